package gcode

import (
	"math"
	"slices"

	"lobewright/gcode/read"
	"lobewright/synth/plane"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
)

// nearShare is the band about a cut's distance, as a share of the tool's radius, in
// which a move counts as part of the cut: a lead's outer end is farther off.
const nearShare = 0.25

// mill walks the moves of a milling program.
func (v *verifier) mill() {
	if !v.changed() {
		v.wrong("words", 0, "no tool change M6 before the first move")
	}
	var group []read.Move
	cuts := 0
	flush := func() {
		if len(group) > 0 {
			v.millCut(group, cuts)
			cuts++
		}
		group = nil
	}
	for _, m := range v.p.Moves {
		switch {
		case m.Kind == read.Rapid || m.HasZ:
			flush()
			v.travel(m)
		case !m.KnownZ || !m.KnownXY:
			v.wrong("depth", m.LineNo, "a feed move from an unknown place")
		case m.FromZ >= v.x.SafeZ:
			v.wrong("depth", m.LineNo, "a feed move at safe height")
		default:
			group = append(group, m)
		}
	}
	flush()
	if cuts != len(v.x.Cuts) {
		v.fail("coverage", float64(cuts), float64(len(v.x.Cuts)), nan(), 0, "%d cuts, expected %d", cuts, len(v.x.Cuts))
	}
	if v.res.Finish != nil {
		v.res.Finish = closed(v.res.Finish)
	}
}

// atClamp holds the tool's center on e against the clamp; the tool may be as far as
// loose from it.
func (v *verifier) atClamp(e chain.Element, loose float64, line int) {
	if v.x.Process == Wire || v.x.ClampRadius <= 0 {
		return
	}
	d, err := certify.AwayFromCircle(e, plane.Circle{Radius: v.x.ClampRadius + v.x.Radius + loose})
	if err != nil || d < 0 {
		v.fail("clamp", d, 0, nan(), line, "the tool comes within the clamp radius %.6g by %.6g", v.x.ClampRadius, -d)
	}
}

// travel holds a rapid or a move of Z.
func (v *verifier) travel(m read.Move) {
	x := v.x
	low := math.Min(m.FromZ, m.ToZ)
	switch {
	case m.Kind == read.Rapid && (!m.KnownXY || !m.KnownZ):
		// From where the machine stands: above the work, and not below safe height.
		if m.HasZ && m.ToZ < x.SafeZ {
			v.fail("depth", m.ToZ, x.SafeZ, nan(), m.LineNo, "the first rapid goes to Z %.6g, below safe height %.6g", m.ToZ, x.SafeZ)
		}
		return
	case !m.KnownXY || !m.KnownZ:
		v.wrong("depth", m.LineNo, "a feed move from an unknown place")
		return
	case low >= x.SafeZ:
		return
	case m.Comp != read.Off:
		v.wrong("words", m.LineNo, "a rapid or a move of Z below safe height under %v", m.Comp)
	}
	if still(m) && m.ToZ > m.FromZ {
		if m.ToZ < x.SafeZ {
			v.fail("depth", m.ToZ, x.SafeZ, nan(), m.LineNo, "the tool is drawn up to Z %.6g only, safe height is %.6g", m.ToZ, x.SafeZ)
		}
		return // out of its own cut
	}
	v.atClamp(element(m), 0, m.LineNo)
	if m.Kind == read.Rapid {
		v.throughBlank(m)
		return
	}
	if m.Feed != x.PlungeFeed {
		v.fail("feed", m.Feed, x.PlungeFeed, nan(), m.LineNo, "plunge at F%g, expected F%g", m.Feed, x.PlungeFeed)
	}
	v.outside(m.To, m.LineNo)
	v.clear("clearance", element(m), x.Radius-x.Eps, m.LineNo, true)
}

// throughBlank refuses a rapid below safe height that touches the blank.
func (v *verifier) throughBlank(m read.Move) {
	if v.x.BlankDiameter <= 0 {
		v.wrong("blank", m.LineNo, "a rapid below safe height, and the blank is not known")
		return
	}
	d, err := certify.AwayFromCircle(element(m), plane.Circle{Radius: v.x.BlankDiameter/2 + v.x.Radius})
	if err != nil || d < 0 {
		v.fail("blank", d, 0, nan(), m.LineNo, "a rapid below safe height comes into the blank of diameter %.6g", v.x.BlankDiameter)
	}
	v.outside(m.To, m.LineNo)
}

// millCut proves the k-th cut of the program.
func (v *verifier) millCut(group []read.Move, k int) {
	line := group[0].LineNo
	if k >= len(v.x.Cuts) {
		v.wrong("coverage", line, "a cut more than expected")
		k = len(v.x.Cuts) - 1
	}
	r := run{moves: group, cut: v.x.Cuts[k], register: v.x.Tool, clockwise: v.x.Clockwise}
	if z := group[0].FromZ; z != r.cut.Z {
		v.fail("depth", z, r.cut.Z, nan(), line, "the cut is at Z %.6g, expected %.6g", z, r.cut.Z)
	}
	for _, m := range group {
		if want, slack := v.feedOf(m); !(math.Abs(m.Feed-want) <= slack) {
			v.fail("feed", m.Feed, want, nan(), m.LineNo, "the cut is fed at F%g, expected F%.6g", m.Feed, want)
		}
	}
	r.first, r.last = v.followed(group, r.cut.Stock, v.band)
	if r.first == r.last && v.x.Rotary != 0 { // another tool: the narrow band of a slide is about where most moves end
		r.first, r.last = v.followed(group, v.median(group), v.band)
	}
	tool := r.cut.Offset - v.x.Eps
	if r.first == r.last {
		v.fail("coverage", 0, 360, nan(), line, "no move of this cut follows the contour at %.6g", r.cut.Offset)
		v.centers(r, 0, len(group), tool)
		return
	}
	c := v.certify(r)
	v.around(c, r)
	v.centers(r, 0, len(group), tool)
}

// feedOf returns the feed a move of a cut must have, and by how much rounding may move it.
func (v *verifier) feedOf(m read.Move) (want, slack float64) {
	if !v.x.ContourFeed {
		return v.x.Feed, 0
	}
	want = contourFeed(v.x.Feed, v.x.Radius, v.x.Clockwise, element(m))
	return want, v.x.FeedStep
}

// around asks for a whole turn.
func (v *verifier) around(c CutResult, r run) {
	if turned := c.Deviation.To - c.Deviation.From; !math.IsInf(c.Deviation.Bound, 1) && !(turned > 360) {
		v.fail("coverage", turned, 360, c.Deviation.To, c.First, "the cut goes %.6g degrees around, and must go past its start", turned)
	}
}

// followed returns the moves from the first to the last that keep about the distance
// from the contour. What a line of the file says in several moves does so as a whole or not at all.
func (v *verifier) followed(group []read.Move, distance, band float64) (first, last int) {
	for i := 0; i < len(group); {
		next, near := i, true
		for ; next < len(group) && group[next].LineNo == group[i].LineNo; next++ {
			near = near && v.near(group[next], distance, band)
		}
		if near {
			if last == 0 {
				first = i
			}
			last = next
		}
		i = next
	}
	return first, last
}

// median is the distance from the contour above and below which as many moves end.
func (v *verifier) median(group []read.Move) float64 {
	var all []float64
	for _, m := range group {
		d, _ := v.outline.near(m.To)
		all = append(all, d)
	}
	slices.Sort(all)
	return all[len(all)/2]
}
