package partial

import (
	"math"
	"sort"
)

// What no jerk, however large, can mend is a local matter: two values at one
// angle; a window above another; a lift on the edge of a window with a velocity that
// leaves it. The only thing that carries a value from one angle to another is a
// stretch on which the motion is rigid, that is held or carried at a velocity.
// Everything else can be met: a free stretch, however short, takes any lift, velocity
// and acceleration at one end to any at the other between any two limits. So the turn
// is cut at every angle a fact names, known values are collected at the cuts, rigid
// stretches pass them on, and each cut is looked at by itself.

// known is a value that may be known.
type known struct {
	x  float64
	is bool
}

// node is a cut: a cam angle that some fact names.
type node struct {
	at      float64 // degrees, from the first node up to below it plus 360
	f, v, a known   // lift, velocity, acceleration; per degree, degree²
	lo, hi  float64 // closed limits of the lift here
	run     int     // the rigid run the node belongs to, or -1
	rise    float64 // lift above the run's first node
}

// cell is the stretch from a node to the next.
type cell struct {
	from, to float64
	rigid    bool
	slope    float64
	lo, hi   float64
}

// timeline is the turn cut at every angle a fact names. Cell i goes from node i to
// node i+1; the last to the first node plus 360.
type timeline struct {
	nodes []node
	cells []cell
	runs  int
	size  float64 // the largest lift named, for what counts as equal
	pace  float64 // the same of velocities
}

// share of the largest value named below which two values are the same.
const same = 1e-9

func (t *timeline) equal(a, b float64) bool    { return math.Abs(a-b) <= same*t.size }
func (t *timeline) samePace(a, b float64) bool { return math.Abs(a-b) <= same*t.pace }

// newTimeline cuts the turn. ok is false when the facts contradict each other.
func newTimeline(facts []Fact) (t *timeline, ok bool) {
	t = &timeline{}
	t.measure(facts)
	t.cut(facts)
	ok = t.cellsOf(facts) && t.nodesOf(facts) && t.stiffen() && t.link() && t.touching()
	if ok && len(t.cells) > 0 && !t.allRigid() {
		t.rotate()
	}
	return t, ok
}

func (t *timeline) measure(facts []Fact) {
	for _, f := range facts {
		for _, x := range []*float64{f.Lift, f.Above, f.Below} {
			if x != nil {
				t.size = math.Max(t.size, math.Abs(*x))
			}
		}
		if f.Velocity != nil {
			t.pace = math.Max(t.pace, math.Abs(*f.Velocity))
			t.size = math.Max(t.size, math.Abs(*f.Velocity)*(f.To-f.From))
		}
	}
}

// cut makes the nodes.
func (t *timeline) cut(facts []Fact) {
	var at []float64
	for _, f := range facts {
		if f.everywhere() && f.window() {
			continue
		}
		at = append(at, past(0, f.From), past(0, f.To))
	}
	if len(at) == 0 {
		at = []float64{0}
	}
	sort.Float64s(at)
	for i, x := range at {
		if i == 0 || x-at[i-1] > sameAngle {
			t.nodes = append(t.nodes, node{at: x, lo: math.Inf(-1), hi: math.Inf(1), run: -1})
		}
	}
	for i, n := range t.nodes {
		to := t.nodes[0].at + turn
		if i+1 < len(t.nodes) {
			to = t.nodes[i+1].at
		}
		t.cells = append(t.cells, cell{from: n.at, to: to, lo: math.Inf(-1), hi: math.Inf(1)})
	}
}

// cellsOf collects what is known between the nodes.
func (t *timeline) cellsOf(facts []Fact) bool {
	for i := range t.cells {
		c := &t.cells[i]
		mid := (c.from + c.to) / 2
		for _, f := range facts {
			if f.point() || !f.covers(mid) {
				continue
			}
			if f.Above != nil {
				c.lo = math.Max(c.lo, *f.Above)
			}
			if f.Below != nil {
				c.hi = math.Min(c.hi, *f.Below)
			}
			slope := 0.0
			switch {
			case f.Lift != nil:
			case f.Velocity != nil:
				slope = *f.Velocity
			default:
				continue
			}
			if c.rigid && !t.samePace(c.slope, slope) {
				return false
			}
			if !c.rigid {
				c.rigid, c.slope = true, slope
			}
		}
		if c.lo > c.hi && !t.equal(c.lo, c.hi) {
			return false
		}
		if t.equal(c.lo, c.hi) { // a corridor without width holds the lift
			if c.rigid && !t.samePace(c.slope, 0) {
				return false
			}
			c.rigid, c.slope = true, 0
		}
	}
	return true
}

// nodesOf collects what is known at the nodes.
func (t *timeline) nodesOf(facts []Fact) bool {
	for i := range t.nodes {
		n := &t.nodes[i]
		for _, f := range facts {
			if !f.covers(n.at) {
				continue
			}
			if f.Above != nil {
				n.lo = math.Max(n.lo, *f.Above)
			}
			if f.Below != nil {
				n.hi = math.Min(n.hi, *f.Below)
			}
			if f.Lift != nil && !n.f.set(*f.Lift, same*t.size) {
				return false
			}
			if f.point() && f.Velocity != nil && !n.v.set(*f.Velocity, same*t.pace) {
				return false
			}
			if f.Acceleration != nil && !n.a.set(*f.Acceleration, same*math.Abs(*f.Acceleration)) {
				return false
			}
		}
		if n.lo > n.hi && !t.equal(n.lo, n.hi) {
			return false
		}
		if t.equal(n.lo, n.hi) && !n.f.set(n.lo, same*t.size) {
			return false
		}
	}
	return true
}

// set makes a value known; false when it was known to be another.
func (k *known) set(x, slack float64) bool {
	if k.is {
		return math.Abs(k.x-x) <= slack
	}
	k.x, k.is = x, true
	return true
}

// stiffen gives the ends of rigid cells the velocity of the cell and no acceleration.
func (t *timeline) stiffen() bool {
	for i, c := range t.cells {
		if !c.rigid {
			continue
		}
		for _, n := range []*node{&t.nodes[i], &t.nodes[(i+1)%len(t.nodes)]} {
			if !n.v.set(c.slope, same*t.pace) || !n.a.set(0, 0) {
				return false
			}
		}
	}
	return true
}

func (t *timeline) allRigid() bool {
	for _, c := range t.cells {
		if !c.rigid {
			return false
		}
	}
	return true
}

// link joins neighboring rigid cells to runs and passes lifts along them.
func (t *timeline) link() bool {
	n := len(t.nodes)
	if t.allRigid() {
		if !t.samePace(t.cells[0].slope, 0) {
			return false // the lift would not close
		}
		return t.passOn(0, n)
	}
	for i := range t.cells {
		before := t.cells[(i+n-1)%n]
		if !t.cells[i].rigid || before.rigid {
			continue
		}
		length := 1
		for t.cells[(i+length)%n].rigid {
			length++
		}
		if !t.passOn(i, length+1) {
			return false
		}
	}
	return true
}

// passOn gives the nodes of a run, count of them from the first, one common lift
// less their rise along it: the known one, or, when the windows leave only one, that.
func (t *timeline) passOn(first, count int) bool {
	run, rise, n := t.runs, 0.0, len(t.nodes)
	t.runs++
	var lift known
	lo, hi := math.Inf(-1), math.Inf(1)
	for k := range count {
		node := &t.nodes[(first+k)%n]
		node.run, node.rise = run, rise
		if node.f.is && !lift.set(node.f.x-rise, same*t.size) {
			return false
		}
		lo, hi = math.Max(lo, node.lo-rise), math.Min(hi, node.hi-rise)
		c := t.cells[(first+k)%n]
		rise += c.slope * (c.to - c.from)
	}
	if lo > hi && !t.equal(lo, hi) {
		return false
	}
	if t.equal(lo, hi) && !lift.set(lo, same*t.size) {
		return false
	}
	for k := range count {
		if node := &t.nodes[(first+k)%n]; lift.is && !node.f.is {
			node.f = known{lift.x + node.rise, true}
		}
	}
	return true
}

// touching looks at every known lift: it must lie within the limits, and on the
// edge of a window the velocity must not leave it, nor the acceleration where the
// velocity is 0. What follows for an unknown value is made known.
func (t *timeline) touching() bool {
	for i := range t.nodes {
		n := &t.nodes[i]
		if !n.f.is {
			continue
		}
		if n.f.x < n.lo && !t.equal(n.f.x, n.lo) || n.f.x > n.hi && !t.equal(n.f.x, n.hi) {
			return false
		}
		left, right := t.cells[(i+len(t.cells)-1)%len(t.cells)], t.cells[i]
		lowLeft, lowRight := t.equal(n.f.x, left.lo), t.equal(n.f.x, right.lo)
		highLeft, highRight := t.equal(n.f.x, left.hi), t.equal(n.f.x, right.hi)
		if !n.v.sign(lowRight || highLeft, lowLeft || highRight, same*t.pace) {
			return false
		}
		if n.v.is && math.Abs(n.v.x) <= same*t.pace && !n.a.sign(lowLeft || lowRight, highLeft || highRight, 0) {
			return false
		}
	}
	return true
}

// sign holds a value to 0 or above, to 0 or below, or to 0 when both; false when
// it is known to be otherwise.
func (k *known) sign(up, down bool, slack float64) bool {
	if k.is {
		return !(up && k.x < -slack || down && k.x > slack)
	}
	if up && down {
		*k = known{0, true}
	}
	return true
}

// rotate makes the last cell a rigid one where there is any, so that nothing free
// goes around the end of the list.
func (t *timeline) rotate() {
	n := len(t.cells)
	for i, c := range t.cells {
		if !c.rigid || t.cells[(i+1)%n].rigid {
			continue
		}
		k := (i + 1) % n
		for j := range k {
			t.nodes[j].at += turn
			t.cells[j].from += turn
			t.cells[j].to += turn
		}
		t.nodes = append(append([]node(nil), t.nodes[k:]...), t.nodes[:k]...)
		t.cells = append(append([]cell(nil), t.cells[k:]...), t.cells[:k]...)
		return
	}
}
