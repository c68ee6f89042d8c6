package fit

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// stroke is an arc of the chain and the parameter at which it ends.
type stroke struct {
	leg
	t float64
}

// thread is the chain of a stretch: arcs from parameter start on.
type thread struct {
	start   float64
	strokes []stroke
}

// path writes the strokes as elements.
func (th thread) path() chain.Path {
	p := make(chain.Path, len(th.strokes))
	t := th.start
	for i, s := range th.strokes {
		p[i] = s.element(chain.Span{From: t, To: s.t})
		t = s.t
	}
	return p
}

// joint returns joint j of the spline: beside the curve by e = q-F and turned off its tangent by what
// e' says, or on the circle of a dwell.
func (f *fitter) joint(q *spline, j int) node {
	n, s := q.arcs(), q.x[j]
	if j == 0 && f.left.dwell {
		b := f.left.on(s)
		b.t = f.ss[0].t + s*f.left.rate
		if s > 0 {
			b.t = f.tAt(s)
		}
		return b
	}
	if j == n && f.right.dwell {
		b := f.right.on(s - f.length)
		b.t = f.ss[len(f.ss)-1].t + (s-f.length)*f.right.rate
		if s < f.length {
			b.t = f.tAt(s)
		}
		return b
	}
	frame, t := f.frameAt(s)
	value, slope := f.valueAt(s)
	own, _ := q.slopes(min(j, n-1))
	if j == n {
		_, own = q.slopes(n - 1)
	}
	e := q.v[j] - value
	if !f.closed && (j == 0 || j == n) {
		e = 0 // a corner
	}
	tilt := math.Atan2(own-slope, 1-frame.K*e)
	return node{p: frame.P.Add(frame.T.Left().Scale(e)), d: frame.T.Turn(plane.Angle(tilt)), t: t}
}

// realise turns the spline into a chain with continuous tangent: a biarc between every other joint,
// its first leg as long as the spline's arc; of an odd number the first arc alone, from its
// joint through the next one's point, whose tangent is then the arc's. It reports whether
// that makes arcs that run forward.
func (f *fitter) realise(q *spline) (thread, bool) {
	n := q.arcs()
	if !f.closed && n > 1 && (q.x[1] <= 0 || q.x[n-1] >= f.length) {
		return thread{}, false // an arc that lies all on a dwell
	}
	nodes := make([]node, n+1)
	for j := range nodes {
		nodes[j] = f.joint(q, j)
	}
	if f.closed {
		nodes[n] = nodes[0]
		nodes[n].t += turnDegrees
	}
	th := thread{start: nodes[0].t}
	j := n % 2
	if j == 1 {
		one := through(nodes[0].p, nodes[0].d, nodes[1].p)
		if n == 1 && f.right.dwell { // then the tangent that counts is the right one
			back := through(nodes[1].p, nodes[1].d.Neg(), nodes[0].p)
			one = leg{p: nodes[0].p, end: nodes[1].p, d: back.endDirection().Neg(), k: -back.k}
		}
		th.strokes = append(th.strokes, stroke{one, nodes[1].t})
		nodes[1].d = one.endDirection()
	}
	for ; j < n; j += 2 {
		pair, ok := join(nodes[j], nodes[j+2], f.firstLeg(q, j))
		if !ok {
			return th, false
		}
		th.strokes = append(th.strokes, stroke{pair.legs[0], nodes[j+1].t}, stroke{pair.legs[1], nodes[j+2].t})
	}
	t := th.start
	for _, s := range th.strokes {
		if !s.forward() || !(s.t > t) {
			return th, false
		}
		t = s.t
	}
	return th, true
}

// firstLeg returns the tangent's length of arc j.
func (f *fitter) firstLeg(q *spline, j int) float64 {
	mid := (q.x[j] + q.x[j+1]) / 2
	value, _ := f.valueAt(mid)
	e := (q.v[j]+2*q.m[j]+q.v[j+1])/4 - value
	half := (q.x[j+1] - q.x[j]) * (1 - f.ss[f.index(mid)].K*e) / 2
	k := q.bend(j) + f.k0
	if math.Abs(k*half) < flatTurn {
		return half
	}
	return math.Tan(k*half) / k
}

// leastAhead is the cosine of half the largest angle an arc turns, 145 degrees.
const leastAhead = 0.3

// forward reports whether the arc runs on without turning far.
func (l leg) forward() bool {
	v := l.end.Sub(l.p)
	return v.Dot(l.d) > leastAhead*v.Norm()
}
