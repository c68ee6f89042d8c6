package measured

import (
	"math"

	"lobewright/synth/motion"
	"lobewright/synth/qp"
)

// conditions are what the least-squares spline is held to: of all rows and places only
// those that an answer before broke.
type conditions struct {
	rows   []bool  // moved too far
	floors []bool  // knot intervals that come near lift 0
	margin float64 // above 0, for what lies between the places looked at
}

// rounds of adding conditions; two or three are the rule.
const rounds = 12

// hold returns the least-squares spline on the knots of s that moves no row by more than
// the smoothing and is nowhere below 0; false when there is none.
func (f *fitter) hold(s *spline) (*spline, bool) {
	plain := f.squares(s)
	c := conditions{rows: make([]bool, len(f.rows)), floors: make([]bool, len(s.knots))}
	for range rounds {
		low, err := s.lowest()
		if err != nil {
			return nil, false
		}
		if low >= 0 && f.worst(s) <= f.smoothing {
			return s, true
		}
		f.pick(&c, s)
		f.pickFloors(&c, s, low)
		at, err := qp.Solve(f.program(plain, c, s))
		if err != nil {
			return nil, false
		}
		s = &spline{knots: s.knots, c: at.X}
	}
	return nil, false
}

// lowest returns the lowest lift of the spline, exact to rounding.
func (s *spline) lowest() (float64, error) {
	turned := &spline{knots: append([]float64(nil), s.knots...), c: s.c}
	turned.rotate()
	c, err := motion.Of(turned.zones())
	if err != nil {
		return 0, err
	}
	return c.MinLift(), nil
}

func (f *fitter) worst(s *spline) float64 {
	worst := 0.0
	for _, r := range f.rows {
		worst = math.Max(worst, math.Abs(s.lift(r.Angle)-r.Lift))
	}
	return worst
}

// pick adds, of every third of a knot interval, the rows that s moves furthest up and
// down, when that is too far.
func (f *fitter) pick(c *conditions, s *spline) {
	type extreme struct {
		row int
		off float64
	}
	bins := make([][2]extreme, 3*len(s.knots))
	for i := range bins {
		bins[i] = [2]extreme{{-1, f.smoothing}, {-1, f.smoothing}}
	}
	for i, r := range f.rows {
		j, t := s.interval(r.Angle)
		bin := &bins[3*j+min(2, int(3*(t-s.knots[j])/(s.knot(j+1)-s.knots[j])))]
		off := s.lift(r.Angle) - r.Lift
		if off > bin[0].off {
			bin[0] = extreme{i, off}
		}
		if -off > bin[1].off {
			bin[1] = extreme{i, -off}
		}
	}
	for _, bin := range bins {
		for _, e := range bin {
			if e.row >= 0 {
				c.rows[e.row] = true
			}
		}
	}
}

// near is how far above lift 0, in smoothings, an interval's middle still counts as
// near it.
const near = 50

// pickFloors adds the intervals near lift 0 when s goes below, and from the second time
// on a margin.
func (f *fitter) pickFloors(c *conditions, s *spline, low float64) {
	if low >= 0 {
		return
	}
	before := false
	for j := range s.knots {
		before = before || c.floors[j]
		c.floors[j] = c.floors[j] || s.lift((s.knots[j]+s.knot(j+1))/2) < near*f.smoothing
	}
	if before {
		c.margin = math.Min(c.margin-2*low, f.smoothing/10)
	}
}

// program is least squares under the conditions.
func (f *fitter) program(p qp.Problem, c conditions, s *spline) qp.Problem {
	tube := f.smoothing * (1 - 1e-6)
	for i, in := range c.rows {
		if r := f.rows[i]; in {
			p.G = append(p.G, s.row(r.Angle, 1), s.row(r.Angle, -1))
			p.H = append(p.H, r.Lift+tube, tube-r.Lift)
		}
	}
	const places = 8
	for j, in := range c.floors {
		for k := range places {
			if in {
				p.G = append(p.G, s.row(s.knots[j]+(s.knot(j+1)-s.knots[j])*(float64(k)+0.5)/places, -1))
				p.H = append(p.H, -c.margin)
			}
		}
	}
	return p
}

// row is the spline at a cam angle, degrees, times by, as a row over its coefficients.
func (s *spline) row(deg, by float64) qp.Row {
	var r qp.Row
	n := len(s.c)
	j, t := s.interval(deg)
	for k, b := range s.basis(j, t, 0) {
		if b != 0 {
			r.I, r.V = append(r.I, ((j-degree+k)%n+n)%n), append(r.V, by*b)
		}
	}
	return r
}
