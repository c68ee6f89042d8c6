package motion

import (
	"fmt"
	"math"
)

// A rise that hands over to a neighbor at speed is known at its ends only: lift,
// velocity and acceleration, here 0. The polynomial of least degree that meets n such
// facts has n coefficients and follows from one linear system (Hermite's
// interpolation; Birkhoff's, where an order is left out). Six facts give a quintic, whose
// basis by powers of u is
//
//	S = 10u³ - 15u⁴ + 6u⁵ + V0(u - 6u³ + 8u⁴ - 3u⁵) + V1(-4u³ + 7u⁴ - 3u⁵)
//
// In that form it loses digits near u = 1, so the system is set up about the middle,
// x = 2u - 1, as for the polynomials between dwells. Facts may make high coefficients
// vanish: from a dwell to V1 = 2 it is 2u³ - u⁴, and V0 = V1 = 1 is constant velocity.

// endFact is a derivative of the lift by u, of order 0 to 5, known at u = 0 or 1.
type endFact struct {
	u     float64
	order int
	value float64
}

// vanishing is the share of the largest coefficient at which one is rounding: 16
// units in the last place.
const vanishing = 0x1p-48

// leastPolynomial returns the polynomial of least degree that meets the facts, by
// powers of x = 2u - 1. The facts must determine it: no order twice at one end, and
// for n facts a system that is not singular, as it never is when each end has its
// orders without a gap.
func leastPolynomial(facts []endFact) []float64 {
	n := len(facts)
	rows := make([][]float64, n) // one a fact: n coefficients and the value
	for i, f := range facts {
		rows[i] = make([]float64, n+1)
		x, sign := 2*f.u-1, 1.0
		for j := f.order; j < n; j++ {
			c := sign
			for k := 0; k < f.order; k++ {
				c *= 2 * float64(j-k) // d/du = 2 d/dx
			}
			rows[i][j], sign = c, sign*x
		}
		rows[i][n] = f.value
	}
	c := solve(rows)
	largest := 0.0
	for _, x := range c {
		largest = math.Max(largest, math.Abs(x))
	}
	for len(c) > 1 && math.Abs(c[len(c)-1]) <= vanishing*largest {
		c = c[:len(c)-1]
	}
	return c
}

// solve returns the solution of a small linear system, each row its coefficients and
// its right side, by elimination with row pivots. The rows are overwritten.
func solve(rows [][]float64) []float64 {
	n := len(rows)
	for k := range n {
		best := k
		for i := k + 1; i < n; i++ {
			if math.Abs(rows[i][k]) > math.Abs(rows[best][k]) {
				best = i
			}
		}
		rows[k], rows[best] = rows[best], rows[k]
		for i := k + 1; i < n; i++ {
			by := rows[i][k] / rows[k][k]
			for j := k; j <= n; j++ {
				rows[i][j] -= by * rows[k][j]
			}
		}
	}
	x := make([]float64, n)
	for k := n - 1; k >= 0; k-- {
		x[k] = rows[k][n]
		for j := k + 1; j < n; j++ {
			x[k] -= rows[k][j] * x[j]
		}
		x[k] /= rows[k][k]
	}
	return x
}

// fastestEnd is the largest end velocity of a polynomial, in units of lift over angle:
// far above any of use, and small enough that the ends are met to 1e-12 of the lift.
const fastestEnd = 1000

// Polynomial returns the polynomial law of least degree, at most 5, with V = dS/du of
// start and end at its ends, zero acceleration at both. With 0 and 0 it is
// polynomial-3-4-5. It may turn back inside: from rest it stays within 0 to 1 as long as
// end is at most 2.5, to rest as long as start is. The velocities are those of the
// law, at most 1000 either way; a fall runs it backwards.
func Polynomial(start, end float64) (Law, error) {
	if !(math.Abs(start) <= fastestEnd && math.Abs(end) <= fastestEnd) {
		return Law{}, fmt.Errorf("law polynomial: its end velocities are %.6g and %.6g times lift over angle; they must be at most %d times", start, end, fastestEnd)
	}
	z := Zone{From: 0, To: 1, Origin: 0.5, Span: 0.5, Poly: leastPolynomial([]endFact{
		{0, 0, 0}, {0, 1, start}, {0, 2, 0},
		{1, 0, 1}, {1, 1, end}, {1, 2, 0},
	})}
	lo, hi := z.Lifts()
	return Law{name: "polynomial", zones: []Zone{z}, handsOver: true,
		below: unlessRounding(math.Max(0, -lo), 1), above: unlessRounding(math.Max(0, hi-1), 1)}, nil
}
