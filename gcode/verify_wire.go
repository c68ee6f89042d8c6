package gcode

import (
	"math"
	"slices"

	"lobewright/gcode/read"
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

const (
	// wireNear is how far from the contour, over the largest offset, a wire that cuts
	// may be; leads begin farther off.
	wireNear = 1.5
	// orderSlack is how far in degrees a pass may go beyond the pass before it
	// without cutting into the full: less than what a joint on the grid may move.
	orderSlack = 0.5
)

// ran is a certified run of the wire.
type ran struct {
	run
	pass   int
	result CutResult
	move   int // index of its first move in the program
}

// wire walks the moves of a wire program: it has no Z, and every feed move cuts.
func (v *verifier) wire() {
	var feeds []read.Move
	start := 0
	for i, m := range v.p.Moves {
		if m.HasZ {
			v.wrong("words", m.LineNo, "a wire program has no Z")
		}
		if m.Kind == read.Rapid {
			if m.KnownXY || m.Comp != read.Off {
				v.wrong("blank", m.LineNo, "a rapid with the wire in the work")
			}
			start = i + 1
			continue
		}
		if !m.KnownXY {
			v.wrong("depth", m.LineNo, "a feed move from an unknown place")
			return
		}
		if m.Feed != v.x.Feed {
			v.fail("feed", m.Feed, v.x.Feed, nan(), m.LineNo, "the wire is fed at F%g, expected F%g (0: none)", m.Feed, v.x.Feed)
		}
		feeds = append(feeds, m)
	}
	if len(feeds) == 0 {
		v.fail("coverage", 0, 360, nan(), 0, "no move cuts")
		return
	}
	if len(feeds) != len(v.p.Moves)-start {
		return // a rapid in between; it has failed already
	}
	v.outside(feeds[0].From, feeds[0].LineNo)
	runs := v.wireRuns(feeds, start)
	v.threaded(start)
	v.order(runs)
	v.wireFinish(runs)
}

// wireRuns finds the runs along the contour, certifies each, and clears everything
// between them.
func (v *verifier) wireRuns(feeds []read.Move, start int) []ran {
	widest := 0.0
	for _, c := range v.x.Cuts {
		widest = math.Max(widest, c.Offset)
	}
	limit := wireNear * widest
	if v.x.Compensation == CompControl {
		limit = (wireNear - 1) * widest
	}
	var runs []ran
	cut := make([]turn, len(v.x.Cuts))
	for i := 0; i < len(feeds); {
		j := i
		for j < len(feeds) && v.near(feeds[j], 0, limit) {
			j++
		}
		if i == j {
			i++
			continue
		}
		r := ran{run: run{moves: feeds, first: i, last: j}, move: start + i}
		r.pass, r.clockwise = v.passOf(feeds[i]), v.turns(feeds[i])
		r.cut, r.register = v.x.Cuts[r.pass], r.pass+1
		r.result = v.certify(r.run)
		d := r.result.Deviation
		for v.x.Compensation == CompPath && r.pass+1 < len(cut) && v.x.Cuts[r.pass+1] == r.cut && cut[r.pass].holds(d.From+orderSlack, d.To-orderSlack) {
			r.pass++ // the same offset again
		}
		cut[r.pass].add(d.From, d.To)
		runs = append(runs, r)
		i = j
	}
	v.clearWire(feeds, runs)
	return runs
}

// clearWire clears every move: those of a run by the offset of its pass, the others
// by the smaller of their neighbors'.
func (v *verifier) clearWire(feeds []read.Move, runs []ran) {
	from, before := 0, math.Inf(1)
	for _, r := range runs {
		v.centers(r.run, from, r.first, math.Min(before, r.cut.Offset)-v.x.Eps)
		v.centers(r.run, r.first, r.last, r.cut.Offset-v.x.Eps)
		from, before = r.last, r.cut.Offset
	}
	if math.IsInf(before, 1) {
		before = v.x.Cuts[len(v.x.Cuts)-1].Offset
	}
	v.centers(run{moves: feeds}, from, len(feeds), before-v.x.Eps)
}

// passOf returns the pass a move belongs to: by its register, else by its distance.
func (v *verifier) passOf(m read.Move) int {
	if v.x.Compensation != CompPath && m.Comp != read.Off {
		return max(0, min(m.D-1, len(v.x.Cuts)-1))
	}
	d, _ := v.outline.near(element(m).PointAt(0.5))
	best := 0
	for i, c := range v.x.Cuts {
		if math.Abs(c.Stock-d) < math.Abs(v.x.Cuts[best].Stock-d) {
			best = i
		}
	}
	return best
}

// turns reports whether a move along the contour goes clockwise about it.
func (v *verifier) turns(m read.Move) bool {
	e := element(m)
	_, t := v.outline.near(e.PointAt(0.5))
	along := frameAt(v.x.Curve(0), t).T.Dot(e.To.Sub(e.From)) > 0
	return along != v.x.CamClockwise
}

// threaded asks for a stop to thread the wire before the first feed move.
func (v *verifier) threaded(start int) {
	for _, m := range v.p.Misc {
		if m.Code == 0 && m.Before == start {
			return
		}
	}
	v.wrong("order", 0, "no M00 at the start hole to thread the wire")
}

// order holds the runs against what keeps the cam in the blank: a pass cuts only
// where the pass before it has been, every pass comes all around, and the run that
// first cuts the cam free follows an M00.
func (v *verifier) order(runs []ran) {
	cut := make([]turn, len(v.x.Cuts))
	free := false
	for _, r := range runs {
		d := r.result.Deviation
		if math.IsInf(d.Bound, 1) {
			continue
		}
		if r.pass > 0 && !cut[r.pass-1].holds(d.From+orderSlack, d.To-orderSlack) {
			v.fail("order", float64(r.pass+1), float64(r.pass), d.From, r.result.First, "pass %d cuts where pass %d has not been", r.pass+1, r.pass)
		}
		cut[r.pass].add(d.From, d.To)
		if !free && v.whole(cut) {
			free = true
			if !v.stopped(runs, r) {
				v.wrong("order", r.result.First, "this run cuts the cam free; an M00 to clamp it must stand before it")
			}
		}
	}
	for i, c := range cut {
		if gap, at := c.gap(); gap > 0 {
			v.fail("coverage", 360-gap, 360, at, 0, "pass %d leaves %.6g degrees of the contour uncut", i+1, gap)
		}
	}
}

// whole reports whether the runs so far, of all passes, cut the cam free.
func (v *verifier) whole(cut []turn) bool {
	var all turn
	for _, c := range cut {
		for _, s := range c.spans {
			all.add(s.From, s.To)
		}
	}
	gap, _ := all.gap()
	return gap <= 0
}

// stopped reports whether an M00 stands between the run and the one before it.
func (v *verifier) stopped(runs []ran, r ran) bool {
	before := 0
	for _, q := range runs {
		if q.move < r.move {
			before = q.move + q.last - q.first
		}
	}
	for _, m := range v.p.Misc {
		if m.Code == 0 && m.Before >= before && m.Before <= r.move && before > 0 {
			return true
		}
	}
	return false
}

// wireFinish joins the runs of the last pass into one closed path.
func (v *verifier) wireFinish(runs []ran) {
	v.res.Finish, v.res.FinishOffset = nil, v.x.Cuts[len(v.x.Cuts)-1].Stock
	var last []ran
	for _, r := range runs {
		if r.pass == len(v.x.Cuts)-1 && !math.IsInf(r.result.Deviation.Bound, 1) {
			last = append(last, r)
		}
	}
	slices.SortStableFunc(last, func(a, b ran) int { // longest first
		return -sign((a.result.Deviation.To - a.result.Deviation.From) - (b.result.Deviation.To - b.result.Deviation.From))
	})
	if len(last) < 2 {
		return
	}
	path := v.growing(last[0])
	d := last[0].result.Deviation
	for _, r := range last[1:] { // the tab: the run that reaches over both ends
		q := r.result.Deviation
		lap := 360 * math.Round(((d.From+d.To)/2+180-(q.From+q.To)/2)/360)
		if q.From+lap < d.To && q.To+lap > d.From+360 {
			v.res.Finish = append(path, trim(v.growing(r), path[len(path)-1].To, path[0].From)...)
			return
		}
	}
}

func (v *verifier) growing(r ran) chain.Path {
	p := elements(r.loop())
	if r.clockwise == v.x.CamClockwise {
		p = p.Reverse()
	}
	return p
}

func sign(x float64) int {
	switch {
	case x > 0:
		return 1
	case x < 0:
		return -1
	}
	return 0
}

// trim returns the path between the places nearest to two points, its ends put there.
func trim(p chain.Path, from, to plane.Point) chain.Path {
	i, j := nearest(p, from), nearest(p, to)
	if j < i {
		return nil
	}
	q := append(chain.Path(nil), p[i:j+1]...)
	if f := fraction(q[len(q)-1], to); f > 0 && f < 1 {
		q[len(q)-1], _ = q[len(q)-1].Split(f)
	}
	if f := fraction(q[0], from); f > 0 && f < 1 {
		_, q[0] = q[0].Split(f)
	}
	q[0].From, q[len(q)-1].To = from, to
	return q
}

// nearest returns the element of p nearest to a point.
func nearest(p chain.Path, to plane.Point) int {
	best, least := 0, math.Inf(1)
	for i, e := range p {
		if d := e.PointAt(fraction(e, to)).Dist(to); d < least {
			best, least = i, d
		}
	}
	return best
}
