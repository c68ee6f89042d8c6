package gcode

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// sliverCounts is the shortest piece, in counts of the grid, that a cut leaves of
// an element: shorter ones would be kinked by rounding, so the cut goes to
// the joint instead.
const sliverCounts = 50

// loop is a closed path over cam angle that can be cut anywhere.
type loop struct {
	path  chain.Path
	curve Curve
	from  float64 // cam angle of the path's start
	least float64 // length: shortest piece left by a cut
}

// loopAt returns the path of the operation whose element centers stand at offset
// from the contour.
func (op Operation) loopAt(part Part, m Machine, offset float64) (loop, error) {
	path, err := op.Path(offset)
	if err != nil {
		return loop{}, fmt.Errorf("path at %g outside the contour: %w", offset, err)
	}
	if len(path) == 0 {
		return loop{}, fmt.Errorf("path at %g outside the contour: it has no elements", offset)
	}
	return loop{path, part.Curve(offset), path[0].Source.From, sliverCounts * m.grid().Step()}, nil
}

// place is a point on the loop: element i of the given lap, at fraction f of it.
type place struct {
	lap, i int
	f      float64
}

// at returns the place on the path that stands for cam angle t, moved to a joint when
// it is close to one.
func (l loop) at(t float64) (place, error) {
	lap := math.Floor((t - l.from) / 360)
	local := t - 360*lap
	for i, e := range l.path {
		if local < e.Source.From || (local >= e.Source.To && i < len(l.path)-1) {
			continue
		}
		p := place{int(lap), i, fraction(e, pointAt(l.curve, local))}
		length := e.Length()
		if p.f*length < l.least {
			p.f = 0
		}
		if (1-p.f)*length < l.least {
			p = l.next(p)
		}
		return p, nil
	}
	return place{}, fmt.Errorf("cam angle %g is in no element of the path", t)
}

// next returns the start of the element after p's.
func (l loop) next(p place) place {
	p.i, p.f = p.i+1, 0
	if p.i == len(l.path) {
		p.i, p.lap = 0, p.lap+1
	}
	return p
}

// between returns the stretch of the path over cam angles from to to, from < to,
// which may be more than a turn apart.
func (l loop) between(from, to float64) (chain.Path, error) {
	a, err := l.at(from)
	if err != nil {
		return nil, err
	}
	b, err := l.at(to)
	if err != nil {
		return nil, err
	}
	var out chain.Path
	for p := a; p.lap < b.lap || (p.lap == b.lap && p.i < b.i); p = l.next(p) {
		out = append(out, part(l.path[p.i], p.f, 1))
	}
	start := 0.0
	if a.lap == b.lap && a.i == b.i {
		start = a.f
	}
	if b.f > start {
		out = append(out, part(l.path[b.i], start, b.f))
	}
	if len(out) == 0 {
		return nil, fmt.Errorf("cam angles %g to %g are too close on a grid of %g", from, to, l.least/sliverCounts)
	}
	return out, nil
}

// part returns the element between two fractions of it.
func part(e chain.Element, from, to float64) chain.Element {
	if to < 1 {
		e, _ = e.Split(to)
	}
	if from > 0 {
		_, e = e.Split(from / to)
	}
	return e
}

// fraction returns where on the element the point nearest to p lies, 0 to 1.
func fraction(e chain.Element, p plane.Point) float64 {
	f := 0.0
	if e.Kind == chain.Arc {
		sweep := e.Sweep()
		a, b := e.From.Sub(e.Center), p.Sub(e.Center)
		turn := math.Atan2(a.Cross(b), a.Dot(b))
		if turn*sweep < 0 && math.Abs(turn) > (2*math.Pi-math.Abs(sweep))/2 {
			turn += math.Copysign(2*math.Pi, sweep)
		}
		f = turn / sweep
	} else if d := e.To.Sub(e.From); d.Norm() > 0 {
		f = p.Sub(e.From).Dot(d) / d.Dot(d)
	}
	return math.Max(0, math.Min(1, f))
}

// pointAt returns the curve's point at cam angle t, any number of turns on.
func pointAt(c Curve, t float64) plane.Point { return frameAt(c, t).P }

func frameAt(c Curve, t float64) plane.Frame {
	pieces := c.Pieces()
	first := pieces[0].From
	t -= 360 * math.Floor((t-first)/360)
	for i, p := range pieces {
		if t < p.To || i == len(pieces)-1 {
			return c.At(i, math.Min(t, p.To))
		}
	}
	return plane.Frame{}
}

// searchSteps is how many points of a curve a search looks at before it refines;
// contours of cams turn by less than half a turn between them.
const searchSteps = 1200

// angleOfPolar returns the cam angle of the contour point at the polar angle, in
// degrees: the outermost when there are several. Exact to 1e-9 degrees.
func angleOfPolar(c Curve, polar float64) float64 {
	dir := plane.Unit(plane.Degrees(polar))
	side := func(t float64) float64 { return dir.Cross(pointAt(c, t).Sub(plane.Point{})) }
	ahead := func(t float64) float64 { return dir.Dot(pointAt(c, t).Sub(plane.Point{})) }
	first, best, radius := c.Pieces()[0].From, 0.0, math.Inf(-1)
	before := side(first) < 0
	for k := range searchSteps {
		lo, hi := first+float64(k)*360/searchSteps, first+float64(k+1)*360/searchSteps
		now := side(hi) < 0
		crossed := now != before
		before = now
		if !crossed || ahead(lo) <= 0 {
			continue
		}
		t := bisect(side, lo, hi)
		if r := ahead(t); r > radius {
			best, radius = t, r
		}
	}
	return best
}

// bisect returns a root of f between lo and hi, where f changes sign.
func bisect(f func(float64) float64, lo, hi float64) float64 {
	neg := f(lo) < 0
	for range 60 {
		mid := lo + (hi-lo)/2
		if (f(mid) < 0) == neg {
			lo = mid
		} else {
			hi = mid
		}
	}
	return lo
}

// nearestAngle returns the cam angle of the curve's point nearest to p.
func nearestAngle(c Curve, p plane.Point) float64 {
	first, best, least := c.Pieces()[0].From, 0.0, math.Inf(1)
	for k := range searchSteps {
		t := first + float64(k)*360/searchSteps
		if d := pointAt(c, t).Dist(p); d < least {
			best, least = t, d
		}
	}
	along := func(t float64) float64 { f := frameAt(c, t); return f.T.Dot(f.P.Sub(p)) }
	lo, hi := best-360.0/searchSteps, best+360.0/searchSteps
	if along(lo) < 0 && along(hi) > 0 {
		return bisect(along, lo, hi)
	}
	return best
}

// walk returns the cam angle that lies a length further along the curve from t, back
// for a negative length. The length is that of a fine polygon, short by
// less than 1e-4 of itself: a tab needs no more.
func walk(c Curve, t, length float64) float64 {
	step := math.Copysign(0.01, length)
	p, left := pointAt(c, t), math.Abs(length)
	for turned := 0.0; turned < 180; turned += math.Abs(step) {
		q := pointAt(c, t+step)
		d := p.Dist(q)
		if d >= left {
			return t + step*left/d
		}
		p, t, left = q, t+step, left-d
	}
	return t
}
