package smooth

import "math"

// Most cams stand still for part of the turn, and there a spline shows every flaw: left to
// itself it swings in behind the end of a rise, by less than the smoothing and over
// degrees, with an acceleration the law does not have. So a dwell is not fitted but found,
// and the curve made constant on it: the coefficients there are one unknown. Where all its
// rows hold one and the same number that number is the level, to the bit.
//
// Where a dwell ends cannot be seen: the lift leaves it with the third power of the angle,
// below the noise for a degree or two. The ends are therefore left out at first, a seventh
// of the length each, and grow back as knots in them are taken away: to lose the knot at
// the end of a flat interval is to be flat as far as the next, at a price like any other.

type dwell struct {
	from, to float64 // degrees, at rows; to may be above 360
	level    float64
	held     bool // the level is what every row says
}

const (
	dwellRows    = 8   // a shorter run of cells shows no dwell
	dwellDegrees = 5.0 // nor does a narrower one: the top of a cosine is as flat
	dwellMargin  = 7   // one part in so many is left out at each end
)

// findDwells finds the dwells, longest first.
func (f *fitter) findDwells() {
	n := len(f.cells)
	used := make([]bool, n)
	for {
		first, count := f.longestRun(used)
		if count < dwellRows {
			return
		}
		for k := range count {
			used[(first+k)%n] = true
		}
		margin := max(2, count/dwellMargin)
		first, count = first+margin, count-2*margin
		if d, ok := f.dwellOver(first, count); ok {
			f.dwells = append(f.dwells, d)
		}
	}
}

// longestRun returns the widest run of unused cells whose rows a constant meets to within
// the smoothing; its first cell and their number, 0 when none is dwellDegrees wide.
func (f *fitter) longestRun(used []bool) (first, count int) {
	n := len(f.cells)
	widest := dwellDegrees
	for i := range f.cells {
		low, high := math.Inf(1), math.Inf(-1)
		k := 0
		for ; k < n && !used[(i+k)%n]; k++ {
			c := &f.cells[(i+k)%n]
			low, high = math.Min(low, c.low), math.Max(high, c.high)
			if high-low > 2*f.allowed {
				break
			}
		}
		if k == 0 {
			continue
		}
		last := f.cells[(i+k-1)%n].angle + turn*float64((i+k-1)/n)
		if width := last - f.cells[i].angle; width > widest {
			widest, first, count = width, i, k
		}
	}
	return first, count
}

// dwellOver returns the dwell of a run of cells, and whether a parabola fits their means
// no better than noise can make it fit.
func (f *fitter) dwellOver(first, count int) (dwell, bool) {
	n := len(f.cells)
	at := func(k int) *cell { return &f.cells[(first+k)%n] }
	start := f.cells[first%n].angle + turn*float64(first/n)
	end := at(count-1).angle + turn*float64((first+count-1)/n)
	mean, low, high := 0.0, math.Inf(1), math.Inf(-1)
	for k := range count {
		mean += at(k).lift / float64(count)
		low, high = math.Min(low, at(k).low), math.Max(high, at(k).high)
	}
	// the growth of the squared residuals that a slope and a curvature would take away
	var slope, bend, slopes, bends float64
	for k := range count {
		u := 2*(at(k).angle+turn*float64((first+k)/n)-start)/(end-start) - 1
		p := (3*u*u - 1) / 2
		slope += u * (at(k).lift - mean)
		slopes += u * u
		bend += p * (at(k).lift - mean)
		bends += p * p
	}
	gain := slope*slope/slopes + bend*bend/bends
	d := dwell{
		from: f.at[at(0).first] + turn*float64(first/n), to: f.at[at(count-1).first] + turn*float64((first+count-1)/n),
		level: mean, held: high-low <= rounding*f.size(),
	}
	if d.held {
		d.level = max(low, min(0, high)) // the one number, and 0 where it is 0 but for rounding
	}
	return d, gain <= f.worth()
}

// firstRing returns the knots the search begins with, one for every cell.
func (f *fitter) firstRing() ring {
	var r ring
	for i := range f.cells {
		r.at = append(r.at, f.at[f.cells[i].first])
	}
	r.flat = make([]int, len(r.at))
	for i := range r.at {
		a, b := r.knot(i), r.knot(i+1)
		for k, d := range f.dwells {
			if a >= d.from && b <= d.to || a+turn >= d.from && b+turn <= d.to {
				r.flat[i] = k + 1
			}
		}
	}
	return r
}
