package fit

// skyline is a symmetric positive definite system A·z = b whose rows are stored from
// their first entry that is not zero to the diagonal: a band, with two or three full last
// rows when the spline is periodic. Factors of A = L·D·Lᵀ stay inside
// the same envelope (A. Jennings, The Computer Journal 9 (1966) 281).
type skyline struct {
	first []int     // column of the first stored entry of each row
	start []int     // index into a of the (virtual) column 0 of each row
	a     []float64 // lower triangle, row by row
	b     []float64 // right hand side, then the solution
}

// reset clears the system for n unknowns; then come couple, shape, add and solve.
func (k *skyline) reset(n int) {
	k.first = resized(k.first, n)
	k.start = resized(k.start, n)
	k.b = resized(k.b, n)
	for i := range k.first {
		k.first[i], k.b[i] = i, 0
	}
}

// couple says that row i has an entry in column j <= i.
func (k *skyline) couple(i, j int) {
	k.first[i] = min(k.first[i], j)
}

// shape allots the envelope once all couplings are known.
func (k *skyline) shape() {
	size := 0
	for i, f := range k.first {
		k.start[i] = size - f
		size += i - f + 1
	}
	k.a = resized(k.a, size)
	clear(k.a)
}

// add adds x to row i, column j, unless that is above the diagonal.
func (k *skyline) add(i, j int, x float64) {
	if i >= j {
		k.a[k.start[i]+j] += x
	}
}

// solve replaces b by the solution; false when A is not positive definite.
func (k *skyline) solve() bool {
	n := len(k.first)
	for i := 0; i < n; i++ {
		row, f := k.start[i], k.first[i]
		for j := f; j < i; j++ {
			other := k.start[j]
			for l := max(f, k.first[j]); l < j; l++ {
				k.a[row+j] -= k.a[row+l] * k.a[other+l]
			}
		}
		d := k.a[row+i]
		for j := f; j < i; j++ {
			x := k.a[row+j]
			k.a[row+j] = x / k.a[k.start[j]+j]
			d -= x * k.a[row+j]
			k.b[i] -= k.a[row+j] * k.b[j]
		}
		if k.a[row+i] = d; !(d > 0) {
			return false
		}
	}
	for i := range k.b {
		k.b[i] /= k.a[k.start[i]+i]
	}
	for i := n - 1; i >= 0; i-- {
		for j := k.first[i]; j < i; j++ {
			k.b[j] -= k.a[k.start[i]+j] * k.b[i]
		}
	}
	return true
}

// resized returns a slice of length n, the old one when it is long enough.
func resized[T any](s []T, n int) []T {
	if cap(s) < n {
		return make([]T, n, n+n/2)
	}
	return s[:n]
}
