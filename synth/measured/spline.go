package measured

import (
	"math"
	"sort"

	"lobewright/synth/motion"
	"lobewright/synth/qp"
)

// degree of the spline: continuous up to its fourth derivative, so that acceleration
// and jerk are smooth.
const degree = 5

// spline is a periodic spline of degree 5 over one turn: coefficient i belongs to the
// basis function that begins at knot i (C. de Boor, A Practical Guide to Splines,
// Springer 1978, cited from memory).
type spline struct {
	knots []float64 // degrees, growing, within one turn of the first
	c     []float64 // as many
}

// knot returns the knot of any index; the row of knots goes on after a turn.
func (s *spline) knot(i int) float64 {
	n, turns := len(s.knots), 0.0
	for ; i < 0; i += n {
		turns--
	}
	for ; i >= n; i -= n {
		turns++
	}
	return s.knots[i] + 360*turns
}

// coefficient of any index.
func (s *spline) at(i int) float64 {
	n := len(s.c)
	return s.c[((i%n)+n)%n]
}

// interval returns the index of the knot interval that holds deg, and deg brought
// within a turn of the first knot.
func (s *spline) interval(deg float64) (int, float64) {
	d := math.Mod(deg-s.knots[0], 360)
	if d < 0 {
		d += 360
	}
	t := s.knots[0] + d
	return sort.SearchFloat64s(s.knots, math.Nextafter(t, math.Inf(1))) - 1, t
}

// basis returns the values at t of the six basis functions that are not 0 on interval j,
// those of coefficients j-5 to j, or their derivatives of order d.
func (s *spline) basis(j int, t float64, d int) (b [degree + 1]float64) {
	var knots [2*degree + 2]float64 // from j-5 to j+6
	for k := range knots {
		knots[k] = s.knot(j - degree + k)
	}
	b[degree] = 1 // degree 0
	for p := 1; p <= degree-d; p++ {
		for k := degree - p; k <= degree; k++ {
			v := 0.0
			if k > degree-p {
				v = (t - knots[k]) / (knots[k+p] - knots[k]) * b[k]
			}
			if k < degree {
				v += (knots[k+p+1] - t) / (knots[k+p+1] - knots[k+1]) * b[k+1]
			}
			b[k] = v
		}
	}
	for p := degree - d + 1; p <= degree; p++ { // each higher degree from differences
		for k := degree - p; k <= degree; k++ {
			v := 0.0
			if k > degree-p {
				v = float64(p) / (knots[k+p] - knots[k]) * b[k]
			}
			if k < degree {
				v -= float64(p) / (knots[k+p+1] - knots[k+1]) * b[k+1]
			}
			b[k] = v
		}
	}
	return b
}

// lift evaluates the spline.
func (s *spline) lift(deg float64) float64 {
	j, t := s.interval(deg)
	sum := 0.0
	for k, b := range s.basis(j, t, 0) {
		sum += b * s.at(j-degree+k)
	}
	return sum
}

// derivatives returns value and derivatives, by degree, at knot j, each by differences
// of coefficients first: neighbors are near each other, so their differences are exact,
// and the polynomials of neighboring pieces meet to the last digits of what is left.
func (s *spline) derivatives(j int) (out [degree + 1]float64) {
	var c [degree + 1]float64
	for k := range c {
		c[k] = s.at(j - degree + k)
	}
	t := s.knot(j)
	for d := 0; d <= degree; d++ {
		v := c
		p := degree - d
		for r := 1; r <= p; r++ { // de Boor's algorithm on the d-th differences
			for k := degree; k >= d+r; k-- {
				i := j - degree + k
				a := (t - s.knot(i)) / (s.knot(i+p+1-r) - s.knot(i))
				v[k] = v[k-1] + a*(v[k]-v[k-1])
			}
		}
		out[d] = v[degree]
		for k := degree; k > d; k-- { // differences for the next
			i := j - degree + k
			c[k] = float64(p) * (c[k] - c[k-1]) / (s.knot(i+p) - s.knot(i))
		}
	}
	return out
}

// zones returns the pieces.
func (s *spline) zones() []motion.Zone {
	var out []motion.Zone
	for j := range s.knots {
		from, to := s.knots[j], s.knot(j+1)
		d, h := s.derivatives(j), to-from
		z := motion.Zone{From: from, To: to, Origin: from, Span: h, Event: -1, Poly: make([]float64, degree+1)}
		scale := 1.0
		for k := range d {
			z.Poly[k] = d[k] * scale
			scale *= h / float64(k+1)
		}
		out = append(out, z)
	}
	return out
}

// rough adds the integral of the squared third derivative, exact by three Gauss points on
// each interval, to a band of rows: band[i][k] is the entry at i and i+k, around the turn.
func (s *spline) rough(band [][degree + 1]float64, weight float64) {
	nodes := [3]float64{-math.Sqrt(0.6), 0, math.Sqrt(0.6)}
	weights := [3]float64{5.0 / 9, 8.0 / 9, 5.0 / 9}
	for j := range s.knots {
		h := (s.knot(j+1) - s.knots[j]) / 2
		for g, x := range nodes {
			square(band, j, s.basis(j, s.knots[j]+h*(1+x), 3), weight*h*weights[g])
		}
	}
}

// square adds w times the product of a row of basis values with itself.
func square(band [][degree + 1]float64, j int, b [degree + 1]float64, w float64) {
	n := len(band)
	for k := range b {
		i := ((j-degree+k)%n + n) % n
		for m := k; m <= degree; m++ {
			band[i][m-k] += w * b[k] * b[m]
		}
	}
}

// terms turns a band into entries for package qp.
func terms(band [][degree + 1]float64) []qp.Term {
	n := len(band)
	out := make([]qp.Term, 0, n*(degree+1))
	for i := range band {
		for k, v := range band[i] {
			out = append(out, qp.Term{I: max(i, (i+k)%n), J: min(i, (i+k)%n), V: v})
		}
	}
	return out
}
