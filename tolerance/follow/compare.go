package follow

import (
	"fmt"
	"math"
	"sort"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Lift is a designed lift: length, and its derivatives per rad and rad², at cam
// angle t in degrees, t0 <= t < t0+360.
type Lift func(t float64) (s, ds, dds float64)

// Error is how far the follower on a written path is from its design: largest
// absolute values, and the cam angles (degrees, t0 <= At < t0+360) where they are.
type Error struct {
	Lift, LiftAt                 float64 // length
	Velocity, VelocityAt         float64 // length per rad
	VelocityStep, VelocityStepAt float64 // length per rad: step at a joint of the path
	Acceleration, AccelerationAt float64 // length per rad², inside lines and arcs
}

// Sample is the error at one cam angle, written path less design.
type Sample struct {
	At                           float64 // cam angle, degrees, t0 <= At < t0+360
	Lift, Velocity, Acceleration float64 // length, per rad, per rad²
	Element                      int     // which of the path's elements it is on, counted with growing cam angle; those shorter than rounding are passed over
}

const (
	// perElement is the number of equal steps in which an element is sampled. The
	// error on an arc is near a cubic of the angle, its second derivative near a
	// straight line: between samples a parabola through three of them finds the peak.
	perElement = 16
	// atJunction is how near, in degrees, a joint of the path must be to a junction of
	// the design to be taken for it. Joints move by a few counts of the grid along
	// the path when they are rounded; in the sliver between, the accelerations differ
	// by their whole step, for an instant in which nothing moves.
	atJunction = 0.05
	// inside is the distance in degrees kept from the ends of a stretch, so that the
	// design is asked on the right side of a junction.
	inside = 1e-9
	// dot is the length, as a share of the radius, below which an element is passed over.
	dot = 1e-10
	// closing is how far, in degrees, a path may miss one turn about the camshaft, and its
	// end its start, as a share of the radius.
	closing = 1e-6
)

// Follower is what can be run over a path: a Roller, any kind given by its Linkage, or one
// Developed.
type Follower interface {
	stretch(e chain.Element) (stretch, bool)
	at(s stretch, theta float64) (lift, v, a float64, ok bool)
	closing() float64                    // how far, in degrees, a path may miss one turn about the camshaft
	closes(first, last plane.Point) bool // whether a path from first to last goes all around
}

// Compare runs the follower over a closed path (Developed: over one turn) of its base curve: of a roller the path
// of its center, under a flat face the contour (either direction). It compares with the
// designed lift, whose cam angle goes from t0 to t0+360. junctions are the cam angles, degrees, at which the design's acceleration
// steps. The samples are in order of cam angle. Peaks are found among 17 samples an
// element and refined by a parabola: not a bound, but within a thousandth on arcs.
//
// Errors: a path that is empty or open, that does not go once about the camshaft,
// or on which the follower would have to turn back.
func Compare(r Follower, pitch chain.Path, lift Lift, t0 float64, junctions ...float64) (Error, []Sample, error) {
	path, err := walk(r, pitch)
	if err != nil {
		return Error{}, nil, err
	}
	c := comparison{follower: r, lift: lift, t0: t0}
	for i, s := range path {
		c.element = i
		for _, part := range parts(s, junctions) {
			c.over(s, part[0], part[1])
		}
		c.joint(path[(i+len(path)-1)%len(path)], s)
	}
	sort.SliceStable(c.samples, func(i, j int) bool { return c.samples[i].At < c.samples[j].At })
	return c.most, c.samples, nil
}

// closed reports whether two points are the same but for rounding.
func closed(first, last plane.Point) bool { return last.Dist(first) <= closing*last.Radius() }

// walk prepares the elements in order of growing cam angle, and checks that they go
// round once.
func walk(r Follower, pitch chain.Path) ([]stretch, error) {
	if len(pitch) == 0 {
		return nil, fmt.Errorf("follower on a path: the path is empty")
	}
	if last := pitch[len(pitch)-1].To; !r.closes(pitch[0].From, last) {
		return nil, fmt.Errorf("follower on a path: it begins at %.6g,%.6g and ends at %.6g,%.6g; it must close",
			pitch[0].From.X, pitch[0].From.Y, last.X, last.Y)
	}
	if first, ok := r.stretch(pitch[0]); ok && first.backward {
		pitch = pitch.Reverse()
	}
	out, sum := make([]stretch, 0, len(pitch)), 0.0
	for i, e := range pitch {
		if e.From.Dist(e.To) <= dot*e.From.Radius() && math.Abs(e.Sweep()) < math.Pi {
			continue // its direction is rounding
		}
		s, ok := r.stretch(e)
		if !ok || s.backward {
			return nil, fmt.Errorf("follower on a path: on element %d, from %.6g,%.6g to %.6g,%.6g, the follower would have to turn back or cannot reach",
				i, e.From.X, e.From.Y, e.To.X, e.To.Y)
		}
		out, sum = append(out, s), sum+s.extent
	}
	if math.Abs(sum-360) > r.closing() {
		return nil, fmt.Errorf("follower on a path: it goes %.6g degrees about the camshaft; it must go 360 once", sum)
	}
	return out, nil
}

// parts cuts the range of a stretch at the junctions of the design, leaving out
// what lies between an end of the stretch and a junction within atJunction of it.
func parts(s stretch, junctions []float64) [][2]float64 {
	lo, hi := s.from, s.from+s.extent
	var cuts []float64
	for _, j := range junctions {
		past := plane.Wrap360(j-s.from+atJunction) - atJunction // from -atJunction on
		switch {
		case past < atJunction:
			lo = math.Max(lo, s.from+past)
		case past <= s.extent-atJunction:
			cuts = append(cuts, s.from+past)
		case past <= s.extent+atJunction:
			hi = math.Min(hi, s.from+past)
		}
	}
	sort.Float64s(cuts)
	var out [][2]float64
	for _, c := range append(cuts, hi) {
		if c-lo > 4*inside {
			out = append(out, [2]float64{lo + inside, c - inside})
		}
		lo = c
	}
	return out
}

// comparison gathers the samples and the peaks.
type comparison struct {
	follower Follower
	lift     Lift
	t0       float64
	samples  []Sample
	element  int // the present one
	most     Error
}

// wrap brings a cam angle into t0 <= t < t0+360.
func (c *comparison) wrap(t float64) float64 {
	w := c.t0 + plane.Wrap360(t-c.t0)
	if w >= c.t0+360 {
		return c.t0
	}
	return w
}

// sample returns the error at cam angle t on the stretch.
func (c *comparison) sample(s stretch, t float64) Sample {
	at := c.wrap(t)
	lift, v, a, _ := c.follower.at(s, t)
	ds, dv, da := c.lift(at)
	return Sample{at, lift - ds, v - dv, a - da, c.element}
}

// over samples [lo, hi] of a stretch.
func (c *comparison) over(s stretch, lo, hi float64) {
	step := (hi - lo) / perElement
	row := make([]Sample, perElement+1)
	for i := range row {
		row[i] = c.sample(s, lo+step*float64(i))
		c.take(row[i])
	}
	c.samples = append(c.samples, row...)
	for _, of := range []func(Sample) float64{
		func(x Sample) float64 { return x.Lift },
		func(x Sample) float64 { return x.Velocity },
		func(x Sample) float64 { return x.Acceleration },
	} {
		best := 0
		for i := range row {
			if math.Abs(of(row[i])) > math.Abs(of(row[best])) {
				best = i
			}
		}
		if best == 0 || best == perElement {
			continue
		}
		p, q, n := of(row[best-1]), of(row[best]), of(row[best+1])
		if bend := p - 2*q + n; bend != 0 {
			c.take(c.sample(s, lo+step*(float64(best)+(p-n)/(2*bend))))
		}
	}
}

// take raises the peaks by one sample.
func (c *comparison) take(x Sample) {
	raise(&c.most.Lift, &c.most.LiftAt, x.Lift, x.At)
	raise(&c.most.Velocity, &c.most.VelocityAt, x.Velocity, x.At)
	raise(&c.most.Acceleration, &c.most.AccelerationAt, x.Acceleration, x.At)
}

// joint raises the largest velocity step by the one from a stretch to the next.
func (c *comparison) joint(before, after stretch) {
	_, v, _, _ := c.follower.at(before, before.from+before.extent)
	_, w, _, _ := c.follower.at(after, after.from)
	raise(&c.most.VelocityStep, &c.most.VelocityStepAt, w-v, c.wrap(after.from))
}

func raise(most, at *float64, value, where float64) {
	if math.Abs(value) > *most {
		*most, *at = math.Abs(value), where
	}
}
