package motion

import (
	"math"

	"lobewright/synth/taylor"
)

// Junction is a cam angle at which the motion changes its expression. Each pair
// is the value just before and just after; the two are equal, to the bit, where
// they differ by no more than rounding.
type Junction struct {
	At           float64    // cam angle, degrees, t0 <= At < t0+360
	Lift         float64    // length
	Velocity     [2]float64 // length per rad
	Acceleration [2]float64 // length per rad²
	Jerk         [2]float64 // length per rad³
	Events       [2]int     // indices of the events before and after
}

// VelocityStep returns the step of velocity, length per rad, 0 where it is
// continuous. A motion with a step cannot be run.
func (j Junction) VelocityStep() float64 { return j.Velocity[1] - j.Velocity[0] }

// AccelerationStep returns the step of acceleration, length per rad², 0 where it
// is continuous.
func (j Junction) AccelerationStep() float64 { return j.Acceleration[1] - j.Acceleration[0] }

// Junctions returns every boundary between zones where some derivative up to the
// fifth changes, in order of cam angle. A boundary through which the motion goes
// on analytically, as from a simple-harmonic rise into its mirrored fall, is none.
func (c *Cycle) Junctions() []Junction {
	var out []Junction
	for i := range c.zones {
		before := c.zones[(i+len(c.zones)-1)%len(c.zones)]
		if j, changes := between(before, c.zones[i]); changes {
			out = append(out, j)
		}
	}
	return out
}

// between compares two zones at the boundary they share.
func between(before, after Zone) (Junction, bool) {
	p := Eval(before, taylor.FVar(before.To))
	q := Eval(after, taylor.FVar(after.From))
	var d [taylor.Order + 1][2]float64
	changes := false
	for k := range d {
		slack := rounding * math.Max(before.bound(k), after.bound(k))
		d[k] = settled(p.Deriv(k), q.Deriv(k), slack)
		changes = changes || d[k][0] != d[k][1]
	}
	j := Junction{At: after.From, Lift: d[0][1], Events: [2]int{before.Event, after.Event}}
	for side := range 2 {
		j.Velocity[side] = d[1][side] * degreesPerRad(1)
		j.Acceleration[side] = d[2][side] * degreesPerRad(2)
		j.Jerk[side] = d[3][side] * degreesPerRad(3)
	}
	return j, changes
}

// settled returns both values; made 0 where they are no more than slack, and equal
// where they differ by no more than that.
func settled(p, q, slack float64) [2]float64 {
	if math.Abs(p) <= slack {
		p = 0
	}
	if math.Abs(q) <= slack {
		q = 0
	}
	if math.Abs(p-q) <= slack {
		q = p
	}
	return [2]float64{p, q}
}
