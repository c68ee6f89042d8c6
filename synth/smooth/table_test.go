package smooth_test

import (
	"math"
	"testing"

	"lobewright/synth/motion"
	"lobewright/synth/smooth"
)

// cycle returns a rise by one law, a dwell, a fall by another and a dwell.
func cycle(t testing.TB, rise, fall string, lift, startAt, over, top, back float64) *motion.Cycle {
	t.Helper()
	up, err := motion.Named(rise, motion.DefaultConstantShare)
	if err != nil {
		t.Fatal(err)
	}
	down, err := motion.Named(fall, motion.DefaultConstantShare)
	if err != nil {
		t.Fatal(err)
	}
	c, err := motion.Join(startAt, 0, []motion.Event{
		{Kind: motion.Rise, Lift: lift, Over: over, Law: up},
		{Kind: motion.Dwell, Over: top},
		{Kind: motion.Fall, Lift: lift, Over: back, Law: down},
		{Kind: motion.Dwell, Over: 360 - over - top - back},
	})
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// tabulated returns the table of a cycle at n even steps from first on, lifts rounded to a
// multiple of place (not when that is 0).
func tabulated(c *motion.Cycle, n int, first, place float64) smooth.Table {
	var out smooth.Table
	for i := range n {
		deg := first + 360*float64(i)/float64(n)
		lift, _, _, _ := c.At(deg)
		if place > 0 {
			lift = math.Round(lift/place) / math.Round(1/place)
		}
		out.Angle, out.Lift = append(out.Angle, deg), append(out.Lift, lift)
	}
	return out
}

// misfit is how a curve differs from the cycle its table was made of.
type misfit struct {
	lift    float64 // the largest
	within  float64 // share of the turn on which the acceleration is right to 3 % of its peak
	rms     float64 // of the acceleration, length per rad²
	largest float64 // of the acceleration
	lowest  float64 // lift of the curve
}

func compare(c *motion.Cycle, curve smooth.Curve) misfit {
	const points = 7200
	e := misfit{lowest: math.Inf(1)}
	peak := math.Abs(c.Peaks().Acceleration.Value)
	for i := range points {
		deg := 360 * (float64(i) + 0.37) / points
		lift, _, a, _ := c.At(deg)
		got, _, b, _ := curve.At(deg)
		e.lift = max(e.lift, math.Abs(got-lift))
		e.largest = max(e.largest, math.Abs(a-b))
		e.lowest = min(e.lowest, got)
		e.rms += (a - b) * (a - b) / points
		if math.Abs(a-b) <= 0.03*peak {
			e.within += 1. / points
		}
	}
	e.rms = math.Sqrt(e.rms)
	return e
}

// steps returns the largest step of each derivative 0 to 4 at the joints of a curve, as a
// share of the larger coefficient bound of the two pieces.
func steps(curve smooth.Curve) (out [5]float64) {
	n := len(curve.Pieces)
	for i, p := range curve.Pieces {
		q := curve.Pieces[(i+1)%n]
		for k := range out {
			a, boundA := derivative(p, k, p.To)
			b, boundB := derivative(q, k, q.From)
			if bound := max(boundA, boundB); bound > 0 {
				out[k] = max(out[k], math.Abs(a-b)/bound)
			}
		}
	}
	return out
}

// derivative returns the k-th derivative per degree, and what it is at most for |u| <= 1.
func derivative(p smooth.Piece, k int, deg float64) (value, bound float64) {
	u := (deg - p.Origin) / p.Span
	for i := len(p.Poly) - 1; i >= k; i-- {
		c := p.Poly[i]
		for j := range k {
			c *= float64(i - j)
		}
		value = value*u + c
		bound += math.Abs(c)
	}
	scale := math.Pow(p.Span, float64(k))
	return value / scale, bound / math.Abs(scale)
}

// covers reports whether the pieces follow each other over one turn.
func covers(curve smooth.Curve) bool {
	p := curve.Pieces
	for i := range p {
		if i > 0 && p[i].From != p[i-1].To || !(p[i].From < p[i].To) {
			return false
		}
	}
	return p[0].From >= 0 && p[0].From < 360 && p[len(p)-1].To == p[0].From+360
}
