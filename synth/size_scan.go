package synth

import (
	"math"

	"lobewright/synth/follower"
	"lobewright/synth/taylor"
)

// sizeSample is the motion at one cam angle of a zone.
type sizeSample struct {
	zone         int
	t            float64 // degrees
	m            moved[real]
	rises, falls bool
}

// sizer holds a cam's motion, sampled, and its follower as a function of the base radius.
type sizer struct {
	cam  *Cam
	kind follower.Kind

	scaled float64 // base radius at which pivot and arm are the spec's, when they grow with it; 0 when they stay
	rows   []sizeSample
	float  mechanism[real]
	over   mechanism[taylor.I]
	sides  []float64 // margins of one pass, kept for the next
	rough  bool      // leave extremes as the samples have them
}

// newSizer returns ok false for a kind of follower that cannot be sized.
func newSizer(c *Cam, rows []sizeSample, scaled float64) (z *sizer, ok bool) {
	z = &sizer{cam: c, kind: c.follower, rows: rows, scaled: scaled, sides: make([]float64, len(rows))}
	if z.float, ok = mechanismOf[real](c.follower, scaled); ok {
		z.over, ok = mechanismOf[taylor.I](c.follower, scaled)
	}
	return z, ok
}

const (
	samplesPerDegree = 6   // of a zone
	leastSamples     = 12  // of a narrow one
	mostSamples      = 300 // of a wide one
)

// samples lists the motion closely, every zone with both its ends.
func (c *Cam) samples() []sizeSample {
	var all []sizeSample
	for i, z := range c.zones {
		n := max(leastSamples, min(mostSamples, int(samplesPerDegree*(z.To-z.From))))
		if z.Dwell {
			n = 1
		}
		for k := range n + 1 {
			t := z.From + (z.To-z.From)*float64(k)/float64(n)
			way := c.moving(i, t)
			all = append(all, sizeSample{i, t, c.movedAt(i, t), way > 0, way < 0})
		}
	}
	return all
}

func (c *Cam) movedAt(zone int, t float64) moved[real] {
	l := c.LiftIn(zone, t)
	m := moved[real]{s: real(l.S), v: real(l.V), a: real(l.A)}
	if c.Swings() {
		m.s, m.v, m.a = m.s.Radians(), m.v.Radians(), m.a.Radians()
		m.sin, m.cos = m.s.SinCos()
	}
	return m
}

// movedOver encloses movedAt.
func (c *Cam) movedOver(zone int, t float64) moved[taylor.I] {
	f := c.lift.I(zone, taylor.IVar(taylor.Exactly(t), 2))
	rad := taylor.Exactly(1).Div(taylor.PiOver180())
	base := taylor.I{N: 1}
	m := moved[taylor.I]{s: base.Const(f.C[0]), v: base.Const(f.C[1].Mul(rad)), a: base.Const(f.C[2].Mul(taylor.Exactly(2)).Mul(rad).Mul(rad))}
	if c.Swings() {
		m.s, m.v, m.a = m.s.Radians(), m.v.Radians(), m.a.Radians()
	}
	m.sin, m.cos = m.s.SinCos()
	return m
}

// margin is the least margin of a limit at a base radius, refined between the samples, with
// the zone and cam angle it stands at.
func (z *sizer) margin(l sizeLimit, base float64) (least float64, zone int, at float64) {
	f := func(m moved[real]) float64 { return float64(l.float(z.float(real(base), m))) }
	return z.lowest(l.use, f)
}

func (z *sizer) lowest(use func(sizeSample) bool, f func(moved[real]) float64) (least float64, zone int, at float64) {
	least = math.Inf(1)
	for i, p := range z.rows {
		z.sides[i] = math.Inf(1)
		if use(p) {
			z.sides[i] = f(p.m)
		}
		if v := z.sides[i]; v < least || math.IsNaN(v) {
			least, zone, at = v, p.zone, p.t
		}
	}
	if z.rough {
		return least, zone, at
	}
	coarse := least
	for i := 1; i+1 < len(z.rows); i++ {
		a, v, b := z.sides[i-1], z.sides[i], z.sides[i+1]
		p, fall := z.rows[i], math.Max(a-v, b-v)
		// Between samples of a parabola the least lies below the lowest by an eighth of its
		// neighbors' climb at most.
		if math.IsInf(v, 1) || math.IsInf(fall, 1) || v > a || v > b || fall <= flat*math.Abs(v) || v-fall > coarse || z.rows[i-1].zone != p.zone || z.rows[i+1].zone != p.zone {
			continue
		}
		t, low := dip(p.t, (z.rows[i+1].t-z.rows[i-1].t)/2, a, v, b, func(t float64) float64 { return f(z.cam.movedAt(p.zone, t)) })
		if low < least {
			least, zone, at = low, p.zone, t
		}
	}
	return least, zone, at
}

// dip refines a least value v at t, between a and b a step to either side, by the vertices
// of two parabolas, the second a hundred times narrower: what is left is the curve's fourth
// order on the narrow one.
func dip(t, h, a, v, b float64, f func(float64) float64) (at, low float64) {
	at, low = t, v
	for range 2 {
		bend := a - 2*v + b
		if !(bend > 0) {
			break
		}
		t += h * math.Max(-1, math.Min(1, (a-b)/(2*bend)))
		if v = f(t); v < low {
			at, low = t, v
		}
		h /= 100
		a, b = f(t-h), f(t+h)
	}
	return at, low
}

// fails reports whether every base radius in [from, to] breaks one of the limits, proven
// at one cam angle.
func (z *sizer) fails(limits []sizeLimit, from, to float64) bool {
	wide := *z // a sample is as good as the worst place, but for narrow intervals
	wide.rough = to-from > sizeShare*from
	for _, l := range limits {
		m, zone, at := wide.margin(l, from+(to-from)/2)
		if m < 0 && z.broken(l, zone, at, taylor.Interval{Lo: from, Hi: to}) {
			return true
		}
	}
	return false
}

// broken encloses a margin at one cam angle over an interval of base radii, as it stands
// and by the mean value form (R. E. Moore, Interval Analysis, 1966), and reports
// whether it is below 0.
func (z *sizer) broken(l sizeLimit, zone int, t float64, base taylor.Interval) bool {
	m := z.cam.movedOver(zone, t)
	whole := l.over(z.over(taylor.IVar(base, 1), m))
	if whole.C[0].Hi < 0 {
		return true
	}
	mid := taylor.Exactly(base.Mid())
	center := l.over(z.over(taylor.IVar(mid, 1), m))
	return center.C[0].Add(whole.C[1].Mul(base.Sub(mid))).Hi < 0
}

const (
	sizeSlack = 1e-9 // of the base radius: what the answer is enlarged by, for rounding
	finest    = 1e-5 // of the base radius: the narrowest interval the proof tries
	sizeShare = 1e-3 // of the base radius: what the proof may leave between the excluded radii and the answer
	sizeSteps = 40   // bisections of a stretch of that share; 2^-40 of it is below rounding
)

// first is the smallest base radius from floor on that meets every limit, up to top. Every
// radius from floor to proven is proven to fail. ok is false when none meets them.
func (z *sizer) first(limits []sizeLimit, floor, top float64) (base, proven float64, ok bool) {
	proven, whole := floor, true
	for from := floor; from < top; {
		reached := z.push(limits, from, top)
		if whole {
			proven = reached
		}
		if reached >= top {
			return 0, proven, false
		}
		if z.met(limits, reached) {
			return reached, proven, true
		}
		lo := reached
		for gap := finest * reached; gap < sizeShare/2*reached; gap *= 2 {
			hi := math.Min(reached+gap, top)
			if z.met(limits, hi) {
				return z.bisect(limits, lo, hi), proven, true
			}
			lo = hi
		}
		from, whole = lo, false
	}
	return 0, proven, false
}

func (z *sizer) bisect(limits []sizeLimit, lo, hi float64) float64 {
	for range sizeSteps {
		if mid := lo + (hi-lo)/2; z.met(limits, mid) {
			hi = mid
		} else {
			lo = mid
		}
	}
	return hi * (1 + sizeSlack)
}

// push proves that base radii from from upwards fail, and returns how far it gets.
func (z *sizer) push(limits []sizeLimit, from, top float64) float64 {
	for step := math.Max(from/4, finest*top/100); from < top; {
		to := math.Min(top, from+step)
		if z.fails(limits, from, to) {
			from, step = to, 2*step
		} else if step /= 2; step < finest*from {
			break
		}
	}
	return from
}

func (z *sizer) met(limits []sizeLimit, base float64) bool {
	for _, l := range limits {
		if m, _, _ := z.margin(l, base); !(m >= 0) {
			return false
		}
	}
	return true
}
