package qp

import "math"

// envelope is a symmetric matrix stored by rows from each row's first entry to the
// diagonal, and its Cholesky factor in the same place: the factor fills the
// envelope and nothing else (A. George and J. W. H. Liu, Computer Solution of Large
// Sparse Positive Definite Systems, Prentice-Hall 1981, cited from memory). Unknowns
// that many others meet (the peak that is minimized, the wrap of a periodic spline) go
// last, where they cost one long row each.
type envelope struct {
	first []int       // first column of each row
	row   [][]float64 // row[i][j-first[i]]
	diag  []float64   // of the matrix before factoring, for the test of pivots
}

// newEnvelope has room for every pair of unknowns that meet in one of the sets.
func newEnvelope(n int, sets func(yield func([]int))) *envelope {
	e := &envelope{first: make([]int, n), row: make([][]float64, n), diag: make([]float64, n)}
	for i := range e.first {
		e.first[i] = i
	}
	sets(func(set []int) {
		least := n
		for _, i := range set {
			least = min(least, i)
		}
		for _, i := range set {
			e.first[i] = min(e.first[i], least)
		}
	})
	size := 0
	for i, f := range e.first {
		size += i - f + 1
	}
	all := make([]float64, size)
	for i, f := range e.first {
		e.row[i], all = all[:i-f+1:i-f+1], all[i-f+1:]
	}
	return e
}

func (e *envelope) clear() {
	for _, r := range e.row {
		clear(r)
	}
}

// add adds v at i, j and j, i.
func (e *envelope) add(i, j int, v float64) {
	if i < j {
		i, j = j, i
	}
	e.row[i][j-e.first[i]] += v
}

// addSquare adds d times the row's product with itself.
func (e *envelope) addSquare(r Row, d float64) {
	for a, i := range r.I {
		f, row, w := e.first[i], e.row[i], d*r.V[a]
		for b, j := range r.I {
			if j <= i {
				row[j-f] += w * r.V[b]
			}
		}
	}
}

// tiny is the share of its own diagonal below which a pivot is rounding; such an
// unknown is free to the method and held where it is (Wright 1997, chapter 11).
const tiny = 1e-14

// factor replaces the matrix by its Cholesky factor.
func (e *envelope) factor() {
	for i, ri := range e.row {
		fi := e.first[i]
		e.diag[i] = ri[i-fi]
		for j := fi; j < i; j++ {
			fj := e.first[j]
			from := max(fi, fj)
			ri[j-fi] = (ri[j-fi] - dot(ri[from-fi:j-fi], e.row[j][from-fj:j-fj])) / e.row[j][j-fj]
		}
		d := ri[i-fi] - dot(ri[:i-fi], ri[:i-fi])
		if !(d > tiny*e.diag[i]) {
			d = 1e128
		}
		ri[i-fi] = math.Sqrt(d)
	}
}

// forward solves with the factor, in place.
func (e *envelope) forward(x []float64) {
	for i, r := range e.row {
		f := e.first[i]
		x[i] = (x[i] - dot(r[:i-f], x[f:i])) / r[i-f]
	}
}

// backward solves with the transpose of the factor, in place.
func (e *envelope) backward(x []float64) {
	for i := len(e.row) - 1; i >= 0; i-- {
		r, f := e.row[i], e.first[i]
		x[i] /= r[i-f]
		for k, v := range r[:i-f] {
			x[f+k] -= v * x[i]
		}
	}
}

func dot(a, b []float64) float64 {
	b = b[:len(a)]
	var s0, s1, s2, s3 float64
	k := 0
	for ; k+4 <= len(a); k += 4 {
		s0 += a[k] * b[k]
		s1 += a[k+1] * b[k+1]
		s2 += a[k+2] * b[k+2]
		s3 += a[k+3] * b[k+3]
	}
	for ; k < len(a); k++ {
		s0 += a[k] * b[k]
	}
	return (s0 + s1) + (s2 + s3)
}
