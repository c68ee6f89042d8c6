package certify

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
)

// proof collects what is proven of each element.
type proof struct {
	*survey
	figures []figure
	leaves  []leaf
	spent   []float64 // per element: largest distance from the feet, band included
	slip    []float64 // per element: largest miss of the feet at its ends
	left    place
	right   place
	most    float64 // lower bound of the largest element of spent
	evals   int     // patches evaluated
}

// leaf is a part of the curve with the range of the path's offset to the left of it.
type leaf struct {
	part
	figure int
	off    extent
}

// place is a deviation certainly reached, where, and on which element.
type place struct {
	size   float64
	at     float64 // degrees
	figure int
}

const (
	// tight: bounds within this factor of a value certainly reached are good enough.
	tight = 1.005
	// floorShare of the curve's size: deviations below it are not told apart.
	floorShare = 1e-10
	// arcParts is how many parts of an arc are tried first; fewer never pass, see
	// the ratio of arc error and third derivative in the theory of arc splines.
	arcParts = 4
	// mostDepth ends the proof of direction; each depth halves.
	mostDepth = 24
	// mostPatches a proof of n elements may evaluate: patchBase + n*patchEach.
	// After that the bounds found so far stand, which are never too low.
	patchBase, patchEach = 20000, 200
	// leastPart is the shortest part that is split on, relative to the turn.
	leastPart = 1e-12
	// mostMiss is how far, in radians, the foot of a joint's curve point may be from the joint.
	mostMiss = 0.5
)

// cover proves that the foot of the curve moves forward over element i from mark a to
// mark b, once and as far as the element reaches; it leaves the parts as leaves.
func (p *proof) cover(i int, a, b mark) error {
	f := &p.figures[i]
	if !a.before(b) {
		return fmt.Errorf("it does not lead on along the curve: it starts at cam angle %.6g and ends at %.6g; "+
			"the path must run the way the cam angle grows, and once around", p.angle(a), p.angle(b))
	}
	parts := p.parts(a, b)
	start, end := parts[0], parts[len(parts)-1]
	from, to := p.spot(start.piece, start.lo), p.spot(end.piece, end.hi)
	t := turned{f: f, last: from.point()}
	n := 1
	if f.arc {
		n = arcParts
	}
	for k, q := range parts {
		if k > 0 { // the step between two pieces is a move of its own
			t.to(p.spot(parts[k-1].piece, parts[k-1].hi).point())
			t.to(p.spot(q.piece, q.lo).point())
		}
		for _, c := range q.cut(n) {
			if err := p.advance(i, c, &t, 0); err != nil {
				return err
			}
		}
	}
	t.to(to.point())
	p.slip[i] = math.Max(f.miss(from, false), f.miss(to, true))
	if !f.arc {
		return nil
	}
	if !(p.slip[i] <= mostMiss) {
		return fmt.Errorf("the curve at cam angles %.6g and %.6g is not beside the arc's ends", p.angle(a), p.angle(b))
	}
	// The swept angle is the sweep, plus the misses (at most 1 in sum), plus whole turns: none.
	if !(math.Abs(t.sum-f.sweep) < math.Pi) {
		return fmt.Errorf("it sweeps %.4f degrees, the curve beside it %.4f", f.sweep*180/math.Pi, t.sum*180/math.Pi)
	}
	return nil
}

// turned sums the angle swept about an arc's center from one midpoint to the next; between two
// it is certainly less than a half turn.
type turned struct {
	f    *figure
	last plane.Point
	sum  float64
}

func (t *turned) to(p plane.Point) {
	if t.f.arc {
		a, b := t.last.Sub(t.f.e.Center), p.Sub(t.f.e.Center)
		t.sum += t.f.sign * math.Atan2(a.Cross(b), a.Dot(b))
	}
	t.last = p
}

// advance proves the direction over a part, splitting it as often as needed, in order.
func (p *proof) advance(i int, q part, t *turned, depth int) error {
	c := p.patch(q)
	p.evals++
	yes, no := p.figures[i].forward(&c, p.step)
	if no {
		return fmt.Errorf("it runs against the curve at cam angle %.6g; if all of the path does, reverse it", c.m)
	}
	if yes {
		t.to(c.p[0].point())
		p.leaves = append(p.leaves, p.measure(i, &c))
		return nil
	}
	if depth == mostDepth || p.evals > p.budget() {
		return fmt.Errorf("it cannot be proven to run along the curve at cam angle %.6g", c.m)
	}
	for _, h := range q.cut(2) {
		if err := p.advance(i, h, t, depth+1); err != nil {
			return err
		}
	}
	return nil
}

func (p *proof) budget() int { return patchBase + patchEach*len(p.figures) }

// measure bounds the offset over a patch and notes what is certainly reached.
func (p *proof) measure(i int, c *patch) leaf {
	f := &p.figures[i]
	off := f.side(c)
	if v := off.inHi - f.half - f.e.Slack; v > p.left.size {
		p.left = place{v, c.m + off.atHi, i}
	}
	if v := -off.inLo - f.half - f.e.Slack; v > p.right.size {
		p.right = place{v, c.m + off.atLo, i}
	}
	if v := math.Max(off.inHi, -off.inLo) + f.half; v > p.most {
		p.most = v
	}
	return leaf{c.part, i, off}
}

// limit is the bound of the offset that is good enough for an element.
func (p *proof) limit(f *figure) float64 {
	return math.Max(tight*p.most-f.half, floorShare*p.size)
}

// refine splits the leaves until each bound is good enough.
func (p *proof) refine() {
	for queue := p.leaves; len(queue) > 0; {
		var next []leaf
		for _, l := range queue {
			f := &p.figures[l.figure]
			limit := p.limit(f)
			if b := l.off.mag(); b <= limit || p.evals > p.budget() || l.hi-l.lo < leastPart*(p.t1-p.t0) {
				p.spent[l.figure] = math.Max(p.spent[l.figure], b+f.half)
				continue
			}
			for _, q := range l.part.cut(l.pieces(limit)) {
				c := p.patch(q)
				p.evals++
				next = append(next, p.measure(l.figure, &c))
			}
		}
		queue = next
	}
}

// pieces guesses into how many a leaf must be cut: the uncertainty falls with the third power.
func (l leaf) pieces(limit float64) int {
	slop := l.off.slop() / 2
	room := math.Max(limit-(l.off.mag()-slop), (tight-1)/2*limit)
	n := math.Ceil(math.Cbrt(slop / room))
	if !(n >= 2) {
		return 2
	}
	return int(math.Min(n, 8))
}

// result is the largest bound of all elements, and the largest deviations reached.
func (p *proof) result() (Deviation, error) {
	d := Deviation{Left: p.left.size, Right: p.right.size, At: p.left.at, Segment: p.left.figure}
	if p.right.size > p.left.size {
		d.At, d.Segment = p.right.at, p.right.figure
	}
	worst := 0
	for i := range p.figures {
		b := p.figures[i].total(p.spent[i], p.slip[i])
		if !finite(b) {
			return d, fmt.Errorf("element %d (%s): its distance from the curve cannot be bounded", i, p.figures[i].name())
		}
		if b > d.Bound {
			d.Bound, worst = b, i
		}
	}
	d.Bound = (d.Bound + 3*p.step) * outward
	if d.Bound > elsewhere*math.Max(d.Left, d.Right) {
		p.locate(&d, worst)
	}
	return d, nil
}

// elsewhere is by how much the bound may exceed what is certainly reached before the place
// named is that of the bound: an arc whose radii differ may be resolved in ways that no
// single point shows.
const elsewhere = 1.2

// locate names the element and a cam angle on it.
func (p *proof) locate(d *Deviation, element int) {
	for _, l := range p.leaves {
		if l.figure == element {
			d.At, d.Segment = l.lo+(l.hi-l.lo)/2, element
			return
		}
	}
}
