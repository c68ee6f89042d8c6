package fit

// spline is a quadratic spline: arc j runs from knot x[j] to x[j+1], with values v at the
// knots and middle control point m[j] (Bernstein form). Its slope is continuous but at
// knots that are kinked.
type spline struct {
	x, v, m []float64
}

func (q *spline) arcs() int { return len(q.x) - 1 }

func (q *spline) copyFrom(p *spline) {
	q.x = append(q.x[:0], p.x...)
	q.v = append(q.v[:0], p.v...)
	q.m = append(q.m[:0], p.m...)
}

// bend returns the second derivative of arc j.
func (q *spline) bend(j int) float64 {
	h := q.x[j+1] - q.x[j]
	return 2 * (q.v[j] - 2*q.m[j] + q.v[j+1]) / (h * h)
}

// slopes returns the slopes of arc j at its two ends.
func (q *spline) slopes(j int) (a, b float64) {
	h := q.x[j+1] - q.x[j]
	return 2 * (q.m[j] - q.v[j]) / h, 2 * (q.v[j+1] - q.m[j]) / h
}

// form is a value that depends on at most two unknowns z: a·z[i] + b·z[j] + c; i or j is
// negative when there is none.
type form struct {
	i, j    int
	a, b, c float64
}

func known(c float64) form { return form{-1, -1, 0, 0, c} }

func (f form) of(z []float64) float64 {
	x := f.c
	if f.i >= 0 {
		x += f.a * z[f.i]
	}
	if f.j >= 0 {
		x += f.b * z[f.j]
	}
	return x
}

// mix returns a·f + b·g for forms of at most one unknown, their i.
func mix(a float64, f form, b float64, g form) form {
	return form{f.i, g.i, a * f.a, b * g.a, a*f.c + b*g.c}
}

// knots says which of them have a slope of their own on either side.
type knots func(j int) bool

func smooth(int) bool { return false }

// movable are the knots that may slide.
func (f *fitter) movable(j int) bool { return !f.held(j) && !(f.closed && j == f.q.arcs()) }

// forms expresses values and control points by unknowns, and returns their number. Where the
// slope is continuous, the value at a knot lies on the line between the control points beside it; at a
// dwell, value and slope are its circle's; at a corner the value is the curve's.
func (f *fitter) forms(kinked knots) int {
	n, x := f.q.arcs(), f.q.x
	f.vs, f.ms = resized(f.vs, n+1), resized(f.ms, n)
	count := 0
	next := func() form { count++; return form{count - 1, -1, 1, 0, 0} }
	if f.closed && kinked(0) {
		f.vs[0] = next()
	}
	for j := range n {
		if j > 0 && kinked(j) {
			f.vs[j] = next()
		}
		switch {
		case j == 0 && f.left.dwell && !kinked(0):
			q, slope := f.before(x[0])
			f.ms[0] = known(q + slope*(x[1]-x[0])/2)
		case j == n-1 && f.right.dwell && !kinked(n):
			q, slope := f.beyond(x[n])
			f.ms[j] = known(q - slope*(x[n]-x[n-1])/2)
		default:
			f.ms[j] = next()
		}
	}
	between := func(a, b int, ha, hb float64) form { return mix(hb/(ha+hb), f.ms[a], ha/(ha+hb), f.ms[b]) }
	for j := 1; j < n; j++ {
		if !kinked(j) {
			f.vs[j] = between(j-1, j, x[j]-x[j-1], x[j+1]-x[j])
		}
	}
	if f.closed {
		if !kinked(0) {
			f.vs[0] = between(n-1, 0, x[n]-x[n-1], x[1]-x[0])
		}
		f.vs[n] = f.vs[0]
		return count
	}
	f.vs[0], f.vs[n] = known(f.f[0]), known(f.f[len(f.f)-1])
	if f.left.dwell {
		q, _ := f.before(x[0])
		f.vs[0] = known(q)
	}
	if f.right.dwell {
		q, _ := f.beyond(x[n])
		f.vs[n] = known(q)
	}
	return count
}
