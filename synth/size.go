// The smallest base radius of a cam.
//
// The problem: pressure angle, curvature and tools each ask for a base circle of some
// size. Trying radii until the gates pass finds a size that works, not the smallest;
// bisection finds the smallest only where every larger cam is better and every smaller
// one worse, which for curvature nobody has shown.
//
// The method: bisection on each limit gives a candidate, the largest of them. It is then
// proven that no smaller radius will do: the radii below are cut into intervals, and for
// each interval one cam angle is found at which a limit is broken by every radius in it,
// with the textbook's closed forms (H. A. Rothbart, ed., Cam Design Handbook, 2004, pp.
// 170, 183) evaluated on intervals with outward rounding. An interval that cannot be
// excluded is halved; what is left undecided at the end is said.
//
// Price: some hundred evaluations of the closed forms, under a tenth of a second.

package synth

import (
	"fmt"
	"math"

	"lobewright/synth/follower"
	"lobewright/synth/gate"
	"lobewright/synth/motion"
	"lobewright/synth/spec"
	"lobewright/synth/taylor"
)

// Limit is one limit on the base radius.
type Limit struct {
	ID       string  // the gate that enforces it
	Least    float64 // smallest base radius that meets it, length
	CamAngle float64 // where it binds at that radius, degrees
}

// Sizing is the answer to "how small may this cam be".
type Sizing struct {
	BaseRadius float64 // smallest that meets every limit, length
	Binds      string  // the limit that binds
	Limits     []Limit // each limit alone
	Rows       []SizingRow
	Excluded   float64 // every base radius from the smallest sensible one to this one is proven to fail, length
	Floor      float64 // the smallest sensible base radius: the bore's, or what the offset asks for, length
}

// SizingRow is one line of the trade-off.
type SizingRow struct {
	BaseRadius    float64 // length
	PressureAngle float64 // largest of the rises, degrees
	ConvexRadius  float64 // least convex radius of curvature of the contour, length; below 0 when undercut
	Pass          bool    // every limit
}

const (
	sizeSlack    = 1e-9  // of the base radius: how closely the candidate is found
	sizeShare    = 1e-3  // of the base radius: what the proof leaves between the excluded radii and the answer
	sizeSteps    = 60    // bisections; 2^-60 is below rounding
	largestSize  = 1e4   // times the lift or the roller: no cam is larger
	leastPortion = 1e-6  // of the interval: below this it is left undecided
	hair         = 1e-14 // what rounding may make of a limit
)

// Size finds the smallest base radius that meets the limits of the spec. Fails when
// limits.radius_of_curvature is not given, and when no radius meets the limits.
func Size(s *spec.Spec) (Sizing, error) {
	if s.Limits.RadiusOfCurvature == nil {
		return Sizing{}, fmt.Errorf("%s:1:1: found no limits.radius_of_curvature; to size a cam give the least convex radius of the contour, for example limits: {radius_of_curvature: %g}",
			s.File, s.Follower.RollerDiameter/4)
	}
	c, err := Build(s)
	if err != nil {
		return Sizing{}, err
	}
	roller, ok := c.follower.(follower.TranslatingRoller)
	if !ok {
		return Sizing{}, fmt.Errorf("%s:%d:%d: found follower.kind %s; allowed for sizing: translating-roller", s.File, s.Follower.Place.Line, s.Follower.Place.Column, s.Follower.Kind)
	}
	z := &sizer{cam: c, line: roller, rows: c.samples()}
	out := Sizing{Floor: z.floor()}
	for _, l := range z.limits() {
		r, ok := z.least(out.Floor, l.value)
		if !ok {
			return out, fmt.Errorf("%s: no base radius up to %g meets limit %s", s.File, z.top(), l.id)
		}
		_, at := l.value(r)
		out.Limits = append(out.Limits, Limit{l.id, r, camAngle(at)})
		if r > out.BaseRadius {
			out.BaseRadius, out.Binds = r, l.id
		}
	}
	if out.BaseRadius <= out.Floor {
		out.BaseRadius, out.Binds = out.Floor, "bore or offset"
	}
	if err := z.check(out.BaseRadius); err != nil {
		return out, err
	}
	out.Excluded = z.exclude(out.Floor, out.BaseRadius*(1-sizeShare))
	for _, f := range []float64{0.7, 0.8, 0.9, 1, 1.1, 1.25, 1.5, 2} {
		out.Rows = append(out.Rows, z.row(f*out.BaseRadius))
	}
	return out, nil
}

// check builds the cam of the answer: a roller that bridges two flanks or a neck too
// narrow for a tool is no matter of curvature, and is said here.
func (z *sizer) check(base float64) error {
	s := *z.cam.spec
	s.Cam.BaseRadius = base
	c, err := Build(&s)
	if err != nil {
		return err
	}
	for _, g := range append([]gate.Gate{c.undercutGate()}, c.reachGates()...) {
		if !g.Pass {
			return fmt.Errorf("%s: at base radius %.6g, which meets the limits of angle and curvature, gate %s still fails: %s", s.File, base, g.ID, g.Text)
		}
	}
	return nil
}

// sizeSample is the motion at one cam angle, lengths and radians.
type sizeSample struct {
	t       float64
	s, v, a float64
	rises   bool
	falls   bool
}

// samples lists the motion closely, every zone with both its ends.
func (c *Cam) samples() []sizeSample {
	var all []sizeSample
	for i, z := range c.zones {
		n := 400
		if z.Dwell {
			n = 1
		}
		for k := range n + 1 {
			t := z.From + (z.To-z.From)*float64(k)/float64(n)
			l := c.LiftIn(i, t)
			all = append(all, sizeSample{t, l.S, l.V, l.A, c.moving(i, t) > 0, c.moving(i, t) < 0})
		}
	}
	return all
}

type sizer struct {
	cam  *Cam
	line follower.TranslatingRoller
	rows []sizeSample
}

// sizeLimit is a limit as a margin of the base radius, at least 0 when it is met, with the cam
// angle that decides it.
type sizeLimit struct {
	id    string
	value func(base float64) (margin, at float64)
}

// sigma is +1 for a cam that turns clockwise, the sign of the offset in the formulas.
func (z *sizer) sigma() float64 { return -z.cam.outward() }

func (z *sizer) roller() float64 { return z.line.RollerRadius }

// datum is the roller center at lift 0 for a base radius.
func (z *sizer) datum(base float64) float64 {
	p, e := base+z.roller(), z.line.Offset
	return math.Sqrt((p - e) * (p + e))
}

// floor is the smallest base radius that leaves room for the bore and takes the offset.
func (z *sizer) floor() float64 {
	f := math.Abs(z.line.Offset) - z.roller()
	if b := z.cam.spec.Cam.Bore; b != nil {
		f = math.Max(f, b.Diameter/2)
		if b.Keyway != nil {
			f = math.Max(f, math.Hypot(b.Diameter/2+b.Keyway.Depth, b.Keyway.Width/2))
		}
	}
	return math.Max(f, 1e-3*z.roller())
}

func (z *sizer) top() float64 {
	return largestSize * math.Max(z.roller(), z.cam.cycle.MaxLift())
}

// limits lists what the spec limits. Falls count only when their limit is given.
func (z *sizer) limits() []sizeLimit {
	l := z.cam.spec.Limits
	angle := func(id string, limit float64, use func(sizeSample) bool) sizeLimit {
		return sizeLimit{id, func(base float64) (float64, float64) {
			return z.margin(use, func(p sizeSample) float64 { return limit - z.pressure(p, z.datum(base)) })
		}}
	}
	out := []sizeLimit{angle("pressure-angle", l.PressureAngle, func(p sizeSample) bool { return p.rises })}
	if r := l.PressureAngleReturn; r != nil {
		out = append(out, angle("pressure-angle-return", *r, func(p sizeSample) bool { return p.falls }))
	}
	out = append(out, sizeLimit{"radius-of-curvature", func(base float64) (float64, float64) {
		return z.margin(always, func(p sizeSample) float64 { return z.mostBend() - z.bend(p, z.datum(base)) })
	}})
	if least, ok := z.leastBend(); ok {
		out = append(out, sizeLimit{"reach", func(base float64) (float64, float64) {
			return z.margin(always, func(p sizeSample) float64 { return z.bend(p, z.datum(base)) - least })
		}})
	}
	return out
}

func always(sizeSample) bool { return true }

// mostBend is the largest curvature of the pitch curve that leaves the contour its
// least convex radius.
func (z *sizer) mostBend() float64 {
	return 1 / (*z.cam.spec.Limits.RadiusOfCurvature + z.roller())
}

// leastBend is the curvature of the pitch curve, below 0, that the largest tool can
// still follow in a hollow; ok is false when every tool can.
func (z *sizer) leastBend() (k float64, ok bool) {
	need := 0.0
	for _, op := range z.cam.spec.Operations {
		for _, o := range Offsets(op) {
			need = math.Max(need, o)
		}
	}
	if need <= z.roller() {
		return 0, false
	}
	return -1 / (need - z.roller()), true
}

// margin is the least of f over the samples, refined between them.
func (z *sizer) margin(use func(sizeSample) bool, f func(sizeSample) float64) (least, at float64) {
	least = math.Inf(1)
	best := -1
	for i, p := range z.rows {
		if use(p) {
			if v := f(p); v < least {
				least, at, best = v, p.t, i
			}
		}
	}
	if best <= 0 || best+1 >= len(z.rows) || z.rows[best-1].t >= z.rows[best].t || z.rows[best+1].t <= z.rows[best].t {
		return least, at
	}
	zone, _ := z.cam.cycle.Zone((z.rows[best-1].t + z.rows[best].t) / 2)
	t, v := golden(z.rows[best-1].t, z.rows[best+1].t, func(t float64) float64 { return -f(z.at(zone, t, z.rows[best])) })
	if -v < least {
		return -v, t
	}
	return least, at
}

func (z *sizer) at(zone int, t float64, like sizeSample) sizeSample {
	l := z.cam.LiftIn(zone, t)
	return sizeSample{t, l.S, l.V, l.A, like.rises, like.falls}
}

// pressure is the size of the pressure angle in degrees.
func (z *sizer) pressure(p sizeSample, d float64) float64 {
	return math.Abs(math.Atan2(p.v-z.sigma()*z.line.Offset, d+p.s)) * 180 / math.Pi
}

// bend is the curvature of the pitch curve, positive where convex.
func (z *sizer) bend(p sizeSample, d float64) float64 {
	u, w := d+p.s, p.v-z.sigma()*z.line.Offset
	return (u*u + w*(w+p.v) - u*p.a) / math.Pow(u*u+w*w, 1.5)
}

// least is the smallest base radius from floor on at which a margin is met, by bisection.
func (z *sizer) least(floor float64, value func(float64) (float64, float64)) (float64, bool) {
	met := func(r float64) bool { m, _ := value(r); return m >= 0 }
	if met(floor) {
		return floor, true
	}
	lo, hi := floor, 2*floor+z.roller()
	for !met(hi) {
		if lo, hi = hi, 2*hi; hi > z.top() {
			return 0, false
		}
	}
	for range sizeSteps {
		if mid := (lo + hi) / 2; met(mid) {
			hi = mid
		} else {
			lo = mid
		}
	}
	return hi * (1 + sizeSlack), true
}

// exclude proves that base radii from lo upwards fail, and returns how far it gets, at
// most hi.
func (z *sizer) exclude(lo, hi float64) float64 {
	if !(hi > lo) {
		return lo
	}
	width, from := hi-lo, lo
	for step := width; from < hi; {
		to := math.Min(hi, from+step)
		if z.fails(from, to) {
			from, step = to, 2*step
			continue
		}
		if step /= 2; step < leastPortion*width {
			return from
		}
	}
	return hi
}

// fails reports whether a limit is broken by every base radius in [from, to], proven at one cam angle.
func (z *sizer) fails(from, to float64) bool {
	for _, l := range z.limits() {
		m, at := l.value(to)
		if m < 0 && z.broken(l.id, at, taylor.Interval{Lo: from, Hi: to}) {
			return true
		}
	}
	return false
}

// broken evaluates a limit at one cam angle for an interval of base radii.
func (z *sizer) broken(id string, t float64, base taylor.Interval) bool {
	zone, at := z.cam.cycle.Zone(t)
	deg := taylor.IVar(taylor.Exactly(at), 2)
	lift := motion.Eval(z.cam.zones[zone], deg)
	perRad := taylor.Exactly(1).Div(taylor.PiOver180())
	s, v := lift.C[0], lift.C[1].Mul(perRad)
	a := lift.C[2].Mul(taylor.Exactly(2)).Mul(perRad).Mul(perRad)
	e := taylor.Exactly(z.sigma() * z.line.Offset)
	p := base.Add(taylor.Exactly(z.roller()))
	u := p.Sqr().Sub(e.Sqr()).Sqrt().Add(s)
	w := v.Sub(e)
	lim := z.cam.spec.Limits
	if id == "radius-of-curvature" || id == "reach" {
		n := u.Sqr().Add(w.Mul(w.Add(v))).Sub(u.Mul(a))
		q := u.Sqr().Add(w.Sqr())
		k := n.Div(q.Mul(q.Sqrt()))
		if least, ok := z.leastBend(); id == "reach" {
			return ok && k.Hi < least*(1+hair)
		}
		return k.Lo > z.mostBend()*(1+hair)
	}
	limit := lim.PressureAngle
	if id == "pressure-angle-return" {
		limit = *lim.PressureAngleReturn
	}
	sin, cos := taylor.Exactly(limit).Mul(taylor.PiOver180()).SinCos()
	return taylor.Exactly(w.Mig()).Mul(cos).Sub(u.Mul(sin)).Lo > 0 // |w| > u tan(limit)
}

// row is the trade-off at one base radius.
func (z *sizer) row(base float64) SizingRow {
	d := z.datum(base)
	least, _ := z.margin(func(p sizeSample) bool { return p.rises }, func(p sizeSample) float64 { return -z.pressure(p, d) })
	bend, _ := z.margin(always, func(p sizeSample) float64 { return -z.bend(p, d) })
	r := SizingRow{BaseRadius: base, PressureAngle: -least, ConvexRadius: 1/-bend - z.roller(), Pass: true}
	for _, l := range z.limits() {
		m, _ := l.value(base)
		r.Pass = r.Pass && m >= 0
	}
	return r
}
