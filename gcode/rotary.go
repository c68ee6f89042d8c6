package gcode

import (
	"fmt"
	"math"

	"lobewright/gcode/read"
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Rotary words within a turn.
//
// A rotary axis either runs on past 360 degrees, or rolls over: its words are 0 to 360 and the control goes the short way to
// each. There a move of half a turn could go either way, so longer ones are split; the proof runs the words on again before
// anything else looks at them, and refuses what a control could take two ways.

const (
	longestPlanned = 170.0 // degrees of a move of an axis that rolls over
	longestRead    = 179.0 // degrees up to which the short way is plain
)

// rotaryWord is the word of a rotary position, both in counts.
func (p drumPlan) rotaryWord(r int64) Count {
	if p.m.RotaryModulo {
		round := 360 * counts(p.p.RotaryGrid, 1)
		r = (r%round + round) % round
	}
	return count(r)
}

// short splits the moves that an axis which rolls over would take the wrong way.
func (p drumPlan) short(path []station) []station {
	if !p.m.RotaryModulo {
		return path
	}
	out := path[:1:1]
	for _, b := range path[1:] {
		a := out[len(out)-1]
		n := int64(math.Ceil(math.Abs(float64(b.r-a.r)) * p.p.RotaryGrid.Step() / longestPlanned))
		for k := int64(1); k < n; k++ {
			u := float64(k) / float64(n)
			mid := func(x, y int64) int64 { return x + int64(math.Round(float64(y-x)*u)) }
			out = append(out, station{mid(a.r, b.r), mid(a.axial, b.axial), mid(a.across, b.across), a.turned + (b.turned-a.turned)*u})
		}
		out = append(out, b)
	}
	return out
}

// slid puts a path of which words tells the rotary (degrees) and the linear word on both grids: X and Y of the segments are counts of
// them. The joints slide along it a little, to where both are near it (chain.Snap in a plane of which the unit is a count of
// either): a vertex that is only rounded takes a count of the tolerance.
func (p drumPlan) slid(path chain.Path, words func(plane.Point) (degrees, length float64)) ([]chain.Segment, error) {
	rotary, linear := float64(counts(p.p.RotaryGrid, 1)), float64(counts(p.grid, 1))
	in := func(v plane.Point) plane.Point {
		r, l := words(v)
		return plane.Point{X: r * rotary, Y: l * linear}
	}
	counted := make(chain.Path, len(path))
	for i, e := range path {
		counted[i] = chain.Element{From: in(e.From), To: in(e.To), Source: e.Source}
	}
	c, err := chain.Snap(counted, chain.Grid{}, chain.SnapOptions{})
	return c.Segments, err
}

// turns says in a header which way the rotary axis goes; turn is the cam's own sense.
func (m Machine) turns(letter byte, turn string) []string {
	carries := "TURNS THE TOOL COUNTERCLOCKWISE ABOUT THE WORK"
	if m.RotaryTable {
		carries = "TURNS THE WORK COUNTERCLOCKWISE"
	}
	return []string{
		fmt.Sprintf("%c0 POLAR ANGLE 0 UNDER THE TOOL. GROWING %c %s,", letter, letter, carries),
		"SEEN ON THE MARKED FACE. CAM TURNS " + turn + " SEEN SO.",
		"A WRONG ROTARY SENSE IS A MIRRORED CAM",
		m.rotaryWords(letter),
	}
}

// rotaryWords says which of the two the words are.
func (m Machine) rotaryWords(letter byte) string {
	if m.RotaryModulo {
		return fmt.Sprintf("%c WORDS STAY WITHIN A TURN. THE AXIS MUST ROLL OVER AND GO THE SHORT WAY", letter)
	}
	return fmt.Sprintf("%c WORDS RUN ON PAST 360. THE AXIS MUST NOT ROLL OVER", letter)
}

// unwound returns the program with rotary words that run on, from one whose axis rolls over. A rapid that turns begins anew within a turn.
func unwound(p *read.Program, wrong func(line int, format string, args ...any)) *read.Program {
	out := *p
	out.Moves = append([]read.Move(nil), p.Moves...)
	const printed = 1e9 // parts of a degree that are read
	on := func(r, turns float64) float64 { return math.Round((r+360*turns)*printed) / printed }
	turns := 0.0
	for i := range out.Moves {
		m := &out.Moves[i]
		from, to := m.FromR, m.ToR
		m.FromR = on(from, turns)
		if m.HasR && !(to >= 0 && to < 360) {
			wrong(m.LineNo, "the rotary word %.6g: those of an axis that rolls over are 0 to 360", to)
		}
		switch {
		case m.HasR && m.Kind == read.Rapid:
			turns = 0
		case m.KnownR:
			if by := math.Abs(math.Remainder(to-from, 360)); by > longestRead {
				wrong(m.LineNo, "the work turns by %.6g degrees: an axis that rolls over could go either way", by)
			}
			turns -= math.Round((to - from) / 360)
		}
		m.ToR = on(to, turns)
	}
	return &out
}

// spin follows the rotary axis from move to move, and keeps the worst of it.
type spin struct {
	before, lasted float64 // degrees/s of the last move and its minutes; 0 minutes after a stop
	worst          Spin
}

// stop: what comes next starts from rest.
func (s *spin) stop() { s.lasted = 0 }

// move holds a move that takes minutes against the limits of speed (degrees/min) and acceleration (degrees/s²), 0 for none. The
// acceleration is taken from the move before: between the middles of the two the speed changes by what they differ in.
func (s *spin) move(m read.Move, minutes, speed, rate float64, fail func(id string, value, limit float64, line int, format string, args ...any)) {
	ran := math.Abs(m.ToR-m.FromR) / minutes
	if ran > s.worst.Speed {
		s.worst.Speed, s.worst.SpeedLine = ran, m.LineNo
	}
	if speed > 0 && ran > speed {
		fail("rotary-speed", ran, speed, m.LineNo, "the rotary axis runs at %.6g degrees/min, it may at %.6g; take a lower feed", ran, speed)
	}
	now := (m.ToR - m.FromR) / (60 * minutes)
	if s.lasted > 0 {
		got := math.Abs(now-s.before) / (30 * (minutes + s.lasted))
		if got > s.worst.Rate {
			s.worst.Rate, s.worst.RateLine = got, m.LineNo
		}
		if rate > 0 && got > rate {
			fail("rotary-acceleration", got, rate, m.LineNo, "the rotary axis is accelerated by %.6g degrees/s² from the move before, it may be by %.6g; take a lower feed", got, rate)
		}
	}
	s.before, s.lasted = now, minutes
}
