package smooth

// The pieces could be read off the B-splines of their intervals. But on an interval that is
// short beside its neighbors a B-spline is nearly constant, and of its second power only
// rounding is left: pieces 0.001 degrees long would meet with steps of the acceleration of
// 1e-8. The derivatives of a spline are splines again, whose coefficients are differences
// of its own; taken at a knot they are weighted means of numbers that the pieces to both
// sides share, and every piece is the Taylor polynomial at its first knot.

// curve writes the spline as pieces from its first knot on.
func (s *spline) curve() Curve {
	var c Curve
	for i := range s.at {
		here := s.interval(i)
		piece := Piece{From: here.from, To: here.to, Origin: here.from, Span: here.to - here.from}
		before, after := s.wrap(i-1), s.wrap(i+1)
		switch {
		case s.flat[i] > 0:
			piece.Poly = []float64{s.coef[i]}
		case s.flat[before] > 0: // the level and a fifth power
			piece.Poly = s.taylor(i, piece.Span)
			piece.Poly[0] = s.coef[before]
		case s.flat[after] > 0: // the same, seen from the dwell
			piece.Origin, piece.Span = here.to, here.from-here.to
			piece.Poly = []float64{s.coef[after], 0, 0, 0, 0, s.taylor(i, piece.Span)[degree]}
		default:
			piece.Poly = s.taylor(i, piece.Span)
		}
		c.Pieces = append(c.Pieces, piece)
	}
	return c
}

// taylor returns the Taylor coefficients of the spline on interval i at its first knot, for
// powers of the angle over span (degrees).
func (s *spline) taylor(i int, span float64) []float64 {
	var c [degree + 1]float64 // of B-splines i-5 to i
	for k := range c {
		c[k] = s.coef[s.wrap(i-degree+k)]
	}
	out := make([]float64, degree+1)
	scale := 1.0
	for r := range out {
		out[r] = s.atKnot(i, degree-r, c) * scale
		scale *= span / float64(r+1)
		for k := degree; k > r; k-- { // the derivative: C. de Boor, ch. X (cited from memory)
			j := i - degree + k
			c[k] = float64(degree-r) * (c[k] - c[k-1]) / (s.knot(j+degree-r) - s.knot(j))
		}
	}
	return out
}

// atKnot returns the value at knot i of the spline of degree p with the coefficients c, by
// the algorithm of de Boor (ch. X); c[5] belongs to the B-spline that begins at knot i.
func (s *spline) atKnot(i, p int, c [degree + 1]float64) float64 {
	x := s.knot(i)
	for k := 1; k <= p; k++ {
		for m := degree; m > degree-p+k-1; m-- {
			j := i - degree + m
			a := s.knot(j)
			part := (x - a) / (s.knot(j+p+1-k) - a)
			c[m] = c[m-1] + part*(c[m]-c[m-1])
		}
	}
	return c[degree]
}
