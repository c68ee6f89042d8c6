package certify

import (
	"math"

	"lobewright/synth/taylor"
)

// cubic is a function about a midpoint by Taylor's theorem: within h of it the
// value is in c0 + c1 x + c2 x² ± c3 |x|³.
type cubic struct {
	c0, c1, c2 taylor.Interval
	c3         float64
}

// extent is the range of a function over a patch: lo <= least <= inLo and
// inHi <= greatest <= hi; atLo and atHi are the offsets from the midpoint where the inner values
// are taken.
type extent struct {
	lo, hi, inLo, inHi, atLo, atHi float64
}

// quadraticRounding is above the relative rounding of evaluating a quadratic
// at three places, one of them its vertex (an error of the vertex counts only squared).
const quadraticRounding = 4e-15

// over returns the range for |x| <= h.
func (c cubic) over(h float64) extent {
	c0, c1, c2 := c.c0.Mid(), c.c1.Mid(), c.c2.Mid()
	slop := (c.c0.Width() + (c.c1.Width()+c.c2.Width()*h)*h + c.c3*h*h*h) * outward
	slop += quadraticRounding * (math.Abs(c0) + (math.Abs(c1)+math.Abs(c2)*h)*h)
	e := extent{inLo: math.Inf(1), inHi: math.Inf(-1)}
	take := func(x float64) {
		v := c0 + (c1+c2*x)*x
		if !(v >= e.inLo) {
			e.inLo, e.atLo = v, x
		}
		if !(v <= e.inHi) {
			e.inHi, e.atHi = v, x
		}
	}
	take(-h)
	take(h)
	if v := -c1 / (2 * c2); math.Abs(v) < h {
		take(v)
	}
	e.lo, e.hi = e.inLo-slop, e.inHi+slop
	e.inLo, e.inHi = e.inLo+slop, e.inHi-slop
	return e
}

// apply maps the range by an increasing function.
func (e extent) apply(f func(float64) taylor.Interval) extent {
	e.lo, e.hi = f(e.lo).Lo, f(e.hi).Hi
	e.inLo, e.inHi = f(e.inLo).Hi, f(e.inHi).Lo
	return e
}

func (e extent) negated() extent {
	return extent{-e.hi, -e.lo, -e.inHi, -e.inLo, e.atHi, e.atLo}
}

// mag is the upper bound of the absolute value, mig the lower one.
func (e extent) mag() float64 { return math.Max(-e.lo, e.hi) }
func (e extent) mig() float64 { return math.Max(math.Max(e.lo, -e.hi), 0) }

// slop is the uncertainty of the larger end.
func (e extent) slop() float64 { return math.Max(e.inLo-e.lo, e.hi-e.inHi) }
