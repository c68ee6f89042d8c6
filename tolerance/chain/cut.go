package chain

import (
	"fmt"
	"math"
)

const turnDegrees = 360 // Source of a closed path runs over one turn

// sliverShare is the share of an element below which a cut is moved to the joint: a
// piece that short would be below any grid.
const sliverShare = 1e-9

// StartAt returns the closed path p started at Source parameter t (degrees, any
// turn): the element there is split, and the elements before it come last,
// their Source one turn on. The first Source.From is t brought into the
// path's turn. Errors as for Stretch.
func (p Path) StartAt(t float64) (Path, error) {
	dir, err := p.turning()
	if err != nil {
		return nil, err
	}
	t = p.within(t, dir)
	return p.Stretch(t, t+dir*turnDegrees)
}

// Stretch returns the part of the closed path p between Source parameters from and
// to (degrees), splitting the elements there. It may pass the start of the path and
// may be longer than a turn (an overlap): Source goes on counting. A path whose
// Source falls along it (a reversed one) is cut from the larger to the
// smaller parameter. Errors: the path's Source does not run over one turn
// without a gap, or from and to do not follow each other in its direction.
//
// A cut is placed by the share of the element's Source, so it is a place near
// that cam angle, not the exact point of the curve.
func (p Path) Stretch(from, to float64) (Path, error) {
	dir, err := p.turning()
	if err != nil {
		return nil, err
	}
	if !((to-from)*dir > 0) || math.IsInf(to-from, 0) {
		return nil, fmt.Errorf("stretch from %g to %g degrees: the path runs %s, so the end must lie beyond the start that way",
			from, to, map[bool]string{true: "up", false: "down"}[dir > 0])
	}
	first := p.within(from, dir)
	shift := from - first // whole turns
	var q Path
	for done := false; !done; shift += dir * turnDegrees {
		for _, e := range p {
			e.Source.From, e.Source.To = e.Source.From+shift, e.Source.To+shift
			if (from-e.Source.To)*dir >= 0 {
				continue
			}
			if (e.Source.From-to)*dir >= 0 {
				done = true
				break
			}
			if part, ok := e.between(from, to); ok {
				q = append(q, part)
			}
		}
	}
	return q, nil
}

// between returns the part of the element inside the parameters, and false when
// that is a sliver. A cut within a sliver of an end is the end.
// An element that stands for no angle at all (the round of a corner) is not cut.
func (e Element) between(from, to float64) (Element, bool) {
	if e.Source.From == e.Source.To {
		return e, true
	}
	a := math.Max(e.Source.fractionOf(from), 0)
	b := math.Min(e.Source.fractionOf(to), 1)
	if !(b-a > sliverShare) {
		return e, false
	}
	if b < 1-sliverShare {
		e, _ = e.Split(b)
		e.Source.To = to
	}
	if a > sliverShare {
		_, e = e.Split(a / b)
		e.Source.From = from
	}
	return e, true
}

// within brings t into the turn of the path: Source.From of the first element is
// the first parameter inside it, that of the next turn the first outside.
func (p Path) within(t, dir float64) float64 {
	start := p[0].Source.From
	d := math.Mod((t-start)*dir, turnDegrees)
	if d < 0 {
		d += turnDegrees
	}
	if d >= turnDegrees {
		d = 0
	}
	return start + d*dir
}

// sourceSlop is what rounding may add up to in Source, in degrees.
const sourceSlop = 1e-9

// turning returns +1 when Source grows along the closed path, -1 when it falls, and
// an error when it does not run over one turn without a gap.
func (p Path) turning() (float64, error) {
	if len(p) == 0 {
		return 0, fmt.Errorf("an empty path cannot be cut")
	}
	total := p[len(p)-1].Source.To - p[0].Source.From
	if !(math.Abs(math.Abs(total)-turnDegrees) <= sourceSlop) {
		return 0, fmt.Errorf("the path stands for %g degrees of cam angle; only one full turn can be cut by cam angle", total)
	}
	dir := math.Copysign(1, total)
	for i, e := range p {
		if !((e.Source.To-e.Source.From)*dir >= 0) || i > 0 && !(math.Abs(e.Source.From-p[i-1].Source.To) <= sourceSlop) {
			return 0, fmt.Errorf("element %d stands for cam angles %g to %g, which do not follow those before it", i, e.Source.From, e.Source.To)
		}
	}
	return dir, nil
}
