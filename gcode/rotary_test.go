package gcode

import (
	"math"
	"testing"

	"lobewright/gcode/read"
	"lobewright/tolerance/chain"
	"pgregory.net/rapid"
)

// asRead makes moves from stations as a control reads them: the words of one machine, in degrees.
func asRead(p drumPlan, path []station) *read.Program {
	word := func(s station) float64 {
		return float64(p.rotaryWord(s.r).V) / float64(counts(p.p.RotaryGrid, 1))
	}
	out := &read.Program{Moves: []read.Move{{Kind: read.Rapid, HasR: true, ToR: word(path[0])}}}
	for i, s := range path[1:] {
		out.Moves = append(out.Moves, read.Move{LineNo: i + 2, Kind: read.Line, HasR: true, KnownR: true, FromR: word(path[i]), ToR: word(s)})
	}
	return out
}

// What an axis that rolls over is told, run on again, is what was meant, to the last digit, but for whole turns; whatever the
// moves, no word leaves the turn and none could be taken the other way.
func TestRollingOverLosesNothing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := drumPlan{emitter: &emitter{m: Machine{RotaryModulo: true}, p: &Program{RotaryGrid: chain.Grid{Decimals: rapid.IntRange(2, 6).Draw(t, "decimals")}}}}
		one := counts(p.p.RotaryGrid, 1)
		r := rapid.Int64Range(-800*one, 800*one).Draw(t, "first")
		path := []station{{r: r}}
		for _, by := range rapid.SliceOfN(rapid.Int64Range(-400*one, 400*one), 1, 12).Draw(t, "moves") {
			r += by
			path = append(path, station{r: r, axial: r / 7})
		}
		split := p.short(path)
		wrong := 0
		back := unwound(asRead(p, split), func(int, string, ...any) { wrong++ })
		if wrong > 0 {
			t.Fatalf("%d words could be taken two ways", wrong)
		}
		shift := math.Round((float64(path[0].r)/float64(one)-back.Moves[0].ToR)/360) * 360
		for i, s := range split {
			if got, want := back.Moves[i].ToR, float64(s.r)/float64(one)-shift; math.Abs(got-want) > 1e-9 {
				t.Fatalf("move %d ends at %.12g, meant %.12g", i, got, want)
			}
		}
		k := 0
		for _, s := range split {
			if k < len(path) && s == path[k] {
				k++
			}
		}
		if k != len(path) {
			t.Fatalf("%d of %d stations are left", k, len(path))
		}
	})
}

// Words outside a turn, and moves that could go either way, are named at their lines.
func TestRollingOverIsPlain(t *testing.T) {
	for _, c := range []struct {
		name     string
		from, to float64
		wrong    bool
	}{
		{"within a turn", 350, 10, false}, {"back over zero", 10, 350, false}, {"a whole turn more", 10, 370, true},
		{"below zero", 10, -5, true}, {"half a turn", 10, 190, true}, {"half a turn back", 270, 90, true}, {"rather less", 10, 185, false},
	} {
		var lines []int
		unwound(&read.Program{Moves: []read.Move{{LineNo: 7, Kind: read.Line, HasR: true, KnownR: true, FromR: c.from, ToR: c.to}}},
			func(line int, _ string, _ ...any) { lines = append(lines, line) })
		if (len(lines) > 0) != c.wrong || c.wrong && lines[0] != 7 {
			t.Errorf("%s: %v", c.name, lines)
		}
	}
}

// The rotary axis of a move of 6 degrees in 0.01 minutes and one of 12 in 0.01: 600 and 1200 degrees a minute; 10 degrees/s more in the 0.6 s
// between their middles.
func TestSpin(t *testing.T) {
	var s spin
	var found []string
	fail := func(id string, _, _ float64, _ int, _ string, _ ...any) { found = append(found, id) }
	s.move(read.Move{LineNo: 1, ToR: 6}, 0.01, 1000, 16, fail)
	s.move(read.Move{LineNo: 2, FromR: 6, ToR: 18}, 0.01, 1000, 16, fail)
	if len(found) != 2 || found[0] != "rotary-speed" || found[1] != "rotary-acceleration" {
		t.Error(found)
	}
	if w := s.worst; math.Abs(w.Speed-1200) > 1e-9 || w.SpeedLine != 2 || math.Abs(w.Rate-10/0.6) > 1e-9 || w.RateLine != 2 {
		t.Errorf("%+v", w)
	}
	s.stop()
	s.move(read.Move{LineNo: 3, FromR: 18}, 0.01, 0, 1, fail)
	if len(found) != 2 || s.worst.RateLine != 2 {
		t.Error("a start from rest counts")
	}
}
