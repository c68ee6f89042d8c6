package gcode

import (
	"math"

	"lobewright/tolerance/chain"
)

// emitter collects blocks.
type emitter struct {
	p    *Program
	grid chain.Grid
}

func newEmitter(part Part, op Operation, m Machine) *emitter {
	g := m.grid()
	return &emitter{grid: g, p: &Program{Number: op.programNumber(), Inch: part.Inch, Grid: g, AbsoluteArcs: m.AbsoluteArcs, BlockNumbers: m.BlockNumbers}}
}

func (e *emitter) add(b Block) { e.p.Blocks = append(e.p.Blocks, b) }

func (e *emitter) note(text string) { e.add(Block{Comment: text}) }

// length returns a length as a count of the grid, rounded to the nearest.
func (e *emitter) length(x float64) Count { return count(counts(e.grid, x)) }

// counts rounds a length or a feed to the grid.
func counts(g chain.Grid, x float64) int64 { return int64(math.Round(x / g.Step())) }

// feed returns an F word, or none for 0.
func (e *emitter) feed(f float64) Count {
	if f == 0 {
		return Count{}
	}
	return e.length(f)
}

// line adds a straight or rapid move to a grid point.
func (e *emitter) line(motion Motion, p chain.Point, words Block) {
	words.Motion, words.X, words.Y = motion, count(p.X), count(p.Y)
	e.add(words)
}

// z adds a move of Z.
func (e *emitter) z(motion Motion, z float64, words Block) {
	words.Motion, words.Z = motion, e.length(z)
	e.add(words)
}

// chain adds the segments as feed moves: first and last are the straight moves on
// which compensation is switched on by the words in on, and off.
func (e *emitter) chain(c chain.Chain, on Block, compensated bool) {
	for i, s := range c.Segments {
		var b Block
		if i == 0 {
			b = on
		}
		if compensated && i == len(c.Segments)-1 {
			b.G = append(b.G, CompOff)
		}
		b.X, b.Y = count(s.To.X), count(s.To.Y)
		b.Motion = Straight
		if s.Kind == chain.Arc {
			b.Motion = Clockwise
			if s.CCW {
				b.Motion = Counterclockwise
			}
			b.I, b.J = e.center(s)
		}
		e.add(b)
	}
}

// center returns I and J.
func (e *emitter) center(s chain.Segment) (i, j Count) {
	if e.p.AbsoluteArcs {
		return count(s.Center.X), count(s.Center.Y)
	}
	return count(s.Center.X - s.From.X), count(s.Center.Y - s.From.Y)
}

// arcMode returns the word that says what I and J are.
func (e *emitter) arcMode() Code {
	if e.p.AbsoluteArcs {
		return CenterAbsolute
	}
	return CenterFromStart
}

func (e *emitter) units() Code {
	if e.p.Inch {
		return UnitInch
	}
	return UnitMM
}

// sideCode returns the compensation word for a tool on the left (+1) or right (-1).
func sideCode(s float64) Code {
	if s > 0 {
		return CompLeft
	}
	return CompRight
}

// snap puts a path with its leads on the grid.
func snap(p chain.Path, g chain.Grid) (chain.Chain, error) {
	return chain.Snap(p, g, chain.SnapOptions{})
}
