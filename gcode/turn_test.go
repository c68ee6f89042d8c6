package gcode

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// The set of stretches against a count of tenths of a degree.
func TestTurn(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var s turn
		covered := make([]bool, 3600)
		for range rapid.IntRange(1, 5).Draw(t, "stretches") {
			from, n := rapid.IntRange(-4000, 4000).Draw(t, "from"), rapid.IntRange(1, 4000).Draw(t, "tenths")
			s.add(float64(from)/10-0.01, float64(from+n)/10+0.01)
			for k := from; k < from+n; k++ {
				covered[((k%3600)+3600)%3600] = true
			}
		}
		missing := 0.0
		for _, c := range covered {
			if !c {
				missing += 0.1
			}
		}
		gap, at := s.gap()
		if math.Abs(gap-missing) > 0.2 || (missing > 0) == math.IsNaN(at) {
			t.Fatalf("gap %g at %g, want %g", gap, at, missing)
		}
		a := rapid.IntRange(-4000, 4000).Draw(t, "a")
		holds := true
		for k := a; k < a+100; k++ {
			holds = holds && covered[((k%3600)+3600)%3600]
		}
		if got := s.holds(float64(a)/10+0.02, float64(a+100)/10-0.02); got != holds {
			t.Fatalf("holds %d to %d tenths: %v, want %v", a, a+100, got, holds)
		}
	})
}

// Stretches that only touch leave a gap: nothing proves that they meet.
func TestTouchingStretches(t *testing.T) {
	var s turn
	s.add(10, 200)
	s.add(200, 370)
	if gap, at := s.gap(); gap <= 0 || at != 200 && at != 10 {
		t.Errorf("gap %g at %g", gap, at)
	}
	s.add(199, 201)
	s.add(5, 15)
	if gap, _ := s.gap(); gap != 0 {
		t.Errorf("gap %g after both seams are covered", gap)
	}
}
