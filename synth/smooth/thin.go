package smooth

import (
	"cmp"
	"math"
	"slices"
)

// Taking away knot j means to allow only those splines whose fifth derivative does not step
// there: one linear condition Lc = 0 on seven neighboring coefficients. The least sum of
// squares under it is larger than without by exactly
//
//	(Lc)² / (L inv(A) L'),
//
// A being the matrix of the normal equations (the numerator and denominator of the F test
// of one linear hypothesis; G. A. F. Seber and A. J. Lee, Linear Regression Analysis, 2nd
// ed., ch. 4, cited from memory). L and c reach over seven coefficients, so only entries of
// the inverse inside the band are needed, and those cost no more than a second
// factorization. The prices hold for one knot at a time. Several go in one round when they
// are far apart and among the cheapest, many at first, few at the end; then all is priced
// anew.
//
// Knots are kept that are worth more than keep times the variance of the noise. Noise alone
// makes a knot worth one variance on average; the best of many places to put one is worth
// several, which is why the limit is as high.

const (
	keep = 16.0

	few          = 6    // no ring has fewer knots
	free         = 0.01 // of what a knot must be worth: a price that is as good as none
	partAtOnce   = 0.15 // of the knots that go in one round
	partAtTheEnd = 1. / 12
	manyKnots    = 120 // from where on the end is counted
)

// worth returns the price at which a knot is kept.
func (f *fitter) worth() float64 { return keep * f.noise * f.noise }

// thin takes knots from a ring of cells until every one left is worth keeping.
func (f *fitter) thin(r ring) ring {
	for {
		s := newSpline(r, f.dwells, f.near)
		n := s.normals(f.gathered(s))
		if !s.advance(n) {
			return r
		}
		gone := f.cheapest(s, n.matrix.inverse())
		if gone == nil {
			return r
		}
		r = r.without(gone)
	}
}

// gathered returns the moments of the intervals of a spline with knots at cells, each
// put together from the moments of its cells, for the misfit of the spline as it is.
func (f *fitter) gathered(s *spline) func(int, *[degree + 1]powers) moments {
	begin := make([]int, len(s.at)) // the cell each knot begins
	k := 0
	for i, at := range s.at {
		for f.at[f.cells[k].first] < at {
			k++
		}
		begin[i] = k
	}
	return func(i int, basis *[degree + 1]powers) (m moments) {
		here := s.interval(i)
		last := begin[s.wrap(i+1)]
		if i == len(s.at)-1 {
			last += len(f.cells)
		}
		for k := begin[i]; k < last; k++ {
			c, shift := &f.cells[k%len(f.cells)], 0.0
			if k >= len(f.cells) {
				shift = turn
			}
			a, b := here.unit(c.from+shift), here.unit(c.to+shift)
			m.merge(&c.moments, (a+b)/2, (b-a)/2)
		}
		p := s.local(i, basis)
		for k := range m.lift {
			for q, c := range p {
				m.lift[k] -= m.weight[k+q] * c
			}
		}
		return m
	}
}

// merge adds the moments of a part whose own unit v is u = at + scale*v.
func (m *moments) merge(part *moments, at, scale float64) {
	weight, lift := part.weight, part.lift
	for k := range weight { // from sums of v^k to sums of u^j*v^(k-j), j growing
		m.weight[k] += weight[0]
		if k < len(lift) {
			m.lift[k] += lift[0]
		}
		for q := 0; q < len(weight)-1-k; q++ {
			weight[q] = at*weight[q] + scale*weight[q+1]
		}
		for q := 0; q < len(lift)-1-k; q++ {
			lift[q] = at*lift[q] + scale*lift[q+1]
		}
	}
}

// offer is a knot and its price as a share of what it must be worth.
type offer struct {
	knot  int
	price float64
}

// cheapest marks the knots to take away next; nil when all are worth keeping.
func (f *fitter) cheapest(s *spline, inverse *band) []bool {
	n := len(s.at)
	var offers []offer
	for j := range n {
		if p := s.price(j, inverse) / f.worth(); p <= 1 {
			offers = append(offers, offer{j, p})
		}
	}
	if len(offers) == 0 || n <= few {
		return nil
	}
	slices.SortFunc(offers, func(a, b offer) int {
		return cmp.Or(cmp.Compare(a.price, b.price), cmp.Compare(a.knot, b.knot))
	})
	part, apart := partAtOnce, degree/2+1
	if n < manyKnots {
		part, apart = partAtTheEnd, degree+1
	}
	most := max(1, min(int(part*float64(n)), n-few))
	dearest := math.Max(offers[min(len(offers)-1, most/2)].price, free)
	gone := make([]bool, n)
	taken := 0
	for _, o := range offers {
		if taken == most || taken > 0 && o.price > dearest {
			break
		}
		clear := true
		for d := -apart + 1; d < apart; d++ {
			clear = clear && !gone[s.wrap(o.knot+d)]
		}
		if clear {
			gone[o.knot] = true
			taken++
		}
	}
	return gone
}

// leastOpen is how many intervals are left between two dwells at least: 5, so that no
// coefficient belongs to both, and what one round may take.
const leastOpen = 7

// dwellsAbout returns the dwells next to knot j, left and right, and how many intervals
// between them are open; no dwell is looked for beyond leastOpen.
func (r *ring) dwellsAbout(j int) (left, right, open int) {
	a, b := 0, 0
	for a <= leastOpen && r.flat[r.wrap(j-1-a)] == 0 {
		a++
	}
	for b <= leastOpen && r.flat[r.wrap(j+b)] == 0 {
		b++
	}
	if a > leastOpen || b > leastOpen {
		return 0, 0, a + b
	}
	return r.flat[r.wrap(j-1-a)], r.flat[r.wrap(j+b)], a + b
}

// price returns by how much the sum of squares grows when knot j is taken away.
func (s *spline) price(j int, inverse *band) float64 {
	switch left, right, open := s.dwellsAbout(j); {
	case left != right && open <= leastOpen:
		return math.Inf(1)
	case open == 0:
		return 0
	}
	jump := s.jump(j)
	var unknown [degree + 2]int
	step := 0.0
	for k, l := range jump {
		c := s.wrap(j - degree - 1 + k)
		unknown[k] = s.unknown[c]
		step += l * s.coef[c]
		if s.held[s.unknown[c]] {
			jump[k] = 0 // has no part in the variance
		}
	}
	variance := 0.0
	for k, l := range jump {
		for m := range k {
			variance += 2 * l * jump[m] * inverse.at(unknown[k], unknown[m])
		}
		variance += l * l * inverse.at(unknown[k], unknown[k])
	}
	return step * step / variance
}

// jump returns how the step of the fifth derivative at knot j follows from the coefficients
// j-6 to j, to scale: the differences of de Boor, ch. X, (cited from memory) of unit vectors.
func (s *spline) jump(j int) (out [degree + 2]float64) {
	here, unit := s.knot(j), s.knot(j+1)-s.knot(j-1)
	var near [2*degree + 3]float64 // knots j-6 to j+6
	for k := range near {
		near[k] = (s.knot(j-degree-1+k) - here) / unit
	}
	var row [degree + 2]([degree + 2]float64)
	for m := range row {
		row[m][m] = 1
	}
	for r := 1; r <= degree; r++ {
		for m := degree + 1; m >= r; m-- {
			over := near[m+degree+1-r] - near[m]
			for q := range row[m] {
				row[m][q] = (row[m][q] - row[m-1][q]) / over
			}
		}
	}
	for q := range out {
		out[q] = row[degree+1][q] - row[degree][q]
	}
	return out
}

// without returns the ring without the marked knots. An interval that becomes part of a
// flat one becomes flat: the polynomial on both is one.
func (r *ring) without(gone []bool) ring {
	var out ring
	for i, at := range r.at {
		if gone[i] {
			continue
		}
		flat := r.flat[i]
		for k := r.wrap(i + 1); gone[k]; k = r.wrap(k + 1) {
			flat = max(flat, r.flat[k])
		}
		out.at = append(out.at, at)
		out.flat = append(out.flat, flat)
	}
	return out
}
