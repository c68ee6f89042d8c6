package certify

import (
	"fmt"
	"math"
	"sort"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// vec is a box: an interval for each coordinate.
type vec struct{ x, y taylor.Interval }

func exactly(p plane.Point) vec                { return vec{taylor.Exactly(p.X), taylor.Exactly(p.Y)} }
func (a vec) add(b vec) vec                    { return vec{a.x.Add(b.x), a.y.Add(b.y)} }
func (a vec) sub(b vec) vec                    { return vec{a.x.Sub(b.x), a.y.Sub(b.y)} }
func (a vec) dot(b vec) taylor.Interval        { return a.x.Mul(b.x).Add(a.y.Mul(b.y)) }
func (a vec) cross(b vec) taylor.Interval      { return a.x.Mul(b.y).Sub(a.y.Mul(b.x)) }
func (a vec) sqr() taylor.Interval             { return a.x.Sqr().Add(a.y.Sqr()) }
func (a vec) norm() taylor.Interval            { return a.sqr().Sqrt() }
func (a vec) mid() plane.Vector                { return plane.Vector{X: a.x.Mid(), Y: a.y.Mid()} }
func (a vec) point() plane.Point               { return plane.Point{X: a.x.Mid(), Y: a.y.Mid()} }
func (a vec) widened(b vec, f float64) vec     { return vec{widen(a.x, b.x, f), widen(a.y, b.y, f)} }
func (a vec) meet(b vec) vec                   { return vec{meet(a.x, b.x), meet(a.y, b.y)} }
func coefficient(x, y *taylor.I, k int) vec    { return vec{x.C[k], y.C[k]} }
func twice(a taylor.Interval) taylor.Interval  { return a.Add(a) }
func halved(a taylor.Interval) taylor.Interval { return a.Mul(taylor.Exactly(0.5)) }

// widen returns a + [-f, f]·b.
func widen(a, b taylor.Interval, f float64) taylor.Interval {
	m := b.Mag()
	return a.Add(taylor.Interval{Lo: -f, Hi: f}.Mul(taylor.Interval{Lo: -m, Hi: m}))
}

// meet returns the intersection of two enclosures of the same range. It is NaN,
// which proves nothing, when they contradict each other.
func meet(a, b taylor.Interval) taylor.Interval {
	c := taylor.Interval{Lo: math.Max(a.Lo, b.Lo), Hi: math.Min(a.Hi, b.Hi)}
	if !(c.Lo <= c.Hi) {
		return taylor.Interval{Lo: math.NaN(), Hi: math.NaN()}
	}
	return c
}

// survey is a curve with what is asked of it once: its pieces, its size, and
// the largest step where pieces meet.
type survey struct {
	curve  Curve
	pieces []plane.Piece
	t0, t1 float64 // the turn, degrees
	size   float64 // of the curve, a length
	step   float64 // upper bound of the steps between pieces, a length
}

// stepShare is the largest step between pieces, relative to the curve's size,
// that passes for rounding.
const stepShare = 1e-9

func newSurvey(curve Curve, closed bool) (*survey, error) {
	s := &survey{curve: curve, pieces: curve.Pieces()}
	n := len(s.pieces)
	if n == 0 {
		return nil, fmt.Errorf("the curve has no pieces")
	}
	for i, p := range s.pieces {
		if !(p.From < p.To) || !finite(p.From, p.To) || i > 0 && p.From != s.pieces[i-1].To {
			return nil, fmt.Errorf("piece %d of the curve, from %g to %g degrees, does not follow the one before it", i, p.From, p.To)
		}
	}
	s.t0, s.t1 = s.pieces[0].From, s.pieces[n-1].To
	for i, p := range s.pieces {
		next := (i + 1) % n
		end, start := s.spot(i, p.To), s.spot(next, s.pieces[next].From)
		s.size = math.Max(s.size, math.Max(end.x.Mag(), end.y.Mag()))
		middle := s.spot(i, p.From+(p.To-p.From)/2)
		s.size = math.Max(s.size, math.Max(middle.x.Mag(), middle.y.Mag()))
		if next > 0 || closed {
			s.step = math.Max(s.step, end.sub(start).norm().Hi)
		}
	}
	if !finite(s.size) || s.size == 0 || !(s.step <= stepShare*s.size) {
		return nil, fmt.Errorf("the curve is not closed and continuous, as it must be: its pieces are up to %.3g apart", s.step)
	}
	return s, nil
}

// spot encloses the curve's point at one parameter.
func (s *survey) spot(piece int, t float64) vec {
	x, y := s.curve.Over(piece, taylor.Exactly(t), 0)
	return coefficient(&x, &y, 0)
}

// mark is a parameter with its count of whole turns, so that going round the
// curve's end costs no rounding: t is in t0 <= t < t1.
type mark struct {
	turn int
	t    float64
}

func (m mark) before(n mark) bool { return m.turn < n.turn || m.turn == n.turn && m.t < n.t }

func (s *survey) angle(m mark) float64 { return m.t + float64(m.turn)*(s.t1-s.t0) }

// mark brings a running parameter into the turn.
func (s *survey) mark(u float64) mark {
	turn := math.Floor((u - s.t0) / (s.t1 - s.t0))
	m := mark{int(turn), math.Max(u-turn*(s.t1-s.t0), s.t0)}
	if m.t >= s.t1 {
		m = mark{m.turn + 1, s.t0}
	}
	return m
}

// piece returns the index of the piece that holds t, t0 <= t < t1.
func (s *survey) piece(t float64) int {
	return min(sort.Search(len(s.pieces), func(i int) bool { return t < s.pieces[i].To }), len(s.pieces)-1)
}

// part is a stretch within one piece, lo < hi.
type part struct {
	piece  int
	lo, hi float64
}

// parts cuts the stretch from a to b at the ends of pieces. Together they cover it.
func (s *survey) parts(a, b mark) []part {
	var out []part
	for turn := a.turn; turn <= b.turn; turn++ {
		lo, hi := s.t0, s.t1
		if turn == a.turn {
			lo = a.t
		}
		if turn == b.turn {
			hi = b.t
		}
		for i, p := range s.pieces {
			if l, h := math.Max(lo, p.From), math.Min(hi, p.To); l < h {
				out = append(out, part{i, l, h})
			}
		}
	}
	return out
}

// cut divides a part into n that cover it.
func (p part) cut(n int) []part {
	out := make([]part, 0, n)
	lo := p.lo
	for k := 1; k <= n; k++ {
		hi := p.hi
		if k < n {
			hi = math.Min(p.lo+(p.hi-p.lo)*(float64(k)/float64(n)), p.hi)
		}
		if lo < hi {
			out = append(out, part{p.piece, lo, hi})
			lo = hi
		}
	}
	return out
}

// patch is what is known of the curve over a part: coefficients p at the
// midpoint m to order 2, and w over the whole part to order 3; every parameter of the part is
// within h of m.
type patch struct {
	part
	m, h float64
	p    [3]vec
	w    [4]vec
}

// patch evaluates the curve over a part. The enclosures over the part are met with
// the mean value form, center plus slope, which is the sharper one on short parts.
func (s *survey) patch(q part) patch {
	a := patch{part: q, m: q.lo + (q.hi-q.lo)/2}
	a.h = math.Max(a.m-q.lo, q.hi-a.m) * outward
	x, y := s.curve.Over(q.piece, taylor.Exactly(a.m), 2)
	for k := range a.p {
		a.p[k] = coefficient(&x, &y, k)
	}
	x, y = s.curve.Over(q.piece, taylor.Interval{Lo: q.lo, Hi: q.hi}, 3)
	a.w[3] = coefficient(&x, &y, 3)
	for k := 2; k >= 0; k-- {
		a.w[k] = coefficient(&x, &y, k).meet(a.p[k].widened(a.w[k+1], float64(k+1)*a.h*outward))
	}
	return a
}
