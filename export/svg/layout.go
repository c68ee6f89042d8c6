package svg

import "math"

// The layout keeps text apart from text, always, off the edges of the part, always, and off
// thin strokes as far as there is room. A label is tried at many places around the point it speaks of; places
// outside the field, on another text or on an edge are out, the rest are compared by how many
// strokes they cover and how long their leader is. What finds no place is
// returned to the caller, who lists it in a column instead.

// box is a rectangle on the sheet in mm.
type box struct{ x0, y0, x1, y1 float64 }

func (b box) grown(d float64) box { return box{b.x0 - d, b.y0 - d, b.x1 + d, b.y1 + d} }
func (b box) width() float64      { return b.x1 - b.x0 }
func (b box) height() float64     { return b.y1 - b.y0 }
func (b box) center() pt          { return pt{(b.x0 + b.x1) / 2, (b.y0 + b.y1) / 2} }

func (b box) meets(o box) bool {
	return b.x0 < o.x1 && o.x0 < b.x1 && b.y0 < o.y1 && o.y0 < b.y1
}

func (b box) holds(o box) bool {
	return o.x0 >= b.x0 && o.x1 <= b.x1 && o.y0 >= b.y0 && o.y1 <= b.y1
}

// cuts reports whether the segment p, q passes through the box (Liang and Barsky's
// clipping, CACM 1984).
func (b box) cuts(p, q pt) bool {
	lo, hi := 0.0, 1.0
	clip := func(d, n float64) bool { // d*t <= n
		switch {
		case d == 0:
			return n >= 0
		case d > 0:
			hi = math.Min(hi, n/d)
		default:
			lo = math.Max(lo, n/d)
		}
		return lo <= hi
	}
	dx, dy := q.x-p.x, q.y-p.y
	return clip(-dx, p.x-b.x0) && clip(dx, b.x1-p.x) && clip(-dy, p.y-b.y0) && clip(dy, b.y1-p.y)
}

// Costs of a place, in halves of a millimeter of leader: text on a square
// millimeter that holds strokes, a leader through one, a leader across another, a
// direction half a turn away from the wanted one.
const (
	strokeCost = 8.0
	passCost   = 0.7
	crossCost  = 25.0
	turnCost   = 14.0
)

// textGap is the least distance between two texts in mm.
const textGap = 0.8

// layout holds what is already on a field.
type layout struct {
	field   box
	texts   []box
	leaders [][2]pt
	ink     map[[2]int]bool // square millimeters that hold strokes
	edges   map[[2]int]bool // those that hold edges of the part: no text stands there
}

func newLayout(field box) *layout {
	return &layout{field: field, ink: map[[2]int]bool{}, edges: map[[2]int]bool{}}
}

// edge remembers the segment p, q as an edge of the part.
func (l *layout) edge(p, q pt) {
	l.stroke(p, q)
	traced(l.edges, p, q)
}

// stroke remembers the segment p, q as something labels should not cover.
func (l *layout) stroke(p, q pt) { traced(l.ink, p, q) }

// traced adds the square millimeters that p, q runs through.
func traced(m map[[2]int]bool, p, q pt) {
	n := math.Hypot(q.x-p.x, q.y-p.y)
	if math.IsNaN(n) || n > paperLimit {
		return // the canvas refuses it
	}
	const perMM = 2
	steps := int(perMM*n) + 1
	for i := 0; i <= steps; i++ {
		u := float64(i) / float64(steps)
		m[[2]int{int(math.Floor(p.x + u*(q.x-p.x))), int(math.Floor(p.y + u*(q.y-p.y)))}] = true
	}
}

// ring hands a circle to stroke or edge, in small chords.
func ring(m pt, r float64, to func(p, q pt)) {
	const steps = 180
	for i := 0; i < steps; i++ {
		a, b := 2*math.Pi*float64(i)/steps, 2*math.Pi*float64(i+1)/steps
		to(pt{m.x + r*math.Cos(a), m.y + r*math.Sin(a)}, pt{m.x + r*math.Cos(b), m.y + r*math.Sin(b)})
	}
}

// block keeps labels off a box.
func (l *layout) block(b box) { l.texts = append(l.texts, b) }

// free reports whether text may stand in b.
func (l *layout) free(b box) bool {
	if !l.field.holds(b) {
		return false
	}
	g := b.grown(textGap)
	for _, t := range l.texts {
		if t.meets(g) {
			return false
		}
	}
	for _, d := range l.leaders {
		if g.cuts(d[0], d[1]) {
			return false
		}
	}
	return counted(l.edges, b) == 0
}

// covered counts the square millimeters of b that hold strokes.
func (l *layout) covered(b box) float64 { return float64(counted(l.ink, b)) }

func counted(m map[[2]int]bool, b box) int {
	n := 0
	for x := int(math.Floor(b.x0)); x <= int(math.Floor(b.x1)); x++ {
		for y := int(math.Floor(b.y0)); y <= int(math.Floor(b.y1)); y++ {
			if m[[2]int{x, y}] {
				n++
			}
		}
	}
	return n
}

// passed counts the steps of a millimeter from p to q that meet strokes.
func (l *layout) passed(p, q pt) float64 {
	n, d := 0, math.Hypot(q.x-p.x, q.y-p.y)
	for s := 0.0; s < d; s++ {
		x, y := p.x+(q.x-p.x)*s/d, p.y+(q.y-p.y)*s/d
		if l.ink[[2]int{int(math.Floor(x)), int(math.Floor(y))}] {
			n++
		}
	}
	return float64(n)
}

// wish is a label looking for a place.
type wish struct {
	at         pt      // what it speaks of
	away       float64 // wanted direction from there, radians on the sheet (y down)
	w, h       float64 // size in mm
	near, far  float64 // least and largest leader in mm
	direct     bool    // no leader: the label stands beside its point
	rowsAtEdge float64 // distance of the leader's end below the top of the label
}

// spot is where a label goes: its box, and the end of its leader on the box.
type spot struct {
	box box
	end pt
}

// place finds the cheapest place and takes it.
func (l *layout) place(w wish) (spot, bool) {
	if !(w.near > 0 && w.far <= paperLimit) { // off any sheet, or not a number
		return spot{}, false
	}
	best, cheapest, found := spot{}, math.Inf(1), false
	const directions = 36
	for r := w.near; r <= w.far; r += 1 + r/12 {
		if r*0.5 > cheapest {
			break
		}
		for k := 0; k < directions; k++ {
			turn := math.Pi * float64((k+1)/2) / (directions / 2)
			a := w.away + turn*float64(1-2*(k%2))
			s := w.spot(r, a)
			if !l.free(s.box) || !w.direct && l.blocked(s.end, w.at) {
				continue
			}
			if c := l.cost(w, s, r, turn); c < cheapest {
				best, cheapest, found = s, c, true
			}
		}
	}
	if found {
		l.texts = append(l.texts, best.box)
		if !w.direct {
			l.leaders = append(l.leaders, [2]pt{best.end, w.at})
		}
	}
	return best, found
}

// spot puts the label at distance r in direction a.
func (w wish) spot(r, a float64) spot {
	end := pt{w.at.x + r*math.Cos(a), w.at.y + r*math.Sin(a)}
	b := box{end.x, end.y - w.rowsAtEdge, end.x + w.w, end.y - w.rowsAtEdge + w.h}
	switch {
	case w.direct && math.Abs(math.Cos(a)) < 0.5:
		b = box{end.x - w.w/2, end.y - w.h/2, end.x + w.w/2, end.y + w.h/2}
	case math.Cos(a) < 0:
		b = box{end.x - w.w, b.y0, end.x, b.y1}
	}
	return spot{b, end}
}

// blocked reports whether a leader would run through text.
func (l *layout) blocked(p, q pt) bool {
	for _, t := range l.texts {
		if t.cuts(p, q) {
			return true
		}
	}
	return false
}

// cost compares places; see the constants.
func (l *layout) cost(w wish, s spot, r, turn float64) float64 {
	c := 0.5*r + strokeCost*l.covered(s.box) + turnCost*turn/math.Pi
	if !w.direct {
		c += passCost * l.passed(s.end, w.at)
		for _, d := range l.leaders {
			if crossing(d[0], d[1], s.end, w.at) {
				c += crossCost
			}
		}
	}
	return c
}

// crossing reports whether the segments ab and cd cross.
func crossing(a, b, c, d pt) bool {
	side := func(p, q, r pt) float64 { return (q.x-p.x)*(r.y-p.y) - (q.y-p.y)*(r.x-p.x) }
	return side(a, b, c)*side(a, b, d) < 0 && side(c, d, a)*side(c, d, b) < 0
}
