package spec

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// withEvents is the smallest spec with other events; it turns 1.08 degrees a
// millisecond, 1080 a second.
func withEvents(events ...string) string {
	text := smallest[:strings.Index(smallest, "    - ")]
	for _, e := range events {
		text += "    - {" + e + "}\n"
	}
	return text + smallest[strings.Index(smallest, "follower:"):]
}

func nearly(t *testing.T, what string, got *float64, want float64) {
	t.Helper()
	if got == nil || math.Abs(*got-want) > 1e-14*math.Max(1, math.Abs(want)) {
		t.Errorf("%s: %v, want %v", what, got, want)
	}
}

// Velocities a second become velocities a degree; what was left out stays out; the law
// left out is the polynomial.
func TestVelocityKeys(t *testing.T) {
	e := mustRead(t, withEvents("dwell: 40", "rise: 3, over: 30, to_velocity: 108", "rise: 4, over: 40, law: constant-velocity",
		"rise: 5, over: 27.77777777777778 ms, law: polynomial, from_velocity: matched, to_velocity: 0", "fall: 12, over: 100, law: polynomial", "dwell: rest")).Motion.Events
	nearly(t, "number", e[1].ToVelocity, 0.1)
	nearly(t, "matched", e[3].FromVelocity, 0.1)
	nearly(t, "zero", e[3].ToVelocity, 0)
	if e[1].FromVelocity != nil || e[2].FromVelocity != nil || e[4].ToVelocity != nil {
		t.Errorf("velocities that were not given: %+v", e)
	}
	if *e[3].FromVelocity != e[2].Lift/e[2].Over || *e[1].ToVelocity != e[2].Lift/e[2].Over {
		t.Error("neighbors differ by rounding")
	}
	for i, timed := range []bool{false, true, false, true, false, false} {
		if e[i].Timed != timed {
			t.Errorf("event %d: timed %v", i+1, e[i].Timed)
		}
	}
	for _, i := range []int{1, 3, 4} {
		if e[i].Law.Name != Polynomial {
			t.Errorf("event %d: law %q", i+1, e[i].Law.Name)
		}
	}
	if p := e[1].Law.Place; p != (Place{8, 7}) {
		t.Errorf("place of the law left out: %v", p)
	}
}

// A fall's velocities are negative; each kind of neighbor hands over what it has.
func TestMatched(t *testing.T) {
	for name, c := range map[string]struct {
		events []string
		index  int
		end    bool
		want   float64 // length/degree
	}{
		"constant velocity": {[]string{"fall: 5, over: 50, to_velocity: matched", "fall: 8, over: 40, law: constant-velocity", "fall: 1, over: 20, from_velocity: matched", "rise: 14, over: 90, law: cycloidal", "dwell: rest"}, 0, true, -0.2},
		"after it":          {[]string{"fall: 5, over: 50, to_velocity: matched", "fall: 8, over: 40, law: constant-velocity", "fall: 1, over: 20, from_velocity: matched", "rise: 14, over: 90, law: cycloidal", "dwell: rest"}, 2, false, -0.2},
		"a number":          {[]string{"rise: 5, over: 50, to_velocity: 54", "rise: 8, over: 40, from_velocity: matched", "fall: 13, over: 90, law: cycloidal", "dwell: rest"}, 1, false, 0.05},
		"a half law":        {[]string{"rise: 5, over: 50, to_velocity: matched", "rise: 8, over: 40, law: cycloidal, from_velocity: matched", "fall: 13, over: 90, law: cycloidal", "dwell: rest"}, 0, true, 0.4},
		"a dwell":           {[]string{"rise: 13, over: 50, to_velocity: matched", "dwell: 40", "fall: 13, over: 90, law: cycloidal", "dwell: rest"}, 0, true, 0},
		"a law at rest":     {[]string{"rise: 13, over: 50, to_velocity: matched", "fall: 13, over: 90, law: cycloidal", "dwell: rest"}, 0, true, 0},
		"a polynomial":      {[]string{"rise: 13, over: 50, to_velocity: matched", "fall: 13, over: 90, to_velocity: 0", "dwell: rest"}, 0, true, 0},
		"the first event":   {[]string{"rise: 5, over: 50, law: polynomial, from_velocity: 216", "fall: 13, over: 90, law: cycloidal", "rise: 8, over: 220, to_velocity: matched"}, 2, true, 0.2},
		"a half's own":      {[]string{"rise: 13, over: 65, law: cycloidal, to_velocity: matched", "rise: 1, over: 10, from_velocity: matched", "fall: 14, over: 90, law: cycloidal", "dwell: rest"}, 0, true, 0.4},
	} {
		text := strings.Replace(withEvents(c.events...), "  events:", "  start_lift: 14\n  events:", 1)
		e := mustRead(t, text).Motion.Events[c.index]
		got := e.FromVelocity
		if c.end {
			got = e.ToVelocity
		}
		nearly(t, name, got, c.want)
	}
}

// A velocity written for half a law is taken to six digits, as messages print it; lift
// and angle decide. π/2 * 5 mm / 30 degrees at 1080 degrees a second is 282.74333882 mm/s.
func TestHalfLawToSixDigits(t *testing.T) {
	text := func(v string) string {
		return withEvents("rise: 5, over: 30, law: simple-harmonic, to_velocity: "+v, "rise: 9, over: 60, from_velocity: matched", "fall: 14, over: 120, law: cycloidal", "dwell: rest")
	}
	for _, v := range []string{"282.743", "282.7433388", "matched"} {
		s := mustRead(t, text(v))
		nearly(t, v, s.Motion.Events[0].ToVelocity, math.Pi/2*5/30)
		nearly(t, v, s.Motion.Events[1].FromVelocity, math.Pi/2*5/30)
		if s.Motion.Events[0].Timed {
			t.Error("a half law does not depend on the speed")
		}
	}
	for _, v := range []string{"282.73", "282.75", "0"} {
		if _, err := Read("x.yaml", []byte(text(v)), vocabulary()); err == nil || strings.Count(err.Error(), "found ") != 1 {
			t.Errorf("%s: %v", v, err)
		}
	}
}

func TestInflectionKey(t *testing.T) {
	e := mustRead(t, withEvents("rise: 5, over: 150, law: cycloidal, inflection: 0.3", "fall: 5, over: 90, law: {cosine: 1}, inflection: 0.75", "dwell: rest")).Motion.Events
	if e[0].Inflection != 0.3 || e[1].Inflection != 0.75 || e[2].Inflection != 0 {
		t.Errorf("%+v", e)
	}
}

// The lift and the angle that a message gives for half a law do meet the velocity.
func TestAdviceOfHalfLawMeets(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lift := rapid.Float64Range(0.5, 20).Draw(t, "lift")
		over := rapid.Float64Range(5, 60).Draw(t, "over")
		velocity := math.Round(1000*1080*lift/over*rapid.Float64Range(0.7, 4).Draw(t, "ratio")) / 1000
		law := rapid.SampledFrom([]string{"cycloidal", "simple-harmonic"}).Draw(t, "law")
		text := func(lift, over string) string {
			return withEvents(fmt.Sprintf("rise: %s, over: %s, law: %s, to_velocity: %v", lift, over, law, velocity), "rise: 2, over: 30, from_velocity: matched", "fall: 2, over: 60, law: cycloidal", "dwell: rest")
		}
		_, err := Read("x.yaml", []byte(text(fmt.Sprint(lift), fmt.Sprint(over))), vocabulary())
		_, advice, ok := strings.Cut(err.Error(), " write over: ") // the lifts do not close in any case
		if half, _ := vocabulary().half(law); !ok && math.Abs(half*lift/over*1080-velocity) < 1e-5*velocity {
			return // drawn by chance as it must be
		}
		angle, height, ok := strings.Cut(advice, " or rise: ")
		if !ok {
			t.Fatalf("no advice: %v", err)
		}
		height, _, _ = strings.Cut(height, "\n")
		for _, one := range []string{text(fmt.Sprint(lift), angle), text(height, fmt.Sprint(over))} {
			if _, err := Read("x.yaml", []byte(one), vocabulary()); err != nil && strings.Contains(err.Error(), "to_velocity") {
				t.Fatalf("advice %s: %v", advice, err)
			}
		}
	})
}
