package smooth

import (
	"errors"
	"fmt"
	"math"
	"slices"
)

// With the knots chosen, all rows are taken into account, in four steps.
//
//  1. Least squares.
//  2. The roughness, the integral of the squared jerk, is given as much weight as leaves the
//     root mean square of the residuals within slack of its least. Between knots that are
//     all worth having little is left to smooth; a twentieth more of residual is no news of
//     the table, and what it takes out of the acceleration was noise.
//  3. If a row is moved by more than allowed: the same sum under the inequality, for every
//     row, that it is not (box.go). This is the usual case only where the smoothing is about
//     as large as the rounding or noise itself. Half the last place is the worst: of 3600
//     rows rounded to 0.001 one within 0.0005 of all takes 300 pieces, within 0.001 it
//     takes 24, and the acceleration of the 300 is useless.
//  4. If no spline on these knots can do that: a knot more in every interval with a row that
//     is moved too far, and all again.

const (
	slack  = 1.05
	pull   = 1.8  // times the smoothing: a larger residual is not worth trying step 3 for
	trials = 3    // of step 3, the slowest,
	costly = 5000 // and only one of them in a table of more rows
	rounds = 6    // of new knots to keep the curve from dipping (above.go)
)

// MostPieces is the most pieces a curve may have. One with more would follow the noise of
// its table row by row.
const MostPieces = 1000

// settle returns the spline on a ring, or on one with more knots, that moves no row by more
// than allowed, and does not dip below the dwell it stands on unless that takes more
// than a few rounds of new knots.
func (f *fitter) settle(r ring) (*spline, error) {
	needed, pieces := 0.0, len(r.at)
	boxes, dips := 0, 0
	for {
		s := newSpline(r, f.dwells, f.near)
		if !s.leastSquares(&f.rows) {
			return nil, errSingular
		}
		residual := s.residuals(&f.rows)
		worst := largest(residual)
		if needed == 0 {
			needed = worst
		}
		var good *spline
		if worst <= f.limit() {
			good = f.smoothest(s, residual)
		} else if worst <= pull*f.allowed && boxes < trials && boxes*len(f.at) <= costly {
			boxes++
			lambda := s.stiffness(&f.rows).weightFor(mayGrow(residual))
			good = f.boxed(s, lambda)
		}
		if good != nil {
			out, left, ok := f.above(good)
			if ok {
				return out, nil
			}
			residual = left
		}
		finer, more := f.refined(r, residual)
		switch {
		case good != nil && (!more || dips == rounds):
			return good, nil
		case good != nil:
			dips++
		case !more:
			return nil, errSingular
		}
		if len(finer.at) > MostPieces {
			return nil, TooClose{Smoothing: f.allowed, Needed: needed, Pieces: pieces}
		}
		r = finer
	}
}

// TooClose is the error of a table that scatters by more than the smoothing, so that a
// curve within it would need more than MostPieces pieces.
type TooClose struct {
	Smoothing float64 // as asked for, length
	Needed    float64 // a smoothing that a curve of Pieces pieces keeps to, length
	Pieces    int
}

func (e TooClose) Error() string {
	return fmt.Sprintf("a curve within %g of every row needs more than %d pieces; within %.4g it needs %d",
		e.Smoothing, MostPieces, e.Needed, e.Pieces)
}

var errSingular = errors.New("the rows lie too unevenly for a spline to be computed through them in 64-bit numbers")

// limit is the largest residual that counts as within the smoothing.
func (f *fitter) limit() float64 {
	return f.allowed + rounding*f.size()
}

func largest(v []float64) float64 {
	most := 0.0
	for _, x := range v {
		most = math.Max(most, math.Abs(x))
	}
	return most
}

// spans calls visit for every interval with its rows, from the first to before the last,
// and what to add to their angles: rows before the first knot are the last interval's, a
// turn up, and come in a second call.
func (s *spline) spans(r *rows, visit func(i, from, to int, shift float64)) {
	early, _ := slices.BinarySearch(r.at, s.at[0])
	k := early
	for i := range s.at {
		from := k
		for end := s.knot(i + 1); k < len(r.at) && r.at[k] < end; {
			k++
		}
		visit(i, from, k, 0)
	}
	visit(len(s.at)-1, 0, early, turn)
}

// residuals returns row less spline for every row.
func (s *spline) residuals(r *rows) []float64 {
	out := make([]float64, len(r.at))
	s.spans(r, func(i, from, to int, shift float64) {
		basis := s.locals(i)
		p := s.local(i, &basis)
		here := s.interval(i)
		for k := from; k < to; k++ {
			out[k] = r.lift[k] - p.value(here.unit(r.at[k]+shift))
		}
	})
	return out
}

// weighed returns the moments of every interval: rows of these weights (nil: all 1), and
// what is to be fitted, weight included.
func (s *spline) weighed(r *rows, weight, lift []float64) []moments {
	out := make([]moments, len(s.at))
	s.spans(r, func(i, from, to int, shift float64) {
		here := s.interval(i)
		w := 1.0
		for k := from; k < to; k++ {
			if weight != nil {
				w = weight[k]
			}
			out[i].add(here.unit(r.at[k]+shift), w, lift[k])
		}
	})
	return out
}

func (s *spline) equations(of []moments) *normal {
	return s.normals(func(i int, _ *[degree + 1]powers) moments { return of[i] })
}

// leastSquares fits the spline to the rows; and twice what rounding left.
func (s *spline) leastSquares(r *rows) bool {
	for range 3 {
		if !s.advance(s.equations(s.weighed(r, nil, s.residuals(r)))) {
			return false
		}
	}
	return true
}

// mayGrow returns by how much the sum of squared residuals may grow for smoothness.
func mayGrow(residual []float64) float64 {
	sum := 0.0
	for _, v := range residual {
		sum += v * v
	}
	return (slack*slack - 1) * sum
}

// stiffness is what it takes to put weight on the roughness of a least-squares spline: the
// matrices of the sum of squares and of the roughness, and how the roughness pulls.
type stiffness struct {
	of        *spline
	sum, jerk *band
	pull      []float64
}

func (s *spline) stiffness(r *rows) *stiffness {
	sum := s.equations(s.weighed(r, nil, make([]float64, len(r.at))))
	jerk := &normal{newBand(s.count), make([]float64, s.count)}
	s.stiffen(jerk, 1)
	return &stiffness{of: s, sum: sum.matrix, jerk: jerk.matrix, pull: jerk.right}
}

// change returns how the unknowns change when the roughness has weight lambda (rad^5), and
// by how much the sum of squares grows.
func (k *stiffness) change(lambda float64) (change []float64, growth float64, ok bool) {
	m := k.sum.plus(lambda, k.jerk)
	if !m.factor() {
		return nil, 0, false
	}
	change = make([]float64, len(k.pull))
	for u := range change {
		change[u] = lambda * k.pull[u]
	}
	m.solve(change)
	return change, k.sum.quadratic(change), true
}

// weightFor returns a weight on the roughness that lets the sum of squares grow by most of
// what it may.
func (k *stiffness) weightFor(may float64) float64 {
	const lowest, highest, steps = -30, 0, 12 // powers of ten, rad^5
	low, high := float64(lowest), float64(highest)
	for range steps {
		middle := (low + high) / 2
		if _, growth, ok := k.change(math.Pow(10, middle)); ok && growth <= may {
			low = middle
		} else {
			high = middle
		}
	}
	return math.Pow(10, low)
}

// smoothest returns s with the most weight on the roughness that the residuals allow.
func (f *fitter) smoothest(s *spline, residual []float64) *spline {
	const tries, less = 4, 4.0
	k := s.stiffness(&f.rows)
	may := mayGrow(residual)
	for range tries {
		if change, _, ok := k.change(k.weightFor(may)); ok {
			out := s.clone()
			out.move(1, change)
			if largest(out.residuals(&f.rows)) <= f.limit() {
				return out
			}
		}
		may /= less
	}
	return s
}
