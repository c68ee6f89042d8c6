package gcode

import (
	"fmt"
	"math"
	"slices"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// The cam is the piece that drops, so it must hang on a tab until someone has
// clamped it. The order written: thread in a start hole outside the contour; run
// straight to the end of the tab nearer to it; rough around to the tab's other end; skim
// back and forth, the compensation side changing with the direction; run a
// little back into the cut, out of it, and stop for the clamp; then cut the
// tab with the same offsets, back and forth, overlapping the cut at both ends.
//
// Every stretch is entered and left through a small arc from a short slot square
// to the contour, the same slot for all stretches that end there. A slot ends
// blind: no two are joined in the waste, so nothing is cut loose that could
// short the wire.

// stretch is a run of the wire along the contour between two cam angles; from > to
// runs against growing angle.
type stretch struct {
	pass     int
	from, to float64
	note     string
	stop     bool // M00 before it
}

// wirePlan is the order of stretches and what they share.
type wirePlan struct {
	part Part
	op   Operation
	m    Machine

	lead     float64 // radius of the wire center's lead arc at every offset, length
	straight float64 // straight part of a slot, length
	slots    map[float64]plane.Point
	hole     plane.Point
}

const (
	// tabOverlap is how far the cut of the tab runs into the cut beside it, and the
	// least straight part of a slot. Common practice, no source.
	tabOverlapMM, tabOverlapInch = 1.0, 0.04
	// tabShare is the part of the tab's width that a lead arc and half a kerf may
	// take at each end: half the tab stays whole.
	tabShare = 0.25
	// leadOverOffset is the least lead arc radius over the largest offset: above 1, so
	// that the contour cut on the inside of an offset arc is not undercut.
	leadOverOffset = 1.1
)

func planWire(part Part, op Operation, m Machine) (Program, error) {
	w := &wirePlan{part: part, op: op, m: m, slots: map[float64]plane.Point{}}
	w.hole = plane.Polar(op.StartHole.Radius, plane.Degrees(op.StartHole.At))
	stretches, err := w.order()
	if err != nil {
		return Program{}, err
	}
	e := newEmitter(part, op, m)
	e.p.Registers = registers(op)
	e.p.Header = header(part, op, m)
	safe := []Code{e.units(), PlaneXY, Absolute, CompOff, WorkFirst}
	e.add(Block{G: safe})
	e.modes()
	e.line(Rapid, e.grid.Point(w.hole), Block{Comment: "START HOLE"})
	e.note("SLOT THREAD. THE CODE OF THE MACHINE, OR BY HAND AT THIS STOP")
	e.own(op.Slots.Thread)
	e.add(Block{M: []int{0}, Comment: "THREAD THE WIRE"})
	at := e.grid.Point(w.hole)
	for _, s := range stretches {
		if at, err = w.run(e, s, at); err != nil {
			return Program{}, fmt.Errorf("%s: %w", s.note, err)
		}
	}
	e.note("SLOT CUT WIRE. THE CODE OF THE MACHINE")
	e.own(op.Slots.Cut)
	e.own(m.End...)
	e.add(Block{G: safe})
	e.add(Block{M: []int{30}})
	return *e.p, nil
}

// tab returns the cam angles of the tab's ends, lower first.
func (op Operation) tab(contour Curve) (from, to float64) {
	mid := angleOfPolar(contour, op.Tab.At)
	return walk(contour, mid, -op.Tab.Width/2), walk(contour, mid, op.Tab.Width/2)
}

// order returns the stretches in the order of cutting.
func (w *wirePlan) order() ([]stretch, error) {
	op, contour := w.op, w.part.Curve(0)
	offset := slices.Max(op.Offsets)
	w.lead = math.Min(4*offset, tabShare*op.Tab.Width-offset)
	if w.lead < leadOverOffset*offset {
		return nil, fmt.Errorf("tab width %g is too narrow for a wire at %g from the contour: at least %.4g is needed",
			op.Tab.Width, offset, (1+leadOverOffset)*offset/tabShare)
	}
	overlap := w.part.small(tabOverlapMM, tabOverlapInch)
	w.straight = math.Max(overlap, 4*offset)
	if op.StartHole.Radius < pointAt(contour, angleOfPolar(contour, op.StartHole.At)).Radius()+offset {
		return nil, fmt.Errorf("the start hole at radius %g, %g degrees lies inside the contour or closer than %g to it: thread outside",
			op.StartHole.Radius, op.StartHole.At, offset)
	}
	low, high := op.tab(contour)
	if high-low >= 180 {
		return nil, fmt.Errorf("tab width %g holds half the cam: give a narrower tab", op.Tab.Width)
	}
	return w.sequence(high, low+360, overlap), nil
}

// sequence returns the stretches when the wire may cut from cam angle a to b, and the
// tab is from b to a+360.
func (w *wirePlan) sequence(a, b, overlap float64) []stretch {
	contour := w.part.Curve(0)
	entry := nearestAngle(contour, w.hole)
	entry -= 360 * math.Floor((entry-a)/360)
	var s []stretch
	first, last := w.firstEnd(entry, a, b), a
	if first == a {
		last = b
	}
	// Closer to a tab's end than a lead is long, the end itself is the entry.
	if margin := w.part.small(tabOverlapMM, tabOverlapInch) + 2*w.lead; entry > walk(contour, a, margin) && entry < walk(contour, b, -margin) {
		s = append(s, stretch{from: entry, to: first, note: "TO THE TAB"})
	}
	s = append(s, backAndForth(len(w.op.Offsets), first, last, "PASS")...)
	end := s[len(s)-1].to
	inner, beyond := walk(contour, a, overlap), walk(contour, b-360, -overlap) // end is a: against growing angle
	if end == b {
		inner, beyond = walk(contour, b, -overlap), walk(contour, a+360, overlap)
	}
	back := stretch{pass: len(w.op.Offsets) - 1, from: end, to: inner, note: "BACK INTO THE CUT"}
	tab := backAndForth(len(w.op.Offsets), inner, beyond, "TAB PASS")
	tab[0].stop = true
	return append(append(s, back), tab...)
}

// firstEnd returns the end of the tab, a or b, where the cut begins: the one nearer
// to the entry, on the contour; in the middle of the tab the one that makes the
// first pass clockwise.
func (w *wirePlan) firstEnd(entry, a, b float64) float64 {
	toA, toB := math.Min(entry-a, a+360-entry), math.Abs(entry-b)
	if near := (a + 360 - b) / 100; math.Abs(toA-toB) < near {
		if w.part.CamClockwise {
			return b
		}
		return a
	}
	if toA < toB {
		return a
	}
	return b
}

// backAndForth returns n passes from first to last and back.
func backAndForth(n int, first, last float64, note string) []stretch {
	var s []stretch
	for i := range n {
		s = append(s, stretch{pass: i, from: first, to: last, note: fmt.Sprintf("%s %d", note, i+1)})
		first, last = last, first
	}
	return s
}

// run adds one stretch, from the grid point where the wire stands, and returns
// where it stands then.
func (w *wirePlan) run(e *emitter, s stretch, at chain.Point) (chain.Point, error) {
	offset, compensated := w.op.Offsets[s.pass], w.op.Compensation != CompPath
	path, side, err := w.path(s)
	if err != nil {
		return at, err
	}
	radius := w.lead
	if w.op.Compensation == CompControl {
		radius += offset
	}
	in, out := leadIn(path, side, radius), leadOut(path, side, radius)
	from, to := w.slot(s.from, in), w.slot(s.to, out)
	c, err := snap(append(append(in.in(from), path...), out.away(to)...), w.m)
	if err != nil {
		return at, err
	}
	if s.stop {
		e.add(Block{M: []int{0}, Comment: "CLAMP THE CAM. THE NEXT CUT FREES IT"})
	}
	if start := c.Segments[0].From; start != at {
		e.line(Straight, start, Block{F: e.feed(w.op.Feed)})
	}
	e.note(fmt.Sprintf("%s. SLOT CONDITION OF PASS %d, OFFSET %s", s.note, s.pass+1, w.m.text(offset)))
	if s.pass < len(w.op.Slots.Conditions) {
		e.own(w.op.Slots.Conditions[s.pass])
	}
	on := Block{F: e.feed(w.op.Feed)}
	if compensated {
		on.G, on.D = []Code{sideCode(side)}, number(s.pass+1)
	}
	e.chain(c, on, compensated)
	return c.Segments[len(c.Segments)-1].To, nil
}

// path returns the written path of the stretch without its leads, and the side of
// travel on which the wire is.
func (w *wirePlan) path(s stretch) (chain.Path, float64, error) {
	written := w.op.Offsets[s.pass]
	if w.op.Compensation == CompControl {
		written = 0
	}
	l, err := w.op.loopAt(w.part, w.m, written)
	if err != nil {
		return nil, 0, err
	}
	if s.from < s.to {
		path, err := l.between(s.from, s.to)
		return path, w.part.outside(), err
	}
	path, err := l.between(s.to, s.from)
	return path.Reverse(), -w.part.outside(), err
}

// slot returns the outer end of the slot at the cam angle; the first stretch that
// comes there cuts it.
func (w *wirePlan) slot(t float64, l lead) plane.Point {
	p, ok := w.slots[t]
	if !ok {
		p = w.m.grid().Value(w.m.grid().Point(l.straight(w.straight)))
		w.slots[t] = p
	}
	return p
}
