package synth

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"lobewright/synth/spec"
	"pgregory.net/rapid"
)

// read reads a spec at 180 rpm, 1080 degrees a second, with these events.
func read(t interface {
	Helper()
	Fatal(...any)
}, events ...string) *spec.Spec {
	t.Helper()
	text := "lobewright: 1\npart: x\nunits: mm\ncamshaft: {speed: 180, rotation: clockwise}\nmotion:\n  events:\n"
	for _, e := range events {
		text += "    - {" + e + "}\n"
	}
	text += "follower: {kind: translating-roller, roller_diameter: 22}\ncam: {kind: plate, base_radius: 45, thickness: 12, datum: none}\ntolerance: {profile: 0.02}\n"
	s, err := spec.Read("x.yaml", []byte(text), Vocabulary())
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// With a stretch of constant velocity, 9 mm in 90 degrees, 108 mm/s, entered and left in
// each of the ways, the velocity is continuous and so is the acceleration at the stretch.
func TestHandOver(t *testing.T) {
	for name, e := range map[string][2]string{
		"matched":   {"rise: 2, over: 40, to_velocity: matched", "rise: 3, over: 50, law: polynomial, from_velocity: matched"},
		"numbers":   {"rise: 2, over: 40, law: polynomial, to_velocity: 108", "rise: 3, over: 50, from_velocity: 108"},
		"cycloidal": {"rise: 2, over: 40, law: cycloidal, to_velocity: 108", "rise: 2.5, over: 50, law: cycloidal, from_velocity: matched"},
		"harmonic":  {"rise: 2.546479089470325, over: 40, law: simple-harmonic, to_velocity: 108", "rise: 3.183098861837907, over: 50, law: simple-harmonic, from_velocity: 108"},
	} {
		events := func(up, down string) []string {
			var a, b float64
			fmt.Sscanf(up, "rise: %g", &a)
			fmt.Sscanf(down, "rise: %g", &b)
			return []string{up, "rise: 9, over: 90, law: constant-velocity", down, fmt.Sprintf("fall: %v, over: 100, law: modified-sine", a+9+b), "dwell: rest"}
		}
		c, err := Build(read(t, events(e[0], e[1])...))
		if err != nil {
			t.Fatal(name, err)
		}
		for _, j := range c.Cycle().Junctions() {
			if math.Abs(j.VelocityStep()) > 1e-12 || (j.At == 40 || j.At == 130) && math.Abs(j.AccelerationStep()) > 1e-10 {
				t.Errorf("%s, at %g: velocity %v, acceleration %v", name, j.At, j.Velocity, j.Acceleration)
			}
		}
		for _, deg := range []float64{40, 85, 130} {
			if v := c.LiftAt(deg).V * c.Omega(); math.Abs(v-108) > 1e-10 {
				t.Errorf("%s: %v mm/s at %g", name, v, deg)
			}
		}
	}
}

// The same as a fall, with angles as times: 1.08 degrees a millisecond.
func TestHandOverOfFall(t *testing.T) {
	c, err := Build(read(t, "rise: 14, over: 62.5 ms, law: modified-sine", "dwell: 25 ms", "fall: 2, over: 37.037037037037038 ms, law: cycloidal, to_velocity: -108",
		"fall: 9, over: 90, law: constant-velocity", "fall: 3, over: 45 ms, from_velocity: matched", "dwell: rest"))
	if err != nil {
		t.Fatal(err)
	}
	for _, j := range c.Cycle().Junctions() {
		if math.Abs(j.VelocityStep()) > 1e-12 || math.Abs(j.AccelerationStep()) > 1e-10 {
			t.Errorf("at %g: velocity %v, acceleration %v", j.At, j.Velocity, j.Acceleration)
		}
	}
	// From rest the half cycloid: 2 mm of u - sin(pi u)/pi; at half its angle 2(1/2 - 1/pi).
	if l := c.LiftAt(67.5 + 27 + 20); math.Abs(l.S-(14-(1-2/math.Pi))) > 1e-12 {
		t.Errorf("lift %v in the middle of the half law", l.S)
	}
	if v := c.LiftAt(67.5+27+85).V * c.Omega(); math.Abs(v+108) > 1e-10 {
		t.Errorf("%v mm/s", v)
	}
}

// inflection is counted as the cam turns, in a rise and in a fall: there the acceleration
// changes sign, and the lift has run the same share of the way.
func TestInflection(t *testing.T) {
	for _, law := range []string{"modified-sine", "polynomial-4-5-6-7", "{sine: 0.5, constant: 0.1, cosine: 0.4}", "modified-constant-velocity, constant_share: 0.2"} {
		c, err := Build(read(t, "dwell: 30", "rise: 10, over: 100, inflection: 0.3, law: "+law, "dwell: 30", "fall: 10, over: 150, inflection: 0.3, law: "+law, "dwell: rest"))
		if err != nil {
			t.Fatal(err)
		}
		for deg, sign := range map[float64]float64{31: 1, 50: 1, 66: -1, 100: -1, 129: -1, 161: -1, 190: -1, 218: 1, 250: 1, 309: 1} {
			if a := c.LiftAt(deg).A; a*sign <= 0 && (deg != 66 && deg != 218 || !strings.HasPrefix(law, "modified-c")) {
				t.Errorf("%s: acceleration %g at %g", law, a, deg)
			}
		}
		if up, down := c.LiftAt(60), c.LiftAt(205); math.Abs(up.S-3) > 1e-12 || math.Abs(down.S-7) > 1e-12 || math.Abs(up.A)+math.Abs(down.A) > 1e-9 {
			t.Errorf("%s: %+v, %+v", law, up, down)
		}
		// Peak acceleration of the first part is 1/0.6 of the even law's.
		even, err := Build(read(t, "dwell: 30", "rise: 10, over: 100, law: "+law, "dwell: 30", "fall: 10, over: 150, law: "+law, "dwell: rest"))
		if err != nil {
			t.Fatal(err)
		}
		if got, want := c.Peaks().A, even.Peaks().A/0.6; math.Abs(got-want) > 1e-10*want {
			t.Errorf("%s: peak acceleration %v, want %v", law, got, want)
		}
	}
}

// From a dwell to V = 4: -6u³ + 13u⁴ - 6u⁵, lowest at u = (26 - sqrt(136))/30.
func TestLiftBelowZero(t *testing.T) {
	const v = 4 * 10. / 100 * 1080
	events := []string{"dwell: 30", fmt.Sprintf("rise: 10, over: 100, to_velocity: %v", v), "rise: 5, over: 100, from_velocity: matched", "fall: 15, over: 80, law: cycloidal", "dwell: rest"}
	u := (26 - math.Sqrt(136)) / 30
	low := 10 * (-6*u*u*u + 13*u*u*u*u - 6*u*u*u*u*u)
	_, err := Build(read(t, events...))
	want := fmt.Sprintf("x.yaml:8:7: motion.events[2]: found a lift of %.6g mm at cam angle %.6g, the lowest of this rise; allowed: lifts of 0 or more", low, 30+100*u)
	if err == nil || !strings.HasPrefix(err.Error(), want) {
		t.Errorf("%v; want %s", err, want)
	}
	s := read(t, events...)
	s.Motion.StartLift = 2
	c, err := Build(s)
	if err != nil {
		t.Fatal(err)
	}
	if got := c.Cycle().MinLift(); math.Abs(got-2-low) > 1e-9 {
		t.Errorf("least lift %v, want %v", got, 2+low)
	}
}

// What Build is handed without the reader is refused too.
func TestEventLawErrors(t *testing.T) {
	v := 0.1
	huge := math.MaxFloat64
	for want, change := range map[string]func(e *spec.Event){
		"modified-sine":                   func(e *spec.Event) { e.ToVelocity = &v },
		"must be at most 1000 times":      func(e *spec.Event) { e.Law.Name = spec.Polynomial; e.ToVelocity = &huge },
		"double-harmonic takes no":        func(e *spec.Event) { e.Law.Name = "double-harmonic"; e.Inflection = 0.4 },
		"above 0 and below 1":             func(e *spec.Event) { e.Inflection = 2 },
		`law "wobble" is not known`:       func(e *spec.Event) { e.Law.Name = "wobble" },
		"half the law cycloidal has one ": func(e *spec.Event) { e.Law.Name = "cycloidal"; e.FromVelocity, e.ToVelocity = &v, &v },
	} {
		s := read(t, "dwell: 30", "rise: 10, over: 100, law: modified-sine", "fall: 10, over: 100, law: cycloidal", "dwell: rest")
		change(&s.Motion.Events[1])
		c, err := Build(s)
		if c != nil || err == nil || !strings.Contains(err.Error(), want) || !strings.HasPrefix(err.Error(), "x.yaml:8:34: motion.events[2]: ") {
			t.Errorf("want %q, got %v", want, err)
		}
	}
}

func TestVocabularyOfVelocities(t *testing.T) {
	v := Vocabulary()
	if strings.Join(v.SymmetricLaws, " ") != "parabolic simple-harmonic cycloidal modified-trapezoidal modified-sine polynomial-3-4-5 polynomial-4-5-6-7 modified-constant-velocity" {
		t.Error(v.SymmetricLaws)
	}
	if len(v.HalfLaws) != 2 || v.HalfLaws[0].Name != "simple-harmonic" || math.Abs(v.HalfLaws[0].Speed-math.Pi/2) > 1e-15 || v.HalfLaws[1] != (spec.HalfLaw{Name: "cycloidal", Speed: 2}) {
		t.Error(v.HalfLaws)
	}
}

// Random stretches at constant velocity, entered and left by polynomials or half laws that
// are matched: what the reader takes, Build makes without a step of velocity; what goes
// below 0 is refused.
func TestHandOverProperty(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		speed := rapid.Float64Range(0.02, 0.5).Draw(t, "speed") // length per degree
		var events []string
		total := 0.0
		add := func(kind string, over float64, end string) {
			lift := over * speed / rapid.Float64Range(0.2, 3.5).Draw(t, "ratio") // mean velocity
			law := ""
			if half := rapid.SampledFrom([]string{"", "cycloidal", "simple-harmonic"}).Draw(t, "law"); half != "" {
				law, lift = "law: "+half+", ", over*speed/map[string]float64{"cycloidal": 2, "simple-harmonic": math.Pi / 2}[half]
			}
			events = append(events, fmt.Sprintf("%s: %v, over: %v, %s%s: matched", kind, lift, over, law, end))
			total += lift
		}
		a, b, c := rapid.Float64Range(10, 80).Draw(t, "a"), rapid.Float64Range(10, 80).Draw(t, "b"), rapid.Float64Range(10, 80).Draw(t, "c")
		add("rise", a, "to_velocity")
		events = append(events, fmt.Sprintf("rise: %v, over: %v, law: constant-velocity", speed*b, b))
		total += speed * b
		add("rise", c, "from_velocity")
		events = append(events, fmt.Sprintf("fall: %v, over: 90, law: cycloidal, inflection: %v", total, rapid.Float64Range(0.1, 0.9).Draw(t, "inflection")), "dwell: rest")
		k, err := Build(read(t, events...))
		if err != nil {
			if !strings.Contains(err.Error(), "a lift of -") {
				t.Fatal(err)
			}
			return
		}
		for _, j := range k.Cycle().Junctions() {
			if math.Abs(j.VelocityStep()) > 1e-7*speed*180/math.Pi {
				t.Fatalf("at %g: velocity %v", j.At, j.Velocity)
			}
		}
		for i := range 720 {
			s := k.LiftAt(float64(i) / 2).S
			if s < -1e-8*total || s > k.Cycle().MaxLift()*(1+1e-9) || s < k.Cycle().MinLift()-1e-9*total {
				t.Fatalf("lift %v at %g", s, float64(i)/2)
			}
		}
	})
}
