package smooth

import (
	"math"
	"math/rand"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// The folded band against dense algebra (gonum/mat), for rings of every size from one
// unknown on.
func TestBandAgainstDense(t *testing.T) {
	random := rand.New(rand.NewSource(1))
	for n := 1; n <= 30; n++ {
		b, dense := newBand(n), mat.NewSymDense(n, nil)
		for range 4 * n { // rank-one terms over neighbors on the ring, as an interval brings
			first := random.Intn(n)
			row := make([]float64, n)
			for k := range min(reach+1, n) {
				row[(first+k)%n] = random.NormFloat64()
			}
			dense.SymRankOne(dense, 1, mat.NewVecDense(n, row))
			for k := range min(reach+1, n) {
				for m := range k + 1 {
					i, j := (first+k)%n, (first+m)%n
					b.add(i, j, row[i]*row[j])
				}
			}
		}
		var inverse mat.Dense
		if err := inverse.Inverse(dense); err != nil {
			t.Fatal(n, err)
		}
		right := make([]float64, n)
		for i := range right {
			right[i] = random.NormFloat64()
		}
		var want mat.VecDense
		want.MulVec(&inverse, mat.NewVecDense(n, slices.Clone(right)))
		if !b.factor() {
			t.Fatal(n, "not positive definite")
		}
		b.solve(right)
		got := b.inverse()
		scale := mat.Norm(&inverse, math.Inf(1))
		for i := range n {
			if math.Abs(right[i]-want.AtVec(i)) > 1e-10*scale {
				t.Fatalf("n %d: x[%d] = %g, want %g", n, i, right[i], want.AtVec(i))
			}
			for d := range min(reach, n-1) + 1 {
				j := (i + d) % n
				if math.Abs(got.at(i, j)-inverse.At(i, j)) > 1e-10*scale {
					t.Fatalf("n %d: inverse[%d][%d] = %g, want %g", n, i, j, got.at(i, j), inverse.At(i, j))
				}
			}
		}
	}
}

func TestBandRefusesIndefinite(t *testing.T) {
	b := newBand(3)
	b.add(0, 0, 1)
	b.add(1, 1, 1)
	b.add(0, 1, 2)
	b.add(2, 2, 1)
	if b.factor() {
		t.Error("took a matrix with a negative eigenvalue")
	}
}

// bspline is the recurrence of Cox and de Boor written down as it is published.
func bspline(knots []float64, j, k int, x float64) float64 {
	if k == 0 {
		if knots[j] <= x && x < knots[j+1] {
			return 1
		}
		return 0
	}
	return (x-knots[j])/(knots[j+k]-knots[j])*bspline(knots, j, k-1, x) +
		(knots[j+k+1]-x)/(knots[j+k+1]-knots[j+1])*bspline(knots, j+1, k-1, x)
}

// design returns the matrix of the periodic B-splines of a ring at the rows.
func design(r *ring, at []float64) *mat.Dense {
	n := len(r.at)
	out := mat.NewDense(len(at), n, nil)
	for j := range n {
		var knots []float64
		for k := range degree + 2 {
			knots = append(knots, r.knot(j+k))
		}
		for i, x := range at {
			for shift := -2; shift <= 2; shift++ { // a short ring goes round more than once
				out.Set(i, j, out.At(i, j)+bspline(knots, 0, degree, x+turn*float64(shift)))
			}
		}
	}
	return out
}

// wavy returns a fitter over a table with something in it everywhere.
func wavy(n int, smoothing float64) *fitter {
	random := rand.New(rand.NewSource(int64(n)))
	var t Table
	for i := range n {
		deg := 360 * (float64(i) + 0.6*random.Float64()) / float64(n)
		t.Angle = append(t.Angle, deg)
		t.Lift = append(t.Lift, 12+5*math.Sin(deg*radians)+2*math.Cos(3*deg*radians)+0.1*random.NormFloat64())
	}
	return newFitter(t, smoothing)
}

// every returns the ring of every k-th row.
func (f *fitter) every(k int) ring {
	var r ring
	for i := 0; i < len(f.at); i += k {
		r.at = append(r.at, f.at[i])
	}
	r.flat = make([]int, len(r.at))
	return r
}

func sumOfSquares(v []float64) (sum float64) {
	for _, x := range v {
		sum += x * x
	}
	return sum
}

// dense returns the residuals of the least-squares fit by the QR factorization.
func dense(t *testing.T, a *mat.Dense, lift []float64) []float64 {
	t.Helper()
	var qr mat.QR
	qr.Factorize(a)
	var c, fit mat.VecDense
	y := mat.NewVecDense(len(lift), slices.Clone(lift))
	if err := qr.SolveVecTo(&c, false, y); err != nil {
		t.Fatal(err)
	}
	fit.MulVec(a, &c)
	out := make([]float64, len(lift))
	for i := range out {
		out[i] = lift[i] - fit.AtVec(i)
	}
	return out
}

func TestLeastSquaresAgainstDense(t *testing.T) {
	for _, size := range []struct{ rows, every int }{{40, 1}, {40, 2}, {40, 3}, {60, 9}, {40, 8}} {
		f := wavy(size.rows, 0.01)
		r := f.every(size.every)
		want := dense(t, design(&r, f.at), f.lift)
		s := newSpline(r, nil, f.near)
		if !s.leastSquares(&f.rows) {
			t.Fatal(size, "no solution")
		}
		for i, got := range s.residuals(&f.rows) {
			if math.Abs(got-want[i]) > 1e-10 {
				t.Errorf("%v: residual %d is %g, want %g", size, i, got, want[i])
			}
		}
	}
}

// The price of a knot is what a fit without it says.
func TestPriceOfAKnot(t *testing.T) {
	for _, every := range []int{2, 4, 6} {
		f := wavy(60, 0.01)
		r := f.every(every)
		s := newSpline(r, nil, f.near)
		n := s.normals(f.gathered(s))
		if !s.advance(n) {
			t.Fatal("no solution")
		}
		inverse := n.matrix.inverse()
		base := sumOfSquares(dense(t, design(&r, f.at), f.lift))
		for j := range r.at {
			gone := make([]bool, len(r.at))
			gone[j] = true
			less := r.without(gone)
			want := sumOfSquares(dense(t, design(&less, f.at), f.lift)) - base
			if got := s.price(j, inverse); math.Abs(got-want) > 1e-7*(want+base) {
				t.Errorf("every %d, knot %d: price %g, want %g", every, j, got, want)
			}
		}
	}
}

// Roughness: the spline with a weight on it is the least of the sum of squares and the
// roughness, which here is integrated by the trapezoidal rule, exact enough on a fine grid.
func TestRoughnessIsLeast(t *testing.T) {
	f := wavy(60, 0.01)
	s := newSpline(f.every(4), nil, f.near)
	if !s.leastSquares(&f.rows) {
		t.Fatal("no solution")
	}
	const lambda = 1e-4
	change, growth, ok := s.stiffness(&f.rows).change(lambda)
	if !ok {
		t.Fatal("no solution")
	}
	best := s.clone()
	best.move(1, change)
	if want := sumOfSquares(best.residuals(&f.rows)) - sumOfSquares(s.residuals(&f.rows)); math.Abs(growth-want) > 1e-9*want {
		t.Errorf("grew by %g, says %g", want, growth)
	}
	cost := func(s *spline) float64 {
		const points = 40000
		curve, sum := s.curve(), 0.0
		for i := range points {
			_, _, _, jerk := curve.At(360 * float64(i) / points)
			sum += jerk * jerk * 2 * math.Pi / points
		}
		return sumOfSquares(s.residuals(&f.rows)) + lambda*sum
	}
	least := cost(best)
	for j := range best.coef {
		for _, by := range []float64{-1e-2, 1e-2} {
			other := best.clone()
			other.coef[j] += by
			if cost(other) <= least {
				t.Errorf("coefficient %d moved by %g costs %g, before %g", j, by, cost(other), least)
			}
		}
	}
}

// The inequality is met where least squares does not meet it, at little more than its sum.
func TestBoxed(t *testing.T) {
	f := wavy(120, 1)
	s := newSpline(f.every(6), nil, f.near)
	if !s.leastSquares(&f.rows) {
		t.Fatal("no solution")
	}
	residual := s.residuals(&f.rows)
	worst := largest(residual)
	f.allowed = 0.9 * worst
	held := f.boxed(s, 0)
	if held == nil {
		t.Fatal("no spline found")
	}
	got := held.residuals(&f.rows)
	if largest(got) > f.allowed {
		t.Errorf("largest residual %g, allowed %g", largest(got), f.allowed)
	}
	if sumOfSquares(got) > 1.5*sumOfSquares(residual) {
		t.Errorf("sum of squares %g, without the inequality %g", sumOfSquares(got), sumOfSquares(residual))
	}
	f.allowed = worst / 20 // fewer coefficients than rows that would have to be met
	if f.boxed(s, 0) != nil {
		t.Error("found a spline where there is none")
	}
}

// Six equal coefficients make a piece constant, and are one unknown.
func TestFlatInterval(t *testing.T) {
	f := wavy(60, 0.01)
	r := f.every(4)
	r.flat[3], r.flat[4] = 1, 1
	s := newSpline(r, []dwell{{level: 12}}, f.near)
	if !s.leastSquares(&f.rows) {
		t.Fatal("no solution")
	}
	curve := s.curve()
	for i := range 3 {
		lift, v, a, j := curve.At(r.at[3+i])
		want, _, _, _ := curve.At(r.at[3])
		if lift != want || v != 0 || a != 0 || j != 0 {
			t.Errorf("at %g: lift %g (%g), derivatives %g %g %g", r.at[3+i], lift, want, v, a, j)
		}
	}
	if got := len(r.at) - s.count; got != 6 {
		t.Errorf("7 coefficients of two flat intervals became %d unknowns fewer", got)
	}
}
