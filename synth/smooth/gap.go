package smooth

import "math"

// Gap is a step of cam angle from one row to the next.
type Gap struct {
	From, To float64 // cam angle, degrees, From < To, From in 0..360
	Lift     float64 // how far open the rows leave the lift in the middle, length
}

// gaps returns the step in which the rows leave the lift most open, and the widest step.
//
// The polynomial of degree 5 through the three rows on either side of a step misses a lift
// f in the middle of it by
//
//	f[x0 ... x5, x] * (x-x0)(x-x1)...(x-x5)
//
// (C. de Boor, A Practical Guide to Splines, ch. I, cited from memory). The divided
// difference with the middle itself is not known; with the next row in its place, to the
// left or the right, it is. Rounding makes a sixth difference up to 64 times as large, and
// the product is 1/205 of a sixth difference of evenly spaced rows: noise shows as about a
// third of itself, and what is more is the curve.
func (f *fitter) gaps() (open, widest Gap) {
	left := f.divided(-3)
	for k, right := range f.divided(-2) {
		g := Gap{From: f.at[k], To: f.angle(k + 1)}
		middle := g.From + (g.To-g.From)/2
		g.Lift = math.Max(math.Abs(left[k]), math.Abs(right))
		for m := -2; m <= 3; m++ {
			g.Lift *= math.Abs(middle - f.angle(k+m))
		}
		if k == 0 || g.Lift > open.Lift {
			open = g
		}
		if g.To-g.From > widest.To-widest.From {
			widest = g
		}
	}
	return open, widest
}

// divided returns for every row k the divided difference over the seven rows from k+first on.
func (f *fitter) divided(first int) []float64 {
	n := len(f.at)
	out := make([]float64, n)
	for k := range out {
		var x, y [degree + 2]float64
		for m := range x {
			x[m] = f.angle(k + first + m)
			y[m] = f.lift[((k+first+m)%n+n)%n] - f.lift[k]
		}
		for order := 1; order < len(y); order++ {
			for m := len(y) - 1; m >= order; m-- {
				y[m] = (y[m] - y[m-1]) / (x[m] - x[m-order])
			}
		}
		out[k] = y[len(y)-1]
	}
	return out
}
