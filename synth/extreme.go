package synth

import (
	"math"

	"lobewright/synth/plane"
)

// samplesPerPiece is how finely a smooth function is looked at before its
// extremes are refined. A zone of a motion law holds at most one arch of each
// sinusoid or a polynomial of degree 7, and what is built from it a handful of
// extremes; 160 samples see them all with a wide margin.
const samplesPerPiece = 160

// flat is the share of a value below which differences are rounding.
const flat = 1e-13

// place is a value with where it stands.
type place struct {
	value float64
	piece int
	t     float64 // cam angle, degrees
}

// largest returns the largest value of f over the pieces that use accepts;
// value is -Inf when it accepts none or f is nowhere a number. The value is exact to
// rounding at a smooth extreme and at the ends of pieces.
func (c *Curve) largest(use func(piece int) bool, f func(piece int, t float64) float64) place {
	return largest(c.pieces, use, f)
}

// samples is how many steps a piece is looked at in: a narrow one, of which a smoothed
// table has many, needs fewer.
func samples(p plane.Piece) int {
	const fullWidth, least = 40.0, 12
	return max(least, min(samplesPerPiece, int(samplesPerPiece*(p.To-p.From)/fullWidth)))
}

func largest(pieces []plane.Piece, use func(piece int) bool, f func(piece int, t float64) float64) place {
	best := place{value: math.Inf(-1)}
	for i, p := range pieces {
		if !use(i) {
			continue
		}
		at := func(t float64) float64 { return f(i, t) }
		if b := largestOn(p.From, p.To, samples(p), at); b.value > above(best.value) {
			best = place{b.value, i, b.t}
		}
	}
	return best
}

// largestOn samples f on [a, b] and refines every sample that tops its neighbors.
func largestOn(a, b float64, n int, f func(float64) float64) place {
	best := place{value: math.Inf(-1), t: a}
	y := make([]float64, n+1)
	at := func(k int) float64 {
		if k == n {
			return b
		}
		return a + (b-a)*float64(k)/float64(n)
	}
	for k := range y {
		if y[k] = f(at(k)); y[k] > above(best.value) {
			best.value, best.t = y[k], at(k)
		}
	}
	span := math.Abs(best.value)
	for k := 1; k < n; k++ {
		// A true maximum between samples cannot top its samples by more than the
		// fall to their neighbors, so low hills need no climbing.
		// Flat ground, as along a dwell, has nothing to climb.
		fall := math.Max(y[k]-y[k-1], y[k]-y[k+1])
		if y[k] < y[k-1] || y[k] < y[k+1] || fall <= flat*span || y[k]+4*fall+1e-9*span < best.value {
			continue
		}
		if t, v := golden(at(k-1), at(k+1), f); v > above(best.value) {
			best.value, best.t = v, t
		}
	}
	return best
}

// above returns what a value must top to count as larger: of values that are equal
// but for rounding, as along a dwell, the first is named.
func above(v float64) float64 {
	if math.IsInf(v, -1) {
		return v
	}
	return v + flat*math.Abs(v)
}

// golden climbs a hill on [a, b] by golden section (J. Kiefer, Proc. AMS 4, 1953).
func golden(a, b float64, f func(float64) float64) (t, v float64) {
	const inv = 0.6180339887498949 // (sqrt 5 - 1)/2
	x, y := b-inv*(b-a), a+inv*(b-a)
	fx, fy := f(x), f(y)
	for range 52 { // 0.618^52 of the bracket: below the rounding of f near its top
		if fx >= fy {
			b, y, fy = y, x, fx
			x = b - inv*(b-a)
			fx = f(x)
		} else {
			a, x, fx = x, y, fy
			y = a + inv*(b-a)
			fy = f(y)
		}
	}
	if fx >= fy {
		return x, fx
	}
	return y, fy
}

func every(int) bool { return true }
