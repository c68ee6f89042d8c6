package qp_test

import (
	"errors"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/optimize/convex/lp"
	"lobewright/synth/qp"
	"pgregory.net/rapid"
)

func dense(v ...float64) qp.Row {
	r := qp.Row{}
	for i, x := range v {
		if x != 0 {
			r.I, r.V = append(r.I, i), append(r.V, x)
		}
	}
	return r
}

// The textbook's plane: maximize 3x + 5y, x <= 4, 2y <= 12, 3x + 2y <= 18: (2, 6), 36
// (F. S. Hillier and G. J. Lieberman, Introduction to Operations Research, cited from
// memory; its multipliers are 0, 3/2, 1).
func TestTextbook(t *testing.T) {
	s, err := qp.Solve(qp.Problem{N: 2, C: []float64{-3, -5},
		G: []qp.Row{dense(1), dense(0, 2), dense(3, 2), dense(-1), dense(0, -1)}, H: []float64{4, 12, 18, 0, 0}})
	if err != nil {
		t.Fatal(err)
	}
	for i, want := range []float64{2, 6} {
		if math.Abs(s.X[i]-want) > 1e-7 {
			t.Errorf("x[%d] = %.10g, want %g", i, s.X[i], want)
		}
	}
	for i, want := range []float64{0, 1.5, 1, 0, 0} {
		if math.Abs(s.Z[i]-want) > 1e-6 {
			t.Errorf("z[%d] = %.10g, want %g", i, s.Z[i], want)
		}
	}
}

// The point of x + y + z = 1, x <= 0.2 nearest the origin is (0.2, 0.4, 0.4).
func TestNearest(t *testing.T) {
	s, err := qp.Solve(qp.Problem{N: 3, C: make([]float64, 3), Q: []qp.Term{{I: 0, J: 0, V: 1}, {I: 1, J: 1, V: 1}, {I: 2, J: 2, V: 1}},
		G: []qp.Row{dense(1)}, H: []float64{0.2}, E: []qp.Row{dense(1, 1, 1)}, F: []float64{1}})
	if err != nil {
		t.Fatal(err)
	}
	for i, want := range []float64{0.2, 0.4, 0.4} {
		if math.Abs(s.X[i]-want) > 1e-7 {
			t.Errorf("x[%d] = %.10g, want %g", i, s.X[i], want)
		}
	}
}

func TestNoSolution(t *testing.T) {
	for name, p := range map[string]qp.Problem{
		"contradiction": {N: 1, C: []float64{1}, G: []qp.Row{dense(1), dense(-1)}, H: []float64{1, -2}},
		"unbounded":     {N: 1, C: []float64{1}, G: []qp.Row{dense(1)}, H: []float64{1}},
	} {
		if s, err := qp.Solve(p); !errors.Is(err, qp.ErrNoSolution) {
			t.Errorf("%s: %+v, %v", name, s, err)
		}
	}
}

// Random linear programs against gonum's simplex, and the optimality conditions.
func TestAgainstSimplex(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(2, 8).Draw(t, "unknowns")
		m := rapid.IntRange(1, 8).Draw(t, "rows")
		entry := rapid.Map(rapid.IntRange(-8, 8), func(i int) float64 { return float64(i) / 8 })
		// x >= 0, x <= 3, rows that (1, ..., 1) satisfies with room to spare
		p := qp.Problem{N: n, C: make([]float64, n)}
		for i := range n {
			p.C[i] = entry.Draw(t, "cost")
			e, f := make([]float64, n), make([]float64, n)
			e[i], f[i] = -1, 1
			p.G, p.H = append(p.G, dense(e...), dense(f...)), append(p.H, 0, 3)
		}
		for range m {
			r, at := make([]float64, n), 0.0
			for i := range r {
				r[i] = entry.Draw(t, "entry")
				at += r[i]
			}
			p.G, p.H = append(p.G, dense(r...)), append(p.H, at+rapid.Float64Range(0.1, 2).Draw(t, "room"))
		}
		got, err := qp.Solve(p)
		if err != nil {
			t.Fatal(err)
		}
		g := mat.NewDense(len(p.G), n, nil)
		for i, r := range p.G {
			for k, j := range r.I {
				g.Set(i, j, r.V[k])
			}
		}
		c, a, b := lp.Convert(p.C, g, p.H, nil, nil)
		want, _, err := lp.Simplex(c, a, b, 1e-10, nil)
		if err != nil {
			return // the simplex cycles on some degenerate corners
		}
		value := 0.0
		for i, x := range got.X {
			value += p.C[i] * x
		}
		if math.Abs(value-want) > 1e-6 {
			t.Fatalf("optimum %.12g, simplex %.12g", value, want)
		}
		for j := range n { // c + G'z = 0
			sum := p.C[j]
			for i := range p.G {
				sum += g.At(i, j) * got.Z[i]
			}
			if math.Abs(sum) > 1e-6 {
				t.Fatalf("the gradient at unknown %d is %g", j, sum)
			}
		}
	})
}
