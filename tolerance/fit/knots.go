package fit

import (
	"math"
	"sort"
)

// pin is a knot that belongs to a place: a jump of the curvature, which it may slide off, or the
// curve's start.
type pin struct {
	j      int
	s      float64
	slides bool
}

const (
	outerShare = 0.27 // arcs that the dwell's circle does of a stretch at a smooth border
	shiftMost  = 0.3  // of the shorter neighbor: how far a pinned knot slides off its jump at once
	shiftPart  = 0.8  // of the computed shift is taken
	levelPart  = 0.7  // of the way to equal measure
	leastGauge = 0.02 // of the worst arc's measure: what a good arc counts
	shortest   = 0.02 // of the mean arc: each keeps that much
	backings   = 40   // halvings of a step that crowds knots
	fewRounds  = 4    // of Lawson's method while the knots are far from their places
	manyRounds = 12
)

// outer returns how many arcs the dwells' circles do at either border.
func (m *model) outer() (a, b float64) {
	if m.left.dwell && !m.jumpA {
		a = outerShare
	}
	if m.right.dwell && !m.jumpB {
		b = outerShare
	}
	return a, b
}

// equidistribute spreads n arcs so that each has the same error, and starts best anew.
func (f *fitter) equidistribute(n, iters int) {
	f.bestMax = math.Inf(1)
	f.begin(n)
	for it := 0; ; it++ {
		rounds := fewRounds
		if it > 1 {
			rounds = manyRounds
		}
		f.uniform()
		if !f.lawson(rounds) || it == iters {
			return
		}
		g := &f.gauge
		for i := range g.out {
			g.out[i] = math.Cbrt(6 * f.out[i] / (arcConstant * f.max))
		}
		for j := range g.arc {
			g.arc[j] = math.Cbrt(f.peak[j]/f.max) + leastGauge
		}
		if len(f.pins) > 0 && f.solve(&f.spare, f.sliding) {
			for _, p := range f.pins {
				if p.slides {
					f.shift[p.j] = f.q.x[p.j] - p.s + f.slide(&f.spare, p.j, shiftMost, shiftPart)
				}
			}
		}
		f.level(levelPart)
	}
}

// begin places n+1 knots at equal shares of N*.
func (f *fitter) begin(n int) {
	a, b := f.outer()
	f.q.x = resized(f.q.x, n+1)
	from, to := f.uAt(0), f.uAt(f.length)
	for j := range f.q.x {
		f.q.x[j] = f.sAt(from + (to-from)*(a+float64(j))/(a+b+float64(n)))
	}
	if a == 0 {
		f.q.x[0] = 0
	}
	if b == 0 {
		f.q.x[n] = f.length
	}
	f.pins = f.choosePins()
	f.shift = resized(f.shift, n+1)
	clear(f.shift)
	f.gauge.out = [2]float64{a, b}
	f.gauge.arc = resized(f.gauge.arc, n)
	for j := range f.gauge.arc {
		f.gauge.arc[j] = 1
	}
	f.level(1)
}

// choosePins gives jumps and the anchor the knots nearest to them.
func (f *fitter) choosePins() []pin {
	n := f.q.arcs()
	pins := f.pins[:0]
	taken := func(j int) bool {
		return sort.Search(len(pins), func(i int) bool { return pins[i].j >= j }) < len(pins)
	}
	for _, s := range f.steps { // growing
		anchor := f.anchored && s == f.anchor
		if j := f.nearest(s); j > 0 && !taken(j) && !anchor {
			pins = append(pins, pin{j, s, true})
		}
	}
	if j := f.nearest(f.anchor); f.anchored && !f.closed && j > 0 {
		own := pin{j, f.anchor, false}
		for _, s := range f.steps {
			own.slides = own.slides || s == f.anchor
		}
		pins = insertPin(pins, own)
	}
	if f.jumpA || f.closed && f.anchored {
		pins = append(pins, pin{})
		copy(pins[1:], pins)
		pins[0] = pin{0, 0, f.jumpA}
	}
	if f.jumpB {
		pins = append(pins, pin{n, f.length, true})
	}
	return pins
}

// insertPin puts p into pins and drops those that are on its knot or out of order with it.
func insertPin(pins []pin, p pin) []pin {
	var all []pin
	for _, q := range pins {
		if q.j < p.j && q.s < p.s {
			all = append(all, q)
		}
	}
	all = append(all, p)
	for _, q := range pins {
		if q.j > p.j && q.s > p.s {
			all = append(all, q)
		}
	}
	return all
}

// nearest returns the inner knot nearest to s, 0 when there is none.
func (f *fitter) nearest(s float64) int {
	best := 0
	for j := 1; j < f.q.arcs(); j++ {
		if best == 0 || math.Abs(f.q.x[j]-s) < math.Abs(f.q.x[best]-s) {
			best = j
		}
	}
	return best
}

// sliding reports whether knot j is pinned to a jump.
func (f *fitter) sliding(j int) bool {
	for _, p := range f.pins {
		if p.j == j && p.slides {
			return true
		}
	}
	return false
}

// held reports whether knot j must not move.
func (f *fitter) held(j int) bool {
	if !f.closed && (j == 0 && !f.left.dwell || j == f.q.arcs() && !f.right.dwell) {
		return true
	}
	for _, p := range f.pins {
		if p.j == j && !p.slides {
			return true
		}
	}
	return false
}

// level moves the knots to equal measure between pins, or a part of the way.
func (f *fitter) level(part float64) {
	n := f.q.arcs()
	f.old = append(f.old[:0], f.q.x...)
	g := &f.gauge
	g.lay(f.old)
	a, b := f.outer()
	last, measured := -a, 0.0 // index and measure where the block of arcs begins
	block := func(j, measure float64) {
		for i := max(int(math.Ceil(last)), 0); float64(i) <= j && i <= n; i++ {
			x := f.whereMeasure(measured + (measure-measured)*(float64(i)-last)/(j-last))
			f.q.x[i] = f.old[i] + part*(x-f.old[i])
		}
	}
	for _, p := range f.pins {
		measure := f.measureAt(p.s)
		if float64(p.j) > last {
			block(float64(p.j), measure)
		}
		last, measured = float64(p.j), measure
	}
	if end := float64(n) + b; end > last {
		block(end, g.sum[n]+g.out[1])
	}
	if f.closed {
		f.q.x[0] = f.q.x[n] - f.length
	}
	for _, p := range f.pins {
		f.q.x[p.j] = p.s + f.shift[p.j]
	}
	f.order(f.old)
}

// order keeps the knots apart and in their bounds, going back towards the knots from, which
// are in order, when they are not.
func (f *fitter) order(from []float64) {
	x := f.q.x
	n := len(x) - 1
	switch {
	case f.closed:
		reach := (marginShare - shortest) * f.length
		x[0] = math.Max(-reach, math.Min(reach, x[0]))
		x[n] = x[0] + f.length
	default:
		x[0], x[n] = math.Max(x[0], -f.left.room), math.Min(x[n], f.length+f.right.room)
		if !f.left.dwell {
			x[0] = 0
		}
		if !f.right.dwell {
			x[n] = f.length
		}
	}
	least := shortest * (x[n] - x[0]) / float64(n)
	for try := 0; try < backings && crowded(x, least); try++ {
		for i := range x {
			x[i] = (x[i] + from[i]) / 2
		}
	}
	if crowded(x, 0) {
		copy(x, from)
	}
}

func crowded(x []float64, least float64) bool {
	for j := 1; j < len(x); j++ {
		if !(x[j]-x[j-1] > least) {
			return true
		}
	}
	return false
}
