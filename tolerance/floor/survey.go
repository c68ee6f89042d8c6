package floor

import (
	"fmt"
	"math"
	"sort"

	"lobewright/synth/plane"
)

// mark is a place on the curve: t in [t0, t0+360) and whole turns, so that places a turn
// apart compare exactly.
type mark struct {
	turn int
	t    float64
}

func (m mark) before(n mark) bool { return m.turn < n.turn || m.turn == n.turn && m.t < n.t }

// since returns the parameter from n to m in degrees, rounded.
func (m mark) since(n mark) float64 { return m.t - n.t + turnDegrees*float64(m.turn-n.turn) }

func (m mark) turned(by int) mark { return mark{m.turn + by, m.t} }

// node is a point of the curve, in floats.
type node struct {
	mark
	piece int
	p     plane.Point
}

// survey is the curve as a table of points, dense enough to choose the points of a proof from.
type survey struct {
	curve  Curve
	pieces []plane.Piece
	eps    float64
	table  []node // one turn, growing t, turn 0
	hint   []int  // by table index: how many entries on the last reach from there was; 0 when not known
}

const (
	freeConstant = 192 // k'h³/192 = eps: the length of a free arc, package comment
	// perArc is the number of table points on a foreseen arc. An inner point is half a spacing from
	// where the deviation peaks at worst; (2/perArc)²/2 · 12/4 < 0.6 % of the deviation, 0.2 % of reach.
	perArc     = 32
	looked     = 49    // points a piece is first looked at with
	leastTable = 40    // points of a piece at least
	mostTable  = 40000 // and at most
	evenShare  = 0.15  // of the density's mean is added to it, so that no stretch goes bare
	floatShare = 1e-11 // of the curve's size: the least eps that floats tell from rounding
	// A jump of curvature makes a narrow peak, and on a dwell the peaks crowd towards its ends: the intervals at
	// a piece's ends, a quarter of a gentle piece, are graded by octaves.
	octaves   = 8
	perOctave = 6
)

func newSurvey(c Curve, pieces []plane.Piece, eps float64) (*survey, error) {
	s := &survey{curve: c, pieces: pieces, eps: eps}
	size := 0.0
	for i, p := range pieces {
		size = math.Max(size, c.At(i, p.From).P.Radius())
	}
	if least := size * floatShare; eps < least {
		return nil, fmt.Errorf("deviation %g is too small for a curve of size %.6g: at least %.1g", eps, size, least)
	}
	for i, p := range pieces {
		ts, err := s.spread(i, p)
		if err != nil {
			return nil, err
		}
		for _, t := range ts {
			if s.before(t) {
				n := node{mark{0, t}, i, c.At(i, t).P}
				if bad := n.p.X + n.p.Y; math.IsNaN(bad) || math.IsInf(bad, 0) {
					return nil, fmt.Errorf("the curve is not finite at cam angle %g", t)
				}
				s.table = append(s.table, n)
			}
		}
	}
	s.hint = make([]int, len(s.table))
	return s, nil
}

// before reports whether t continues the table within the turn.
func (s *survey) before(t float64) bool {
	n := len(s.table)
	return t < s.pieces[0].From+turnDegrees && (n == 0 || t > s.table[n-1].t)
}

// spread returns parameters of a piece from its start, its end left out: as many for a foreseen arc
// everywhere, more at the ends.
func (s *survey) spread(i int, p plane.Piece) ([]float64, error) {
	sum, mean := s.foresee(i, p)
	if math.IsNaN(sum) || math.IsInf(sum, 0) {
		return nil, fmt.Errorf("the curve is not regular between cam angles %g and %g (curvature or its rate is not finite)", p.From, p.To)
	}
	n := int(math.Min(math.Max(perArc*sum, leastTable), mostTable))
	wide := 1 // the intervals at an end that are graded
	if n == leastTable {
		wide = leastTable / 4
	}
	step := 1 / float64(n)
	ends := graded(float64(wide) * step)
	var shares []float64
	shares = append(shares, 0)
	shares = append(shares, ends...)
	for j := wide; j <= n-wide; j++ {
		shares = append(shares, step*float64(j))
	}
	for k := range ends {
		shares = append(shares, 1-ends[len(ends)-1-k])
	}
	ts := make([]float64, len(shares))
	for k, x := range shares {
		ts[k] = p.From + (p.To-p.From)*mean(x)
	}
	ts[0] = p.From
	return ts, nil
}

// graded returns numbers that grow to below end, closer the nearer to 0.
func graded(end float64) []float64 {
	var xs []float64
	for k := octaves; k > 0; k-- {
		for i := range perOctave {
			xs = append(xs, math.Ldexp(end*(1+float64(i)/perOctave), -k))
		}
	}
	return xs
}

// foresee returns the number of free arcs the piece takes by theory and a map of shares of
// it, 0..1, to shares of the parameter, growing.
func (s *survey) foresee(i int, p plane.Piece) (arcs float64, share func(float64) float64) {
	var sums [looked]float64
	var was plane.Frame
	for j := range looked {
		f := s.curve.At(i, p.From+(p.To-p.From)*float64(j)/(looked-1))
		if j > 0 {
			mean := (math.Cbrt(math.Abs(f.DK)) + math.Cbrt(math.Abs(was.DK))) / 2
			sums[j] = sums[j-1] + mean/math.Cbrt(freeConstant*s.eps)*f.P.Dist(was.P)
		}
		was = f
	}
	arcs = sums[looked-1]
	even := evenShare * arcs / (looked - 1)
	if !(even > 0) {
		even = 1
	}
	for j := range sums {
		sums[j] += even * float64(j)
	}
	return arcs, func(x float64) float64 {
		v := x * sums[looked-1]
		j := sort.Search(looked-2, func(j int) bool { return sums[j+1] >= v })
		return (float64(j) + (v-sums[j])/(sums[j+1]-sums[j])) / (looked - 1)
	}
}

// index returns the last table entry at or before t.
func (s *survey) index(t float64) int {
	return max(sort.Search(len(s.table), func(i int) bool { return s.table[i].t > t })-1, 0)
}

// nodeAt evaluates the curve at a place.
func (s *survey) nodeAt(m mark) node {
	near := s.table[s.index(m.t)]
	if near.t == m.t {
		return node{m, near.piece, near.p}
	}
	t := math.Min(m.t, s.pieces[near.piece].To)
	return node{m, near.piece, s.curve.At(near.piece, t).P}
}

// window is the table as seen from a: node 0 is a itself, node k the k-th table entry after it.
type window struct {
	s     *survey
	a     node
	base  int // table index at or before a
	last  int // the last index before a + one turn
	cache []node
}

func (s *survey) window(a node) *window {
	base := s.index(a.t)
	last := len(s.table)
	if s.table[base].t == a.t {
		last--
	}
	return &window{s: s, a: a, base: base, last: last, cache: []node{a}}
}

// to returns the window's nodes 0..j, j <= last.
func (w *window) to(j int) []node {
	n := len(w.s.table)
	for k := len(w.cache); k <= j; k++ {
		i := w.base + k
		e := w.s.table[i%n]
		e.turn = w.a.turn + i/n
		w.cache = append(w.cache, e)
	}
	return w.cache[:j+1]
}
