package svg

import (
	"fmt"
	"math"
)

// MarkKind is what a mark on a chart stands for.
type MarkKind uint8

const (
	MarkFact   MarkKind = iota // a value known at a cam angle: a diamond
	MarkHeld                   // a value known over a span: a broad line under the curve
	MarkAbove                  // the curve stays above: a line hatched on the forbidden side
	MarkBelow                  // the curve stays below
	MarkSample                 // a point of a table: a dot
)

// Mark is something known that shaped the curve. From and To are cam angles in
// degrees, 0 <= From < 360, To from From to From+360; of facts and samples To is From.
type Mark struct {
	Kind     MarkKind
	From, To float64
	Value    float64 // in the curve's unit
}

// checkMarks refuses marks that cannot be drawn.
func checkMarks(name string, marks []Mark) error {
	for _, m := range marks {
		if !finite(m.From, m.To, m.Value) || m.From < 0 || m.From >= 360 || m.To < m.From || m.To > m.From+360 {
			return fmt.Errorf("svg: %s: a mark of value %v from %v to %v cannot be drawn", name, m.Value, m.From, m.To)
		}
	}
	return nil
}

// legend says in words what the marks mean.
func legend(marks []Mark) string {
	var has [MarkSample + 1]bool
	for _, m := range marks {
		has[m.Kind] = true
	}
	text := ""
	for k, words := range []string{MarkFact: "diamonds: known", MarkHeld: "broad: known", MarkAbove: "hatched: windows", MarkSample: "dots: table"} {
		if words != "" && (has[k] || k == int(MarkAbove) && has[MarkBelow]) {
			text = joinNotes(text, words)
		}
	}
	return text
}

// under draws what lies under the curve.
func (a axes) under(marks []Mark) {
	for _, m := range marks {
		switch m.Kind {
		case MarkHeld:
			a.stretches(m, func(p, q pt) { a.c.line(p, q, pen{width: 1.5, color: pale}) })
		case MarkAbove, MarkBelow:
			a.stretches(m, func(p, q pt) { a.hatched(p, q, m.Kind == MarkAbove) })
		}
	}
}

// over draws what lies over it; of a long table as many dots as can be told apart.
func (a axes) over(marks []Mark, l *layout) {
	const apart = 0.5 // mm
	last := math.Inf(-1)
	for _, m := range marks {
		q := pt{a.x(m.From), a.y(m.Value)}
		if !a.inside(m.Value) {
			continue
		}
		switch m.Kind {
		case MarkFact:
			const r = 1.0
			a.c.polygon(ink, pt{q.x, q.y - r}, pt{q.x + r, q.y}, pt{q.x, q.y + r}, pt{q.x - r, q.y})
			l.block(box{q.x - r, q.y - r, q.x + r, q.y + r})
		case MarkSample:
			if q.x-last >= apart {
				a.c.circle(q, 0.22, pen{width: 0.12, fill: "#ffffff"})
				last = q.x
			}
		}
	}
}

// stretches calls draw for the parts of a span between 0 and 360, in range.
func (a axes) stretches(m Mark, draw func(p, q pt)) {
	y := a.y(math.Min(math.Max(m.Value, a.lo), a.hi))
	for _, shift := range []float64{0, -360} {
		from, to := math.Max(0, m.From+shift), math.Min(360, m.To+shift)
		if to > from {
			draw(pt{a.x(from), y}, pt{a.x(to), y})
		}
	}
}

// hatched is a line with strokes on its forbidden side.
func (a axes) hatched(p, q pt, below bool) {
	const step, length = 1.6, 1.4
	a.c.line(p, q, pen{width: 0.3, color: gray})
	for x := p.x + step/2; x < q.x; x += step {
		end := pt{x - length*0.7, p.y + length}
		if !below {
			end = pt{x - length*0.7, p.y - length}
		}
		if end.y > a.b.y0 && end.y < a.b.y1 && end.x > a.b.x0 {
			a.c.line(pt{x, p.y}, end, pen{width: 0.15, color: gray})
		}
	}
}
