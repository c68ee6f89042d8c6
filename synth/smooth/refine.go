package smooth

import (
	"math"
	"slices"
)

// refined returns the ring with a knot more in every interval that has a row moved too far,
// at the row moved farthest or the nearest that is no knot yet; false when all rows are
// knots and there is no dwell. A dwell with such a row, or beside one that can be given no
// other knot, is cut back as far as the new knot.
func (f *fitter) refined(r ring, residual []float64) (ring, bool) {
	n := len(f.at)
	const none = -1
	old := make([]int, n) // the knot each row is, or none
	for k := range old {
		old[k] = none
	}
	for i, at := range r.at {
		k, _ := slices.BinarySearch(f.at, at)
		old[k] = i
	}
	fresh, cut := make([]bool, n), make([]bool, n) // rows that become knots; from which row to the next no dwell goes on
	more := false
	s := &spline{ring: r}
	s.spans(&f.rows, func(i, from, to int, _ float64) {
		worst, most := none, f.limit()
		for k := from; k < to; k++ {
			if v := math.Abs(residual[k]); v > most {
				worst, most = k, v
			}
		}
		if worst == none {
			return
		}
		least := 0 // how far about the row to look at least
		if r.flat[i] > 0 {
			least = degree
		}
		found := false
		for d := 0; d < n && !(found && d > least); d++ {
			right, left := (worst+d)%n, (worst-d+n)%n
			for _, k := range [2]int{right, left} {
				if old[k] == none && !fresh[k] && !(found && least == 0) {
					fresh[k], found, more = true, true, true
				}
			}
			if d > 0 {
				cut[(right-1+n)%n], cut[left] = true, true
			}
		}
	})
	if !more { // every such row and its neighbors are knots: give up the dwells
		open := ring{at: r.at, flat: make([]int, len(r.flat))}
		return open, !slices.Equal(open.flat, r.flat)
	}
	return f.spliced(r, old, fresh, cut), true
}

// spliced returns the ring with the fresh knots in it. Of a flat interval that part stays
// flat which has no cut.
func (f *fitter) spliced(r ring, old []int, fresh, cut []bool) ring {
	var out ring
	flat := r.flat[len(r.flat)-1] // of the old interval the row lies in
	severed := false              // a cut before the first knot
	for k, at := range f.at {
		if old[k] >= 0 {
			flat = r.flat[old[k]]
		}
		if old[k] >= 0 || fresh[k] {
			out.at, out.flat = append(out.at, at), append(out.flat, flat)
		}
		if last := len(out.flat) - 1; cut[k] && last >= 0 {
			out.flat[last] = 0
		} else if cut[k] {
			severed = true
		}
	}
	if severed {
		out.flat[len(out.flat)-1] = 0
	}
	return out
}
