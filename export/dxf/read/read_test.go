package read

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"lobewright/synth/plane"
)

// The files of testdata were typed by hand after the DXF Reference, not written by a program.
func load(t testing.TB, name string) string {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	return strings.ReplaceAll(string(data), "\r\n", "\n")
}

func byHand(version string, unit Unit) *File {
	f := &File{
		Version: version, Unit: unit,
		Min: plane.Point{X: -20.5, Y: -10}, Max: plane.Point{X: 30, Y: 12.25},
		Layers: []Layer{{Name: "0", Color: 7, LineType: "CONTINUOUS"}, {Name: "CONTOUR", Color: 1, LineType: "CONTINUOUS"}},
		Polylines: []Polyline{{
			Layer: "CONTOUR", Closed: true,
			Points: []plane.Point{{X: 10, Y: -10}, {X: 10, Y: 10}, {X: -10.5, Y: 10}}, Bulges: []float64{1, 0, -0.25},
		}},
		Circles: []Circle{{Layer: "CONTOUR", Center: plane.Point{X: 1, Y: 2}, Radius: 3.5}},
		Arcs:    []Arc{{Layer: "CONTOUR", Center: plane.Point{X: -1, Y: 0}, Radius: 2, From: 350, To: 10}},
		Lines:   []Line{{Layer: "0", From: plane.Point{X: 0, Y: 0}, To: plane.Point{X: 30, Y: 1e-3}}},
		Texts:   []Text{{Layer: "0", At: plane.Point{X: 5, Y: 6}, Height: 2.5, Angle: 90, Value: `10 ⌀ é \ 50%`}},
	}
	return f
}

// unplaced drops the line numbers of a file.
func unplaced(f *File) *File {
	for i := range f.Layers {
		f.Layers[i].Line = 0
	}
	for i := range f.Polylines {
		f.Polylines[i].Line = 0
	}
	f.Circles[0].Line, f.Arcs[0].Line, f.Lines[0].Line, f.Texts[0].Line = 0, 0, 0, 0
	return f
}

func TestFilesTypedByHand(t *testing.T) {
	for name, want := range map[string]*File{"hand-2000.dxf": byHand("2000", Inch), "hand-r12.dxf": byHand("r12", Millimeter)} {
		text := load(t, name)
		for end, data := range map[string]string{"LF": text, "CR LF": strings.ReplaceAll(text, "\n", "\r\n"), "no last line end": strings.TrimSuffix(text, "\n")} {
			got, err := Parse([]byte(data))
			if err != nil {
				t.Errorf("%s, %s: %v", name, end, err)
				continue
			}
			line := got.Polylines[0].Line
			if kind := strings.Split(text, "\n")[line]; !strings.HasSuffix(kind, "POLYLINE") {
				t.Errorf("%s: line %d after the polyline's is %q", name, line, kind)
			}
			if diff := cmp.Diff(want, unplaced(got)); diff != "" {
				t.Errorf("%s, %s (-want +got):\n%s", name, end, diff)
			}
		}
	}
}

// change is a replacement in one of the files; the fault must be reported at the
// first changed line, or at another one that is named, with a word that says why.
type change struct {
	old, new string
	at       string // text that begins the reported line and the ones after it in the changed file; "" = where the change begins
	say      string
}

func TestFaults2000(t *testing.T) {
	runFaults(t, "hand-2000.dxf", []change{
		{"AC1015", "AC1032", "", "AC1032"},
		{"70\n1\n9\n$MEASUREMENT", "70\n6\n9\n$MEASUREMENT", "6\n9\n$M", "$INSUNITS"},
		{"9\n$INSUNITS\n70\n1\n", "", "0\nSECTION\n2\nHEADER", "$INSUNITS"},
		{"$MEASUREMENT\n70\n0", "$MEASUREMENT\n70\n1", "1\n0\nENDSEC", "$MEASUREMENT"},
		{"9\n$MEASUREMENT", "9\n$INSUNITS", "$INSUNITS\n70\n0", "twice"},
		{"$EXTMIN", "$EXTMUM", "0\nSECTION\n2\nHEADER", "$EXTMIN"},
		{"0\nSECTION\n2\nENTITIES", "0\nSECTION\n2\nENTITY", "0\nSECTION\n2\nENTITY", `"ENTITY"`},
		{"0\nSECTION\n2\nENTITIES", "0\nSECTION\n2\nHEADER", "0\nSECTION\n2\nHEADER\n0\nLWP", "comes after"},
		{"0\nENDSEC\n0\nSECTION\n2\nENTITIES", "0\nSECTION\n2\nENTITIES", "0\nSECTION\n2\nENTITIES", "ENDSEC"},
		{"0\nENDBLK", "0\nLINE\n8\n0\n0\nENDBLK", "LINE\n8\n0\n0\nENDBLK", "block"},
		{"62\n1\n", "62\n-1\n", "0\nLAYER\n2\nCONTOUR", "off"},
		{"2\nCONTOUR\n70\n0", "2\nCONTOUR\n70\n4", "0\nLAYER\n2\nCONTOUR", "locked"},
		{"2\n0\n70\n0\n62", "2\ncontour\n70\n0\n62", "0\nLAYER\n2\nCONTOUR", "twice"},
		{"6\nCONTINUOUS\n0\nENDTAB", "6\nDOTS\n0\nENDTAB", "0\nLAYER\n2\nCONTOUR", `"DOTS"`},
		{"0\nLWPOLYLINE\n5\n10\n100\nAcDbEntity\n8\nCONTOUR", "0\nLWPOLYLINE\n5\n10\n100\nAcDbEntity\n8\nOTHER", "0\nLWPOLYLINE", `"OTHER"`},
		{"90\n3\n", "90\n4\n", "0\nLWPOLYLINE", "states 4"},
		{"90\n3\n70\n1", "90\n3\n70\n5", "5\n10\n10.000", "flags 5"},
		{"10\n10.000\n20\n-10.000\n", "10\n10.000\n30\n-10.000\n", "30\n-10.000", "Y (20)"},
		{"20\n10.000\n42\n-0.25\n", "", "0\nLWPOLYLINE", "no Y"},
		{"42\n1.0\n", "42\n1.0\n42\n1.0\n", "42\n1.0\n10", "once"},
		{"42\n1.0\n", "42\nNaN\n", "NaN\n", "decimal"},
		{"42\n1.0\n", "42\n0x1p1\n", "0x1p1", "decimal"},
		{"42\n1.0\n", "42\n1e999\n", "1e999", "magnitude"},
		{"42\n1.0\n", "42\n1001\n", "1001", "bulge"},
		{"42\n1.0\n", "40\n1.0\n", "40\n1.0\n10", "group 40"},
		{"10\n10.000\n20\n10.000\n", "10\n10.000\n20\n-10.000\n", "0\nLWPOLYLINE", "vertex 1"},
		{"0\nCIRCLE\n", "0\nELLIPSE\n", "ELLIPSE", `"ELLIPSE"`},
		{"40\n3.5\n", "40\n-3.5\n", "-3.5", "above 0"},
		{"40\n3.5\n", "", "0\nCIRCLE", "lacks group 40"},
		{"40\n3.5\n", "40\n3.5\n40\n3.5\n", "40\n3.5\n0", "twice"},
		{"30\n0.0\n40\n3.5\n", "30\n0.5\n40\n3.5\n", "0.5\n40", "group 30 is 0.5"},
		{"40\n3.5\n", "40\n3.5\n230\n-1.0\n", "-1.0\n0\nARC", "group 230"},
		{"40\n3.5\n", "40\n3.5\n67\n1\n", "1\n0\nARC", "group 67"},
		{"50\n350.0\n51\n10.0", "50\n10.0\n51\n10.0", "0\nARC", "starts and ends"},
		{"11\n30.0\n21\n0.001", "11\n0.0\n21\n0.0", "0\nLINE", "no length"},
		{`\U+00e9`, `\U+00g9`, "1\n10 %%c", "code"},
		{`\U+00e9`, `\U+d83d`, "1\n10 %%c", "code"},
		{`%%c`, `%%u`, "1\n10 %%u", "code"},
		{"1\n10 %%c \\U+00e9 \\U+005C 50%\n", "", "0\nTEXT", "no text"},
		{"1\n10 %%c \\U+00e9 \\U+005C 50%\n", "1\n \n", "1\n \n", "blank"},
		{"72\n0\n", "72\n1\n", "1\n0\nENDSEC", "group 72"},
		{"0\nEOF\n", "0\nEOF\n\n", "EOF\n\n", "after EOF"},
		{"0\nEOF\n", "", "\x00", "cut short"},
		{"0\nEOF\n", "0\n", "0\n\x00", "missing"},
		{"9\n$EXTMAX", "nine\n$EXTMAX", "nine", "group code"},
		{"9\n$EXTMAX", "1072\n$EXTMAX", "1072", "group code"},
		{"AC1015", "AC1015\t", "AC1015\t", "printable"},
	})
}

func TestFaultsR12(t *testing.T) {
	runFaults(t, "hand-r12.dxf", []change{
		{"70\n1\n0\nVERTEX", "70\n9\n0\nVERTEX", "9\n0\nVERTEX", "flags 9"},
		{"66\n1\n", "", "0\nPOLYLINE", "group 66"},
		{"0\nSEQEND\n8\nCONTOUR\n", "", "CIRCLE", "among the vertices"},
		{"0\nVERTEX\n8\nCONTOUR\n10\n10.000\n20\n10.000", "0\nVERTEX\n8\n0\n10\n10.000\n20\n10.000", "0\nVERTEX\n8\n0\n", "VERTEX is on"},
		{"30\n0.0\n42\n-0.25", "30\n0.0\n70\n16\n42\n-0.25", "16\n42", "group 70"},
		{"70\n1\n0\nVERTEX", "70\n0\n0\nVERTEX", "0\nPOLYLINE", "last bulge"},
		{"0\nPOLYLINE\n", "0\nLWPOLYLINE\n", "LWPOLYLINE", "r12"},
		{"0\nENDTAB\n0\nENDSEC", "0\nENDSEC", "0\nLAYER\n2\nCONTOUR", "does not end"},
	})
}

// runFaults makes each change and looks for an error at the right line.
func runFaults(t *testing.T, name string, changes []change) {
	text := load(t, name)
	for _, c := range changes {
		label := fmt.Sprintf("%s: %q -> %q", name, c.old, c.new)
		before, after, found := strings.Cut(text, c.old)
		if !found {
			t.Errorf("%s: not in the file", label)
			continue
		}
		data := before + c.new + after
		where := len(before)
		switch {
		case strings.HasSuffix(c.at, "\x00"):
			where = len(data) - len(c.at) + 1
		case c.at != "":
			where = strings.Index("\n"+data, "\n"+c.at)
		}
		if where < 0 {
			t.Errorf("%s: the changed file has no line %q", label, c.at)
			continue
		}
		want := 1 + strings.Count(data[:where], "\n")
		_, err := Parse([]byte(data))
		var fault *Error
		if !errors.As(err, &fault) {
			t.Errorf("%s: error %v", label, err)
			continue
		}
		if !strings.Contains(err.Error(), c.say) {
			t.Errorf("%s: %q does not say %q", label, err, c.say)
		}
		if (fault.Line != want && fault.Line != want+1) || !strings.HasPrefix(err.Error(), fmt.Sprintf("line %d: ", fault.Line)) {
			t.Errorf("%s: reported as %q, wanted at line %d", label, err, want)
		}
	}
}

func TestNotDXF(t *testing.T) {
	for name, data := range map[string]string{
		"empty": "", "text": "hello\nworld\n", "only EOF": "0\nEOF\n", "one line": "0",
		"no header": "0\nSECTION\n2\nENTITIES\n0\nENDSEC\n0\nEOF\n", "group first": "2\nHEADER\n0\nEOF\n",
		"no entities": "0\nSECTION\n2\nHEADER\n9\n$ACADVER\n1\nAC1009\n9\n$EXTMIN\n10\n0\n20\n0\n9\n$EXTMAX\n10\n0\n20\n0\n0\nENDSEC\n0\nEOF\n",
		"no name":     "0\nSECTION\n0\nENDSEC\n0\nEOF\n",
		"open":        "0\nSECTION\n2\nHEADER\n0\nEOF\n",
		"binary":      "AutoCAD Binary DXF\r\n\x1a\x00",
	} {
		if f, err := Parse([]byte(data)); err == nil {
			t.Errorf("%s: accepted as %+v", name, f)
		}
	}
	if _, err := Parse(make([]byte, LargestFile+1)); err == nil || !strings.Contains(err.Error(), "bytes") {
		t.Errorf("a file beyond the limit: error %v", err)
	}
}

// An r12 file without the comment leaves the unit open, and says so.
func TestUnitOfR12(t *testing.T) {
	text := load(t, "hand-r12.dxf")
	for old, want := range map[string]Unit{"MILLIMETERS": Millimeter, "INCHES": Inch, "FURLONGS": Unknown} {
		f, err := Parse([]byte(strings.Replace(text, "MILLIMETERS", old, 1)))
		if err != nil || f.Unit != want {
			t.Errorf("%s: unit %v, error %v", old, f, err)
		}
	}
	withUnits := strings.Replace(text, "9\n$EXTMIN", "9\n$INSUNITS\n70\n1\n9\n$EXTMIN", 1)
	if _, err := Parse([]byte(withUnits)); err == nil || !strings.Contains(err.Error(), "comment above says mm") {
		t.Errorf("a header that contradicts the comment: error %v", err)
	}
}

// Every digit of a coordinate counts: changing one changes the file that is read, or is refused.
func TestEveryDigitCounts(t *testing.T) {
	text := load(t, "hand-2000.dxf")
	begin, end := strings.Index(text, "AcDbPolyline"), strings.Index(text, "0\nTEXT")
	original, err := Parse([]byte(text))
	if err != nil {
		t.Fatal(err)
	}
	figures := 0
	for i := begin; i < end; i++ {
		if text[i] < '0' || text[i] > '9' {
			continue
		}
		figures++
		data := []byte(text)
		data[i] = '0' + (data[i]-'0'+1)%10
		if got, err := Parse(data); err == nil && cmp.Equal(original, got) && !isHandle(text, i) {
			t.Errorf("digit %d, in line %q, does not count", i, lineAt(text, i))
		}
	}
	if figures < 80 {
		t.Errorf("only %d digits were tried", figures)
	}
}

func lineAt(text string, i int) string {
	return text[strings.LastIndexByte(text[:i], '\n')+1 : i+strings.IndexByte(text[i:], '\n')]
}

// isHandle tells whether the place is in a group 5, code or value, which says nothing of the shape.
func isHandle(text string, i int) bool {
	start := strings.LastIndexByte(text[:i], '\n')
	return lineAt(text, i) == "5" || strings.HasSuffix(text[:start], "\n5")
}

func FuzzParse(f *testing.F) {
	f.Add([]byte(load(f, "hand-2000.dxf")))
	f.Add([]byte(load(f, "hand-r12.dxf")))
	f.Add([]byte(strings.Replace(load(f, "hand-r12.dxf"), "1\n10 %%c \\U+00e9 \\U+005C 50%\n", "", 1)))
	f.Add([]byte("0\nSECTION\n2\nHEADER\n0\nENDSEC\n0\nEOF\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		file, err := Parse(data)
		if err != nil {
			var fault *Error
			if !errors.As(err, &fault) || fault.Line < 1 || fault.Line > strings.Count(string(data), "\n")+3 {
				t.Fatalf("error %v has no place in a file of %d lines", err, strings.Count(string(data), "\n"))
			}
			return
		}
		for _, p := range file.Polylines {
			if len(p.Points) < 2 || len(p.Points) != len(p.Bulges) {
				t.Fatalf("polyline with %d points, %d bulges", len(p.Points), len(p.Bulges))
			}
			for i, at := range p.Points {
				if !(at.Radius() <= 2*LargestFigure && p.Bulges[i] <= LargestBulge && p.Bulges[i] >= -LargestBulge) {
					t.Fatalf("vertex %v, bulge %g", at, p.Bulges[i])
				}
			}
		}
		for _, c := range file.Circles {
			if !(c.Radius > 0 && c.Radius <= LargestFigure) {
				t.Fatalf("radius %g", c.Radius)
			}
		}
	})
}
