package follow

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Developed is a follower whose base curve lies in a developed plane, where the cam angle
// is along X: it begins at one cam angle and ends one turn on, elsewhere.
type Developed struct {
	On        Linkage
	PerDegree float64 // X to a degree of cam angle, length, negative when X falls
}

// openEnds is how far, in degrees, an open path may miss one turn: its ends are rounded to
// the output grid.
const openEnds = 1e-3

func (d Developed) closing() float64 { return openEnds }

func (d Developed) closes(first, last plane.Point) bool { return true }

func (d Developed) stretch(e chain.Element) (stretch, bool) {
	backward := (e.To.X-e.From.X)*d.PerDegree < 0
	if backward {
		e = e.Reverse()
	}
	s := stretch{start: e.From, tangent: startTangent(e), k: e.Curvature(), backward: backward,
		from: e.From.X / d.PerDegree, extent: (e.To.X - e.From.X) / d.PerDegree}
	return s, !math.IsNaN(s.from + s.extent)
}

func (d Developed) at(s stretch, theta float64) (lift, v, a float64, ok bool) {
	lift, v, a, _, ok = d.On(theta, s.frame())
	return lift, v, a, ok
}
