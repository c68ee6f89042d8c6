package smooth

import "math"

// degree of the spline: 5, so that the first four derivatives go on through every knot.
// It is also the degree of every curve that minimizes the integral of the squared jerk
// while it stays near points (Schoenberg, PNAS 52 (1964) 947-950, cited from memory).
const degree = 5

const (
	turn    = 360.0         // degrees
	radians = math.Pi / 180 // in a degree
)

// ring is the knots of a periodic spline and what is known of its intervals: interval i
// runs from knot i to knot i+1. Indices go round: knot i+K is knot i, a turn later.
type ring struct {
	at   []float64 // degrees, increasing, all within one turn
	flat []int     // of each interval: 0, or the number of the dwell it belongs to, from 1
}

// wrap brings an index into 0..K-1.
func (r *ring) wrap(i int) int {
	n := len(r.at)
	if i %= n; i < 0 {
		i += n
	}
	return i
}

// knot returns knot i for any i.
func (r *ring) knot(i int) float64 {
	n := len(r.at)
	k := r.wrap(i)
	return r.at[k] + turn*float64((i-k)/n)
}

// stretch is part of the turn, degrees.
type stretch struct{ from, to float64 }

func (s stretch) half() float64   { return (s.to - s.from) / 2 }
func (s stretch) middle() float64 { return s.from + s.half() }

// unit returns u, -1 at from and 1 at to. Through the middle it would be no more exact than the
// middle is, which in a stretch of a thousandth of a degree at 300 degrees is 1e-10 of it.
func (s stretch) unit(deg float64) float64 {
	return ((deg - s.from) + (deg - s.to)) / (s.to - s.from)
}

// interval returns the ends of interval i.
func (r *ring) interval(i int) stretch { return stretch{r.knot(i), r.knot(i + 1)} }

// powers is a polynomial in u on -1..1 by growing power.
type powers [degree + 1]float64

// locals returns the six B-splines that live on interval i, from the one that begins at
// knot i-5 to the one that begins at knot i, as polynomials in u, -1 to 1 over the
// interval. They follow from the recurrence of Cox and de Boor (C. de Boor, A Practical
// Guide to Splines, ch. IX, cited from memory); each of its ramps goes from 0 to 1 over
// more than the interval, so it is exact to rounding in this form.
func (r *ring) locals(i int) (out [degree + 1]powers) {
	var near [2*degree + 2]float64 // knots i-5 to i+6 in the unit of u
	here := r.interval(i)
	for k := range near {
		near[k] = here.unit(r.knot(i - degree + k))
	}
	out[degree][0] = 1
	for k := 1; k <= degree; k++ {
		for j := degree - k; j <= degree; j++ { // B-spline of degree k beginning at near[j]
			var sum powers
			if j > degree-k {
				a, b := near[j], near[j+k]
				addRamp(&sum, &out[j], -a/(b-a), 1/(b-a), k)
			}
			if j < degree {
				a, b := near[j+1], near[j+k+1]
				addRamp(&sum, &out[j+1], b/(b-a), -1/(b-a), k)
			}
			out[j] = sum
		}
	}
	return out
}

// addRamp adds (c0 + c1 u)*p to sum; p has degree below k.
func addRamp(sum, p *powers, c0, c1 float64, k int) {
	for m := k - 1; m >= 0; m-- {
		sum[m] += c0 * p[m]
		sum[m+1] += c1 * p[m]
	}
}
