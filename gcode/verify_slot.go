package gcode

import (
	"math"

	"lobewright/gcode/read"
	"lobewright/synth/plane"
	"lobewright/tolerance/certify"
)

// slot walks the moves of a program that mills a groove: on the pitch curve, on every feed
// move at whatever height, and then, when the tool is narrower than the groove, along both
// walls, which no move may come nearer to than the tool's radius.
func (v *verifier) slot() {
	if !v.changed() {
		v.wrong("words", 0, "no tool change M6 before the first move")
	}
	var group []read.Move
	turns := 0
	flush := func() {
		switch {
		case len(group) == 0:
		case turns < len(v.x.Cuts) && v.x.Cuts[turns].Wall:
			v.slotWall(group, turns)
			turns++
		default:
			v.slotTurn(group, turns)
			turns++
		}
		group = nil
	}
	deepest := v.x.Cuts[len(v.x.Cuts)-1].Z
	var ramp []read.Move
	for _, m := range v.p.Moves {
		if m.ToZ < deepest {
			v.fail("depth", m.ToZ, deepest, nan(), m.LineNo, "the tool goes down to Z %.6g, the groove's bottom is at %.6g", m.ToZ, deepest)
		}
		if m.Comp != read.Off {
			v.wrong("words", m.LineNo, "a move under %v: the groove is cut without compensation", m.Comp)
		}
		down := m.Kind != read.Rapid && m.HasZ && m.HasXY
		if !down && len(ramp) > 0 {
			v.slotRamp(ramp, turns)
			ramp = nil
		}
		switch {
		case m.Kind == read.Rapid || m.HasZ && !m.HasXY:
			flush()
			v.slotTravel(m, turns)
		case !m.KnownZ || !m.KnownXY:
			v.wrong("depth", m.LineNo, "a feed move from an unknown place")
		case down:
			flush()
			ramp = append(ramp, m)
		case m.FromZ >= v.x.SafeZ:
			v.wrong("depth", m.LineNo, "a feed move at safe height")
		default:
			group = append(group, m)
		}
	}
	flush()
	if turns != len(v.x.Cuts) {
		v.fail("coverage", float64(turns), float64(len(v.x.Cuts)), nan(), 0, "%d turns, expected %d", turns, len(v.x.Cuts))
	}
	if v.res.Finish != nil {
		v.res.Finish = closed(v.res.Finish)
	}
	if math.IsInf(v.res.Clearance, 1) {
		v.res.Clearance = 0 // nothing travels below the face but in the groove itself
	}
}

// slotTravel holds what is not cut along the curve: sideways only at safe height, down
// only at a feed and not below the face, up to safe height.
func (v *verifier) slotTravel(m read.Move, turns int) {
	x := v.x
	switch {
	case m.Kind == read.Rapid && (!m.KnownXY || !m.KnownZ):
		if m.HasZ && m.ToZ < x.SafeZ {
			v.fail("depth", m.ToZ, x.SafeZ, nan(), m.LineNo, "the first rapid goes to Z %.6g, below safe height %.6g", m.ToZ, x.SafeZ)
		}
	case !m.KnownXY || !m.KnownZ:
		v.wrong("depth", m.LineNo, "a feed move from an unknown place")
	case m.Kind == read.Rapid && math.Min(m.FromZ, m.ToZ) < x.SafeZ && !(still(m) && m.ToZ >= x.SafeZ):
		v.fail("clearance", math.Min(m.FromZ, m.ToZ), x.SafeZ, nan(), m.LineNo, "a rapid below safe height %.6g that is not straight up out of the groove", x.SafeZ)
	case m.Kind != read.Rapid && !still(m):
		v.wrong("words", m.LineNo, "a feed move off the curve")
	case m.Kind != read.Rapid && m.ToZ < 0 && turns < len(x.Cuts) && x.Cuts[turns].Wall:
		if d, t := v.outline.near(m.To); math.Abs(d) > inSlot*x.Radius {
			v.fail("clearance", math.Abs(d), inSlot*x.Radius, t, m.LineNo, "the tool goes down %.6g beside the slot it has cut", math.Abs(d))
		}
		if m.Feed != x.PlungeFeed {
			v.fail("feed", m.Feed, x.PlungeFeed, nan(), m.LineNo, "plunge at F%g, expected F%g", m.Feed, x.PlungeFeed)
		}
	case m.Kind != read.Rapid && m.ToZ < 0:
		v.fail("depth", m.ToZ, 0, nan(), m.LineNo, "a plunge to Z %.6g into full material: a ramp goes down along the curve", m.ToZ)
	case m.Kind != read.Rapid && m.ToZ < m.FromZ && m.Feed != x.PlungeFeed:
		v.fail("feed", m.Feed, x.PlungeFeed, nan(), m.LineNo, "plunge at F%g, expected F%g", m.Feed, x.PlungeFeed)
	}
}

// slotRamp proves a ramp: on the curve, down, at the feed for it, to the next depth.
func (v *verifier) slotRamp(ramp []read.Move, turn int) {
	last := ramp[len(ramp)-1]
	if turn < len(v.x.Cuts) && last.ToZ != v.x.Cuts[turn].Z {
		v.fail("depth", last.ToZ, v.x.Cuts[turn].Z, nan(), last.LineNo, "the ramp ends at Z %.6g, expected %.6g", last.ToZ, v.x.Cuts[turn].Z)
	}
	for _, m := range ramp {
		if m.Feed != v.x.PlungeFeed {
			v.fail("feed", m.Feed, v.x.PlungeFeed, nan(), m.LineNo, "the ramp is fed at F%g, expected F%g", m.Feed, v.x.PlungeFeed)
		}
		if m.ToZ > m.FromZ {
			v.fail("depth", m.ToZ, m.FromZ, nan(), m.LineNo, "the ramp goes up")
		}
		v.atClamp(element(m), 0, m.LineNo)
	}
	known := len(v.res.Cuts)
	finish, offset := v.res.Finish, v.res.FinishOffset
	v.certify(v.slotRun(ramp, Cut{Z: last.ToZ}))
	v.res.Cuts = v.res.Cuts[:known] // a ramp is no cut of its own
	v.res.Finish, v.res.FinishOffset = finish, offset
}

// slotTurn proves the k-th turn.
func (v *verifier) slotTurn(group []read.Move, k int) {
	line := group[0].LineNo
	if k >= len(v.x.Cuts) {
		v.wrong("coverage", line, "a turn more than expected")
		k = len(v.x.Cuts) - 1
	}
	r := v.slotRun(group, v.x.Cuts[k])
	if z := group[0].FromZ; z != r.cut.Z {
		v.fail("depth", z, r.cut.Z, nan(), line, "the turn is at Z %.6g, expected %.6g", z, r.cut.Z)
	}
	for _, m := range group {
		if m.Feed != v.x.Feed {
			v.fail("feed", m.Feed, v.x.Feed, nan(), m.LineNo, "the groove is fed at F%g, expected F%g", m.Feed, v.x.Feed)
		}
		v.atClamp(element(m), 0, m.LineNo)
	}
	v.around(v.certify(r), r)
}

// inSlot is how far from the pitch curve the tool may go down into its own slot, as a share
// of its radius: what a lead's arc and the curve's own bend make of it.
const inSlot = 0.25

// slotWall proves a cut along a wall: an arc to the wall's path, a turn and more, an arc
// back, and none of it nearer to either wall than the tool's radius.
func (v *verifier) slotWall(group []read.Move, k int) {
	cut, line := v.x.Cuts[k], group[0].LineNo
	if z := group[0].FromZ; z != cut.Z {
		v.fail("depth", z, cut.Z, nan(), line, "the cut is at Z %.6g, expected %.6g", z, cut.Z)
	}
	for _, m := range group {
		if m.Feed != v.x.Feed {
			v.fail("feed", m.Feed, v.x.Feed, nan(), m.LineNo, "the wall is fed at F%g, expected F%g", m.Feed, v.x.Feed)
		}
		v.atClamp(element(m), 0, m.LineNo)
		for _, wall := range v.walls() {
			found, at, err := wall.Clear(element(m), v.x.Radius-v.x.Eps)
			if err != nil {
				v.fail("clearance", nan(), v.x.Radius-v.x.Eps, nan(), m.LineNo, "clearance not proven: %v", err)
			} else if !(found >= v.x.Radius-v.x.Eps) {
				v.fail("reach", found, v.x.Radius-v.x.Eps, at, m.LineNo, "the tool's center comes to %.6g of a wall at cam angle %.4g; it must keep %.6g", found, at, v.x.Radius-v.x.Eps)
			}
		}
		// Between the walls, and not beyond one of them.
		if d, t := v.outline.near(m.To); math.Abs(d) > v.x.HalfWidth {
			v.fail("clearance", math.Abs(d), v.x.HalfWidth, t, m.LineNo, "the tool is outside the groove")
		}
	}
	if len(group) < 4 {
		v.fail("coverage", 0, 360, nan(), line, "no move of this cut follows the wall")
		return
	}
	r := run{moves: group, first: 1, last: len(group) - 1, cut: cut, clockwise: cut.Clockwise}
	v.around(v.certify(r), r)
}

// walls prepares both walls.
func (v *verifier) walls() []*certify.Body {
	if v.both == nil {
		for _, d := range []float64{-v.x.HalfWidth, v.x.HalfWidth} {
			v.both = append(v.both, certify.Prepare(v.x.Curve(d)))
		}
	}
	return v.both
}

// slotRun is a run of moves that are all on the curve; their direction is their own.
func (v *verifier) slotRun(moves []read.Move, cut Cut) run {
	r := run{moves: moves, last: len(moves), cut: cut}
	path, turned := elements(moves), 0.0
	for _, e := range path {
		a, b := plane.Vector(e.From), plane.Vector(e.To)
		turned += math.Atan2(a.Cross(b), a.Dot(b))
	}
	r.clockwise = turned < 0
	return r
}
