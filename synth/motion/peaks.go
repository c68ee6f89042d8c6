package motion

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// Finding a peak on a grid misses it by the square of the step and says nothing of
// how much. Here it is found by branch and bound on interval enclosures (R. E.
// Moore, Interval Analysis, Prentice-Hall 1966): a stretch is dropped when its
// enclosure is nowhere above the largest value found, or when the enclosure of the
// derivative excludes 0, so that its ends decide; it is settled by bisection of the
// derivative when that is monotone; any other is halved. To isolate the roots of
// the derivative alone would not do: where polynomial-4-5-6-7 meets a dwell, that of
// the torque has a fourfold root, and a million stretches are left around it.

// quantity is what a peak is sought of.
type quantity uint8

const (
	velocity quantity = iota
	acceleration
	jerk
	torque // velocity times acceleration
	height // the lift itself
)

// narrowest is the width, as a share of the zone, below which a stretch that
// cannot be decided is taken for a stationary point; the peak is then off by no
// more than the square of it.
const narrowest = 1e-8

// of returns the quantity of a lift, with its derivatives.
func of[T taylor.Scalar[T]](q quantity, lift T) T {
	if q == height {
		return lift
	}
	v := lift.D()
	switch q {
	case velocity:
		return v
	case acceleration:
		return v.D()
	case jerk:
		return v.D().D()
	}
	return v.Mul(v.D())
}

// extreme returns the largest absolute value of the quantity on the zone and
// where it is, per unit of the zone's parameter. Of equal peaks it returns the
// first.
func extreme(z Zone, q quantity) (value, at float64) { return extremeAbove(z, q, 0) }

// extremeAbove is extreme, but for a zone that has nothing above the floor, of which it
// returns something at or below it.
func extremeAbove(z Zone, q quantity, floor float64) (value, at float64) {
	if floor > 0 && of(q, Eval(z, taylor.IVar(taylor.Interval{Lo: z.From, Hi: z.To}, taylor.Order))).Range().Mag() <= floor {
		return 0, z.From
	}
	s := search{zone: z, of: q, at: z.From, floor: floor}
	for i := range coarse {
		s.floor = math.Max(s.floor, s.size(z.From+(z.To-z.From)*float64(i)/(coarse-1)))
	}
	s.try(z.From)
	s.over(z.From, z.To)
	s.try(z.To)
	return s.value, s.at
}

// coarse is the number of points that give the search its first lower bound.
const coarse = 17

// search is a running search for the largest value.
type search struct {
	zone      Zone
	of        quantity
	floor     float64 // the largest value is at least this
	value, at float64 // the largest tried, and where
}

// size returns the absolute value of the quantity at t.
func (s *search) size(t float64) float64 {
	return math.Abs(of(s.of, Eval(s.zone, taylor.FVar(t))).Deriv(0))
}

func (s *search) try(t float64) {
	if v := s.size(t); v > s.value*(1+rounding) {
		s.value, s.at = v, t
	}
}

// over tries the points inside [lo, hi] where the quantity may exceed what was found.
func (s *search) over(lo, hi float64) {
	f := of(s.of, Eval(s.zone, taylor.IVar(taylor.Interval{Lo: lo, Hi: hi}, taylor.Order)))
	rate := f.D()
	mid := lo + (hi-lo)/2
	switch {
	case f.Range().Mag() < s.floor, f.Range().Mag() <= s.value*(1+rounding), !rate.Range().Has(0), rate.Range().Mag() == 0:
	case !rate.D().Range().Has(0):
		s.try(bisect(s.zone, s.of, lo, hi))
	case hi-lo <= narrowest*(s.zone.To-s.zone.From):
		s.try(mid)
	default:
		s.over(lo, mid)
		s.over(mid, hi)
	}
}

// bisect returns the root of the quantity's derivative, monotone on [lo, hi]; one of
// the ends when it has none there.
func bisect(z Zone, q quantity, lo, hi float64) float64 {
	rate := func(t float64) float64 { return of(q, Eval(z, taylor.FVar(t))).Deriv(1) }
	rising := rate(lo) < rate(hi)
	for {
		mid := lo + (hi-lo)/2
		if mid <= lo || mid >= hi {
			return mid
		}
		if (rate(mid) < 0) == rising {
			lo = mid
		} else {
			hi = mid
		}
	}
}

// Peaks are the peak factors of a law between dwells, in the customary
// normalization: for lift h over β rad, peak velocity is Velocity*h/β, peak
// acceleration Acceleration*h/β², peak jerk Jerk*h/β³, and the product of velocity
// and acceleration at most Torque*h²/β³. A step makes what it is the derivative of
// infinite: a step of velocity Acceleration, Torque and Jerk, a step of acceleration Jerk.
// A half law and a polynomial stand between neighbors that hold their end velocities.
type Peaks struct {
	Velocity, Acceleration, Jerk, Torque float64
	SmoothJerk                           float64 // largest |jerk| inside the zones, finite
	VelocityStep, AccelerationStep       float64 // largest |step|, ends against a dwell included
}

// Peaks returns the law's peak factors, exact to rounding; zeros for the zero Law.
func (l Law) Peaks() Peaks {
	var p Peaks
	for _, z := range l.zones {
		for q, most := range [...]*float64{velocity: &p.Velocity, acceleration: &p.Acceleration, jerk: &p.SmoothJerk, torque: &p.Torque} {
			v, _ := extreme(z, quantity(q))
			*most = math.Max(*most, v)
		}
	}
	p.VelocityStep, p.AccelerationStep = l.steps()
	p.Jerk = p.SmoothJerk
	if p.AccelerationStep > 0 || p.VelocityStep > 0 {
		p.Jerk = math.Inf(1)
	}
	if p.VelocityStep > 0 {
		p.Acceleration, p.Torque = math.Inf(1), math.Inf(1)
	}
	return p
}

// steps returns the largest steps of velocity and acceleration of the law between
// its neighbors.
func (l Law) steps() (v, a float64) {
	var start, end float64
	if l.handsOver {
		start, end = l.EndSpeeds()
	}
	before := Zone{From: -1, To: 0, Span: 1, Poly: []float64{0, start}}
	for _, z := range append(l.Zones(), Zone{From: 1, To: 2, Origin: 1, Span: 1, Poly: []float64{1, end}}) {
		j, _ := between(before, z)
		v = math.Max(v, math.Abs(j.VelocityStep())/degreesPerRad(1))
		a = math.Max(a, math.Abs(j.AccelerationStep())/degreesPerRad(2))
		before = z
	}
	return v, a
}

// Peak is the largest absolute value of a quantity over the cycle.
type Peak struct {
	Value float64 // length per rad, rad² or rad³
	At    float64 // cam angle, degrees, 0 <= At < 360; of equal peaks the first of the cycle
}

// CyclePeaks are the peaks of a cycle. Jerk is the peak inside zones: at a step of
// acceleration it is infinite, and Junctions tell of those.
type CyclePeaks struct{ Velocity, Acceleration, Jerk Peak }

// Peaks returns the cycle's peaks, exact to rounding.
func (c *Cycle) Peaks() CyclePeaks {
	return CyclePeaks{c.peak(velocity, 1), c.peak(acceleration, 2), c.peak(jerk, 3)}
}

func (c *Cycle) peak(q quantity, order int) Peak {
	var most Peak
	for _, z := range c.zones {
		if v, at := extremeAbove(z, q, most.Value); v > most.Value*(1+rounding) {
			most = Peak{v, at}
		}
	}
	return Peak{most.Value * degreesPerRad(order), plane.Wrap360(most.At)}
}
