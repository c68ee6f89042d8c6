package svg

import (
	"bytes"
	"math"
	"strings"
	"testing"
)

// motion is the sample's motion chart, worked out from its closed forms.
func (s sampleCam) motion() MotionChart {
	omega := 180.0 / 60 * 2 * math.Pi
	m := MotionChart{Head: s.head(), Events: s.events()}
	add := func(c *Curve, r Run) { c.Runs = append(c.Runs, r) }
	for i, e := range sampleEvents {
		var runs [6]Run
		const n = 90
		for k := 0; k <= n; k++ {
			t := e.from + (e.to-e.from)*float64(k)/n
			y, v, a, j := s.lift(i, t)
			_, _, pa, kappa := s.at(i, t)
			for q, value := range []float64{y, v * omega, a * omega * omega, j * omega * omega * omega, pa, kappa / s.k} {
				scale := s.k
				if q >= 4 {
					scale = 1
				}
				runs[q] = append(runs[q], Sample{t, value * scale})
			}
		}
		for q, c := range []*Curve{&m.Lift, &m.Velocity, &m.Acceleration, &m.Jerk, &m.PressureAngle, &m.Radius} {
			add(c, runs[q])
		}
	}
	u := map[bool]string{true: "mm", false: "in"}[s.k == 1]
	m.Lift.Unit, m.Velocity.Unit, m.Acceleration.Unit, m.Jerk.Unit = u, u+"/s", u+"/s²", u+"/s³"
	m.PressureAngle.Unit, m.Radius.Unit = "deg", u
	m.Velocity.Second, m.Jerk.Second = &Scale{u + "/deg", 1.0 / 1080}, &Scale{u + "/deg³", math.Pow(1080, -3)}
	m.PressureAngle.Limits = []Limit{{Value: 30, From: 60, To: 150, Text: "limit 30"}, {Value: -30, From: 190, To: 310}}
	m.Acceleration.Limits = []Limit{{Value: 15000 * s.k}}
	m.Radius.Limits = []Limit{{Value: 22 * s.k}}
	return m
}

func (s sampleCam) deviation(paths int) DeviationChart {
	d := DeviationChart{Head: s.head(), Chord: 0.002 * s.k, DesignPeak: 11600 * s.k, AccelerationUnit: "mm/s²", LiftUnit: "mm", Events: s.events()}
	for n := 0; n < paths; n++ {
		p := PathDeviation{Name: "stick-lift.dxf, contour", Bound: 0.00193 * s.k, Blocks: "2 lines, 46 arcs"}
		if n > 0 {
			p.Name = "stick-lift.1-mill.nc, tool center, pass 3"
		}
		var run []DeviationSample
		var acc Run
		for t := 0.0; t <= 360; t += 0.5 {
			_, c, _, _ := s.at(eventAt(t), t)
			run = append(run, DeviationSample{t, c.PolarAngle(), s.k * 0.0018 * math.Sin(t*math.Pi/180*23) * math.Abs(math.Sin(t*math.Pi/180))})
			acc = append(acc, Sample{t, s.k * 900 * math.Sin(t*math.Pi/180*46) * math.Abs(math.Sin(t*math.Pi/180))})
		}
		p.Runs = [][]DeviationSample{run}
		if n != 1 {
			p.AccelerationError = []Run{acc}
		}
		if n != 2 {
			p.LiftError = []Run{{{0, 0}, {120, 0.0017 * s.k}, {240, -0.0018 * s.k}, {360, 0}}}
		}
		d.Paths = append(d.Paths, p)
	}
	return d
}

func eventAt(t float64) int {
	for i, e := range sampleEvents {
		if t <= e.to {
			return i
		}
	}
	return len(sampleEvents) - 1
}

func charts(t *testing.T) map[string][]byte {
	t.Helper()
	inch := mmCam(5, true)
	inch.k = 1 / 25.4
	hollow := mmCam(5, false)
	hollow.rb, hollow.rise = 24, 24
	refused := mmCam(5, true).motion()
	refused.Released = false
	refused.Title = strings.Repeat("long ", 80)
	figures := map[string][]byte{}
	for name, m := range map[string]MotionChart{"motion": mmCam(5, true).motion(), "motion-inch": inch.motion(),
		"motion-hollow": hollow.motion(), "motion-refused": refused} {
		out, err := Motion(m)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		figures[name] = out
	}
	broken := mmCam(5, true).deviation(2)
	broken.Released = false
	broken.Paths[0].Bound = 0.0141
	broken.Paths[0].Runs[0][200].Value = 0.0139
	for name, d := range map[string]DeviationChart{"error": mmCam(5, true).deviation(1), "error-many": mmCam(5, true).deviation(4),
		"error-inch": inch.deviation(2), "error-broken": broken} {
		out, err := Deviation(d)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		figures[name] = out
	}
	return figures
}

func TestChartTextsKeepApart(t *testing.T) {
	for name, out := range charts(t) {
		t.Run(name, func(t *testing.T) {
			show(t, name, out)
			checkTexts(t, out)
		})
	}
}

// The lift error has its panel with its greatest and least value, in thousandths of a degree for a swinging follower.
func TestLiftError(t *testing.T) {
	d := mmCam(5, true).deviation(1)
	for unit, want := range map[string]string{
		"mm":  "Follower lift error, µm (most 1.7 at 120°, least −1.8 at 240°)",
		"deg": "Follower lift error, 10⁻³ deg (most 1.7 at 120°, least −1.8 at 240°)",
	} {
		d.LiftUnit = unit
		out, err := Deviation(d)
		if err != nil {
			t.Fatal(err)
		}
		if !has(checkTexts(t, out), want) {
			t.Errorf("%s: the chart lacks %q", unit, want)
		}
	}
}

// The second scale stands on the right, a value at the height at which the first scale has its match: at 180 rpm
// 0.1 mm/deg is 108 mm/s.
func TestSecondScale(t *testing.T) {
	out, err := Motion(mmCam(5, true).motion())
	if err != nil {
		t.Fatal(err)
	}
	texts := checkTexts(t, out)
	if !has(texts, "right: mm/deg") || !has(texts, "right: 10⁻³ mm/deg³") {
		t.Error("the second scales have no unit")
	}
	find := func(text string, left bool) float64 {
		for _, w := range texts { // the velocity is the first panel with a second scale
			if w.text == text && (w.box.x0 < 40) == left && w.box.y0 > 60 {
				return w.box.y0
			}
		}
		t.Fatalf("no label %q", text)
		return 0
	}
	perMM := (find("0", true) - find("200", true)) / 200
	if got := (find("0", false) - find("0.2", false)) / 0.2; math.Abs(got-1080*perMM) > 0.02*got {
		t.Errorf("a mm/deg is %.4f mm high, 1080 mm/s are %.4f", got, 1080*perMM)
	}
	bad := mmCam(5, true).motion()
	bad.Jerk.Second = &Scale{"x", math.NaN()}
	if _, err := Motion(bad); err == nil {
		t.Error("a second scale that is not a number was accepted")
	}
}

func TestSameDataSameBytes(t *testing.T) {
	first, second := charts(t), charts(t)
	for name := range first {
		if !bytes.Equal(first[name], second[name]) {
			t.Errorf("%s differs between two runs", name)
		}
	}
	for name, d := range drawings() {
		a, _ := Drawing(d)
		b, _ := Drawing(d)
		if !bytes.Equal(a, b) {
			t.Errorf("drawing %s differs between two runs", name)
		}
	}
}
