package partial_test

import (
	"errors"
	"math"
	"testing"

	"lobewright/synth/motion"
	"lobewright/synth/partial"
	"lobewright/synth/taylor"
	"pgregory.net/rapid"
)

func at(deg, lift float64) partial.Fact { return partial.Fact{From: deg, To: deg, Lift: &lift} }
func hold(from, to, lift float64) partial.Fact {
	return partial.Fact{From: from, To: to, Lift: &lift}
}
func carry(from, to, v float64) partial.Fact {
	return partial.Fact{From: from, To: to, Velocity: &v}
}
func above(from, to, v float64) partial.Fact { return partial.Fact{From: from, To: to, Above: &v} }
func below(from, to, v float64) partial.Fact { return partial.Fact{From: from, To: to, Below: &v} }
func state(deg, lift, v, a float64) partial.Fact {
	return partial.Fact{From: deg, To: deg, Lift: &lift, Velocity: &v, Acceleration: &a}
}

// problems are the kinds of things people know.
var problems = map[string][]partial.Fact{
	"rest to rest":         {hold(0, 90, 0), hold(180, 270, 10)},
	"carried":              {hold(0, 60, 0), carry(100, 140, 0.2), hold(190, 220, 20)},
	"window in the way":    {hold(0, 60, 0), below(60, 120, 2), hold(180, 220, 20)},
	"unequal dwells":       {hold(0, 120, 0), hold(150, 160, 10), hold(200, 210, 4)},
	"mid-air":              {hold(0, 90, 0), at(130, 8), hold(180, 270, 10)},
	"three lifts":          {at(0, 0), at(120, 10), at(200, 4)},
	"two peaks":            {hold(0, 60, 0), at(120, 10), at(180, 3), at(240, 12)},
	"corridor":             {hold(0, 60, 0), above(90, 140, 4), below(90, 140, 5), hold(200, 240, 12)},
	"floor in the way":     {at(0, 0), at(20, 0), at(120, 10), at(200, 0.5)},
	"wrapped dwell":        {hold(300, 420, 0), at(180, 6)},
	"a whole state":        {hold(0, 30, 1), state(120, 9, 0.1, -0.002), hold(200, 210, 12)},
	"carried over a floor": {hold(350, 370, 0), carry(60, 90, 0.1), below(0, 120, 7), at(180, 15), above(170, 200, 12)},
}

// within 2 % of a bound that holds for every motion whatsoever.
const gap = 0.02

func TestProblems(t *testing.T) {
	for name, facts := range problems {
		for _, jerk := range []bool{true, false} {
			r, err := partial.Solve(partial.Problem{Facts: facts, Jerk: jerk, JerkRatio: 2})
			if err != nil {
				t.Fatalf("%s: %v", name, err)
			}
			if share := r.Share(jerk); !(share >= 0 && share <= gap) {
				t.Errorf("%s, jerk %t: %.3g above the bound", name, jerk, share)
			}
			if r.Jerk > r.JerkLimit*(1+1e-12) || !jerk && r.JerkLimit > 2*r.LeastJerk*(1+1e-12) {
				t.Errorf("%s: jerk %g, limit %g, least %g", name, r.Jerk, r.JerkLimit, r.LeastJerk)
			}
			if n := len(r.Zones); n > 30 {
				t.Errorf("%s: %d zones", name, n)
			}
			meets(t, name, facts, r)
		}
	}
}

// meets holds a result to its facts by sampling, and to its peaks; it shares no code
// with the solver but the evaluator of zones.
func meets(t tb, name string, facts []partial.Fact, r partial.Result) {
	t.Helper()
	eval := func(deg float64) taylor.F {
		t0 := r.Zones[0].From
		for deg < t0 {
			deg += 360
		}
		for deg >= t0+360 {
			deg -= 360
		}
		for i, z := range r.Zones {
			if deg < z.To || i == len(r.Zones)-1 {
				return motion.Eval(z, taylor.FVar(deg))
			}
		}
		return taylor.F{}
	}
	size := 0.0
	for i := range 3600 {
		size = math.Max(size, math.Abs(eval(float64(i) / 10).C[0]))
	}
	is := func(what string, deg, got, want, slack float64) {
		t.Helper()
		if !(math.Abs(got-want) <= slack) {
			t.Errorf("%s: at %g %s is %.15g, want %g", name, deg, what, got, want)
		}
	}
	for _, f := range append(facts, above(0, 360, 0)) {
		n := 200
		if f.From == f.To {
			n = 0
		}
		for i := 0; i <= n; i++ {
			deg := f.From
			if n > 0 {
				deg += (f.To - f.From) * float64(i) / float64(n)
			}
			got := eval(deg)
			if f.Lift != nil {
				is("lift", deg, got.C[0], *f.Lift, 1e-13*size)
			}
			if f.Velocity != nil {
				is("velocity", deg, got.Deriv(1), *f.Velocity, 1e-12*size)
			}
			if f.Acceleration != nil {
				is("acceleration", deg, got.Deriv(2), *f.Acceleration, 1e-12*size)
			}
			if f.Above != nil && got.C[0] < *f.Above-1e-12*size || f.Below != nil && got.C[0] > *f.Below+1e-12*size {
				t.Errorf("%s: lift %.15g at %g is outside its window", name, got.C[0], deg)
			}
		}
	}
	var a, j float64
	for i, z := range r.Zones {
		next := r.Zones[(i+1)%len(r.Zones)]
		before, after := motion.Eval(z, taylor.FVar(z.To)), motion.Eval(next, taylor.FVar(next.From))
		h := z.To - z.From
		for k, slack := range []float64{1e-13, 1e-12, 1e-11} {
			is("derivative", z.To, before.Deriv(k), after.Deriv(k), slack*size/math.Pow(min(h, next.To-next.From), float64(k)))
		}
		for k := range 50 {
			e := motion.Eval(z, taylor.FVar(z.From+h*float64(k)/49))
			a, j = math.Max(a, math.Abs(e.Deriv(2))), math.Max(j, math.Abs(e.Deriv(3)))
		}
	}
	if a > r.Acceleration*(1+1e-9) || a < r.Acceleration*0.99 || j > r.Jerk*(1+1e-9) || j < r.Jerk*0.99 {
		t.Errorf("%s: peaks said %g, %g, sampled %g, %g", name, r.Acceleration, r.Jerk, a, j)
	}
}

// Rest to rest over b, lift h: the least peak jerk is 32 h/b³ (four equal stretches of
// constant jerk); with the jerk held to q times that the least peak acceleration is
// that of the trapezoid with ramps of a = A/J: A(b/2 - A/J)·b/4 = h/2, so A = (4 q) 4h/b²
// (1 - sqrt(1-1/q)), falling to 4 h/b² (constant acceleration) as q grows.
func TestRestToRest(t *testing.T) {
	const h, b = 10.0, 90.0
	facts := problems["rest to rest"]
	r, err := partial.Solve(partial.Problem{Facts: facts, Jerk: true})
	if err != nil {
		t.Fatal(err)
	}
	if want := 32 * h / (b * b * b); !(r.LeastJerk <= want && want <= r.Jerk && r.Jerk < want*1.002 && r.LeastJerk > want*0.999) {
		t.Errorf("jerk factor %g, proven at least %g, want 32", r.Jerk*b*b*b/h, r.LeastJerk*b*b*b/h)
	}
	for _, q := range []float64{1.1, 1.5, 2, 4, 16} {
		r, err := partial.Solve(partial.Problem{Facts: facts, JerkRatio: q})
		if err != nil {
			t.Fatal(err)
		}
		want := 8 * q * (1 - math.Sqrt(1-1/q)) * h / (b * b)
		if !(r.LeastAcceleration <= want && want <= r.Acceleration*(1+1e-4) && r.Acceleration < want*1.02 && r.LeastAcceleration > want*0.98) {
			t.Errorf("ratio %g: acceleration factor %g, proven at least %g, want %g", q,
				r.Acceleration*b*b/h, r.LeastAcceleration*b*b/h, want*b*b/h)
		}
	}
}

// No motion is below the bound: every law of the field that meets the facts is not.
func TestLawsAgainstBound(t *testing.T) {
	r, err := partial.Solve(partial.Problem{Facts: problems["rest to rest"], Jerk: true})
	if err != nil {
		t.Fatal(err)
	}
	for _, name := range motion.Names() {
		l, err := motion.Named(name, 0.5)
		if err != nil {
			t.Fatal(err)
		}
		if p := l.Peaks(); p.Jerk*10/(90*90*90) < r.LeastJerk {
			t.Errorf("%s has peak jerk factor %g, below the bound", name, p.Jerk)
		}
	}
}

func TestConstant(t *testing.T) {
	r, err := partial.Solve(partial.Problem{Facts: []partial.Fact{at(30, 4), hold(100, 200, 4)}, JerkRatio: 2})
	if err != nil || len(r.Zones) != 1 || !r.Zones[0].Dwell || r.Zones[0].Poly[0] != 4 {
		t.Errorf("%+v, %v", r, err)
	}
}

func TestSolveErrors(t *testing.T) {
	if _, err := partial.Solve(partial.Problem{Facts: []partial.Fact{carry(0, 20, 0.1)}, JerkRatio: 2}); !errors.Is(err, partial.ErrNoLift) {
		t.Error(err)
	}
	if _, err := partial.Solve(partial.Problem{Facts: []partial.Fact{at(0, 1), at(0, 2)}, JerkRatio: 2}); !errors.Is(err, partial.ErrConflict) {
		t.Error(err)
	}
}

// facts drawn at random: either they are in conflict, and the set named is one from
// which no fact can be dropped, or the motion found meets them.
func TestRandomFacts(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		facts := draw(t)
		conflict := partial.Conflict(facts)
		r, err := partial.Solve(partial.Problem{Facts: facts, Jerk: rapid.Bool().Draw(t, "jerk"), JerkRatio: rapid.Float64Range(1, 4).Draw(t, "ratio")})
		if (conflict != nil) != errors.Is(err, partial.ErrConflict) {
			t.Fatalf("conflict %v, solved with %v", conflict, err)
		}
		if conflict == nil {
			if err != nil {
				t.Fatal(err)
			}
			meets(t, "random", facts, r)
			return
		}
		for i := range conflict {
			less := append(append([]partial.Fact(nil), conflict[:i]...), conflict[i+1:]...)
			if !solvable(less) {
				t.Fatalf("without %+v the set is still no motion's", conflict[i])
			}
		}
	})
}

// solvable asks the solver itself; a lift somewhere anchors the motion.
func solvable(facts []partial.Fact) bool {
	var stated []partial.Fact
	floor := false
	for _, f := range facts {
		if f.ID == partial.Floor {
			floor = true
			continue
		}
		stated = append(stated, f)
	}
	if !floor { // lift the whole problem above the floor that is always implied
		for i, f := range stated {
			for _, x := range []**float64{&f.Lift, &f.Above, &f.Below} {
				if *x != nil {
					y := **x + 1000
					*x = &y
				}
			}
			stated[i] = f
		}
	}
	_, err := partial.Solve(partial.Problem{Facts: stated, Jerk: true})
	return err == nil || errors.Is(err, partial.ErrNoLift)
}

// draw makes a handful of facts on a coarse raster, so that many of them meet.
func draw(t *rapid.T) []partial.Fact {
	deg := rapid.Map(rapid.IntRange(0, 17), func(i int) float64 { return float64(20 * i) })
	lift := rapid.Map(rapid.IntRange(0, 4), func(i int) float64 { return float64(3 * i) })
	facts := []partial.Fact{at(deg.Draw(t, "at"), lift.Draw(t, "lift"))}
	for range rapid.IntRange(1, 5).Draw(t, "facts") {
		from, x := deg.Draw(t, "from"), lift.Draw(t, "value")
		to := from + float64(20*rapid.IntRange(1, 5).Draw(t, "over"))
		switch rapid.IntRange(0, 5).Draw(t, "kind") {
		case 0:
			facts = append(facts, at(from, x))
		case 1:
			facts = append(facts, hold(from, to, x))
		case 2:
			facts = append(facts, carry(from, to, (x-6)/60))
		case 3:
			facts = append(facts, above(from, to, x))
		case 4:
			facts = append(facts, below(from, to, x+1))
		case 5:
			v := (x - 6) / 60
			facts = append(facts, partial.Fact{From: from, To: from, Velocity: &v})
		}
	}
	return facts
}

// tb is what testing.T and rapid.T share.
type tb interface {
	Helper()
	Errorf(string, ...any)
}

// The long facts people type: each is one completion of a stick lift.
func BenchmarkSolve(b *testing.B) {
	for range b.N {
		if _, err := partial.Solve(partial.Problem{Facts: problems["window in the way"], JerkRatio: 2}); err != nil {
			b.Fatal(err)
		}
	}
}

// A lift of 0, where the floor is, and a carried stretch soon after: the program of the least peak jerk is degenerate there, and
// the usual steps of the method shrink to nothing.
func TestDegenerateVertex(t *testing.T) {
	facts := []partial.Fact{at(0, 0), carry(20, 60, 0.05)}
	for _, jerk := range []bool{true, false} {
		r, err := partial.Solve(partial.Problem{Facts: facts, Jerk: jerk, JerkRatio: 3.877265016857833})
		if err != nil {
			t.Fatal(err)
		}
		meets(t, "degenerate", facts, r)
		if !jerk && !(r.Acceleration >= r.LeastAcceleration && r.Acceleration < 1.02*r.LeastAcceleration) {
			t.Errorf("acceleration %g, bound %g", r.Acceleration, r.LeastAcceleration)
		}
	}
}
