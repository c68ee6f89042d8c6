package synth

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lobewright/synth/follower"
	"lobewright/synth/spec"
	"lobewright/synth/taylor"
)

// kinds are spec-to-be-sized for one follower of each kind, each with a limit that binds.
func sizedKinds() map[string]*spec.Spec {
	with := func(f spec.Follower, swing bool, change func(*spec.Spec)) *spec.Spec {
		h := 18.0
		if swing {
			h = 16
		}
		s := sizing(6, 0, true, dwell(50), rise(h, 80, "modified-sine"), dwell(40), fall(h, 100, "polynomial-3-4-5"), dwell(90))
		s.Follower = f
		if change != nil {
			change(s)
		}
		return s
	}
	mill := func(s *spec.Spec) {
		s.Operations = []spec.Operation{{Process: "mill", ToolDiameter: 60, Stock: []float64{0}}}
		s.Limits.PressureAngle = 50
	}
	groove := func(s *spec.Spec) {
		s.Cam.Kind, s.Cam.GrooveDepth, s.Cam.Clearance, s.Cam.OutsideDiameter = "groove", 5, 0.05, 2000
	}
	return map[string]*spec.Spec{
		"roller":       with(spec.Follower{Kind: "translating-roller", RollerDiameter: 20, Offset: 4}, false, nil),
		"roller, tool": with(spec.Follower{Kind: "translating-roller", RollerDiameter: 20}, false, mill),
		"roller, return": with(spec.Follower{Kind: "translating-roller", RollerDiameter: 20, Offset: 4}, false, func(s *spec.Spec) {
			r := 20.0
			s.Limits.PressureAngleReturn = &r
		}),
		"roller, curvature": sizing(12, -6, false, rise(20, 70, "polynomial-4-5-6-7"), fall(20, 70, "simple-harmonic"), dwell(220)),
		"roller, jump":      sizing(3, 5, false, rise(10, 50, "parabolic"), dwell(60), fall(10, 90, "double-harmonic"), dwell(160)),
		"knife":             with(spec.Follower{Kind: "translating-knife", Offset: 3}, false, nil),
		"knife, tool":       with(spec.Follower{Kind: "translating-knife"}, false, mill),
		"mushroom":          with(spec.Follower{Kind: "translating-mushroom", FaceRadius: 50, HeadDiameter: 40}, false, nil),
		"mushroom, contact": with(spec.Follower{Kind: "translating-mushroom", FaceRadius: 50, HeadDiameter: 20}, false, nil),
		"flat":              with(spec.Follower{Kind: "translating-flat", FaceWidth: 60}, false, nil),
		"arm above":         with(spec.Follower{Kind: "swinging-roller", RollerDiameter: 20, ArmLength: 70, PivotDistance: 95}, true, nil),
		"arm below":         with(spec.Follower{Kind: "swinging-roller", RollerDiameter: 20, ArmLength: 80, PivotDistance: 110, Below: true}, true, func(s *spec.Spec) { s.Limits.PressureAngle = 45 }),
		"face above":        with(spec.Follower{Kind: "swinging-flat", PivotDistance: 120, FaceOffset: 5, Face: spec.Face{From: 40, To: 190}}, true, nil),
		"face below":        with(spec.Follower{Kind: "swinging-flat", PivotDistance: 110, FaceOffset: -4, Face: spec.Face{From: 40, To: 190}, Below: true}, true, nil),
		"groove":            with(spec.Follower{Kind: "translating-roller", RollerDiameter: 20, Offset: 4}, false, groove),
		"groove, arm":       with(spec.Follower{Kind: "swinging-roller", RollerDiameter: 20, ArmLength: 70, PivotDistance: 95}, true, groove),
		"groove, hollow": with(spec.Follower{Kind: "translating-roller", RollerDiameter: 90}, false, func(s *spec.Spec) {
			groove(s)
			least := 0.5
			s.Limits.PressureAngle, s.Limits.RadiusOfCurvature = 85, &least
		}),
		"face, contact": with(spec.Follower{Kind: "swinging-flat", PivotDistance: 120, FaceOffset: 5, Face: spec.Face{From: 50, To: 112}, Below: true}, true, nil),
	}
}

// passes builds the cam and asks the gates that limit its base radius.
func passes(t *testing.T, s *spec.Spec, base float64, reach bool) bool {
	t.Helper()
	again := *s
	again.Cam.BaseRadius = base
	cam, err := Build(&again)
	if err != nil {
		return false
	}
	gates := append(cam.kindGates(), cam.pressureGate(), *cam.radiusGate())
	if cam.Grooved() {
		gates = append(gates, cam.grooveGates()[0])
	}
	if g := cam.returnGate(); g != nil {
		gates = append(gates, *g)
	}
	if reach {
		gates = append(gates, cam.reachGates()...)
	}
	for _, g := range gates {
		if !g.Pass && g.ID != "arm" && g.ID != "pivot" {
			return false
		}
	}
	return true
}

// The answer passes its gates; a thousandth less fails one, and so does every smaller radius
// that is tried, from the smallest sensible one on.
func TestSizeIsTight(t *testing.T) {
	binds := map[string]bool{}
	for name, s := range sizedKinds() {
		z, err := Size(s)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		binds[z.Binds] = true
		if !(z.Excluded >= z.BaseRadius*(1-sizeShare)) || z.Excluded > z.BaseRadius {
			t.Errorf("%s: base radius %v, but up to %v is excluded", name, z.BaseRadius, z.Excluded)
		}
		if !passes(t, s, z.BaseRadius, true) {
			t.Errorf("%s: the answer %v fails a gate", name, z.BaseRadius)
		}
		if passes(t, s, 0.999*z.BaseRadius, true) {
			t.Errorf("%s: a thousandth less than %v passes", name, z.BaseRadius)
		}
		for k := range 25 {
			r := z.Floor + (0.999*z.BaseRadius-z.Floor)*float64(k)/25
			if z.Binds != "reach" && passes(t, s, r, false) {
				t.Errorf("%s: %v passes, but %v is called the smallest", name, r, z.BaseRadius)
			}
		}
		t.Logf("%s: %.6f, %s binds, from %.6f excluded to %.6f", name, z.BaseRadius, z.Binds, z.Floor, z.Excluded)
	}
	for _, id := range []string{"pressure-angle", "pressure-angle-return", "radius-of-curvature", "contact", "reach"} {
		if !binds[id] {
			t.Errorf("no case is decided by %s", id)
		}
	}
}

// With pivot and arm in proportion the answer passes its gates when they are, and a thousandth less, all in
// proportion, fails one.
func TestSizeScaledIsTight(t *testing.T) {
	kinds := sizedKinds()
	for _, name := range []string{"arm above", "arm below", "face above", "groove, arm"} {
		s := kinds[name]
		if strings.HasPrefix(name, "face") { // smaller ones are undercut in proportion
			s.Cam.BaseRadius = 95
		}
		z, err := SizeScaled(s)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		at := func(base float64) bool {
			again, unit := *s, base/s.Cam.BaseRadius
			again.Follower.ArmLength, again.Follower.PivotDistance = unit*s.Follower.ArmLength, unit*s.Follower.PivotDistance
			again.Follower.Face = spec.Face{From: unit * s.Follower.Face.From, To: unit * s.Follower.Face.To}
			return passes(t, &again, base, true)
		}
		if !z.Scaled || math.Abs(z.PivotDistance-z.BaseRadius/s.Cam.BaseRadius*s.Follower.PivotDistance) > 1e-9 {
			t.Errorf("%s: pivot distance %v at base radius %v", name, z.PivotDistance, z.BaseRadius)
		}
		if !at(z.BaseRadius) || z.Binds != "bore or offset" && at(0.999*z.BaseRadius) {
			t.Errorf("%s: base radius %v passes: %v; a thousandth less: %v", name, z.BaseRadius, at(z.BaseRadius), at(0.999*z.BaseRadius))
		}
		t.Logf("%s: %.6f in proportion, %s binds", name, z.BaseRadius, z.Binds)
	}
	if _, err := SizeScaled(kinds["flat"]); err == nil {
		t.Error("a follower that does not swing has no pivot to scale")
	}
}

// A flat face needs a base radius of least radius - min(s + s”). Over the lift, for a least
// radius of 0: simple-harmonic pi²/(2B²) - 1, parabolic 4/B² - 1/2, 3-4-5 and
// cycloidal the least of S + S”/B² solved with 12 digits (derived).
func TestSizeFlat(t *testing.T) {
	for _, c := range []struct {
		law         string
		over, ratio float64
	}{
		{"simple-harmonic", 45, 7}, {"simple-harmonic", 60, 3.5}, {"simple-harmonic", 90, 1}, {"simple-harmonic", 120, 0.125},
		{"parabolic", 45, 5.98455575311}, {"parabolic", 60, 3.14756261112}, {"parabolic", 90, 1.12113893828}, {"parabolic", 120, 0.411890652781},
		{"polynomial-3-4-5", 45, 8.42768890103}, {"polynomial-3-4-5", 60, 4.33369031236}, {"polynomial-3-4-5", 90, 1.41138502579}, {"polynomial-3-4-5", 120, 0.391765105103},
		{"cycloidal", 45, 9.27802457578}, {"cycloidal", 60, 4.82269680497}, {"cycloidal", 90, 1.64263127865}, {"cycloidal", 120, 0.533199741881}, {"cycloidal", 150, 0.0243578035642},
	} {
		least := 1.0
		s := sizing(least, 0, true, rise(20, c.over, c.law), dwell(10), fall(20, 190, "cycloidal"), dwell(160-c.over))
		s.Follower = spec.Follower{Kind: "translating-flat", FaceWidth: 400}
		z, err := Size(s)
		if err != nil {
			t.Fatal(err)
		}
		near(t, c.law, z.BaseRadius, least+20*c.ratio, 1e-8)
		if z.Binds != "radius-of-curvature" {
			t.Errorf("%s binds", z.Binds)
		}
	}
}

// Simple-harmonic at 30°, rises only: in line the prime radius A is 3 h over 45°. With an offset
// e the rise asks for d = A - e/tan 30° of the center at lift 0, its start for e <= d tan 30°: the
// least prime radius is A/(2 cos 30°), at e = A/2 tan 30°, on the side the cam turns to.
func TestSizeBestOffset(t *testing.T) {
	for _, c := range []struct {
		clockwise bool
		follower  spec.Follower
		inside    float64
	}{
		{true, spec.Follower{Kind: "translating-roller", RollerDiameter: 20}, 10},
		{false, spec.Follower{Kind: "translating-roller", RollerDiameter: 20}, 10},
		{true, spec.Follower{Kind: "translating-knife"}, 0},
		{false, spec.Follower{Kind: "translating-mushroom", FaceRadius: 8, HeadDiameter: 15.9}, 8},
	} {
		s := sizing(0.01, 0, c.clockwise, rise(20, 45, "simple-harmonic"), dwell(60), fall(20, 200, "cycloidal"), dwell(55))
		s.Follower = c.follower
		s.Follower.OffsetFree = true
		z, err := Size(s)
		if err != nil {
			t.Fatal(err)
		}
		sign := 1.0
		if !c.clockwise {
			sign = -1
		}
		near(t, c.follower.Kind, z.BaseRadius, 60/(2*math.Cos(math.Pi/6))-c.inside, 1e-5)
		near(t, c.follower.Kind+" offset", z.BestOffset, sign*30*math.Tan(math.Pi/6), 1e-4)
		if !z.OffsetFree || z.Binds != "pressure-angle" {
			t.Errorf("offset free %v, %s binds", z.OffsetFree, z.Binds)
		}
		s.Follower.OffsetFree, s.Follower.Offset, s.Cam.BaseRadius = false, z.BestOffset, z.BaseRadius
		if cam, err := Build(s); err != nil || !cam.pressureGate().Pass {
			t.Errorf("%s: the answer fails: %v", c.follower.Kind, err)
		}
	}
}

// Rise and fall alike: no offset is better than another than 0 is.
func TestSizeOffsetOfSymmetricCam(t *testing.T) {
	s := sizing(0.5, 0, true, rise(20, 60, "cycloidal"), dwell(90), fall(20, 60, "cycloidal"), dwell(150))
	limit := 30.0
	s.Limits.PressureAngleReturn, s.Follower.OffsetFree = &limit, true
	z, err := Size(s)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "prime radius", z.BaseRadius+10, 20/.3522976643, 1e-5)
	if math.Abs(z.BestOffset) > 1e-3 {
		t.Errorf("offset %v", z.BestOffset)
	}
}

func TestFreeOffsetIsRefused(t *testing.T) {
	const text = "lobewright: 1\npart: a\nunits: mm\ncamshaft: {speed: 60, rotation: clockwise}\n" +
		"motion: {events: [{rise: 10, over: 180, law: cycloidal}, {fall: 10, over: 180, law: cycloidal}]}\n" +
		"follower: {kind: translating-roller, roller_diameter: 20, offset: free}\n" +
		"cam: {kind: plate, base_radius: 40, thickness: 10}\ntolerance: {profile: 0.02}\n"
	s, err := spec.Read("a.yaml", []byte(text), Vocabulary())
	if err != nil {
		t.Fatal(err)
	}
	if _, err := Build(s); err == nil || !strings.Contains(err.Error(), "a.yaml:6:11: follower.offset: found free; allowed: a length; run lobewright size, then write its offset") {
		t.Errorf("got %v", err)
	}
	groove := strings.Replace(text, "kind: plate", "kind: groove, outside_diameter: 150, groove_depth: 5, clearance: 0.04", 1)
	if _, err := spec.Read("a.yaml", []byte(groove), Vocabulary()); err == nil || !strings.Contains(err.Error(), "follower.offset: found free; allowed: a length from -10000 to 10000; only a plate cam can be sized") {
		t.Errorf("got %v", err)
	}
}

// The mechanisms as functions of the base radius against the cam's own curves, pressure
// angle and contact; and their enclosures against themselves.
func TestMechanisms(t *testing.T) {
	all := sizedKinds()
	names := []string{"roller", "roller, curvature", "knife", "mushroom", "flat", "arm above", "arm below", "face above", "face below"}
	rapid.Check(t, func(t *rapid.T) {
		name := rapid.SampledFrom(names).Draw(t, "kind")
		s := *all[name]
		s.Cam.BaseRadius = rapid.Float64Range(38, 60).Draw(t, "base")
		s.Camshaft.Clockwise = rapid.Bool().Draw(t, "clockwise")
		c, err := Build(&s)
		if err != nil {
			t.Fatal(err)
		}
		z, ok := newSizer(c, nil, 0)
		if !ok {
			t.Fatal("cannot be sized")
		}
		zone, at := c.cycle.Zone(rapid.Float64Range(0, 359.9).Draw(t, "cam angle"))
		m, l := c.movedAt(zone, at), c.LiftIn(zone, at)
		x := z.float(real(s.Cam.BaseRadius), m)
		same := func(what string, got, want float64) {
			if !(math.Abs(got-want) <= 1e-9*(1+math.Abs(want))) {
				t.Errorf("%s, %s: got %v, want %v", name, what, got, want)
			}
		}
		same("pressure angle", math.Abs(math.Atan2(float64(x.n), float64(x.d))), math.Abs(float64(c.follower.PressureAngle(l.S, l.V))))
		if f, ok := c.face(); ok {
			same("radius of curvature", float64(x.rho), faceRound(f, c.liftF(zone, at), at))
			touch := c.follower.Contact(l.S, l.V)
			if _, ok := f.(follower.TranslatingFlat); ok {
				touch *= f.Sense()
			}
			same("contact", float64(x.touch), touch)
		} else {
			same("curvature", float64(x.turn/(x.q*x.q.Sqrt())), -c.outward()*c.Pitch().At(zone, at).K)
		}
		width := rapid.Float64Range(0, 2).Draw(t, "width")
		over := z.over(taylor.IVar(taylor.Interval{Lo: s.Cam.BaseRadius - width, Hi: s.Cam.BaseRadius + width/2}, 1), c.movedOver(zone, at))
		for i, p := range []struct {
			float real
			over  taylor.I
		}{{x.n, over.n}, {x.d, over.d}, {x.turn, over.turn}, {x.q, over.q}, {x.rho, over.rho}, {x.touch, over.touch}} {
			slack := 1e-11 * (1 + math.Abs(float64(p.float)))
			if v := float64(p.float); v < p.over.C[0].Lo-slack || v > p.over.C[0].Hi+slack {
				t.Errorf("%s, figure %d: %v outside %v", name, i, v, p.over.C[0])
			}
		}
	})
}

// An arm that is kept: past some base radius larger cams are worse, and where the limit
// is too tight for the arm no cam is found, with no bisection to be led astray.
func TestSizeOfArmIsNotMonotone(t *testing.T) {
	s := sizedKinds()["arm above"]
	z, err := Size(s)
	if err != nil {
		t.Fatal(err)
	}
	worse := false
	for r := z.BaseRadius; r < s.Follower.PivotDistance+s.Follower.ArmLength-10; r += 2 {
		worse = worse || !passes(t, s, r, false)
	}
	if !worse {
		t.Error("every larger cam passes: the case shows nothing")
	}
	s.Limits.PressureAngle = 4
	if _, err := Size(s); err == nil || !strings.Contains(err.Error(), "no base radius up to") {
		t.Errorf("sized at 4°: %v", err)
	}
}

// BenchmarkSize sizes every plate cam of the samples; what a spec lacks, a least radius of
// curvature, is added; "free" looks for the offset beside. Completing a partial motion and smoothing a table are in it.
func BenchmarkSize(b *testing.B) {
	files, err := filepath.Glob("../samples/*.yaml")
	if err != nil || len(files) == 0 {
		b.Fatal("no samples")
	}
	for _, file := range files {
		data, err := os.ReadFile(file)
		if err != nil {
			b.Fatal(err)
		}
		s, err := spec.Read(file, data, Vocabulary())
		if err != nil {
			b.Fatal(err)
		}
		s, err = s.Load(data, Vocabulary(), func(name string) ([]byte, error) { return os.ReadFile(filepath.Join("../samples", name)) })
		if err != nil {
			b.Fatal(err)
		}
		if s.Cam.Kind != "plate" {
			continue
		}
		if s.Limits.RadiusOfCurvature == nil {
			least := s.Cam.BaseRadius / 8
			s.Limits.RadiusOfCurvature = &least
		}
		free := *s
		free.Follower.OffsetFree = strings.HasPrefix(s.Follower.Kind, "translating-") && s.Follower.Kind != "translating-flat"
		for _, part := range []struct {
			name string
			do   func() error
		}{
			{"build", func() error { _, err := Build(s); return err }},
			{"all", func() error { _, err := Size(s); return err }},
			{"free", func() error { _, err := Size(&free); return err }},
		} {
			b.Run(strings.TrimSuffix(filepath.Base(file), ".yaml")+"/"+part.name, func(b *testing.B) {
				for range b.N {
					if err := part.do(); err != nil {
						b.Fatal(err)
					}
				}
			})
		}
	}
}
