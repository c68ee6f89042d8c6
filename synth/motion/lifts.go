package motion

import (
	"math"

	"lobewright/synth/taylor"
)

// MaxLift returns the largest lift of the cycle, length, exact to rounding: also where
// an event goes beyond its ends.
func (c *Cycle) MaxLift() float64 { return c.max }

// MinLift returns the smallest lift of the cycle, length, as exact.
func (c *Cycle) MinLift() float64 { return c.min }

// Lowest returns a cam angle where the lift is smallest, degrees, t0 <= at < t0+360, and
// the index of the event there; of equal places the first.
func (c *Cycle) Lowest() (at float64, event int) {
	least := math.Inf(1)
	for _, z := range c.zones {
		if lift, t := z.lowest(); lift < least-rounding*(c.max-c.min) {
			least, at, event = lift, t, z.Event
		}
	}
	return at, event
}

// Lifts returns the least and largest lift of a zone, exact to rounding; infinite or
// not a number where the zone is.
func (z Zone) Lifts() (lo, hi float64) {
	base := z.mag()
	switch {
	case z.Dwell:
		return z.Poly[0], z.Poly[0]
	case math.IsNaN(base) || math.IsInf(base, 0):
		return base, base
	}
	lo, _ = z.lowest()
	up, _ := extreme(z.scaled(1, base), height) // base keeps it above 0
	return lo, up - base
}

// lowest returns the least lift of a finite zone, and where it is.
func (z Zone) lowest() (lift, at float64) {
	if z.Dwell {
		return z.Poly[0], z.From
	}
	base := z.mag()
	down, at := extreme(z.scaled(-1, base), height)
	return base - down, at
}

// mag returns an upper bound of the zone's absolute lift.
func (z Zone) mag() float64 {
	return Eval(z, taylor.IVar(taylor.Interval{Lo: z.From, Hi: z.To}, 0)).Range().Mag()
}
