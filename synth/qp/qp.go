// Package qp solves convex quadratic programs of a few hundred unknowns:
//
//	minimize ½ x'Qx + c'x   subject to   Gx <= h,  Ex = e
//
// with Q positive semidefinite and sparse rows.
//
// The completion of a partial motion is such a program: a few hundred spline
// coefficients, each row touching six of them. A simplex walks over the corners of a
// polytope that has thousands nearly equal, and its basis of neighboring spline
// rows turns singular as the mesh is refined. A primal-dual interior-point method
// goes through the inside instead, needs 15 to 40 steps whatever the size, and each
// step is one factorization of Q + G'DG, a matrix as narrow as the spline's support
// (envelope.go). It also returns the multipliers, from which the caller makes a true
// lower bound.
//
// Method: S. Mehrotra, On the implementation of a primal-dual interior point method,
// SIAM J. Optim. 2 (1992) 575-601, in the form of S. J. Wright, Primal-Dual
// Interior-Point Methods, SIAM 1997 (both cited from memory).
package qp

import (
	"errors"
	"math"
)

// Row is a sparse row: the sum of V[k]*x[I[k]], each index once.
type Row struct {
	I []int
	V []float64
}

func (r Row) dot(x []float64) float64 {
	s := 0.0
	for k, i := range r.I {
		s += r.V[k] * x[i]
	}
	return s
}

func (r Row) addTo(x []float64, by float64) {
	for k, i := range r.I {
		x[i] += by * r.V[k]
	}
}

// Term is an entry of Q: 2*V*x[I]*x[J]/2 when I and J differ, V*x[I]²/2 when they
// are equal; that is, both Q[I][J] and Q[J][I] are V. Terms of one place add up.
type Term struct {
	I, J int
	V    float64
}

// Problem is a convex quadratic program. Rows are scaled inside; give them as
// they come.
type Problem struct {
	N int // unknowns
	Q []Term
	C []float64 // of length N
	G []Row
	H []float64
	E []Row
	F []float64 // right-hand sides of E
}

// Solution is a point that satisfies the optimality conditions to Tolerance.
type Solution struct {
	X     []float64 // the unknowns
	Z     []float64 // multipliers of G, at least 0
	Y     []float64 // multipliers of E: Qx + c + G'Z + E'Y = 0
	Steps int

	Residual float64 // the largest relative residual, the duality gap among them
}

// Tolerance is the relative size of residuals and of the duality gap at which a
// point counts as optimal.
const Tolerance = 1e-9

// acceptable is what is still taken when rounding keeps the method from Tolerance.
const acceptable = 1e-6

const (
	mostSteps = 120
	stalled   = 20 // steps without progress that tell a program without a solution
)

// ErrNoSolution says that no point was found: the rows contradict each other, the
// objective is unbounded, or the numbers are beyond the arithmetic.
var ErrNoSolution = errors.New("no solution found")

// Solve returns the optimum. It fails with ErrNoSolution, and then returns the best
// point it met, whose multipliers may still serve: a bound made from multipliers is true
// for any.
func Solve(p Problem) (Solution, error) {
	at, err := solve(p, false)
	if err == nil {
		return at, nil
	}
	if again, err := solve(p, true); err == nil || again.Residual < at.Residual {
		return again, err
	}
	return at, err
}

// solve runs the method. Cautious, it starts further inside and keeps more to the middle, without the
// corrector: where a degenerate vertex makes the usual steps shrink to nothing, these do not. They are some two times as many.
func solve(p Problem, cautious bool) (Solution, error) {
	s := newSolver(p)
	s.cautious = cautious
	s.start()
	at := s.point()
	at.Residual = math.Inf(1)
	moved, least := 0, math.Inf(1) // the last step that got anywhere, the least gap
	for step := range mostSteps {
		worst := s.residuals()
		if math.IsNaN(worst) {
			break
		}
		if worst < at.Residual {
			at = s.point()
			at.Steps, at.Residual, moved = step, worst, step
		}
		if s.gap < 0.9*least {
			least, moved = s.gap, step
		}
		if worst <= Tolerance || step-moved > stalled {
			break
		}
		if !s.advance() {
			break
		}
	}
	at = s.unscaled(at)
	if !(at.Residual <= acceptable) {
		return at, ErrNoSolution
	}
	return at, nil
}
