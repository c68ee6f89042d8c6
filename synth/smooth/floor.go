package smooth

import (
	"cmp"
	"math"
	"slices"
	"sort"
)

// Floor is a standard deviation of acceleration over the turn, length per rad².
type Floor struct {
	RMS     float64 // root mean square over the turn
	Largest float64
	At      float64 // cam angle of the largest, degrees
}

// floor returns how far the acceleration of the curve may be off and the rows not show it.
//
// Were the knots given, the acceleration b'c of a least-squares spline would vary by
//
//	σ² b' inv(A) b
//
// (Gauss and Markov; Seber and Lee, Linear Regression Analysis, 2nd ed., ch. 3, cited from
// memory), and that is some ten times too little: the knots were chosen by the same rows,
// and what a knot more would have brought was left out because noise could have brought it
// as well. So the formula is applied to the spline with a knot more in the middle of
// every interval: what the rows cannot keep this one from doing they do not know of the
// curve. σ is the noise the search for knots counted on. In the tests the root mean square of
// the true error is between an eighth and six times the figure, mostly within a factor of
// two. A step of acceleration is rounded off over a row or two, and there the error is of
// the size of the step and the figure does not know of it.
func (f *fitter) floor(of ring) Floor {
	s := newSpline(f.halved(&of), f.dwells, f.near)
	n := s.equations(s.weighed(&f.rows, f.shares(), make([]float64, len(f.at))))
	var out Floor
	if !n.matrix.factor() {
		return Floor{RMS: math.Inf(1), Largest: math.Inf(1)}
	}
	inverse := n.matrix.inverse()
	for i := range s.at {
		basis := s.locals(i)
		here := s.interval(i)
		simpson := [3]float64{1. / 6, 4. / 6, 1. / 6}
		for k, share := range simpson {
			u := float64(k - 1)
			v := s.variance(i, &basis, u, inverse) * f.noise * f.noise
			out.RMS += v * share * 2 * here.half() / turn
			if v > out.Largest {
				out.Largest, out.At = v, here.middle()+u*here.half()
			}
		}
	}
	out.RMS, out.Largest = math.Sqrt(out.RMS), math.Sqrt(out.Largest)
	out.At -= turn * math.Floor(out.At/turn)
	return out
}

// shares returns the weight of every row in the search: one for a cell.
func (f *fitter) shares() []float64 {
	out := make([]float64, len(f.at))
	for _, c := range f.cells {
		for k := c.first; k < c.first+c.count; k++ {
			out[k] = 1 / float64(c.count)
		}
	}
	return out
}

// variance returns b' inv(A) b for the acceleration, per rad², at u on interval i.
func (s *spline) variance(i int, basis *[degree + 1]powers, u float64, inverse *band) float64 {
	h := s.interval(i).half() * radians
	var second [degree + 1]float64
	var unknown [degree + 1]int
	for k, p := range basis {
		unknown[k] = s.unknown[s.wrap(i-degree+k)]
		if !s.held[unknown[k]] {
			second[k] = (((20*p[5]*u+12*p[4])*u+6*p[3])*u + 2*p[2]) / (h * h)
		}
	}
	sum := 0.0
	for a, v := range second {
		for b, w := range second {
			sum += v * w * inverse.at(unknown[a], unknown[b])
		}
	}
	return math.Max(sum, 0)
}

// halved returns the ring with a knot more in every open interval, at the cell nearest to
// its middle, where one begins inside.
func (f *fitter) halved(r *ring) ring {
	begin := make([]float64, len(f.cells))
	for k, c := range f.cells {
		begin[k] = f.at[c.first]
	}
	type knot struct {
		at   float64
		flat int
	}
	var all []knot
	for i, at := range r.at {
		all = append(all, knot{at, r.flat[i]})
		middle := r.interval(i).middle()
		after := sort.SearchFloat64s(begin, middle-turn*math.Floor(middle/turn))
		best := math.Inf(1)
		for _, k := range [2]int{after - 1, after} {
			x := begin[(k+len(begin))%len(begin)]
			x += turn * math.Round((middle-x)/turn)
			if x > at && x < r.knot(i+1) && math.Abs(x-middle) < math.Abs(best-middle) {
				best = x
			}
		}
		if r.flat[i] == 0 && !math.IsInf(best, 1) {
			all = append(all, knot{best - turn*math.Floor(best/turn), 0})
		}
	}
	slices.SortFunc(all, func(a, b knot) int { return cmp.Compare(a.at, b.at) })
	var out ring
	for _, k := range all {
		out.at, out.flat = append(out.at, k.at), append(out.flat, k.flat)
	}
	return out
}
