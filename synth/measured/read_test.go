package measured_test

import (
	"fmt"
	"strings"
	"testing"

	"lobewright/synth/measured"
)

// good is a table of n rows with the separator.
func good(n int, sep string) []string {
	lines := []string{"cam angle" + sep + "lift" + sep + "remark"}
	for i := range n {
		lines = append(lines, fmt.Sprintf("%g%s%g%sok", 10*float64(i), sep, float64(i%7), sep))
	}
	return lines
}

func TestParse(t *testing.T) {
	for _, sep := range []string{",", ";", "\t"} {
		for _, end := range []string{"\n", "\r\n"} {
			rows, faults := measured.Parse([]byte("\ufeff"+strings.Join(good(36, sep), end)+end+end), 0.01)
			if faults != nil || len(rows) != 36 || rows[35].Angle != 350 || rows[35].Lift != 0 || rows[35].Line != 37 {
				t.Errorf("%q %q: %d rows, %v", sep, end, len(rows), faults)
			}
		}
	}
	lines := append(good(36, ","), "360,0.005")
	if rows, faults := measured.Parse([]byte(strings.Join(lines, "\n")), 0.01); faults != nil || len(rows) != 36 {
		t.Errorf("a closing row: %d rows, %v", len(rows), faults)
	}
}

func TestParseFaults(t *testing.T) {
	for _, c := range []struct {
		line          int // that is replaced, from 1
		text          string
		column        int
		found, advice string
	}{
		{5, "30;3", 1, "a row of one column", ""},
		{5, "x,3", 1, `"x"`, ""},
		{5, "30, nan", 5, "nan, which is not a finite number", "measure it again, or take the row out"},
		{5, "30,", 4, "an empty cell", "fill it, or take the row out"},
		{5, "", 1, "an empty line", "take it out"},
		{5, "10,3", 1, "the cam angle 10 after 20 in line 4: it is not sorted", ""},
		{5, "20,3", 1, "the cam angle 20 after 20 in line 4: it stands twice", ""},
		{5, "30,0x1p3", 4, `"0x1p3"`, ""},
		{5, "30,1e9", 4, "the lift 1e+09", ""},
		{1, "0,0", 1, "a number where the header stands", "add a header above the first row"},
		{37, "360,5", 1, "the lift 5 a full turn after 0 in line 2", "correct it, or take the last row out"},
		{37, "361,5", 1, "the cam angle 361, 361 after the first", ""},
	} {
		lines := good(36, ",")
		lines[c.line-1] = c.text
		rows, faults := measured.Parse([]byte(strings.Join(lines, "\n")), 0.01)
		if len(faults) == 0 || rows != nil {
			t.Errorf("%q: no fault", c.text)
			continue
		}
		if f := faults[0]; f.Line != c.line || f.Column != c.column || f.Found != c.found || f.Advice != c.advice || f.Allowed == "" && c.text != "" {
			t.Errorf("%q: %+v", c.text, f)
		}
	}
	lines := good(36, ";")
	lines[9] = "80;3,5"
	_, faults := measured.Parse([]byte(strings.Join(lines, "\n")), 0.01)
	if len(faults) != 1 || faults[0].Advice != "write the decimal sign as a point: 3.5" || faults[0].Column != 4 {
		t.Errorf("decimal comma: %+v", faults)
	}
	for name, data := range map[string]string{"empty": "", "binary": "a,b\x00", "few rows": strings.Join(good(19, ","), "\n"), "one column": "lift\n1\n"} {
		if _, faults := measured.Parse([]byte(data), 0.01); len(faults) == 0 {
			t.Errorf("%s: no fault", name)
		}
	}
}

// Whatever stands in a file, a table has sorted finite rows or faults with places.
func FuzzParse(f *testing.F) {
	f.Add([]byte(strings.Join(good(30, ","), "\n")))
	f.Add([]byte("a;b\n1;2,5\n"))
	f.Add([]byte("\ufeffa\tb\r\n0\t1e400\r\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		rows, faults := measured.Parse(data, 0.01)
		if (len(faults) == 0) != (len(rows) >= 20) || len(faults) > 20 {
			t.Fatalf("%d rows, %d faults", len(rows), len(faults))
		}
		for i, r := range rows {
			if i > 0 && !(r.Angle > rows[i-1].Angle) || r.Line < 2 {
				t.Fatalf("row %+v after %+v", r, rows[max(0, i-1)])
			}
		}
		for _, f := range faults {
			if f.Line < 1 || f.Column < 1 || f.Found == "" {
				t.Fatalf("fault %+v", f)
			}
		}
	})
}
