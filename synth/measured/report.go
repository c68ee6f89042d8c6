package measured

import (
	"math"
	"slices"
)

// report compares the spline with the rows.
func (f *fitter) report(s *spline) Report {
	n := len(f.rows)
	r := Report{Rows: n, Knots: len(s.knots), Residuals: make([]float64, n)}
	for i, row := range f.rows {
		d := s.lift(row.Angle) - row.Lift
		r.Residuals[i] = d
		r.RMS += d * d / float64(n)
		if math.Abs(d) > r.Largest {
			r.Largest, r.LargestAt = math.Abs(d), row
		}
	}
	r.RMS = math.Sqrt(r.RMS)
	r.NoiseLift, r.Between, r.BetweenAt = f.prediction()
	r.NoiseAcceleration = r.NoiseLift * math.Sqrt(2*math.Pi/float64(n)*math.Pow(float64(r.Knots)/2, 5)/(5*math.Pi))
	return r
}

// prediction predicts each row from three neighbors on either side, by the polynomial
// through the six (Lagrange).
//
// Where the curve is smooth what is left is noise: of equal rows the prediction error has
// a variance of 1 + (2(1+36+225)/400) times the noise's. The largest twentieth is left
// out: those are the corners of the curve. White noise of a row's root mean square s, at n rows a turn, through
// a spline of K knots, which passes the K/2 lowest harmonics and nothing above, has an
// acceleration of root mean square s√((2π/n)·(K/2)⁵/(5π)) (the integral of the fourth
// power of the frequency).
//
// Where the rows are too few the error is the curve's own: the remainder of the
// interpolation at a distance of one row, 36 h⁶ f⁽⁶⁾/720, against at most 225/64 h⁶
// f⁽⁶⁾/720 between two rows, so the lift between rows is known to about a tenth.
func (f *fitter) prediction() (noise, between float64, at Row) {
	const share = 225.0 / 64 / 36
	n := len(f.rows)
	sizes := make([]float64, n)
	for i, row := range f.rows {
		var t, y [6]float64
		for k, off := range [6]int{-3, -2, -1, 1, 2, 3} {
			m := ((i+off)%n + n) % n
			t[k], y[k] = f.rows[m].Angle-row.Angle, f.rows[m].Lift
			if i+off < 0 {
				t[k] -= 360
			} else if i+off >= n {
				t[k] += 360
			}
		}
		sum, squares := 0.0, 1.0
		for k := range t {
			w := 1.0
			for m := range t {
				if m != k {
					w *= t[m] / (t[m] - t[k])
				}
			}
			sum += w * y[k]
			squares += w * w
		}
		e := math.Abs(sum - row.Lift)
		sizes[i] = e / math.Sqrt(squares)
		if b := share * e; b > between {
			between, at = b, row
		}
	}
	slices.Sort(sizes)
	kept := sizes[:n-n/20]
	for _, e := range kept {
		noise += e * e / float64(len(kept))
	}
	return math.Sqrt(noise), between, at
}
