package dxf

import (
	"math"
	"strings"
	"testing"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Each case spoils one thing of the sample; the error must name it.
func TestRefused(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for name, c := range map[string]struct {
		spoil func(*Drawing)
		say   []string
	}{
		"version":           {func(d *Drawing) { d.Version = "2018" }, []string{`"2018"`, `"2000"`, `"r12"`}},
		"empty":             {func(d *Drawing) { *d = Drawing{Version: R12} }, []string{"empty"}},
		"no layer":          {func(d *Drawing) { d.Circles[0].Layer = "" }, []string{"circle 1", "no layer"}},
		"layer 0":           {func(d *Drawing) { d.Lines[1].Layer = "0" }, []string{"line 2", "layer 0"}},
		"layer in small":    {func(d *Drawing) { d.Texts[0].Layer = "Notes" }, []string{"text 1", `"Notes"`, "A-Z"}},
		"layer line feed":   {func(d *Drawing) { d.Arcs[0].Layer = "A\nB" }, []string{"arc 1", `'\n'`}},
		"long layer":        {func(d *Drawing) { d.Arcs[0].Layer = strings.Repeat("A", 32) }, []string{"32 bytes", "at most 31"}},
		"grid":              {func(d *Drawing) { d.Polylines[0].Grid.Decimals = 9 }, []string{"polyline 1", "9 decimals"}},
		"one vertex":        {func(d *Drawing) { d.Polylines[2].Vertices = d.Polylines[2].Vertices[:1] }, []string{"polyline 3", "1 vertices"}},
		"bulge NaN":         {func(d *Drawing) { d.Polylines[0].Vertices[1].Bulge = nan }, []string{"polyline 1", "vertex 2", "NaN"}},
		"bulge infinite":    {func(d *Drawing) { d.Polylines[0].Vertices[1].Bulge = -inf }, []string{"vertex 2", "-Inf"}},
		"bulge tiny":        {func(d *Drawing) { d.Polylines[0].Vertices[1].Bulge = 1e-13 }, []string{"vertex 2", "write a line"}},
		"bulge of open end": {func(d *Drawing) { d.Polylines[2].Vertices[1].Bulge = 1 }, []string{"vertex 2", "open polyline"}},
		"doubled vertex": {func(d *Drawing) { d.Polylines[0].Vertices[2].P = d.Polylines[0].Vertices[1].P },
			[]string{"vertex 2", "same point (30.000000, 20.000000)"}},
		"repeated first":   {func(d *Drawing) { d.Polylines[0].Vertices[3].P = d.Polylines[0].Vertices[0].P }, []string{"vertex 4", "does not repeat"}},
		"vertex too far":   {func(d *Drawing) { d.Polylines[1].Vertices[0].P.X = math.MinInt64 }, []string{"polyline 2", "vertex 1", "beyond"}},
		"back and forth":   {func(d *Drawing) { d.Polylines[2].Closed = true }, []string{"polyline 3", "over itself"}},
		"arc too far":      {func(d *Drawing) { v := d.Polylines[0].Vertices; v[0].P.X, v[1].P.X, v[0].Bulge = 6e12, 5e12, 999 }, []string{"outermost", "1e+07"}},
		"center NaN":       {func(d *Drawing) { d.Circles[0].Center.Y = nan }, []string{"circle 1", "center Y", "NaN"}},
		"radius zero":      {func(d *Drawing) { d.Circles[1].Radius = 0 }, []string{"circle 2", "radius is 0"}},
		"radius negative":  {func(d *Drawing) { d.Arcs[0].Radius = -1 }, []string{"arc 1", "radius is -1"}},
		"radius huge":      {func(d *Drawing) { d.Circles[1].Radius = 1e300 }, []string{"circle 2", "1e+300"}},
		"arc angle":        {func(d *Drawing) { d.Arcs[0].To = inf }, []string{"arc 1", "end angle"}},
		"arc of a turn":    {func(d *Drawing) { d.Arcs[0].From, d.Arcs[0].To = 10, -350 }, []string{"arc 1", "draw a circle"}},
		"line end":         {func(d *Drawing) { d.Lines[0].To.X = -inf }, []string{"line 1", "end X", "-Inf"}},
		"line of no size":  {func(d *Drawing) { d.Lines[0].To = d.Lines[0].From }, []string{"line 1", "length is 0"}},
		"text height":      {func(d *Drawing) { d.Texts[2].Height = nan }, []string{"text 3", "height"}},
		"text angle":       {func(d *Drawing) { d.Texts[2].Angle = nan }, []string{"text 3", "angle"}},
		"text position":    {func(d *Drawing) { d.Texts[2].At.X = inf }, []string{"text 3", "position X"}},
		"text blank":       {func(d *Drawing) { d.Texts[2].Value = "  " }, []string{"text 3", "blank"}},
		"text line feed":   {func(d *Drawing) { d.Texts[2].Value = "a\r\n  0\nEOF" }, []string{"text 3", "U+000D"}},
		"text NUL":         {func(d *Drawing) { d.Texts[2].Value = "a\x00" }, []string{"U+0000"}},
		"text C1 control":  {func(d *Drawing) { d.Texts[2].Value = "a\u0085" }, []string{"U+0085"}},
		"text not UTF-8":   {func(d *Drawing) { d.Texts[2].Value = "a\xff" }, []string{"UTF-8"}},
		"text too long":    {func(d *Drawing) { d.Texts[2].Value = strings.Repeat("鉛", 293) }, []string{"2051 bytes", "2049"}},
		"circle twice":     {func(d *Drawing) { d.Circles = append(d.Circles, d.Circles[0]) }, []string{"circle 3", "twice"}},
		"line there, back": {func(d *Drawing) { l := d.Lines[1]; d.Lines = append(d.Lines, Line{l.Layer, l.To, l.From}) }, []string{"line 3", "twice"}},
		"contour twice":    {func(d *Drawing) { d.Polylines = append(d.Polylines, d.Polylines[0]) }, []string{"polyline 4", "twice"}},
	} {
		d := sample(R2000, false)
		c.spoil(&d)
		out, err := Write(d)
		if err == nil || out != nil {
			t.Errorf("%s: accepted", name)
			continue
		}
		for _, s := range c.say {
			if !strings.Contains(err.Error(), s) {
				t.Errorf("%s: %q does not say %q", name, err, s)
			}
		}
	}
}

func TestLongTextInR12(t *testing.T) {
	long := strings.Repeat("x", 256)
	if _, err := Write(withText(R12, long)); err == nil || !strings.Contains(err.Error(), "at most 255") {
		t.Errorf("256 bytes in r12: error %v", err)
	}
	for v, n := range map[Version]int{R12: 255, R2000: 2049} {
		if _, err := Write(withText(v, strings.Repeat("x", n))); err != nil {
			t.Errorf("%d bytes in %s: %v", n, v, err)
		}
	}
}

// Items on different layers may coincide: a pitch curve of a circular cam lies
// on a circle that is drawn too.
func TestSameItemOnTwoLayers(t *testing.T) {
	d := Drawing{Version: R12, Circles: []Circle{{LayerPitchCurve, plane.Point{}, 5}, {LayerBaseCircle, plane.Point{}, 5}}}
	if _, err := Write(d); err != nil {
		t.Error(err)
	}
}

// The formatter is the last guard: it remembers what no file may hold.
func TestFormatterRemembersFaults(t *testing.T) {
	for name, write := range map[string]func(*pairs){
		"NaN":       func(f *pairs) { f.WriteFloat(40, math.NaN()) },
		"infinite":  func(f *pairs) { f.WriteFloat(40, math.Inf(-1)) },
		"line feed": func(f *pairs) { f.WriteString(1, "a\nb") },
		"Latin":     func(f *pairs) { f.WriteString(1, "é") },
	} {
		f := new(pairs)
		write(f)
		f.WriteInt(70, 1)
		if f.err == nil {
			t.Errorf("%s: no fault remembered", name)
		}
		if f.Reset(); f.err != nil || f.Output() != "" {
			t.Errorf("%s: Reset leaves something", name)
		}
	}
}

func TestDecimals(t *testing.T) {
	for _, c := range []struct {
		decimals int
		count    int64
		want     string
	}{{0, -7, "-7.0"}, {0, 0, "0.0"}, {3, 5, "0.005"}, {3, -5, "-0.005"}, {6, 30_000_001, "30.000001"}, {2, 0, "0.00"}} {
		if got := decimal(chain.Grid{Decimals: c.decimals}, c.count); got != c.want {
			t.Errorf("count %d with %d decimals is %q, want %q", c.count, c.decimals, got, c.want)
		}
	}
	for v, want := range map[float64]string{math.Copysign(0, -1): "0.0", 1e7: "10000000.0", 1e-7: "0.0000001", -0.1: "-0.1", 30.123456789012344: "30.123456789012344"} {
		if got := shortest(v); got != want {
			t.Errorf("%g is printed as %q, want %q", v, got, want)
		}
	}
}
