package fit

import (
	"math"
)

// fitter fits splines to a model and holds the room to do it in.
type fitter struct {
	*model
	anchored bool // a joint is kept where the curve starts

	goal   []float64 // what the spline is to approximate: F, less what the last chain was off the model
	q      spline    // the present spline
	w      []float64 // weight of each sample
	lo, hi int       // the samples that count: all, or of a closed stretch one turn from x[0]
	e      []float64 // (q-goal)·inv at those, or with the dwell's circle for q beyond the outer knots
	peak   []float64 // largest |e| on each arc
	out    [2]float64
	max    float64

	best    spline // the best so far for a count, and its largest |e|
	bestMax float64
	spare   spline

	pins  []pin
	shift []float64 // how far each pinned knot lies from its pin
	gauge gauge

	grams  []gram
	vs, ms []form
	sys    skyline
	old    []float64 // knots before a step
	real   []float64 // signed distance of each sample from the last chain
	mark   []float64 // weights of the last step on the maximum
}

func newFitter(m *model) *fitter {
	n := len(m.s)
	return &fitter{model: m, goal: make([]float64, n), e: make([]float64, n), w: make([]float64, n),
		mark: make([]float64, n), real: make([]float64, n)}
}

// gram is the normal equations of one arc in its Bernstein basis b.
type gram struct {
	a [3][3]float64 // Σ w·b·bᵀ, upper triangle
	r [3]float64    // Σ w·b·goal
}

// window sets lo and hi for the present knots.
func (f *fitter) window() {
	f.lo, f.hi = 0, len(f.s)
	if f.closed {
		f.lo = min(f.index(f.q.x[0])+1, len(f.s)-f.period)
		f.hi = f.lo + f.period
	}
}

// until returns the first sample from i on that is not on arc j: arcs do not hold their
// ends but for the last.
func (f *fitter) until(q *spline, j, i int) int {
	end := q.x[j+1]
	switch last := j == q.arcs()-1; {
	case last && f.closed:
		return f.hi
	case last:
		end = math.Nextafter(end, math.Inf(1))
	}
	for i < f.hi && f.s[i] < end {
		i++
	}
	return i
}

// skip returns the first sample on the first arc.
func (f *fitter) skip(q *spline) int {
	i := f.lo
	for i < f.hi && f.s[i] < q.x[0] {
		i++
	}
	return i
}

// gather sums the normal equations for the present knots and weights.
func (f *fitter) gather() {
	n := f.q.arcs()
	f.grams = resized(f.grams, n)
	i := f.skip(&f.q)
	for j := range n {
		start, inv := f.q.x[j], 1/(f.q.x[j+1]-f.q.x[j])
		var a00, a01, a02, a11, a12, a22, r0, r1, r2 float64
		for end := f.until(&f.q, j, i); i < end; i++ {
			u := (f.s[i] - start) * inv
			c := 1 - u
			w, y := f.w[i], f.goal[i]
			b0, b1, b2 := c*c, 2*u*c, u*u
			w0, w1, w2 := w*b0, w*b1, w*b2
			a00 += w0 * b0
			a01 += w0 * b1
			a02 += w0 * b2
			a11 += w1 * b1
			a12 += w1 * b2
			a22 += w2 * b2
			r0 += w0 * y
			r1 += w1 * y
			r2 += w2 * y
		}
		f.grams[j] = gram{[3][3]float64{{a00, a01, a02}, {a01, a11, a12}, {a02, a12, a22}}, [3]float64{r0, r1, r2}}
	}
}

// solve fits q on the present knots to the gathered equations; false when they do not determine it.
func (f *fitter) solve(q *spline, kinked knots) bool {
	n := f.q.arcs()
	f.sys.reset(f.forms(kinked))
	for j := range n {
		f.couple(f.vs[j], f.ms[j], f.vs[j+1])
	}
	f.sys.shape()
	for j := range n {
		g := &f.grams[j]
		three := [3]*form{&f.vs[j], &f.ms[j], &f.vs[j+1]}
		for a, p := range three {
			if p.i >= 0 {
				f.spread(p.i, p.a, &g.a[a], g.r[a], three)
			}
			if p.j >= 0 {
				f.spread(p.j, p.b, &g.a[a], g.r[a], three)
			}
		}
	}
	if !f.sys.solve() {
		return false
	}
	q.x = append(q.x[:0], f.q.x...)
	q.v, q.m = resized(q.v, n+1), resized(q.m, n)
	for j := range q.m {
		q.m[j] = f.ms[j].of(f.sys.b)
	}
	for j := range q.v {
		q.v[j] = f.vs[j].of(f.sys.b)
	}
	return true
}

// couple makes room for the products of the unknowns of three forms.
func (f *fitter) couple(p, q, r form) {
	all := [6]int{p.i, p.j, q.i, q.j, r.i, r.j}
	least := math.MaxInt
	for _, i := range all {
		if i >= 0 {
			least = min(least, i)
		}
	}
	for _, i := range all {
		if i >= 0 {
			f.sys.couple(i, least)
		}
	}
}

// spread adds the part c·z[i] of one form to the equations: its products with all three, and its
// right hand side r.
func (f *fitter) spread(i int, c float64, g *[3]float64, r float64, three [3]*form) {
	sum := r
	for b, q := range three {
		x := c * g[b]
		if q.i >= 0 {
			f.sys.add(i, q.i, x*q.a)
		}
		if q.j >= 0 {
			f.sys.add(i, q.j, x*q.b)
		}
		sum -= g[b] * q.c
	}
	f.sys.b[i] += c * sum
}

// measure computes e, the peaks and their maximum for the spline q on the present knots.
func (f *fitter) measure(q *spline) {
	n := q.arcs()
	f.peak = resized(f.peak, n)
	i := f.skip(q)
	f.out[0], f.out[1] = f.outside(f.lo, i, f.before), 0
	f.max = f.out[0]
	for j := range n {
		start, inv := q.x[j], 1/(q.x[j+1]-q.x[j])
		v0, v1, v2 := q.v[j], 2*q.m[j], q.v[j+1]
		worst := 0.0
		for end := f.until(q, j, i); i < end; i++ {
			u := (f.s[i] - start) * inv
			c := 1 - u
			e := c*(c*v0+u*v1) + u*u*v2 - f.goal[i]
			e *= f.inv[i]
			f.e[i] = e
			if e = math.Abs(e); !(e <= worst) {
				worst = e
			}
		}
		f.peak[j] = worst
		f.max = math.Max(f.max, worst)
	}
	f.out[1] = f.outside(i, f.hi, f.beyond)
	if f.max = math.Max(f.max, f.out[1]); math.IsNaN(f.max) {
		f.max = math.Inf(1)
	}
}

// outside measures the circle of a dwell against the samples from..to and returns the largest
// distance.
func (f *fitter) outside(from, to int, circle func(s float64) (q, slope float64)) float64 {
	worst := 0.0
	for i := from; i < to; i++ {
		q, _ := circle(f.s[i])
		f.e[i] = (q - f.goal[i]) * f.inv[i]
		worst = math.Max(worst, math.Abs(f.e[i]))
	}
	return worst
}

// keep stores the present spline when it is the best so far.
func (f *fitter) keep() {
	if f.max < f.bestMax {
		f.bestMax = f.max
		f.best.copyFrom(&f.q)
	}
}
