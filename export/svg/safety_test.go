package svg

import (
	"bytes"
	"encoding/xml"
	"io"
	"math"
	"strconv"
	"strings"
	"testing"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"

	"pgregory.net/rapid"
)

const hostile = "<script>alert(\"x\")</script> & 'quoted' ]]> --> a=\"b\" \x1b[31m\x00\xff \u202Eevil 粉筆"

func TestHostileTextStaysText(t *testing.T) {
	d := mmCam(5, true).drawing()
	d.Title, d.Part, d.Revision, d.SHA256, d.Material, d.Finish = hostile, hostile, hostile, hostile, hostile, hostile
	d.Notes, d.Cautions = []string{hostile}, []string{hostile}
	d.Bore.Fit, d.Events[1].Text = hostile, hostile
	m := mmCam(5, true).motion()
	m.Title, m.Part, m.Events[1].Text, m.Lift.Unit = hostile, hostile, hostile, hostile
	m.Acceleration.Limits[0].Text = hostile
	e := mmCam(5, true).deviation(1)
	e.Title, e.Part, e.Paths[0].Name, e.Paths[0].Blocks, e.AccelerationUnit = hostile, hostile, hostile, hostile, hostile
	for name, draw := range map[string]func() ([]byte, error){
		"drawing":   func() ([]byte, error) { return Drawing(d) },
		"motion":    func() ([]byte, error) { return Motion(m) },
		"deviation": func() ([]byte, error) { return Deviation(e) },
	} {
		out, err := draw()
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		texts := checkTexts(t, out)
		if bytes.Contains(out, []byte("<script")) || bytes.ContainsAny(out, "\x1b\x00\u202E") {
			t.Errorf("%s: hostile text came through", name)
		}
		if !has(texts, "<script>") {
			t.Errorf("%s: the title is not printed as it stands", name)
		}
	}
}

// spoilers put a number into one place of the data; the key, or what follows its
// colon, is how an error names the place.
func drawingSpoilers() map[string]func(*DrawingData, float64) {
	return map[string]func(*DrawingData, float64){
		"base radius":                   func(d *DrawingData, v float64) { d.BaseRadius = v },
		"roller diameter":               func(d *DrawingData, v float64) { d.RollerDiameter = v },
		"roller x":                      func(d *DrawingData, v float64) { d.Roller.X = v },
		"offset":                        func(d *DrawingData, v float64) { d.Offset = v },
		"thickness":                     func(d *DrawingData, v float64) { d.Thickness = v },
		"profile":                       func(d *DrawingData, v float64) { d.Profile = v },
		"zero mark y":                   func(d *DrawingData, v float64) { d.Zero.Y = v },
		"contour 1, element 4":          func(d *DrawingData, v float64) { d.Contours[0][3].Center.X = v },
		"pitch curve, element 2":        func(d *DrawingData, v float64) { d.PitchCurve[1].To.Y = v },
		"event 3":                       func(d *DrawingData, v float64) { d.Events[2].Start.X = v },
		"event 2":                       func(d *DrawingData, v float64) { d.Events[1].From = v },
		"hole 1":                        func(d *DrawingData, v float64) { d.Holes[0].At = v },
		"keyway":                        func(d *DrawingData, v float64) { d.Bore.Keyway.At = v },
		"bore":                          func(d *DrawingData, v float64) { d.Bore.Diameter = v },
		"keyway depth: keyway":          func(d *DrawingData, v float64) { d.Bore.Keyway.Depth = v },
		"keyway width: keyway":          func(d *DrawingData, v float64) { d.Bore.Keyway.Width = v },
		"hole diameter: hole 1":         func(d *DrawingData, v float64) { d.Holes[0].Diameter = v },
		"speed":                         func(d *DrawingData, v float64) { d.Speed = v },
		"outside diameter":              func(d *DrawingData, v float64) { d.OutsideDiameter = v },
		"event end: event 5":            func(d *DrawingData, v float64) { d.Events[4].To = v },
		"first point: contour 1, eleme": func(d *DrawingData, v float64) { d.Contours[0][0].From.X = v },
	}
}

func motionSpoilers() map[string]func(*MotionChart, float64) {
	return map[string]func(*MotionChart, float64){
		"Lift":                              func(m *MotionChart, v float64) { m.Lift.Runs[1][7].Value = v },
		"Jerk":                              func(m *MotionChart, v float64) { m.Jerk.Runs[0][0].CamAngle = v },
		"Radius of curvature":               func(m *MotionChart, v float64) { m.Radius.Runs[2][5].Value = v },
		"a limit":                           func(m *MotionChart, v float64) { m.Acceleration.Limits[0].Value = v },
		"limit's range: a limit":            func(m *MotionChart, v float64) { m.PressureAngle.Limits[0].To = v },
		"peaks of Velocity":                 func(m *MotionChart, v float64) { m.Velocity.Peaks = []Sample{{3, v}} },
		"event 2":                           func(m *MotionChart, v float64) { m.Events[1].To = v },
		"speed of the motion chart: speed":  func(m *MotionChart, v float64) { m.Speed = v },
		"peaks given: peaks of Lift":        func(m *MotionChart, v float64) { m.Lift.Peaks = []Sample{{v, 3}} },
		"peaks given: peaks of Radius of c": func(m *MotionChart, v float64) { m.Radius.Peaks = []Sample{{3, v}} },
	}
}

func deviationSpoilers() map[string]func(*DeviationChart, float64) {
	return map[string]func(*DeviationChart, float64){
		"the zone":           func(d *DeviationChart, v float64) { d.Chord = v },
		"the bound":          func(d *DeviationChart, v float64) { d.Paths[0].Bound = v },
		"the design's peak":  func(d *DeviationChart, v float64) { d.DesignPeak = v },
		"contour":            func(d *DeviationChart, v float64) { d.Paths[0].Runs[0][9].Value = v },
		"polar angle":        func(d *DeviationChart, v float64) { d.Paths[0].Runs[0][9].Polar = v },
		"lift error":         func(d *DeviationChart, v float64) { d.Paths[0].LiftError[0][2].Value = v },
		"acceleration error": func(d *DeviationChart, v float64) { d.Paths[0].AccelerationError[0][2].Value = v },
	}
}

// spoiled draws every figure with v in one place after the other.
func spoiled(v float64, see func(name string, out []byte, err error)) {
	for name, spoil := range drawingSpoilers() {
		d := mmCam(5, true).drawing()
		spoil(&d, v)
		out, err := Drawing(d)
		see(name, out, err)
	}
	for name, spoil := range motionSpoilers() {
		m := mmCam(5, true).motion()
		spoil(&m, v)
		out, err := Motion(m)
		see(name, out, err)
	}
	for name, spoil := range deviationSpoilers() {
		d := mmCam(5, true).deviation(1)
		spoil(&d, v)
		out, err := Deviation(d)
		see(name, out, err)
	}
}

func TestNotFiniteIsRefusedByName(t *testing.T) {
	refused := func(name string, err error) {
		t.Helper()
		if i := strings.Index(name, ": "); i >= 0 {
			name = name[i+2:]
		}
		if err == nil || !strings.Contains(err.Error(), name) {
			t.Errorf("%s is not finite: error %v does not name it", name, err)
		}
	}
	for _, v := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		spoiled(v, func(name string, _ []byte, err error) { refused(name, err) })
	}
}

// TestExtremesNeverPanic puts finite nonsense everywhere: an error, or a figure that
// is well formed and keeps its texts apart.
func TestExtremesNeverPanic(t *testing.T) {
	drawn := 0
	for _, v := range []float64{1e300, -1e300, 1e9, -5, 0, 1e-300, 5e-324} {
		spoiled(v, func(name string, out []byte, err error) {
			if err != nil {
				return
			}
			drawn++
			checkTexts(t, out)
			if t.Failed() {
				t.Fatalf("%s is %v", name, v)
			}
		})
	}
	if drawn < 30 {
		t.Errorf("only %d figures were drawn", drawn)
	}
}

func TestMissingDataIsRefused(t *testing.T) {
	if _, err := Drawing(DrawingData{Head: Head{Units: "mm"}}); err == nil || !strings.Contains(err.Error(), "no contour") {
		t.Errorf("no contour: %v", err)
	}
	if _, err := Drawing(DrawingData{Head: Head{Units: "furlong"}}); err == nil || !strings.Contains(err.Error(), "mm and inch") {
		t.Errorf("unknown units: %v", err)
	}
	if _, err := Motion(MotionChart{Head: Head{Units: "mm"}}); err == nil || !strings.Contains(err.Error(), "empty") {
		t.Errorf("no series: %v", err)
	}
	if _, err := Deviation(DeviationChart{Head: Head{Units: "mm"}, Chord: 1}); err == nil || !strings.Contains(err.Error(), "no path") {
		t.Errorf("no paths: %v", err)
	}
	d := mmCam(5, true).drawing()
	d.BaseRadius = 1e12
	if _, err := Drawing(d); err == nil || !strings.Contains(err.Error(), "scale") {
		t.Errorf("a cam of a million kilometers: %v", err)
	}
}

// TestAnyTextKeepsTheLayout draws with random texts, holes and offsets: no panic,
// well-formed, nothing overlaps and nothing leaves the sheet.
func TestAnyTextKeepsTheLayout(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		s := mmCam(rapid.Float64Range(-30, 30).Draw(r, "offset"), rapid.Bool().Draw(r, "clockwise"))
		s.rb = rapid.Float64Range(38, 150).Draw(r, "base radius")
		d := s.drawing()
		d.Released = rapid.Bool().Draw(r, "released")
		d.Title = rapid.String().Draw(r, "title")
		d.Notes = rapid.SliceOfN(rapid.StringN(0, 200, 400), 0, 6).Draw(r, "notes")
		d.Bore.Keyway.At = rapid.Float64Range(-400, 400).Draw(r, "keyway")
		d.Holes = nil
		for range rapid.IntRange(0, 9).Draw(r, "holes") {
			d.Holes = append(d.Holes, Hole{rapid.Float64Range(1, 8).Draw(r, "d"), rapid.Float64Range(16, 30).Draw(r, "r"),
				rapid.Float64Range(0, 360).Draw(r, "at")})
		}
		out, err := Drawing(d)
		if err != nil {
			r.Fatal(err)
		}
		checkTexts(t, out)
		if t.Failed() {
			r.Fatalf("layout of\n%s", out)
		}
	})
}

func TestChooseSheetAndScale(t *testing.T) {
	for _, c := range []struct {
		units      string
		w, h       float64
		name, want string
	}{
		{"mm", 150, 140, "A4", "1:1"}, {"mm", 200, 200, "A3", "1:1"}, {"mm", 500, 480, "A3", "1:2"}, {"mm", 14, 14, "A4", "10:1"},
		{"mm", 9000, 9000, "A3", "1:50"}, {"inch", 5, 5, "Letter", "1:1"}, {"inch", 12, 12, "Letter", "1:4"}, {"inch", 0.5, 0.5, "Letter", "8:1"},
	} {
		p, s, err := choose(c.units, "", c.w, c.h, true)
		if err != nil || p.name != c.name || s.String() != c.want {
			t.Errorf("%g by %g %s: %s at %s (%v), want %s at %s", c.w, c.h, c.units, p.name, s, err, c.name, c.want)
		}
	}
}

// circles reads the circles of the group "cam": center and radius in mm.
func circles(t *testing.T, data []byte) [][3]float64 {
	t.Helper()
	var cs [][3]float64
	d := xml.NewDecoder(bytes.NewReader(data))
	for {
		tok, err := d.Token()
		if err == io.EOF {
			return cs
		}
		if err != nil {
			t.Fatal(err)
		}
		e, ok := tok.(xml.StartElement)
		if !ok || e.Name.Local != "circle" {
			continue
		}
		var c [3]float64
		for _, a := range e.Attr {
			v, _ := strconv.ParseFloat(a.Value, 64)
			switch a.Name.Local {
			case "cx":
				c[0] = v
			case "cy":
				c[1] = v
			case "r":
				c[2] = v
			}
		}
		cs = append(cs, c)
	}
}

// TestTrueSizeAndYUp measures the drawing: at 1:1 the base circle has the base radius
// in mm, and a hole at polar angle 90 stands above the axis.
func TestTrueSizeAndYUp(t *testing.T) {
	d := mmCam(5, true).drawing()
	d.Holes = []Hole{{7, 26, 90}}
	out, err := Drawing(d)
	if err != nil {
		t.Fatal(err)
	}
	var base, hole *[3]float64
	for _, c := range circles(t, out) {
		switch c[2] {
		case 45:
			base = &c
		case 3.5:
			hole = &c
		}
	}
	if base == nil || hole == nil {
		t.Fatal("base circle of radius 45 mm or hole of radius 3.5 mm not found")
	}
	if math.Abs(hole[0]-base[0]) > 0.002 || math.Abs(hole[1]-(base[1]-26)) > 0.002 {
		t.Errorf("the hole is at %v, the axis at %v; want 26 mm above", hole, base)
	}
}

// TestArcsAreTrueArcs rebuilds every arc of a random path from the SVG arithmetic (end points,
// radius, sweep flag) and compares its middle with the element's.
func TestArcsAreTrueArcs(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		m := plane.Point{X: rapid.Float64Range(-50, 50).Draw(r, "x"), Y: rapid.Float64Range(-50, 50).Draw(r, "y")}
		radius := rapid.Float64Range(0.5, 200).Draw(r, "radius")
		a, sweep := rapid.Float64Range(0, 360).Draw(r, "from"), rapid.Float64Range(1, 360).Draw(r, "sweep")
		ccw := rapid.Bool().Draw(r, "ccw")
		sign := 1.0
		if !ccw {
			sign = -1
		}
		point := func(deg float64) plane.Point { return m.Add(plane.Unit(plane.Degrees(deg)).Scale(radius)) }
		e := chain.Element{Kind: chain.Arc, From: point(a), To: point(a + sign*sweep), Center: m, CCW: ccw}
		if sweep == 360 {
			e.To = e.From
		}
		var ends []plane.Point
		last := e.From
		walk(e, func(plane.Point) { r.Fatal("an arc became a line") }, func(to plane.Point, rad float64) {
			half := last.Dist(to) / 2
			if half > rad*math.Sin(61*math.Pi/180) {
				r.Fatalf("a part turns more than 122 degrees: chord %v, radius %v", 2*half, rad)
			}
			// The center is on the left of a counterclockwise chord, at the height of the sagitta's rest.
			dir := to.Sub(last).Unit()
			mid := last.Add(to.Sub(last).Scale(0.5))
			c := mid.Add(dir.Left().Scale(sign * math.Sqrt(rad*rad-half*half)))
			if c.Dist(m) > 1e-6*(radius+100) {
				r.Fatalf("center %v, want %v", c, m)
			}
			ends, last = append(ends, to), to
		})
		if len(ends) == 0 || ends[len(ends)-1] != e.To {
			r.Fatalf("the arc does not end where it should: %v", ends)
		}
		if n := int(math.Ceil(sweep / 120)); len(ends) < n-1 || len(ends) > n+1 {
			r.Fatalf("sweep %v in %d parts", sweep, len(ends))
		}
	})
}

func TestRadiiSplitAtInflections(t *testing.T) {
	// Curvature falls through zero and comes back: 1/10, 1/20, 0, -1/20, -1/10, -1/20, 1/20.
	run := Run{{0, 0.1}, {1, 0.05}, {2, 0}, {3, -0.05}, {4, -0.1}, {5, -0.05}, {6, 0.05}}
	got := radii(run, 0.01)
	if len(got) != 3 {
		t.Fatalf("%d runs, want 3: %v", len(got), got)
	}
	for i, want := range [][2]Sample{{{0, 10}, {1.8, 100}}, {{2.2, -100}, {5.4, -100}}, {{5.6, 100}, {6, 20}}} {
		for k, s := range []Sample{got[i][0], got[i][len(got[i])-1]} {
			if math.Abs(s.CamAngle-want[k].CamAngle) > 1e-9 || math.Abs(s.Value-want[k].Value) > 1e-9 {
				t.Errorf("run %d, end %d: %v, want %v", i, k, s, want[k])
			}
		}
	}
	rapid.Check(t, func(r *rapid.T) {
		ks := rapid.SliceOfN(rapid.Float64Range(-1, 1), 1, 30).Draw(r, "curvature")
		var run Run
		for i, k := range ks {
			run = append(run, Sample{float64(i), k})
		}
		for _, part := range radii(run, 0.02) {
			for i, s := range part {
				if !(math.Abs(s.Value) <= 50*(1+1e-9)) {
					r.Fatalf("radius %v beyond 50", s.Value)
				}
				if i > 0 && (s.Value > 0) != (part[i-1].Value > 0) {
					r.Fatalf("a run crosses the inflection: %v", part)
				}
			}
		}
	})
}

// TestJumpsAreVertical finds the step of a series in the path that is written.
func TestJumpsAreVertical(t *testing.T) {
	c := newCanvas(100, 100, "t", "d")
	a := axes{c: c, b: box{0, 0, 36, 10}, lo: 0, hi: 10, unit: 1}
	a.series([]Run{{{0, 1}, {90, 1}}, {{90, 5}, {180, 5}}, {{270, 3}, {360, 3}}}, pen{width: 1}, nil)
	out, err := c.bytes()
	if err != nil {
		t.Fatal(err)
	}
	// 90 degrees are 9 mm: up from 1 to 5 there, a gap from 180 to 270, and at 0 from 3 to 1.
	if want := `d="M0 9L9 9L9 5L18 5M27 7L36 7M0 7L0 9"`; !bytes.Contains(out, []byte(want)) {
		t.Errorf("no %s in\n%s", want, out)
	}
}

func TestNiceStep(t *testing.T) {
	for _, c := range []struct{ span, want float64 }{{10, 2}, {1, 0.2}, {7, 2}, {0.026, 0.01}, {3e6, 1e6}, {4.9, 1}} {
		if got := niceStep(c.span, 5); math.Abs(got-c.want) > 1e-9*c.want {
			t.Errorf("niceStep(%g, 5) = %g, want %g", c.span, got, c.want)
		}
	}
}
