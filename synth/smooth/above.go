package smooth

import (
	"math"
	"slices"
)

// A table that stands at 0 for part of the turn must not become a curve that dips below 0
// beside it, if only by a thousandth of the smoothing: a lift below 0 is refused later on.
// A spline is nowhere below the least of its coefficients. So where the lowest rows of the
// table are a dwell at one number, coefficients below that number are held at it and the
// rest is fitted again.

// above returns s changed so that it is nowhere below such a dwell; as it is when it
// already is not or there is no such dwell. Otherwise and when that moves a row too far it
// returns false and the residuals.
func (f *fitter) above(s *spline) (*spline, []float64, bool) {
	floor := math.Inf(-1)
	for _, d := range f.dwells {
		if d.held && d.level-f.low <= rounding*f.size() {
			floor = d.level
		}
	}
	if slices.Min(s.coef) >= floor {
		return s, nil, true
	}
	out := s.clone()
	out.held = slices.Clone(s.held)
	for slices.Min(out.coef) < floor {
		for j, u := range out.unknown {
			if out.coef[j] < floor {
				out.coef[j], out.held[u] = floor, true
			}
		}
		if !out.leastSquares(&f.rows) {
			return s, nil, true
		}
	}
	residual := out.residuals(&f.rows)
	return out, residual, largest(residual) <= f.limit()
}
