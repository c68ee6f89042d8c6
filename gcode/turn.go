package gcode

import (
	"math"
	"slices"

	"lobewright/tolerance/chain"
)

// turn is a set of stretches of cam angle, degrees, on the circle.
type turn struct{ spans []chain.Span }

// add takes a stretch in, from < to.
func (t *turn) add(from, to float64) {
	lap := 360 * math.Floor(from/360)
	t.spans = append(t.spans, chain.Span{From: from - lap, To: to - lap})
	slices.SortFunc(t.spans, func(a, b chain.Span) int { return sign(a.From - b.From) })
}

// merged returns the stretches joined where they overlap, each also a turn earlier
// and a turn later.
func (t turn) merged() []chain.Span {
	all := append([]chain.Span(nil), t.spans...)
	for _, s := range t.spans {
		all = append(all, chain.Span{From: s.From - 360, To: s.To - 360}, chain.Span{From: s.From + 360, To: s.To + 360})
	}
	slices.SortFunc(all, func(a, b chain.Span) int { return sign(a.From - b.From) })
	var out []chain.Span
	for _, s := range all {
		if n := len(out); n > 0 && s.From < out[n-1].To {
			out[n-1].To = math.Max(out[n-1].To, s.To)
			continue
		}
		out = append(out, s)
	}
	return out
}

// holds reports whether the set covers from to to, wherever the turn begins.
func (t turn) holds(from, to float64) bool {
	if to <= from {
		return true
	}
	from, to = from-360*math.Floor(from/360), to-360*math.Floor(from/360)
	for _, s := range t.merged() {
		if s.From <= from && to <= s.To {
			return true
		}
	}
	return false
}

// gap returns how many degrees of the turn are not covered, 0 when none, and where
// the first gap begins. Stretches that only touch leave a gap of the least size.
func (t turn) gap() (size, at float64) {
	const touch = 1e-9 // degrees: what two stretches that only touch are counted as
	at = math.NaN()
	reach := 0.0
	hole := func(to float64) {
		if math.IsNaN(at) {
			at = reach
		}
		size += math.Max(to-reach, touch)
	}
	for _, s := range t.merged() {
		if s.To <= 0 || s.From >= 360 {
			continue
		}
		if s.From >= 0 {
			hole(s.From)
		}
		reach = s.To
	}
	if reach < 360 {
		hole(360)
	}
	return size, at
}
