package tolerance_test

import (
	"math"
	"testing"

	"lobewright/tolerance"
)

// A disc under a flat face or an in-line roller answers 1 to 1: an eccentricity n lifts by n·cos θ, with an
// acceleration of n; a disc too large only lifts; a polygon's wave of half length Δ by n·(π/Δ)².
func TestEffectOnADisc(t *testing.T) {
	disc := []tolerance.Answer{{G: 1}}
	const n = 0.004
	for _, c := range []struct {
		share  tolerance.Share
		blocks int
		want   tolerance.Effect
	}{
		{tolerance.OnContour("positioning", n, tolerance.Variable, tolerance.Turn), 1, tolerance.Effect{Lift: n, Acceleration: n}},
		{tolerance.OnContour("tool", n, tolerance.Variable, tolerance.Parallel), 1, tolerance.Effect{Lift: n}},
		{tolerance.OnContour("grid", n, tolerance.Fixed, tolerance.Blocks), 60, tolerance.Effect{Lift: n, Acceleration: 900 * n}},
		{tolerance.Share{Source: "phase", HalfWidth: n, Wave: tolerance.Shifted, Angle: 0.001}, 1, tolerance.Effect{}},
	} {
		e := c.share.Worst(disc, c.blocks)
		if math.Abs(e.Lift-c.want.Lift) > 1e-15 || math.Abs(e.Acceleration-c.want.Acceleration) > 1e-15 {
			t.Errorf("%s: %+v, want %+v", c.share.Source, e, c.want)
		}
	}
}

// An arm of length L that swings by a lift in radians answers 1/L; what the wave n·cos(θ+β) makes of a
// growing answer g = g0·e^(kθ) is the second derivative of the product, at its worst over β:
// g·n·√((k²-1)² + (2k)²) = g·n·(k²+1).
func TestEffectOfAWave(t *testing.T) {
	const g, k, n = 0.01, 0.7, 0.003
	share := tolerance.OnContour("runout", n, tolerance.Variable, tolerance.Turn)
	got := share.Worst([]tolerance.Answer{{G: g, DG: k * g, DDG: k * k * g}, {G: g / 2}}, 1)
	if want := g * n * (k*k + 1); math.Abs(got.Acceleration-want) > 1e-15 || math.Abs(got.Lift-g*n) > 1e-15 {
		t.Errorf("%+v, want %g", got, want)
	}
	moved := tolerance.Share{Source: "phase", Wave: tolerance.Shifted, Angle: 0.002}.Worst([]tolerance.Answer{{G: 1, V: -20, J: 300}, {G: 1, V: 12, J: -500}}, 1)
	if math.Abs(moved.Lift-0.04) > 1e-15 || math.Abs(moved.Acceleration-1) > 1e-15 {
		t.Errorf("shifted: %+v, want 0.04 and 1", moved)
	}
}
