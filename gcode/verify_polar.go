package gcode

import (
	"fmt"
	"math"

	"lobewright/gcode/read"
	"lobewright/tolerance/chain"
)

// Turning is what a program of a rotary and a radial axis must keep to besides its path.
type Turning struct {
	Speed   float64 // degrees/min; 0 when not limited
	Rate    float64 // degrees/s²; 0 when not limited
	Seconds bool    // F under G93 is the seconds of a move
	way     turning
	band    float64 // length: what lies nearer to the path than this is meant to be on it
}

// minutes is what a move takes by its F under G93.
func minutes(f float64, seconds bool) float64 {
	if seconds {
		return f / 60
	}
	return 1 / f
}

// verifyPolar holds a program of a rotary and a radial axis: its words here, and its path as arcs that stand for its
// spirals (spiral.go), by what holds programs in the plane. What those arcs may be off is taken from the tolerance first.
func verifyPolar(p *read.Program, x Expect) (Result, error) {
	f := &flattened{p: p, x: x, enough: x.Eps / 200}
	if x.Modulo {
		p = unwound(p, func(line int, format string, args ...any) { f.fail("words", nan(), nan(), line, format, args...) })
		f.p = p
	}
	for i := range p.Moves {
		f.move(i)
	}
	x.Eps -= f.slack
	x.Limits.Radius, x.Limits.Chord, x.Limits.Sweep = 0, 0, 0 // of arcs, which the program has none of
	flat := *p
	flat.Moves = f.moves
	flat.Misc = append([]read.Misc(nil), p.Misc...)
	for i, m := range flat.Misc {
		if m.Before < len(f.first) {
			flat.Misc[i].Before = f.first[m.Before]
		} else {
			flat.Misc[i].Before = len(f.moves)
		}
	}
	v := newVerifier(&flat, x)
	v.band = x.Turning.band
	if !(x.Eps < v.band/2) {
		return Result{}, fmt.Errorf("verify: a tolerance of %g does not tell the slide from the path; at most %g does", x.Eps, v.band/2)
	}
	v.res.Failures = f.failures
	v.run()
	f.tally(&v.res)
	for i := range v.res.Cuts {
		c := &v.res.Cuts[i]
		c.Arcs, c.Lines = 0, f.between(c.First, c.Last)
		if !math.IsInf(c.Deviation.Bound, 1) {
			c.Deviation.Bound += f.slack
		}
	}
	v.worst()
	v.sort()
	return v.res, nil
}

// flattened turns the moves of both axes into moves in the cam's plane.
type flattened struct {
	p        *read.Program
	x        Expect
	enough   float64 // slack that is small enough, length
	moves    []read.Move
	first    []int // of each move the first that stands for it
	slack    float64
	knownX   bool
	touch    map[float64]touching
	failures []Failure
	spin     spin
	plunges  int // feed moves of Z so far
}

func (f *flattened) fail(id string, value, limit float64, line int, format string, args ...any) {
	f.failures = append(f.failures, Failure{id, value, limit, nan(), line, -1, fmt.Sprintf(format, args...)})
}

// move adds what move i is in the plane.
func (f *flattened) move(i int) {
	m := f.p.Moves[i]
	f.first = append(f.first, len(f.moves))
	known := f.knownX && m.KnownR
	f.knownX = f.knownX || m.HasXY
	s := spiral{f.x.Turning.way.polar(m.FromR), f.x.Turning.way.polar(m.ToR), m.From.X, m.To.X}
	turns := m.FromR != m.ToR
	if m.Kind == read.Rapid {
		f.spin.stop()
	}
	if m.Kind != read.Rapid && m.HasZ {
		f.plunges++
	}
	out := m
	out.FromR, out.ToR, out.HasR, out.KnownR = 0, 0, false, false
	out.KnownXY, out.HasXY = known, m.HasXY || m.HasR
	out.From, out.To = polarPoint(s.from, s.r0), polarPoint(s.to, s.r1)
	switch {
	case m.Kind == read.Arc:
		f.fail("words", nan(), nan(), m.LineNo, "an arc where two axes of different kinds move")
	case m.From.Y != 0 || m.To.Y != 0:
		f.fail("words", nan(), nan(), m.LineNo, "a word Y: the tool stays on the radial axis")
	case !known:
	case m.Kind == read.Rapid:
		if low := math.Min(m.FromZ, m.ToZ); low < f.x.SafeZ && turns {
			f.fail("clearance", low, f.x.SafeZ, m.LineNo, "the work is turned by a rapid below safe height %.6g", f.x.SafeZ)
		}
	case !m.Inverse:
		if turns {
			f.fail("words", nan(), nan(), m.LineNo, "the work turns in a feed move that is not under inverse time G93")
		}
	default:
		f.inverse(m, s)
		return
	}
	f.moves = append(f.moves, out)
}

// mostSlack is the share of the tolerance that the arcs for a spiral may need: a move that is near its path needs far less.
const mostSlack = 0.25

// mostTurned, degrees, bounds the work that a wrong word can ask of the proof: a move of a pass turns by little more than 360.
const mostTurned = 720.0

// inverse adds a move under inverse time, and holds its F.
func (f *flattened) inverse(m read.Move, s spiral) {
	if m.HasZ {
		f.fail("words", nan(), nan(), m.LineNo, "Z moves under inverse time")
	}
	if by := math.Abs(s.to - s.from); by > mostTurned {
		f.fail("words", by, mostTurned, m.LineNo, "the work turns by %.6g degrees in one move; a pass goes around once, and moves up to %g degrees are looked at", by, mostTurned)
		return
	}
	path, slack := s.arcs(f.enough)
	if most := f.x.Eps * mostSlack; slack <= most {
		f.slack = math.Max(f.slack, slack)
	} else {
		f.fail("deviation", slack, most, m.LineNo, "the work turns by %.6g degrees from radius %.6g to %.6g: no path near the contour does", s.to-s.from, s.r0, s.r1)
	}
	feed := f.hold(m, s)
	for _, e := range path {
		out := m
		out.FromR, out.ToR, out.HasR, out.KnownR = 0, 0, false, false
		out.KnownXY, out.HasXY, out.Inverse, out.Feed = true, true, false, feed
		out.From, out.To = e.From, e.To
		if e.Kind == chain.Arc {
			out.Kind, out.Center, out.CCW = read.Arc, e.Center, e.CCW
		}
		f.moves = append(f.moves, out)
	}
}

// cutAt is the cut that the moves so far belong to: one begins at every move down.
func (f *flattened) cutAt() (Cut, bool) {
	if f.plunges < 1 || f.plunges > len(f.x.Cuts) {
		return Cut{}, false
	}
	return f.x.Cuts[f.plunges-1], true
}

// hold holds F and the rotary axis's limits, and returns the feed a minute that it stands for: that asked for, when it is right.
func (f *flattened) hold(m read.Move, s spiral) float64 {
	t := f.x.Turning
	cut, ok := f.cutAt()
	if !ok || !(m.Feed > 0) || !(s.r0 > 0 && s.r1 > 0) {
		f.fail("feed", m.Feed, nan(), m.LineNo, "F%g of a move that belongs to no cut", m.Feed)
		return f.x.Feed
	}
	if f.touch == nil {
		f.touch = map[float64]touching{}
	}
	on, ok := f.touch[cut.Offset]
	if !ok {
		on = newTouching(f.x.Curve(cut.Offset), f.x.Curve(cut.Offset-f.x.Radius), t.way)
		f.touch[cut.Offset] = on
	}
	const rounding = 1e-6
	want := inverseTime(f.x.Feed, on.length(s), t.Seconds)
	if math.Abs(m.Feed-want) > f.x.FeedStep+rounding*want {
		f.fail("feed", m.Feed, want, m.LineNo, "F%g, expected F%.6g for this move at %g a minute over the contour", m.Feed, want, f.x.Feed)
	}
	f.spin.move(m, minutes(m.Feed, t.Seconds), t.Speed, t.Rate, f.fail)
	return f.x.Feed
}

// between is the number of moves on the lines from first to last.
func (f *flattened) between(first, last int) int {
	n := 0
	for _, m := range f.p.Moves {
		if m.LineNo >= first && m.LineNo <= last && m.Kind != read.Rapid {
			n++
		}
	}
	return n
}

// tally replaces the figures that the arcs falsify.
func (f *flattened) tally(r *Result) {
	r.Rotary = f.spin.worst
	r.Arcs, r.Lines, r.ArcMismatch, r.ArcMismatchLine, r.ShortestMove = 0, 0, 0, 0, math.Inf(1)
	rapid, total := RapidMM, 0.0
	if f.p.Inch {
		rapid = RapidInch
	}
	knownX := false
	for _, m := range f.p.Moves {
		known := knownX && m.KnownR && m.KnownZ
		knownX = knownX || m.HasXY
		around := (m.ToR - m.FromR) * math.Pi / 180 * (m.From.X + m.To.X) / 2
		length := math.Hypot(math.Hypot(around, m.To.X-m.From.X), m.ToZ-m.FromZ)
		switch {
		case m.Kind == read.Rapid && known:
			total += length / rapid
		case m.Inverse && m.Feed > 0:
			total += minutes(m.Feed, f.x.Turning.Seconds)
		case m.Kind != read.Rapid && m.Feed > 0:
			total += length / m.Feed
		}
		if m.Inverse && m.Kind != read.Rapid {
			r.Lines++
			r.ShortestMove = math.Min(r.ShortestMove, length)
		}
	}
	if math.IsInf(r.ShortestMove, 1) {
		r.ShortestMove = 0
	}
	r.Seconds = 60 * total
}
