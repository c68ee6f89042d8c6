package gcode

import (
	"math"

	"lobewright/tolerance/chain"
)

// emitter collects blocks.
type emitter struct {
	p    *Program
	grid chain.Grid
	m    Machine
}

func newEmitter(part Part, op Operation, m Machine) *emitter {
	g := m.grid()
	return &emitter{grid: g, m: m, p: &Program{Number: op.programNumber(), Inch: part.Inch, Grid: g, AbsoluteArcs: m.AbsoluteArcs, BlockNumbers: m.BlockNumbers, Semicolons: m.Semicolons, LineLength: m.Limits.Line}}
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
			if e.m.RadiusArcs {
				b.Round = count(rounded(s))
			} else {
				b.I, b.J = e.center(s)
			}
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

// rounded is the radius of an arc in counts, at least half its chord.
func rounded(s chain.Segment) int64 {
	far := func(p chain.Point) float64 { return math.Hypot(float64(p.X-s.Center.X), float64(p.Y-s.Center.Y)) }
	half := math.Hypot(float64(s.To.X-s.From.X), float64(s.To.Y-s.From.Y)) / 2
	return max(int64(math.Round((far(s.From)+far(s.To))/2)), int64(math.Ceil(half)))
}

// own adds lines of the user's own.
func (e *emitter) own(lines ...string) {
	for _, l := range lines {
		if l != "" {
			e.add(Block{Own: l})
		}
	}
}

// begin adds what every milling program says before its first move: a known state, the tool, the spindle.
func (e *emitter) begin(op Operation) {
	e.add(Block{G: e.safety()})
	e.modes()
	e.add(Block{T: number(op.Tool), M: []int{6}})
	e.add(Block{S: number(op.speed()), M: op.on()})
}

// end adds what every milling program says after its last move.
func (e *emitter) end(op Operation) {
	e.add(Block{M: op.off()})
	e.own(e.m.End...)
	e.add(Block{G: e.safety()})
	e.add(Block{M: []int{30}})
}

// modes adds what follows the first safety block: how arcs are written, the path mode, the user's own start.
func (e *emitter) modes() {
	if !e.m.RadiusArcs && e.p.Rotary == 0 { // a rotary program has no arcs
		e.add(Block{G: []Code{e.arcMode()}})
	}
	e.pathMode()
	e.own(e.m.Start...)
}

// pathMode adds what the control is to do at corners.
func (e *emitter) pathMode() {
	switch e.m.Path {
	case Exact:
		e.add(Block{G: []Code{ExactPath}})
	case Blended:
		b := Block{G: []Code{Blend}}
		if e.m.PathBlend > 0 {
			b.P = e.length(e.m.PathBlend)
		}
		e.add(b)
	}
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
func snap(p chain.Path, m Machine) (chain.Chain, error) {
	g, l := m.grid(), m.Limits
	return chain.Snap(p, g, chain.SnapOptions{MaxRadius: l.Radius, MinChord: l.Chord / g.Step(), MaxSweep: l.Sweep * math.Pi / 180})
}
