package gcode

import (
	"fmt"
	"math"
	"sort"

	"lobewright/gcode/read"
	"lobewright/tolerance/certify"
)

// DrumCut is a cut that a program of a barrel must make.
type DrumCut struct {
	Pass    DrumPass
	Z       float64 // as written, length
	Forward bool    // in the direction of growing cam angle
}

// DrumExpect is what a program on a barrel must do.
type DrumExpect struct {
	Expect // of which Curve and Cuts are not used
	Axis   func(pass DrumPass, z float64) Curve
	Passes []DrumCut

	Sense, Radius, Depth float64 // of polar angle by cam angle; lengths
	Room                 func(stock float64) float64
	RotaryTable          bool
	RotarySpeed          float64 // degrees/min; 0 when not limited
	RotaryRate           float64 // degrees/s²; 0 when not limited
	Seconds              bool    // F under G93 is seconds
	OffCenter            bool
}

// ExpectedDrum returns what the operation's program must do, each cut within eps (a length) of its
// exact path at every depth.
func ExpectedDrum(d Drum, op Operation, m Machine, eps float64) DrumExpect {
	g := m.grid()
	x := DrumExpect{Axis: d.Axis, Sense: d.sense(), Radius: d.Radius, Depth: d.Depth, RotaryTable: m.RotaryTable, RotarySpeed: m.RotarySpeed, RotaryRate: m.RotaryRate, Seconds: m.InverseSeconds,
		Room: func(stock float64) float64 { return d.room(op, stock) }, OffCenter: !d.fills(op) && !op.RotaryShift}
	x.Expect = Expect{Process: Slot, Number: op.programNumber(), Fluid: op.Coolant > 0, Inch: d.Inch, Eps: eps, CamClockwise: d.CamClockwise, Compensation: op.Compensation, Rotary: op.Rotary, Modulo: m.RotaryModulo,
		Feed: gridValue(g, op.Feed), FeedStep: g.Step(), MaxBlocks: m.MaxBlocks, Limits: m.Limits, Path: m.Path, PathBlend: gridValue(g, m.PathBlend), Own: ownLines(op, m), ArcMismatch: m.ArcMismatch, Radius: op.radius(), Tool: op.Tool, Speed: op.speed(),
		PlungeFeed: gridValue(g, op.PlungeFeed), SafeZ: gridValue(g, m.SafeZ), HalfWidth: d.Width / 2}
	height := func(z int64) float64 { return float64(z) / float64(counts(g, 1)) }
	for k, z := range d.depths(op, g, DrumPass{}) {
		x.Passes = append(x.Passes, DrumCut{Z: height(z), Forward: k%2 == 0})
	}
	walls, forward := d.walls(op)
	for i, w := range walls {
		for _, z := range d.depths(op, g, w) {
			x.Passes = append(x.Passes, DrumCut{w, height(z), forward[i]})
		}
	}
	return x
}

// drumVerifier collects the verdicts on one program.
type drumVerifier struct {
	verifier
	x    DrumExpect
	next int // pass that is expected next
	spin spin
	way  float64 // sign of the last turn
	z    float64
}

// VerifyDrum holds a program of a barrel as read against what it must do:
//
//   - every feed move of a turn is within Eps of its exact path, both directions, as the planes at the
//     outer radius and at the groove's bottom see it (between them both distances grow evenly), and
//     every turn goes all around at its depth;
//   - a tool that slides over to a wall stays between the pitch curve and its pass;
//   - every feed move takes the time its length at the outer radius asks for, within the printed
//     digits of F, and keeps the rotary axis below its limit;
//   - nothing else goes below SafeZ but straight down to where the groove is open, and straight up;
//   - units, tool, spindle, stops and end are those expected.
//
// The error says that the expectation itself is not sound.
func VerifyDrum(p *read.Program, x DrumExpect) (Result, error) {
	if p == nil || x.Axis == nil || len(x.Passes) == 0 || !(x.Eps > 0) {
		return Result{}, fmt.Errorf("verify: a program, a path, passes and a positive Eps are needed")
	}
	v := &drumVerifier{verifier: verifier{p: p, x: x.Expect}, x: x}
	if x.Modulo {
		v.p = unwound(p, func(line int, format string, args ...any) { v.wrong("words", line, format, args...) })
	}
	v.words()
	v.walk()
	v.tally()
	v.worst()
	v.number()
	sort.SliceStable(v.res.Failures, func(i, j int) bool { return v.res.Failures[i].Line < v.res.Failures[j].Line })
	return v.res, nil
}

// walk takes the moves in order.
func (v *drumVerifier) walk() {
	if p := v.p.Rotary; p != v.x.Rotary {
		v.wrong("words", 0, "the rotary axis is %q, expected %q", p, v.x.Rotary)
	}
	if !v.changed() {
		v.wrong("words", 0, "no tool change M6 before the first move")
	}
	var group []read.Move
	flush := func() {
		if len(group) > 0 {
			v.cut(group)
		}
		group = nil
	}
	for _, m := range v.p.Moves {
		switch {
		case m.Kind == read.Arc:
			v.wrong("words", m.LineNo, "an arc where two axes of different kinds move")
		case m.Kind == read.Rapid:
			flush()
			v.spin.stop()
			v.rapid(m)
		case !m.KnownXY || !m.KnownZ || !m.KnownR:
			v.wrong("depth", m.LineNo, "a feed move from an unknown place")
		case !m.Inverse:
			flush()
			v.spin.stop()
			v.plunge(m)
		default:
			v.feed(m)
			group = append(group, m)
		}
	}
	flush()
	v.width()
	if v.next != len(v.x.Passes) {
		v.fail("coverage", float64(v.next), float64(len(v.x.Passes)), nan(), 0, "%d cuts, expected %d", v.next, len(v.x.Passes))
	}
}

// width holds a tool that goes on the pitch curve alone: it makes the groove's width.
func (v *drumVerifier) width() {
	for _, c := range v.x.Passes {
		if c.Pass.Side != 0 {
			return
		}
	}
	if tool, room := 2*v.x.Expect.Radius, 2*v.x.HalfWidth; math.Abs(tool-room) > wholeWidth*room {
		v.fail("groove-width", tool, room, nan(), 0, "the tool cuts the groove %.6g wide, wanted %.6g", tool, room)
	}
}

// rests reports whether nothing but Z moves.
func rests(m read.Move) bool { return m.From == m.To && m.FromR == m.ToR }

func (v *drumVerifier) rapid(m read.Move) {
	low := m.ToZ
	if m.KnownZ {
		low = math.Min(m.FromZ, m.ToZ)
	} else if !m.HasZ {
		return
	}
	if low < v.x.SafeZ && !(m.KnownZ && rests(m) && m.ToZ >= v.x.SafeZ) {
		v.fail("clearance", low, v.x.SafeZ, nan(), m.LineNo, "a rapid below safe height %.6g that is not straight up out of the groove", v.x.SafeZ)
	}
	if m.HasZ {
		v.z = m.ToZ
	}
}

// plunge is a feed move a minute: straight down, onto the outside before the first turn or into
// the groove that is cut.
func (v *drumVerifier) plunge(m read.Move) {
	if !rests(m) {
		v.wrong("words", m.LineNo, "a feed move sideways that is not under inverse time G93")
		return
	}
	if m.Feed != v.x.PlungeFeed {
		v.fail("feed", m.Feed, v.x.PlungeFeed, nan(), m.LineNo, "plunge at F%g, expected F%g", m.Feed, v.x.PlungeFeed)
	}
	floor := 0.0
	if v.next < len(v.x.Passes) && v.x.Passes[v.next].Pass.Side != 0 {
		floor = v.x.Passes[v.next].Z
	}
	if m.ToZ < floor {
		v.fail("depth", m.ToZ, floor, nan(), m.LineNo, "a plunge to Z %.6g into full material", m.ToZ)
	}
	v.z = m.ToZ
}

// feed holds F against the way at the outer radius.
func (v *drumVerifier) feed(m read.Move) {
	asked := v.x.Feed
	if m.ToZ != m.FromZ {
		asked = v.x.PlungeFeed
	}
	want := inverseTime(asked, v.length(m), v.x.Seconds)
	const rounding = 1e-9
	if math.Abs(m.Feed-want) > v.x.FeedStep+rounding*want {
		v.fail("feed", m.Feed, want, nan(), m.LineNo, "F%g, expected F%.6g for this move at %g a minute", m.Feed, want, asked)
	}
	by := m.ToR - m.FromR
	if by*v.way < 0 { // a turn back begins from rest
		v.spin.stop()
	}
	v.way = by
	v.spin.move(m, minutes(m.Feed, v.x.Seconds), v.x.RotarySpeed, v.x.RotaryRate, func(id string, value, limit float64, line int, format string, args ...any) {
		v.fail(id, value, limit, nan(), line, format, args...)
	})
	if m.Comp != read.Off {
		v.wrong("words", m.LineNo, "a move under %v: the groove is cut without compensation", m.Comp)
	}
	if _, across := v.axes(m); across != 0 && !v.x.OffCenter {
		v.wrong("words", m.LineNo, "the tool leaves the camshaft's plane")
	}
}

// axes are the parts of a move along the camshaft and across it, lengths.
func (v *drumVerifier) axes(m read.Move) (axial, across float64) {
	axial, across = m.To.X-m.From.X, m.To.Y-m.From.Y
	if v.x.Rotary == 'B' {
		return across, axial
	}
	return axial, across
}

// length is how far a move goes over the work at the outer radius.
func (v *drumVerifier) length(m read.Move) float64 {
	axial, across := v.axes(m)
	return drumLength((m.ToR-m.FromR)*math.Pi/180*v.x.Radius, axial, across, m.ToZ-m.FromZ)
}

// cut proves one group of feed moves.
func (v *drumVerifier) cut(group []read.Move) {
	line := group[0].LineNo
	if v.next >= len(v.x.Passes) {
		v.wrong("coverage", line, "a cut more than expected")
		return
	}
	c := v.x.Passes[v.next]
	v.next++
	for len(group) > 0 { // turns of the slot follow each other without a rapid
		n := v.until(group)
		v.prove(group[:n], c)
		group = group[n:]
		if len(group) == 0 {
			return
		}
		if v.next >= len(v.x.Passes) {
			v.wrong("coverage", group[0].LineNo, "a cut more than expected")
			return
		}
		c = v.x.Passes[v.next]
		v.next++
	}
}

// until returns how many moves go on in the direction of the first.
func (v *drumVerifier) until(group []read.Move) int {
	way := group[0].ToR - group[0].FromR
	for i, m := range group {
		if (m.ToR-m.FromR)*way < 0 {
			return i
		}
	}
	return len(group)
}

// prove certifies a cut: its ramp or its slides, and its turn.
func (v *drumVerifier) prove(moves []read.Move, c DrumCut) {
	first, last, line := 0, len(moves), moves[0].LineNo
	polar := moves[0].ToR - moves[0].FromR
	if v.x.RotaryTable {
		polar = -polar
	}
	forward := polar*v.x.Sense > 0
	if forward != c.Forward {
		v.wrong("coverage", line, "the work turns the wrong way for this cut")
	}
	start, end := moves[0].FromR, moves[len(moves)-1].ToR
	for i, m := range moves {
		switch {
		case c.Pass.Side == 0 && m.ToZ != m.FromZ: // the ramp
			first = i + 1
			if m.ToZ > m.FromZ {
				v.fail("depth", m.ToZ, m.FromZ, nan(), m.LineNo, "the ramp goes up")
			}
		case c.Pass.Side != 0 && math.Abs(m.ToR-start) <= leadDegrees+slideSlack:
			first = i + 1
		case c.Pass.Side != 0 && math.Abs(m.FromR-end) <= leadDegrees+slideSlack && last == len(moves):
			last = i
		}
		if m.ToZ != c.Z && i >= first {
			v.fail("depth", m.ToZ, c.Z, nan(), m.LineNo, "the turn is at Z %.6g, expected %.6g", m.ToZ, c.Z)
		}
	}
	if first >= last {
		v.fail("coverage", 0, 360, nan(), line, "no move of this cut is at its depth")
		return
	}
	turn := moves[first:last]
	if around := math.Abs(turn[len(turn)-1].ToR - turn[0].FromR); around < 360 {
		v.fail("coverage", around, 360, nan(), turn[0].LineNo, "the cut goes %.6g degrees around", around)
	}
	if c.Pass.Side == 0 {
		turn = moves // the ramp is on the same path
	} else {
		v.between(moves[:first], c, forward)
		v.between(moves[last:], c, forward)
	}
	r := CutResult{Offset: float64(c.Pass.Side) * v.x.Room(c.Pass.Stock), Z: c.Z, First: moves[first].LineNo, Last: moves[last-1].LineNo, Lines: last - first,
		Clockwise: forward != v.x.CamClockwise}
	r.Deviation.Bound = math.Inf(1)
	worst := certify.Deviation{}
	for _, z := range []float64{v.x.Radius, v.x.Radius - v.x.Depth} {
		d, err := v.against(turn, c.Pass, z, forward)
		if err != nil {
			v.wrong("deviation", turn[0].LineNo, "%v", err)
			v.res.Cuts = append(v.res.Cuts, r)
			return
		}
		if !(d.Bound <= v.x.Eps) {
			at := d.Segment
			if !forward {
				at = len(turn) - 1 - at
			}
			v.fail("deviation", d.Bound, v.x.Eps, d.At, turn[at].LineNo, "the tool's path is up to %.6g from the exact one, %.6g from the camshaft axis; %.6g is allowed", d.Bound, z, v.x.Eps)
		}
		if d.Bound > worst.Bound {
			worst = d
		}
	}
	r.Deviation = worst
	v.res.Cuts = append(v.res.Cuts, r)
	finish := v.surface(moves[first:last], v.x.Radius)
	if !forward {
		finish = finish.Reverse()
	}
	v.res.Finish, v.res.FinishOffset = finish, r.Offset
}

// slideSlack is what rounding the rotary words may move the end of a slide, degrees.
const slideSlack = 1e-2

// against certifies moves against the exact path of a pass, at a distance z from the camshaft
// axis.
func (v *drumVerifier) against(moves []read.Move, pass DrumPass, z float64, forward bool) (certify.Deviation, error) {
	path := v.surface(moves, z)
	if !forward {
		path = path.Reverse()
	}
	return certify.Part(newEndless(v.x.Axis(pass, z), z, v.x.Sense), path)
}

// between proves that a tool that slides to or from a wall keeps between the pitch curve and its
// pass.
func (v *drumVerifier) between(moves []read.Move, c DrumCut, forward bool) {
	if len(moves) == 0 {
		return
	}
	d, err := v.against(moves, DrumPass{}, v.x.Radius, forward)
	if err != nil {
		v.wrong("lead", moves[0].LineNo, "%v", err)
		return
	}
	wrong := d.Left // +Y is on the left of travel towards growing X
	if (c.Pass.Side > 0) == (v.x.Sense > 0) {
		wrong = d.Right
	}
	if room := v.x.Room(c.Pass.Stock) + v.x.Eps; !(d.Bound <= room) || !(wrong <= v.x.Eps) {
		v.fail("lead", d.Bound, room, d.At, moves[0].LineNo, "the tool slides %.6g from the pitch curve, and %.6g away from the wall it is meant for; at most %.6g is allowed, and only to the wall", d.Bound, wrong, room)
	}
}

// tally fills the figures that need no proof.
func (v *drumVerifier) tally() {
	r := &v.res
	r.Rotary = v.spin.worst
	r.Blocks, r.Bytes, r.ShortestMove = v.p.Blocks, v.p.Bytes, math.Inf(1)
	rapid := RapidMM
	if v.p.Inch {
		rapid = RapidInch
	}
	total := 0.0
	for _, m := range v.p.Moves {
		length := v.length(m)
		switch {
		case !m.KnownXY || !m.KnownZ || !m.KnownR:
		case m.Kind == read.Rapid:
			total += length / rapid
		case m.Inverse && m.Feed > 0:
			total += minutes(m.Feed, v.x.Seconds)
		case m.Feed > 0:
			total += length / m.Feed
		}
		if m.Kind != read.Rapid {
			r.PathLength += length
			if m.Inverse {
				r.Lines++
				r.ShortestMove = math.Min(r.ShortestMove, length)
			}
		}
	}
	if math.IsInf(r.ShortestMove, 1) {
		r.ShortestMove = 0
	}
	r.Seconds = 60 * total
	if v.x.MaxBlocks > 0 && r.Blocks > v.x.MaxBlocks {
		v.fail("block-count", float64(r.Blocks), float64(v.x.MaxBlocks), nan(), 0, "%d blocks, the control takes %d; allow a larger chord tolerance", r.Blocks, v.x.MaxBlocks)
	}
}
