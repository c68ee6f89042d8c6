package sheet

import (
	"bytes"
	"encoding/json"
	"encoding/xml"
	"io"
	"math"
	"os"
	"regexp"
	"slices"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/google/go-cmp/cmp"
)

// contractKeys are the keys other programs rely on, as the users' contract prints them.
const contractKeys = `{
  "tool": "", "part": "", "revision": "", "units": "mm", "spec_sha256": "", "released": true,
  "gates": [{"id": "", "value": 27.9, "limit": 30, "unit": "deg", "cam_angle": 104.2, "pass": true, "text": ""}],
  "findings": [{"id": "", "cam_angle": 0, "text": ""}],
  "contour": {"length": 0, "area": 0, "least_convex_radius": 0, "least_concave_radius": null, "junctions": [0]},
  "motion": {"peak_velocity": 0, "peak_acceleration": 0, "peak_jerk": 0},
  "paths": [{"file": "x.dxf", "curve": "contour", "lines": 0, "arcs": 0, "segments_theory": 0, "segments_floor": 0,
             "deviation": {"bound": 0, "outside": 0, "inside": 0, "cam_angle": 0},
             "follower": {"lift": 0, "velocity": 0, "velocity_step": 0, "acceleration": 0, "acceleration_share": 0}}],
  "operations": [{"file": "x.1-mill.nc", "process": "mill", "blocks": 0, "bytes": 0, "path_length": 0, "seconds": 0,
                  "arc_mismatch": 0, "deviation": {}, "follower": {}}],
  "budget": {"shares": [{"source": "chord", "half_width": 0, "kind": "fixed"}], "worst_case": 0, "rss": 0, "fixed_plus_rss": 0, "limit": 0},
  "files": ["x.dxf"]
}`

// covers reports the first key of want that got lacks or holds as another type.
func covers(t *testing.T, path string, got, want any) {
	t.Helper()
	switch w := want.(type) {
	case map[string]any:
		g, ok := got.(map[string]any)
		if !ok {
			t.Errorf("%s is %T, want an object", path, got)
			return
		}
		for k, v := range w {
			if _, ok := g[k]; !ok {
				t.Errorf("%s.%s is missing", path, k)
				continue
			}
			covers(t, path+"."+k, g[k], v)
		}
	case []any:
		g, ok := got.([]any)
		if !ok || len(g) == 0 {
			t.Errorf("%s is %v, want a list that holds something", path, got)
			return
		}
		covers(t, path+"[0]", g[0], w[0])
	case nil:
	default:
		if a, b := typeOf(got), typeOf(want); a != b {
			t.Errorf("%s is a %s, want a %s", path, a, b)
		}
	}
}

func typeOf(v any) string {
	switch v.(type) {
	case string:
		return "string"
	case float64:
		return "number"
	case bool:
		return "boolean"
	}
	return "other"
}

func TestJSONHasTheContractsKeys(t *testing.T) {
	out, err := sampleReport().JSON()
	if err != nil {
		t.Fatal(err)
	}
	var got, want any
	if err := json.Unmarshal(out, &got); err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal([]byte(contractKeys), &want); err != nil {
		t.Fatal(err)
	}
	covers(t, "report", got, want)
	gates := got.(map[string]any)["gates"].([]any)
	if v, ok := gates[3].(map[string]any)["cam_angle"]; !ok || v != nil {
		t.Errorf("a gate without a place has cam_angle %v, want null", v)
	}
}

func TestJSONReadsBackTheSame(t *testing.T) {
	r := refusedReport()
	out, err := r.JSON()
	if err != nil {
		t.Fatal(err)
	}
	var back Report
	if err := json.Unmarshal(out, &back); err != nil {
		t.Fatal(err)
	}
	again, err := back.JSON()
	if err != nil {
		t.Fatal(err)
	}
	if d := cmp.Diff(string(out), string(again)); d != "" {
		t.Error(d)
	}
	if bytes.Contains(out, []byte(": -0,")) {
		t.Error("a minus zero was printed")
	}
}

func TestJSONListsAreNeverNull(t *testing.T) {
	out, err := Report{Contour: Contour{Length: math.Copysign(0, -1)}}.JSON()
	if err != nil {
		t.Fatal(err)
	}
	var got map[string]any
	if err := json.Unmarshal(out, &got); err != nil {
		t.Fatal(err)
	}
	for _, k := range []string{"gates", "findings", "paths", "operations", "files", "facts", "notes", "cautions"} {
		if _, ok := got[k].([]any); !ok {
			t.Errorf("%s is %v, want an empty list", k, got[k])
		}
	}
	if bytes.Contains(out, []byte("-0")) {
		t.Errorf("a minus zero was printed:\n%s", out)
	}
}

func TestNotFiniteIsRefusedByName(t *testing.T) {
	for key, spoil := range map[string]func(*Report, float64){
		"motion.peak_jerk":                  func(r *Report, v float64) { r.Motion.PeakJerk = v },
		"paths[1].deviation.bound":          func(r *Report, v float64) { r.Paths[1].Deviation.Bound = v },
		"paths[0].follower.velocity":        func(r *Report, v float64) { r.Paths[0].Follower.Velocity = v },
		"gates[2].value":                    func(r *Report, v float64) { r.Gates[2].Value = &v },
		"operations[0].passes[0].stock":     func(r *Report, v float64) { r.Operations[0].Passes[0].Stock = v },
		"contour.junctions[3]":              func(r *Report, v float64) { r.Contour.Junctions[3] = v },
		"budget.shares[1].half_width":       func(r *Report, v float64) { r.Budget.Shares[1].HalfWidth = v },
		"operations[1].offsets[0].value":    func(r *Report, v float64) { r.Operations[1].Offsets[0].Value = v },
		"contour.least_convex_radius":       func(r *Report, v float64) { r.Contour.LeastConvexRadius = &v },
		"operations[0].deviation.cam_angle": func(r *Report, v float64) { r.Operations[0].Deviation.CamAngle = &v },
	} {
		for _, v := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
			r := sampleReport()
			spoil(&r, v)
			if _, err := r.JSON(); err == nil || !strings.Contains(err.Error(), key+" is") {
				t.Errorf("JSON with %s = %v: error %v does not name the key", key, v, err)
			}
			if _, err := HTML(r, Figures{}); err == nil || !strings.Contains(err.Error(), key+" is") {
				t.Errorf("HTML with %s = %v: error %v does not name the key", key, v, err)
			}
		}
	}
}

func figures() Figures {
	return Figures{Drawing: []byte(boxSVG), Motion: []byte(boxSVG), Deviation: []byte(boxSVG)}
}

// elements reads a page with an XML parser in its HTML mode: every element closes.
func elements(t *testing.T, data []byte) (ids []string, names map[string]int) {
	t.Helper()
	names = map[string]int{}
	d := xml.NewDecoder(bytes.NewReader(data))
	d.Strict, d.AutoClose, d.Entity = false, xml.HTMLAutoClose, xml.HTMLEntity
	depth := 0
	for {
		tok, err := d.Token()
		if err == io.EOF {
			break
		}
		if err != nil {
			t.Fatalf("the page does not parse: %v", err)
		}
		switch e := tok.(type) {
		case xml.StartElement:
			depth++
			names[e.Name.Local]++
			for _, a := range e.Attr {
				if a.Name.Local == "id" {
					ids = append(ids, a.Value)
				}
				if n := a.Name.Local; strings.HasPrefix(n, "on") || (n == "src" || n == "href") && !strings.HasPrefix(a.Value, "#") {
					t.Errorf("<%s %s=%q>: the sheet needs no scripts and no network", e.Name.Local, n, a.Value)
				}
			}
		case xml.EndElement:
			depth--
		}
	}
	if depth != 0 {
		t.Errorf("%d elements are not closed", depth)
	}
	return ids, names
}

func TestHTMLHoldsEverything(t *testing.T) {
	r := sampleReport()
	out, err := HTML(r, figures())
	if err != nil {
		t.Fatal(err)
	}
	ids, names := elements(t, out)
	if names["svg"] != 3 || names["script"] != 0 || names["link"] != 0 {
		t.Errorf("the page has %d figures, %d scripts, %d links; want 3, 0, 0", names["svg"], names["script"], names["link"])
	}
	slices.Sort(ids)
	if n := len(slices.Compact(slices.Clone(ids))); n != len(ids) || n != 12 {
		t.Errorf("ids clash or are lost: %v", ids)
	}
	for _, want := range []string{">RELEASED<", "27.913", "acceleration-jump", "312 blocks", "6 min 12 s", "1 h 07 min", "7.67 %",
		"&#43;0.145", "-0.002", r.FileHashes[0].SHA256, "in manifest.json", "NOT FINISHED", "(gated)", "0.00631", "guard them",
		`aria-labelledby="motion-title motion-desc"`, `clip-path="url(#error-clip)"`, `xlink:href="#drawing-cam"`,
		"of id=&#34;title&#34; and url(#clip)"} {
		if !bytes.Contains(out, []byte(want)) {
			t.Errorf("the page does not hold %q", want)
		}
	}
	if bytes.Contains(out, []byte("Do not cut")) {
		t.Error("a released sheet forbids cutting")
	}
}

func TestHTMLMarksWhatIsNotReleased(t *testing.T) {
	r := refusedReport()
	out, err := HTML(r, Figures{})
	if err != nil {
		t.Fatal(err)
	}
	text := string(out)
	for _, want := range []string{">NOT RELEASED<", "2 gates fail:", "34.62", "Do not cut from this sheet.", "enlarge the base radius"} {
		if !strings.Contains(text, want) {
			t.Errorf("the page does not hold %q", want)
		}
	}
	if n := strings.Count(text, "<td>FAIL</td>"); n != 2 {
		t.Errorf("%d gates are shown as failing, want 2", n)
	}
	if strings.Contains(text, ">RELEASED<") {
		t.Error("the page says RELEASED")
	}
	r = sampleReport()
	r.Released = false
	if out, err = HTML(r, Figures{}); err != nil || !bytes.Contains(out, []byte("made by a check")) {
		t.Errorf("a check whose gates pass does not say that it is a check (%v)", err)
	}
}

func TestHostileTextStaysText(t *testing.T) {
	r := refusedReport()
	r.Title, r.Part, r.Revision, r.Tool = hostile, hostile, hostile, hostile
	r.Facts[0] = Fact{hostile, hostile}
	r.Gates[0].ID, r.Gates[0].Text, r.Gates[0].Unit = hostile, hostile, hostile
	r.Findings[0].Text, r.Notes[0], r.Cautions[0], r.Files[0] = hostile, hostile, hostile, hostile
	r.Operations[0].File, r.Operations[0].Setup[0].Text, r.Operations[0].Offsets[0].Name = hostile, hostile, hostile
	r.Paths[0].File, r.Budget.Shares[0].Source, r.Events[0].Text = hostile, hostile, hostile
	out, err := HTML(r, figures())
	if err != nil {
		t.Fatal(err)
	}
	if _, names := elements(t, out); names["script"] != 0 {
		t.Error("a title became a script")
	}
	text := Text(r, false)
	for name, s := range map[string]string{"page": string(out), "summary": text} {
		if strings.ContainsAny(s, "\x1b\x00\u202E") {
			t.Errorf("the %s passes control characters on", name)
		}
		if !strings.Contains(s, "粉筆") {
			t.Errorf("the %s lost the letters of another script", name)
		}
	}
	data, err := r.JSON()
	if err != nil {
		t.Fatal(err)
	}
	var back Report
	if err := json.Unmarshal(data, &back); err != nil || back.Title != hostile {
		t.Errorf("JSON reads back %q, %v", back.Title, err)
	}
}

func TestFiguresThatRunOrLoadAreRefused(t *testing.T) {
	const open = `<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink">`
	for name, svg := range map[string]string{
		"script":       open + `<script>alert(1)</script></svg>`,
		"event":        open + `<g onload="alert(1)"/></svg>`,
		"foreign":      open + `<foreignObject/></svg>`,
		"link out":     open + `<a xlink:href="https://example.org/"><g/></a></svg>`,
		"style":        open + `<style>@import "x"</style></svg>`,
		"not closed":   open + `<g></svg>`,
		"not a figure": `<p>hello</p>`,
	} {
		if _, err := HTML(sampleReport(), Figures{Drawing: []byte(svg)}); err == nil {
			t.Errorf("%s: the figure was taken", name)
		}
	}
}

var ansi = regexp.MustCompile("\x1b\\[[0-9;]*m")

func TestTextFitsEightyColumnsAndAligns(t *testing.T) {
	for name, r := range map[string]Report{"released": sampleReport(), "refused": refusedReport()} {
		text := Text(r, false)
		for _, line := range strings.Split(text, "\n") {
			if n := utf8.RuneCountInString(line); n > columns {
				t.Errorf("%s: %d columns: %s", name, n, line)
			}
		}
		if got := ansi.ReplaceAllString(Text(r, true), ""); got != text {
			t.Errorf("%s: color changes more than color:\n%s", name, cmp.Diff(text, got))
		}
		verdicts := map[int]int{}
		for _, line := range strings.Split(text, "\n") {
			for _, word := range []string{"pass", "FAIL"} {
				if strings.HasSuffix(line, "  "+word) {
					verdicts[utf8.RuneCountInString(line)]++
				}
			}
		}
		if len(verdicts) != 1 || verdicts[78] != len(r.Gates) {
			t.Errorf("%s: verdicts end in columns %v, want all %d in column 78", name, verdicts, len(r.Gates))
		}
	}
}

func TestTextSaysWhatTheContractAsks(t *testing.T) {
	text := Text(refusedReport(), false)
	for _, want := range []string{"pressure-angle", "34.62", "104.2", "112.3", "FAIL", "enlarge the base radius", "acceleration-jump at 60.0°",
		"48 (2 lines, 46 arcs)", "in theory about 41.2", "in theory            41.2", "0.00193 mm", "893 mm/s²", "7.67 % of the design's peak",
		"NOT RELEASED: 2 gates fail", "floor 38"} {
		if !strings.Contains(text, want) {
			t.Errorf("the summary does not hold %q:\n%s", want, text)
		}
	}
	if text := Text(sampleReport(), false); !strings.HasSuffix(text, "\nRELEASED\n") {
		t.Errorf("the summary does not end in its verdict:\n%s", text)
	}
}

func TestSameReportSameBytes(t *testing.T) {
	a, _ := HTML(sampleReport(), figures())
	b, _ := HTML(sampleReport(), figures())
	if !bytes.Equal(a, b) {
		t.Error("two sheets of one report differ")
	}
	c, _ := sampleReport().JSON()
	d, _ := sampleReport().JSON()
	if !bytes.Equal(c, d) {
		t.Error("two report.json of one report differ")
	}
}

// TestPagesParse writes pages to the folder named by SHEET_OUT, with the figures found in the
// folder named by SVG_OUT, for looking at them; it always checks that they parse.
func TestPagesParse(t *testing.T) {
	figs := figures()
	if dir := os.Getenv("SVG_OUT"); dir != "" {
		for name, to := range map[string]*[]byte{"refused": &figs.Drawing, "motion": &figs.Motion, "error": &figs.Deviation} {
			data, err := os.ReadFile(dir + "/" + name + ".svg")
			if err != nil {
				t.Fatal(err)
			}
			*to = data
		}
	}
	for name, r := range map[string]Report{"released": sampleReport(), "refused": refusedReport(), "empty": {}} {
		out, err := HTML(r, figs)
		if err != nil {
			t.Fatal(err)
		}
		elements(t, out)
		if dir := os.Getenv("SHEET_OUT"); dir != "" {
			if err := os.WriteFile(dir+"/"+name+".html", out, 0o644); err != nil {
				t.Fatal(err)
			}
		}
	}
}

func TestSig(t *testing.T) {
	for _, c := range []struct {
		v    float64
		n    int
		want string
	}{{0, 3, "0"}, {27.913, 5, "27.913"}, {0.00193, 3, "0.00193"}, {-0.0017812, 3, "-0.00178"}, {11639.4, 4, "11639"}, {30, 5, "30"},
		{1452000, 4, "1452000"}, {1.5e12, 4, "1.5e+12"}, {2e-9, 3, "2e-09"}, {0.1, 5, "0.1"}, {99.999, 3, "100"}} {
		if got := sig(c.v, c.n); got != c.want {
			t.Errorf("sig(%v, %d) = %q, want %q", c.v, c.n, got, c.want)
		}
	}
}
