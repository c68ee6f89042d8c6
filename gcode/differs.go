package gcode

import (
	"fmt"
	"math"

	"lobewright/gcode/read"
	"lobewright/synth/plane"
)

// Differs returns an error that names the first difference between what a program
// says and what was read back from its bytes: a move, a modal word, an M word. nil
// says that a control will make exactly the planned moves, those of leads and
// links in the air included, which Verify only holds to one side.
func Differs(p Program, back *read.Program) error {
	s := &said{p: p, state: read.State{D: -1, H: -1, Tool: -1, Speed: -1}, pending: -1}
	for _, b := range p.Blocks {
		s.block(b)
	}
	if back.Rotary != p.Rotary {
		return fmt.Errorf("read back: the rotary axis is %q, written %q", back.Rotary, p.Rotary)
	}
	if back.Inch != p.Inch || back.Number != p.Number {
		return fmt.Errorf("read back: program O%d in %s, written O%d in %s", back.Number, unitWord(back.Inch), p.Number, unitWord(p.Inch))
	}
	for i := range max(len(s.moves), len(back.Moves)) {
		if i >= len(s.moves) || i >= len(back.Moves) {
			return fmt.Errorf("read back: %d moves, written %d", len(back.Moves), len(s.moves))
		}
		got := back.Moves[i]
		got.LineNo, got.N = 0, 0
		if got != s.moves[i] {
			return fmt.Errorf("read back: line %d makes the move %+v, written %+v", back.Moves[i].LineNo, got, s.moves[i])
		}
	}
	if s.path != back.PathMode || s.blend != back.PathBlend {
		return fmt.Errorf("read back: path mode G%d with P%g, written G%d with P%g", back.PathMode, back.PathBlend, s.path, s.blend)
	}
	for i := range max(len(s.own), len(back.Own)) {
		if i >= len(s.own) || i >= len(back.Own) || s.own[i].Text != back.Own[i].Text || s.own[i].Before != back.Own[i].Before {
			return fmt.Errorf("read back: lines of the user's own %v, written %v", back.Own, s.own)
		}
	}
	for i := range max(len(s.misc), len(back.Misc)) {
		if i >= len(s.misc) || i >= len(back.Misc) {
			return fmt.Errorf("read back: %d M words, written %d", len(back.Misc), len(s.misc))
		}
		got := back.Misc[i]
		got.LineNo = 0
		if got != s.misc[i] {
			return fmt.Errorf("read back: line %d has M%d before move %d, written M%d before move %d",
				back.Misc[i].LineNo, got.Code, got.Before, s.misc[i].Code, s.misc[i].Before)
		}
	}
	return nil
}

// said is what the blocks of a Program say, as moves.
type said struct {
	p       Program
	state   read.State
	pending int
	x, y, z int64
	r       int64
	knownR  bool
	knownX  bool
	knownY  bool
	knownZ  bool
	moves   []read.Move
	misc    []read.Misc
	own     []read.Own
	path    int
	blend   float64
}

// centerOf is the center of an arc of at most half a turn with a radius.
func centerOf(from, to plane.Point, radius float64, ccw bool) plane.Point {
	way := to.Sub(from)
	half := way.Norm() / 2
	side := math.Sqrt(math.Max(0, radius*radius-half*half))
	if !ccw {
		side = -side
	}
	return from.Add(way.Scale(0.5)).Add(way.Unit().Left().Scale(side))
}

// codes applies the G words that last.
func (s *said) codes(b Block) {
	for _, c := range b.G {
		switch c {
		case CompOff:
			s.state.Comp, s.state.D = read.Off, -1
		case CompLeft, CompRight:
			s.state.Comp, s.state.D = read.Comp((c-CompOff)/10), b.D.V
		case LengthOn:
			s.state.H = b.H.V
		case LengthOff:
			s.state.H = -1
		case WorkFirst:
			s.state.Work = 54
		case FeedInverse, FeedPerMinute:
			if s.state.Inverse != (c == FeedInverse) {
				s.state.Inverse, s.state.Feed = c == FeedInverse, 0
			}
		case ExactPath:
			s.path, s.blend = 61, 0
		case Blend:
			s.path, s.blend = 64, s.value(b.P.V)
		}
	}
}

func (s *said) block(b Block) {
	s.codes(b)
	if b.F.On {
		s.state.Feed = s.value(b.F.V)
	}
	if b.S.On {
		s.state.Speed = b.S.V
	}
	if b.T.On {
		s.pending = b.T.V
	}
	for _, m := range b.M {
		switch m {
		case 3:
			s.state.Spindle = 1
		case 6:
			s.state.Tool = s.pending
		case 7, 8:
			s.state.Fluid = true
		case 9:
			s.state.Fluid = false
		}
	}
	s.move(b)
	for _, m := range b.M {
		if m == 5 {
			s.state.Spindle = 0
		}
		s.misc = append(s.misc, read.Misc{Code: m, Before: len(s.moves)})
	}
	if b.Own != "" {
		s.own = append(s.own, read.Own{Text: b.Own, Before: len(s.moves)})
	}
}

func (s *said) value(v int64) float64 { return float64(v) / float64(counts(s.p.Grid, 1)) }

func (s *said) degrees(v int64) float64 { return float64(v) / float64(counts(s.p.RotaryGrid, 1)) }

func (s *said) point(x, y int64) plane.Point { return plane.Point{X: s.value(x), Y: s.value(y)} }

func (s *said) move(b Block) {
	if !b.X.On && !b.Y.On && !b.Z.On && !b.R.On {
		return
	}
	m := read.Move{State: s.state, HasXY: b.X.On || b.Y.On, HasZ: b.Z.On, KnownXY: s.knownX && s.knownY, KnownZ: s.knownZ,
		From: s.point(s.x, s.y), FromZ: s.value(s.z), HasR: b.R.On, KnownR: s.knownR, FromR: s.degrees(s.r)}
	if m.Tool < 0 {
		m.Tool = s.pending
	}
	if b.Motion == Clockwise || b.Motion == Counterclockwise {
		m.Kind, m.CCW = read.Arc, b.Motion == Counterclockwise
		m.Center = s.point(b.I.V, b.J.V)
		if b.Round.On {
			m.Center = centerOf(s.point(s.x, s.y), s.point(b.X.V, b.Y.V), s.value(b.Round.V), m.CCW)
		} else if !s.p.AbsoluteArcs {
			m.Center = s.point(s.x+b.I.V, s.y+b.J.V)
		}
	} else if b.Motion == Straight {
		m.Kind = read.Line
	}
	for _, a := range []struct {
		word Count
		at   *int64
	}{{b.X, &s.x}, {b.Y, &s.y}, {b.Z, &s.z}, {b.R, &s.r}} {
		if a.word.On {
			*a.at = a.word.V
		}
	}
	s.knownX, s.knownY, s.knownZ = s.knownX || b.X.On, s.knownY || b.Y.On, s.knownZ || m.HasZ
	m.To, m.ToZ, m.ToR = s.point(s.x, s.y), s.value(s.z), s.degrees(s.r)
	s.knownR = s.knownR || b.R.On
	s.moves = append(s.moves, m)
}
