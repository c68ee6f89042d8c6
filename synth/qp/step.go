package qp

import "math"

// solver holds a scaled problem and the running point.
type solver struct {
	p          Problem
	gs, es     []float64 // the scale each row was divided by
	x, s, z, y []float64
	rd, rp, re []float64 // residuals: dual, of G, of E
	normal     *envelope // Q + G'DG + E'E, factored
	schur      *envelope // E normal⁻¹ E', factored
	d          []float64 // D = z/s
	size       float64   // scale of the objective's gradient
	gap        float64   // s'z at the present point
	cautious   bool
}

func newSolver(p Problem) *solver {
	s := &solver{x: make([]float64, p.N), s: make([]float64, len(p.G)), z: make([]float64, len(p.G)), y: make([]float64, len(p.E)),
		rd: make([]float64, p.N), rp: make([]float64, len(p.G)), re: make([]float64, len(p.E)), d: make([]float64, len(p.G))}
	s.p = Problem{N: p.N, Q: p.Q, C: p.C}
	s.p.G, s.p.H, s.gs = scaled(p.G, p.H)
	s.p.E, s.p.F, s.es = scaled(p.E, p.F)
	s.normal = newEnvelope(p.N, func(yield func([]int)) {
		for _, t := range p.Q {
			yield([]int{t.I, t.J})
		}
		for _, r := range p.G {
			yield(r.I)
		}
		for _, r := range p.E {
			yield(r.I)
		}
	})
	every := make([]int, len(p.E))
	for i := range every {
		every[i] = i
	}
	s.schur = newEnvelope(len(p.E), func(yield func([]int)) { yield(every) })
	s.size = 1
	for _, c := range p.C {
		s.size = math.Max(s.size, math.Abs(c))
	}
	return s
}

// scaled divides each row by its largest entry.
func scaled(rows []Row, rhs []float64) ([]Row, []float64, []float64) {
	out, h, by := make([]Row, len(rows)), make([]float64, len(rows)), make([]float64, len(rows))
	for i, r := range rows {
		by[i] = 0
		for _, v := range r.V {
			by[i] = math.Max(by[i], math.Abs(v))
		}
		if by[i] == 0 {
			by[i] = 1
		}
		out[i] = Row{I: r.I, V: make([]float64, len(r.V))}
		for k, v := range r.V {
			out[i].V[k] = v / by[i]
		}
		h[i] = rhs[i] / by[i]
	}
	return out, h, by
}

func (s *solver) point() Solution {
	return Solution{X: append([]float64(nil), s.x...), Z: append([]float64(nil), s.z...), Y: append([]float64(nil), s.y...)}
}

func (s *solver) unscaled(at Solution) Solution {
	for i, by := range s.gs {
		at.Z[i] /= by
	}
	for i, by := range s.es {
		at.Y[i] /= by
	}
	return at
}

// start finds a first point by least squares and moves it inside
// (L. Vandenberghe, The CVXOPT linear and quadratic cone program solvers, 2010,
// section 5.3, cited from memory).
func (s *solver) start() {
	for i := range s.d {
		s.d[i] = 1
	}
	s.factor()
	rhs := make([]float64, s.p.N)
	for i, c := range s.p.C {
		rhs[i] = -c
	}
	for i, g := range s.p.G {
		g.addTo(rhs, s.p.H[i])
	}
	s.x, s.y = s.solve(rhs, s.p.F)
	for i, g := range s.p.G {
		s.z[i] = g.dot(s.x) - s.p.H[i]
		s.s[i] = -s.z[i]
	}
	inside(s.s)
	inside(s.z)
	if s.cautious {
		for i := range s.s {
			s.s[i], s.z[i] = s.s[i]+deeper, s.z[i]+deeper
		}
	}
}

const (
	deeper  = 10.0 // what a cautious start adds to slacks and multipliers
	midmost = 0.2  // the least share of the gap that a cautious step keeps
)

// inside shifts a vector until all of it is above 0.
func inside(v []float64) {
	least := math.Inf(1)
	for _, x := range v {
		least = math.Min(least, x)
	}
	if least <= 1e-3 {
		for i := range v {
			v[i] += 1 - least
		}
	}
}

// factor factors the matrix of the step for the present D.
func (s *solver) factor() {
	s.normal.clear()
	for _, t := range s.p.Q {
		s.normal.add(t.I, t.J, t.V)
	}
	for i, g := range s.p.G {
		s.normal.addSquare(g, s.d[i])
	}
	for _, e := range s.p.E { // changes no solution of Ex = e, and makes the matrix regular
		s.normal.addSquare(e, 1)
	}
	s.normal.factor()
	if len(s.p.E) == 0 {
		return
	}
	w := make([][]float64, len(s.p.E))
	for i, e := range s.p.E {
		w[i] = make([]float64, s.p.N)
		e.addTo(w[i], 1)
		s.normal.forward(w[i])
	}
	s.schur.clear()
	for i := range w {
		for j := 0; j <= i; j++ {
			s.schur.add(i, j, dot(w[i], w[j]))
		}
	}
	s.schur.factor()
}

// solve returns dx, dy with (Q + G'DG)dx + E'dy = a and E dx = b, refined as long as
// that helps.
func (s *solver) solve(a, b []float64) (dx, dy []float64) {
	dx, dy = s.solveOnce(a, b)
	ra, rb, before := s.left(a, b, dx, dy)
	for range 3 {
		cx, cy := s.solveOnce(ra, rb)
		for i := range dx {
			cx[i] += dx[i]
		}
		for i := range dy {
			cy[i] += dy[i]
		}
		na, nb, after := s.left(a, b, cx, cy)
		if !(after < before/2) {
			break
		}
		dx, dy, ra, rb, before = cx, cy, na, nb, after
	}
	return dx, dy
}

// left returns what a step leaves of its right-hand sides, and the largest of it.
func (s *solver) left(a, b, dx, dy []float64) (ra, rb []float64, most float64) {
	ra, rb = append([]float64(nil), a...), append([]float64(nil), b...)
	for _, t := range s.p.Q {
		ra[t.I] -= t.V * dx[t.J]
		if t.I != t.J {
			ra[t.J] -= t.V * dx[t.I]
		}
	}
	for i, g := range s.p.G {
		g.addTo(ra, -s.d[i]*g.dot(dx))
	}
	for i, e := range s.p.E {
		e.addTo(ra, -dy[i])
		rb[i] -= e.dot(dx)
	}
	for _, r := range [][]float64{ra, rb} {
		for _, x := range r {
			most = math.Max(most, math.Abs(x))
		}
	}
	return ra, rb, most
}

func (s *solver) solveOnce(a, b []float64) (dx, dy []float64) {
	dx = append([]float64(nil), a...)
	for i, e := range s.p.E { // for the E'E that was added to the matrix
		e.addTo(dx, b[i])
	}
	dy = make([]float64, len(b))
	if len(b) > 0 {
		w := append([]float64(nil), dx...)
		s.normal.forward(w)
		s.normal.backward(w)
		for i, e := range s.p.E {
			dy[i] = e.dot(w) - b[i]
		}
		s.schur.forward(dy)
		s.schur.backward(dy)
		for i, e := range s.p.E {
			e.addTo(dx, -dy[i])
		}
	}
	s.normal.forward(dx)
	s.normal.backward(dx)
	return dx, dy
}

// residuals computes the residuals of the present point and returns the largest
// relative one, the duality gap among them.
func (s *solver) residuals() float64 {
	copy(s.rd, s.p.C)
	quad := 0.0
	for _, t := range s.p.Q {
		s.rd[t.I] += t.V * s.x[t.J]
		quad += t.V * s.x[t.I] * s.x[t.J]
		if t.I != t.J {
			s.rd[t.J] += t.V * s.x[t.I]
			quad += t.V * s.x[t.I] * s.x[t.J]
		}
	}
	objective, hs, primal, gap := quad/2, 1.0, 0.0, 0.0
	for i, c := range s.p.C {
		objective += c * s.x[i]
	}
	for i, g := range s.p.G {
		g.addTo(s.rd, s.z[i])
		s.rp[i] = g.dot(s.x) + s.s[i] - s.p.H[i]
		primal = math.Max(primal, math.Abs(s.rp[i]))
		hs = math.Max(hs, math.Abs(s.p.H[i]))
		gap += s.s[i] * s.z[i]
	}
	for i, e := range s.p.E {
		e.addTo(s.rd, s.y[i])
		s.re[i] = e.dot(s.x) - s.p.F[i]
		primal = math.Max(primal, math.Abs(s.re[i]))
		hs = math.Max(hs, math.Abs(s.p.F[i]))
	}
	s.gap = gap
	dual := 0.0
	for _, r := range s.rd {
		dual = math.Max(dual, math.Abs(r))
	}
	return math.Max(math.Max(dual/s.size, primal/hs), gap/math.Max(math.Abs(objective), 1e-3))
}

// advance takes one predictor-corrector step; false when it cannot move.
func (s *solver) advance() bool {
	m := len(s.p.G)
	mu := 0.0
	for i := range s.s {
		s.d[i] = s.z[i] / s.s[i]
		mu += s.s[i] * s.z[i]
	}
	mu /= float64(max(m, 1))
	s.factor()
	rc := make([]float64, m)
	for i := range rc {
		rc[i] = s.s[i] * s.z[i]
	}
	_, _, ds, dz := s.direction(rc)
	a := math.Min(reach(s.s, ds), reach(s.z, dz))
	after := 0.0
	for i := range ds {
		after += (s.s[i] + a*ds[i]) * (s.z[i] + a*dz[i])
	}
	after /= float64(max(m, 1))
	sigma := math.Pow(after/mu, 3)
	for i := range rc {
		if s.cautious {
			rc[i] -= math.Max(sigma, midmost) * mu
			continue
		}
		rc[i] += ds[i]*dz[i] - sigma*mu
	}
	dx, dy, ds, dz := s.direction(rc)
	const inner = 0.995
	ap, ad := math.Min(1, inner*reach(s.s, ds)), math.Min(1, inner*reach(s.z, dz))
	if len(s.p.Q) > 0 { // the dual residual depends on x: one length for both
		ap = math.Min(ap, ad)
		ad = ap
	}
	if !(math.Max(ap, ad) > 1e-10) {
		return false
	}
	step(s.x, dx, ap)
	step(s.s, ds, ap)
	step(s.z, dz, ad)
	step(s.y, dy, ad)
	return true
}

// direction returns the Newton step towards s*z = s*z - rc.
func (s *solver) direction(rc []float64) (dx, dy, ds, dz []float64) {
	a, b := make([]float64, s.p.N), make([]float64, len(s.re))
	for i, r := range s.rd {
		a[i] = -r
	}
	for i, g := range s.p.G {
		g.addTo(a, rc[i]/s.s[i]-s.d[i]*s.rp[i])
	}
	for i, r := range s.re {
		b[i] = -r
	}
	dx, dy = s.solve(a, b)
	ds, dz = make([]float64, len(rc)), make([]float64, len(rc))
	for i, g := range s.p.G {
		gx := g.dot(dx)
		ds[i] = -s.rp[i] - gx
		dz[i] = -rc[i]/s.s[i] + s.d[i]*(s.rp[i]+gx)
	}
	return dx, dy, ds, dz
}

// reach is the longest step, at most 1/inner, that keeps v + step*dv at 0 or above.
func reach(v, dv []float64) float64 {
	a := 1e10
	for i, d := range dv {
		if d < 0 {
			a = math.Min(a, -v[i]/d)
		}
	}
	return math.Min(a, 1.01)
}

func step(v, dv []float64, by float64) {
	for i := range v {
		v[i] += by * dv[i]
	}
}
