package fit

import (
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// border is what a stretch meets at one of its ends: the circle (or straight line) of a dwell, onto which the
// last joint may slide, or a corner of the curve, where the joint stays.
type border struct {
	dwell  bool
	frame  plane.Frame   // of the circle at the border
	circle *plane.Circle // nil: a straight line
	room   float64       // length of the circle that the stretch may take
	rate   float64       // degrees of parameter to a length on the circle
}

// stretch is a part of the curve that is fitted in one go: from dwell to dwell or corner, or
// the whole curve when it has neither.
type stretch struct {
	curve       Curve
	parts       []part
	left, right border
	closed      bool
}

// item is a dwell or a stretch of the curve, in the order of the parameter.
type item struct {
	circle bool                       // one element, exactly: an arc or a straight line
	joined struct{ left, right bool } // to the item before and behind it; an open curve is not at its ends
	stretch
}

// exact reports whether the piece is one element exactly.
func (p part) exact() bool { return p.Circle != nil || p.Straight }

// roomShare is the share of a dwell that the stretch on either side may take.
const roomShare = 0.4

// route cuts the curve into dwells and stretches, from the first cut on. Without any
// cut it is one closed stretch.
func route(c Curve, pieces []plane.Piece) []item {
	parts := partsOf(pieces)
	n := len(parts)
	cut := func(i int) bool { // at the start of part i
		before := parts[(i+n-1)%n]
		return i == 0 && isOpen(c) || parts[i].exact() || before.exact() ||
			breaks(before.frame(c, before.To), parts[i].frame(c, parts[i].From))
	}
	start := 0
	for start < n && !cut(start) {
		start++
	}
	if start == n {
		return []item{{stretch: stretch{curve: c, parts: parts, closed: true}}}
	}
	inOrder := append([]part(nil), parts[start:]...)
	for _, p := range parts[:start] {
		inOrder = append(inOrder, p.turned())
	}
	var items []item
	for i, p := range inOrder {
		if i == 0 || cut((start+i)%n) {
			items = append(items, item{circle: p.exact(), stretch: stretch{curve: c}})
		}
		last := &items[len(items)-1]
		last.parts = append(last.parts, p)
	}
	for i := range items {
		it := &items[i]
		it.joined.left, it.joined.right = i > 0 || !isOpen(c), i < len(items)-1 || !isOpen(c)
		if it.circle {
			continue
		}
		if it.joined.left {
			it.left = edge(it.stretch, items[(i+len(items)-1)%len(items)], true)
		}
		if it.joined.right {
			it.right = edge(it.stretch, items[(i+1)%len(items)], false)
		}
	}
	return items
}

// edge says what s meets at its left or right end, given the neighbor there.
func edge(s stretch, neighbor item, left bool) border {
	if !neighbor.circle {
		return border{}
	}
	p := neighbor.parts[0]
	there, own := p.frame(s.curve, p.From), s.end()
	if left {
		there, own = p.frame(s.curve, p.To), s.begin()
	}
	if breaks(there, own) {
		return border{}
	}
	length := circleElement(s.curve, p).Length()
	return border{dwell: true, frame: there, circle: p.Circle, room: roomShare * length, rate: (p.To - p.From) / length}
}

func (s stretch) begin() plane.Frame { return s.parts[0].frame(s.curve, s.parts[0].From) }

func (s stretch) end() plane.Frame {
	p := s.parts[len(s.parts)-1]
	return p.frame(s.curve, p.To)
}

// circleElement returns the arc of a part that is a circle, or the line of one that is straight.
func circleElement(c Curve, p part) chain.Element {
	from, to := p.frame(c, p.From), p.frame(c, p.To)
	if p.Straight {
		return chain.Element{Kind: chain.Line, From: from.P, To: to.P, Source: chain.Span{From: p.From, To: p.To}}
	}
	if p.To-p.From >= turnDegrees-parameterGap {
		to = from // a full circle must not become an empty arc by rounding
	}
	return chain.Element{Kind: chain.Arc, From: from.P, To: to.P, Center: p.Circle.Center, CCW: from.K > 0,
		Source: chain.Span{From: p.From, To: p.To}}
}

// on returns the point and direction of the circle a length beyond the border, negative for
// before it.
func (b border) on(x float64) node {
	if b.circle == nil {
		return node{p: b.frame.P.Add(b.frame.T.Scale(x)), d: b.frame.T}
	}
	turn := plane.Angle(x * b.frame.K)
	return node{p: b.circle.Center.Add(b.frame.P.Sub(b.circle.Center).Turn(turn)), d: b.frame.T.Turn(turn)}
}
