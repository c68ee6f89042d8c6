// Package measured turns a table of cam angles and lifts, measured or computed, into a
// periodic smoothing spline of degree 5.
//
// The textbook's smoothing spline has a knot at every row and a weight that somebody has
// to choose. Twenty thousand pieces are of no use to whoever must fit arcs to the contour,
// and a weight is no promise. Here the promise is the tube: no row is moved by more than
// the smoothing. What smooths is that the knots are as few as the tube allows: from a
// spline with knots enough, the density of knots is read off its sixth derivative (C. de
// Boor, A Practical Guide to Splines, Springer 1978, chapter XII, cited from memory), and
// their number is halved in on by plain least squares, whose largest residual must stay
// within the tube. On those knots the least-squares spline that keeps to the tube and is
// nowhere below lift 0 is a quadratic program; a small weight on the squared jerk settles
// what no row does. (To take the least rough curve of the whole tube instead was tried:
// it leans on the edge of the tube wherever it can, and lost twice the acceleration.)
package measured

import (
	"fmt"
	"math"

	"lobewright/synth/motion"
	"lobewright/synth/qp"
)

// Curve is a smoothed table.
type Curve struct {
	Zones  []motion.Zone // one turn, each of Event -1
	Report Report
}

// Report is what the smoothing did. Lengths in the table's unit.
type Report struct {
	Rows, Knots int
	RMS         float64 // root mean square of the residuals
	Largest     float64 // largest move of a row, its size
	LargestAt   Row
	Residuals   []float64 // spline less table, row by row

	// NoiseLift is the noise of the table itself, root mean square, from its sixth
	// differences; NoiseAcceleration what of it the spline lets through into the
	// acceleration, length per rad², root mean square.
	NoiseLift, NoiseAcceleration float64

	// Between is the largest uncertainty of the lift between rows, judged by how well
	// rows predict one another, and BetweenAt where it is. A table is too coarse for its
	// curvature when it exceeds the smoothing.
	Between   float64
	BetweenAt Row
}

// TooCoarse reports whether the rows lie too far apart for the curve they describe.
func (r Report) TooCoarse(smoothing float64) bool { return r.Between > smoothing }

// TooNoisy is the error of a table whose noise the smoothing does not cover.
type TooNoisy struct {
	Needed float64 // a smoothing that would do, length
}

func (e TooNoisy) Error() string {
	return fmt.Sprintf("no smooth curve of at most %d pieces passes within the smoothing; one of %.3g would do", mostKnots, e.Needed)
}

// TooLow is the error of a table that goes below lift 0.
type TooLow struct{ Row Row }

func (e TooLow) Error() string { return fmt.Sprintf("a lift of %g, below 0", e.Row.Lift) }

const (
	leastKnots = 8
	mostKnots  = 640
)

// Smooth fits the rows of Parse. smoothing is the most a row may be moved, length,
// above 0. The lift of the spline is nowhere below 0. It fails with TooLow or TooNoisy.
func Smooth(rows []Row, smoothing float64) (Curve, error) {
	for _, r := range rows {
		if r.Lift < -smoothing {
			return Curve{}, TooLow{r}
		}
	}
	f := &fitter{rows: rows, smoothing: smoothing}
	thin := &fitter{rows: thinned(rows), smoothing: smoothing}
	s, err := thin.fewest()
	if err != nil {
		return Curve{}, err
	}
	s, _ = f.least(s.knots)
	for {
		if held, ok := f.hold(s); ok {
			s = held
			break
		}
		n := len(s.knots) + max(1, len(s.knots)/8)
		if n > min(mostKnots, len(f.rows)) {
			return Curve{}, TooNoisy{1.5 * smoothing}
		}
		s, _ = f.least(s.spread(n))
	}
	s.rotate()
	return Curve{Zones: s.zones(), Report: f.report(s)}, nil
}

// thinned returns rows enough to choose the knots by; the fit itself takes all.
func thinned(rows []Row) []Row {
	const enough = 3000
	every := (len(rows) + enough - 1) / enough
	var out []Row
	for i := 0; i < len(rows); i += every {
		out = append(out, rows[i])
	}
	return out
}

// fitter is a running fit.
type fitter struct {
	rows      []Row
	smoothing float64
}

// ridge is the weight of the roughness in plain least squares, as a share of what the
// rows weigh: enough to settle what no row does.
const ridge = 1e-9

// least returns the least-squares spline on knots, and its largest residual.
func (f *fitter) least(knots []float64) (*spline, float64) {
	s := &spline{knots: knots, c: make([]float64, len(knots))}
	at, err := qp.Solve(f.squares(s))
	if err != nil {
		return s, math.Inf(1)
	}
	s.c = at.X
	return s, f.worst(s)
}

// squares is the program of least squares, without conditions.
func (f *fitter) squares(s *spline) qp.Problem {
	n := len(s.knots)
	band, rhs := make([][degree + 1]float64, n), make([]float64, n)
	for _, r := range f.rows {
		j, t := s.interval(r.Angle)
		b := s.basis(j, t, 0)
		square(band, j, b, 1)
		for k, v := range b {
			rhs[((j-degree+k)%n+n)%n] -= v * r.Lift
		}
	}
	h := 360 / float64(n)
	s.rough(band, ridge*float64(len(f.rows))/float64(n)*math.Pow(h, 5))
	return qp.Problem{N: n, Q: terms(band), C: rhs}
}

// within is the share of the smoothing that plain least squares must keep to, so that
// the conditions that come later have some room.
const within = 0.7

// fewest finds the fewest knots.
func (f *fitter) fewest() (*spline, error) {
	most := min(mostKnots, len(f.rows))
	n := min(48, most/2)
	var dense *spline
	for {
		var worst float64
		dense, worst = f.least(uniform(f.rows[0].Angle, n))
		if worst <= within*f.smoothing {
			break
		}
		if n == most {
			return nil, TooNoisy{1.3 * worst}
		}
		n = min(2*n, most)
	}
	best := dense
	lo, hi := leastKnots-1, n // lo fails, hi holds
	for hi-lo > max(1, hi/16) {
		mid := (lo + hi) / 2
		s, worst := f.least(dense.spread(mid))
		if worst <= within*f.smoothing {
			hi, best = mid, s
		} else {
			lo = mid
		}
	}
	return best, nil
}

func uniform(from float64, n int) []float64 {
	out := make([]float64, n)
	for i := range out {
		out[i] = from + 360*float64(i)/float64(n)
	}
	return out
}

// spread returns n knots in the density that the sixth derivative of the spline asks
// for: its sixth root, from the jumps of the fifth, a little evened out so that no
// interval is without.
func (s *spline) spread(n int) []float64 {
	m := len(s.knots)
	fifth := make([]float64, m)
	for j := range fifth {
		fifth[j] = s.derivatives(j)[degree]
	}
	density := make([]float64, m) // on the interval after each knot
	mean := 0.0
	for j := range density {
		h := s.knot(j+1) - s.knots[j]
		before, after := math.Abs(fifth[j]-fifth[(j+m-1)%m]), math.Abs(fifth[(j+1)%m]-fifth[j])
		density[j] = math.Pow((before+after)/(2*h), 1.0/6)
		mean += density[j] * h / 360
	}
	const even = 0.15
	total := make([]float64, m+1)
	for j := range density {
		total[j+1] = total[j] + (density[j]+even*mean)*(s.knot(j+1)-s.knots[j])
	}
	out, j := make([]float64, n), 0
	for i := range out {
		want := total[m] * float64(i) / float64(n)
		for total[j+1] < want {
			j++
		}
		out[i] = s.knots[j] + (want-total[j])/(total[j+1]-total[j])*(s.knot(j+1)-s.knots[j])
	}
	return out
}

// rotate brings the first knot into 0 to 360.
func (s *spline) rotate() {
	shift := 360 * math.Floor(s.knots[0]/360)
	if s.knots[0]-shift >= 360 { // a hair below 0
		s.knots[0] = 0
		return
	}
	for i := range s.knots {
		s.knots[i] -= shift
	}
}
