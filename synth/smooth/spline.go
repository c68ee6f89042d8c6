package smooth

import (
	"math"
	"slices"
)

// spline is a ring of knots with coefficients, and the unknowns behind them: the six
// B-splines of a flat interval share one.
type spline struct {
	ring
	coef    []float64 // of the B-spline that begins at knot i
	unknown []int     // of each coefficient
	count   int       // of unknowns
	held    []bool    // of each unknown: its value is given, not sought
}

// newSpline ties the coefficients of flat intervals and gives every coefficient the lift
// that start has near the middle of its B-spline, or the level of its dwell.
func newSpline(r ring, dwells []dwell, start func(deg float64) float64) *spline {
	n := len(r.at)
	s := &spline{ring: r, coef: make([]float64, n), unknown: make([]int, n)}
	tied := make([]int, n) // the dwell of each coefficient, 0 for none
	for i, d := range r.flat {
		for k := 0; d > 0 && k <= degree; k++ {
			tied[s.wrap(i-k)] = d
		}
	}
	first := 0 // a coefficient that does not share with the one before
	for first < n && tied[first] > 0 && tied[first] == tied[s.wrap(first-1)] {
		first++
	}
	for k := range n {
		j := s.wrap(first + k)
		d := tied[j]
		if k == 0 || d == 0 || d != tied[s.wrap(j-1)] {
			s.count++
			s.held = append(s.held, d > 0 && dwells[d-1].held)
		}
		s.unknown[j] = s.count - 1
		if d > 0 {
			s.coef[j] = dwells[d-1].level
			continue
		}
		middle := 0.0
		for m := 1; m <= degree; m++ {
			middle += s.knot(j+m) / degree
		}
		s.coef[j] = start(middle)
	}
	return s
}

// clone returns a copy whose coefficients may be changed.
func (s *spline) clone() *spline {
	out := *s
	out.coef = slices.Clone(s.coef)
	return &out
}

// local returns the spline on interval i as a polynomial in u, -1 to 1. The B-splines add
// up to 1: all but the constant term see only how the coefficients differ.
func (s *spline) local(i int, basis *[degree + 1]powers) (p powers) {
	base := s.coef[s.wrap(i-degree/2)]
	for k := range basis {
		c := s.coef[s.wrap(i-degree+k)] - base
		for m := range p {
			p[m] += c * basis[k][m]
		}
	}
	p[0] += base
	return p
}

// value returns the polynomial at u.
func (p *powers) value(u float64) float64 {
	return ((((p[5]*u+p[4])*u+p[3])*u+p[2])*u+p[1])*u + p[0]
}

// moments are what the normal equations need to know of the points on an interval: the
// sums of weight*u^k, and of weight*what is to be fitted*u^k.
type moments struct {
	weight [2*degree + 1]float64
	lift   powers
}

// add adds a point at u.
func (m *moments) add(u, weight, lift float64) {
	for k := range m.lift {
		m.weight[k] += weight
		m.lift[k] += lift
		weight *= u
		lift *= u
	}
	for k := len(m.lift); k < len(m.weight); k++ {
		m.weight[k] += weight
		weight *= u
	}
}

// normal is the system of normal equations over the unknowns.
type normal struct {
	matrix *band
	right  []float64
}

// normals gathers the equations. of gives the moments of interval i, whose B-splines it is
// handed; what is fitted is a change of the coefficients, so the lifts among the moments
// are what the spline as it is misses.
func (s *spline) normals(of func(i int, basis *[degree + 1]powers) moments) *normal {
	out := &normal{newBand(s.count), make([]float64, s.count)}
	for i := range s.at {
		basis := s.locals(i)
		m := of(i, &basis)
		var element [degree + 1][degree + 1]float64
		var right [degree + 1]float64
		for b := range basis {
			var column powers // the moments' Hankel matrix times B-spline b
			for k := range column {
				for q, c := range basis[b] {
					column[k] += m.weight[k+q] * c
				}
			}
			for a := b; a <= degree; a++ {
				for k, c := range basis[a] {
					element[a][b] += c * column[k]
				}
			}
			for k, c := range basis[b] {
				right[b] += c * m.lift[k]
			}
		}
		s.gather(out, i, &element, &right)
	}
	for u, held := range s.held {
		if held {
			out.hold(u)
		}
	}
	return out
}

// gather adds what interval i brings: the lower half of its matrix and its right side.
func (s *spline) gather(n *normal, i int, element *[degree + 1][degree + 1]float64, right *[degree + 1]float64) {
	for a := range element {
		ua := s.unknown[s.wrap(i-degree+a)]
		n.right[ua] += right[a]
		for b := range a + 1 {
			v := element[a][b]
			ub := s.unknown[s.wrap(i-degree+b)]
			if a != b && ua == ub { // both halves fall on the diagonal
				v *= 2
			}
			n.matrix.add(ua, ub, v)
		}
	}
}

// hold keeps unknown u where it is.
func (n *normal) hold(u int) {
	n.matrix.isolate(u)
	n.right[u] = 0
}

// stiffen adds the integral of the squared jerk over the turn, times lambda (rad^5): the
// third derivative of a piece is a quadratic in u.
func (s *spline) stiffen(n *normal, lambda float64) {
	for i := range s.at {
		basis := s.locals(i)
		scale := lambda / math.Pow(s.interval(i).half()*radians, 5)
		var element [degree + 1][degree + 1]float64
		var right [degree + 1]float64
		for a := range basis {
			for b := range basis {
				v := scale * jerkProduct(&basis[a], &basis[b])
				element[a][b] = v
				right[a] -= v * (s.coef[s.wrap(i-degree+b)] - s.coef[s.wrap(i-degree/2)])
			}
		}
		s.gather(n, i, &element, &right)
	}
	for u, held := range s.held {
		if held {
			n.hold(u)
		}
	}
}

// jerkProduct returns the integral over -1..1 of the product of two third derivatives.
func jerkProduct(p, q *powers) float64 {
	a0, a1, a2 := 6*p[3], 24*p[4], 60*p[5]
	b0, b1, b2 := 6*q[3], 24*q[4], 60*q[5]
	return 2 * (a0*b0 + (a0*b2+a1*b1+a2*b0)/3 + a2*b2/5)
}

// move changes the coefficients by part of a change of the unknowns.
func (s *spline) move(part float64, change []float64) {
	for j, u := range s.unknown {
		s.coef[j] += part * change[u]
	}
}

// advance solves the equations and moves the coefficients; false when they have no
// solution in floats. The matrix is a factor afterwards.
func (s *spline) advance(n *normal) bool {
	if !n.matrix.factor() {
		return false
	}
	n.matrix.solve(n.right)
	s.move(1, n.right)
	return true
}
