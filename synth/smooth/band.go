package smooth

import "math"

// The matrix of a periodic spline is banded but for two corners, where the last
// coefficients meet the first. The customary cure cuts the ring and carries the corners
// as a border; it needs a ring wider than its border, and a cam of a few knots is not.
// Here the ring is folded flat instead: its unknowns are taken from both ends in turn,
//
//	0, n-1, 1, n-2, 2, ...
//
// so that two unknowns d apart on the ring are at most 2d apart in the list. One plain
// band of twice the width then holds every ring, down to a single unknown. The price is
// about twice the arithmetic of a border; it is never what takes the time.

// reach is how far apart on the ring two unknowns may be that share an entry: 5 for two
// splines that live on one interval, 6 for the seven that a knot can tell apart.
const reach = degree + 1

const width = 2 * reach // of the folded band, below the diagonal

// folded returns the place in the list of unknown i of a ring of n.
func folded(i, n int) int {
	if 2*i < n {
		return 2 * i
	}
	return 2*(n-1-i) + 1
}

// band is a symmetric matrix over a ring of n unknowns, folded: rows of the lower half,
// each with its width entries left of the diagonal and the diagonal last.
type band struct {
	n    int
	rows [][width + 1]float64
}

func newBand(n int) *band { return &band{n, make([][width + 1]float64, n)} }

// add adds v to the entry of ring unknowns i and j, at most reach apart; both halves at
// once when they differ.
func (b *band) add(i, j int, v float64) {
	p, q := folded(i, b.n), folded(j, b.n)
	if p < q {
		p, q = q, p
	}
	b.rows[p][width+q-p] += v
}

// at returns the entry of ring unknowns i and j, at most reach apart.
func (b *band) at(i, j int) float64 {
	return b.entry(folded(i, b.n), folded(j, b.n))
}

// plus returns the matrix plus c times another.
func (b *band) plus(c float64, other *band) *band {
	out := newBand(b.n)
	for i := range b.rows {
		for k, v := range b.rows[i] {
			out.rows[i][k] = v + c*other.rows[i][k]
		}
	}
	return out
}

// quadratic returns x'Ax for x over the ring.
func (b *band) quadratic(x []float64) float64 {
	y := make([]float64, b.n)
	for i := range x {
		y[folded(i, b.n)] = x[i]
	}
	sum := 0.0
	for i := range b.rows {
		sum += b.rows[i][width] * y[i] * y[i]
		for j := max(0, i-width); j < i; j++ {
			sum += 2 * b.rows[i][width+j-i] * y[i] * y[j]
		}
	}
	return sum
}

// isolate makes unknown i stand alone with a 1 on its diagonal.
func (b *band) isolate(i int) {
	p := folded(i, b.n)
	b.rows[p] = [width + 1]float64{}
	for q := p + 1; q <= min(p+width, b.n-1); q++ {
		b.rows[q][width+p-q] = 0
	}
	b.rows[p][width] = 1
}

// factor replaces the matrix by its Cholesky factor L, A = LL', and reports whether it is
// positive definite. Golub and Van Loan, Matrix Computations, 4.3.5 (cited from memory).
func (b *band) factor() bool {
	for i := range b.rows {
		row := &b.rows[i]
		for j := max(0, i-width); j < i; j++ {
			row[width+j-i] = (row[width+j-i] - overlap(row, &b.rows[j], i, j)) / b.rows[j][width]
		}
		pivot := row[width] - overlap(row, row, i, i)
		if !(pivot > pivotShare*row[width]) {
			return false
		}
		row[width] = math.Sqrt(pivot)
	}
	return true
}

// pivotShare is the share of a diagonal entry that must be left of it: below, the
// difference holds no digit.
const pivotShare = 1e-14

// overlap returns the sum of L[i][c]*L[j][c] over the columns c left of j, j <= i.
func overlap(row, other *[width + 1]float64, i, j int) float64 {
	shift := i - j
	first := max(shift, width-j)
	if first >= width {
		return 0
	}
	a, b := row[first-shift:width-shift], other[first:width]
	sum := 0.0
	for k, v := range a {
		sum += v * b[k]
	}
	return sum
}

// solve replaces x, over the ring, by the solution of LL'x = x.
func (b *band) solve(x []float64) {
	n := b.n
	y := make([]float64, n)
	for i := range x {
		y[folded(i, n)] = x[i]
	}
	for i := range y {
		row := &b.rows[i]
		for j := max(0, i-width); j < i; j++ {
			y[i] -= row[width+j-i] * y[j]
		}
		y[i] /= row[width]
	}
	for i := n - 1; i >= 0; i-- {
		row := &b.rows[i]
		y[i] /= row[width]
		for j := max(0, i-width); j < i; j++ {
			y[j] -= row[width+j-i] * y[i]
		}
	}
	for i := range x {
		x[i] = y[folded(i, n)]
	}
}

// inverse returns the entries of the inverse that lie inside the band, from the factor.
// They follow from the last row upwards without the entries outside: K. Takahashi, J.
// Fagan and M.-S. Chen, Formation of a sparse bus impedance matrix, 8th PICA Conference,
// 1973; A. M. Erisman and W. F. Tinney, CACM 18 (1975) 177-179 (both cited from memory).
func (b *band) inverse() *band {
	z := newBand(b.n)
	for i := b.n - 1; i >= 0; i-- {
		last := min(i+width, b.n-1)
		pivot := b.rows[i][width]
		var below [width]float64 // column i of L under the diagonal, over its pivot
		for k := i + 1; k <= last; k++ {
			below[k-i-1] = b.rows[k][width+i-k] / pivot
		}
		diagonal := 1 / (pivot * pivot)
		for j := last; j > i; j-- {
			sum := 0.0
			for k := i + 1; k <= last; k++ {
				sum -= below[k-i-1] * z.entry(k, j)
			}
			z.rows[j][width+i-j] = sum
		}
		for k := i + 1; k <= last; k++ {
			diagonal -= below[k-i-1] * z.rows[k][width+i-k]
		}
		z.rows[i][width] = diagonal
	}
	return z
}

// entry returns the entry at places p and q of the list.
func (b *band) entry(p, q int) float64 {
	if p < q {
		p, q = q, p
	}
	return b.rows[p][width+q-p]
}
