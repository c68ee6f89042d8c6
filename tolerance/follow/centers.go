package follow

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// hair is the largest tangent break, in radians, at a joint with an arc that is taken
// for the rounding of a smooth joint: on a grid of 0.001 an element as short as 0.2
// makes half of it. A joint of two lines is a corner at any angle.
const hair = 0.01

// straight is the tangent break, in radians, that rounding may make between two pieces
// of one line; no round is put there.
const straight = 1e-9

// Centers returns the path of the roller's center over a contour (or over a path
// parallel to it, as a tool's center runs): moved by d, a length, to the left of
// travel, negative to the right.
//
// Around an outer corner the center goes on an arc of radius |d| about the corner;
// at an inner corner it turns where the moved neighbors cross. A joint on an arc that
// breaks by at most 0.01 rad is the rounding of a smooth one: the moved neighbors
// meet in its bisector, and the follower's velocity steps there. Errors: an arc
// that would turn inside out, a neighbor trimmed away.
func Centers(path chain.Path, d float64) (chain.Path, error) {
	if d == 0 {
		return append(chain.Path(nil), path...), nil
	}
	joints := make([]joint, len(path))
	for i, e := range path {
		next := path[(i+1)%len(path)]
		joints[i] = between(e, next, d)
		if i == len(path)-1 && e.To != next.From {
			joints[i] = joint{open: true}
		}
		if joints[i].broken {
			return path.OffsetRound(d)
		}
	}
	return moved(path, joints, d)
}

// joint is what becomes of a joint when the path is moved.
type joint struct {
	open   bool        // an end of the path
	broken bool        // a corner with an arc at it, too large for the bisector
	round  bool        // outer: the neighbors part, and an arc joins them
	ccw    bool        // direction of that arc
	meet   plane.Point // otherwise where they meet
}

// between looks at the joint from a to b, moved by d.
func between(a, b chain.Element, d float64) joint {
	u, v := a.EndTangent(), b.StartTangent()
	turn := math.Atan2(u.Cross(v), u.Dot(v))
	lines := a.Kind == chain.Line && b.Kind == chain.Line
	if !lines && math.Abs(turn) > hair {
		return joint{broken: true}
	}
	if lines && turn*d < 0 && math.Abs(turn) > straight {
		return joint{round: true, ccw: turn > 0}
	}
	// The bisector point of two lines moved by d: (n+m)/(1+n·m) is as long as
	// 1/cos(turn/2) and halves the angle between the normals n and m.
	n, m := u.Left(), v.Left()
	return joint{meet: a.To.Add(n.Add(m).Scale(d / (1 + n.Dot(m))))}
}

// moved assembles the moved elements and the rounds.
func moved(path chain.Path, joints []joint, d float64) (chain.Path, error) {
	var out chain.Path
	for i, e := range path {
		alone, err := chain.Path{e}.Offset(d)
		if err != nil {
			return path.OffsetRound(d) // the same error, with the element's number
		}
		m := alone[0]
		straight := m.To.Sub(m.From)
		before, after := joints[(i+len(path)-1)%len(path)], joints[i]
		if !before.open && !before.round {
			m.From = before.meet
		}
		if !after.open && !after.round {
			m.To = after.meet
		}
		if e.Kind == chain.Line && m.To.Sub(m.From).Dot(straight) <= 0 {
			return nil, fmt.Errorf("element %d, from %.6g,%.6g to %.6g,%.6g, is trimmed away by its corners when moved by %g",
				i, e.From.X, e.From.Y, e.To.X, e.To.Y, d)
		}
		out = append(out, m)
		if after.round {
			normal := path[(i+1)%len(path)].StartTangent().Left()
			out = append(out, chain.Element{Kind: chain.Arc, From: m.To, To: e.To.Add(normal.Scale(d)), Center: e.To, CCW: after.ccw,
				Source: chain.Span{From: e.Source.To, To: e.Source.To}})
		}
	}
	return out, nil
}
