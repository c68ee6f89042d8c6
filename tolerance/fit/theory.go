package fit

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// theorySamples is how finely Theory integrates a piece. k and k' go linearly between the
// samples and their roots are integrated in closed form, cusps included, so the error
// is that of the linear course: about 1e-4 of a piece's share.
const theorySamples = 300

// A piece of less than 1/fullShare of the whole, of which a smoothed table has many,
// takes as many fewer samples, but leastSamples.
const (
	fullShare    = 9
	leastSamples = 12
)

// Theory returns the asymptotic count (as eps goes to 0) of the elements of the given
// kind that keep the curve within ±eps:
//
//	arcs:  N* = ∫ (|k'|/(124.7·eps))^(1/3) ds, tangent-continuous arcs; a stretch that is
//	       a circle adds nothing here but takes one arc (Meek and Walton 1992 for the
//	       order; the constant is √3/216, the sup norm of the Bernoulli polynomial B3/6)
//	lines: N = ∫ √(|k|/(16·eps)) ds, vertices anywhere within ±eps
//
// A curve that fails the checks of Arcs, or a piece without finite curvature, gives NaN
// or +Inf.
func Theory(c Curve, eps float64, kind chain.Kind) float64 {
	power, unit := 1.0/2, lineConstant*eps
	if kind == chain.Arc {
		power, unit = 1.0/3, arcConstant*eps
	}
	sum, whole := 0.0, 0.0
	for _, p := range c.Pieces() {
		whole += p.To - p.From
	}
	for i, p := range c.Pieces() {
		if p.Circle != nil && kind == chain.Arc {
			continue
		}
		var before plane.Frame
		n := max(leastSamples, min(theorySamples, int(theorySamples*fullShare*(p.To-p.From)/whole)))
		for j := 0; j < n; j++ {
			f := c.At(i, at(p, j, n))
			a, b := before.K, f.K
			if kind == chain.Arc {
				a, b = before.DK, f.DK
			}
			if j > 0 {
				sum += step(before, f) * meanPower(a/unit, b/unit, power)
			}
			before = f
		}
	}
	return sum
}

// meanPower returns the mean of |x|^q for x from a to b, 0 < q < 1.
func meanPower(a, b, q float64) float64 {
	// Close together the closed form cancels, and the mean of the ends is as good.
	const near = 1e-4
	pa, pb := math.Pow(math.Abs(a), q), math.Pow(math.Abs(b), q)
	if math.Abs(b-a) <= near*math.Max(math.Abs(a), math.Abs(b)) {
		return (pa + pb) / 2
	}
	return (b*pb - a*pa) / ((q + 1) * (b - a))
}
