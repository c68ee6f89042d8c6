package partial

import (
	"math"

	"lobewright/synth/motion"
)

// The program's answer is a quintic on each of a hundred or two stretches. Most of
// them are parts of one and the same polynomial: under the least mean square of the
// jerk the sixth derivative is 0 wherever no limit is met, a peak that is held is a
// parabola, a jerk at its limit a cubic. So stretches are joined again as long as the
// one quintic through the values at both ends keeps every limit and stays as near as
// a designer could never tell; joints stay continuous in acceleration by construction.

// state is lift, velocity and acceleration at a cam angle, degrees.
type state struct{ at, f, v, a float64 }

// states returns the values at the start of every stretch, and of the first again.
func (s *search) states() []state {
	p := s.primal
	out := make([]state, 0, len(p.f)+1)
	for i := range p.f {
		out = append(out, state{s.m.stretches[i].from, p.f[i].at(s.x), p.v[i].at(s.x), p.a[i].at(s.x)})
	}
	last := out[0]
	last.at += turn
	return append(out, last)
}

// between returns the zone of the quintic from one state to another, written about the
// end that is at rest, or where the velocity at least is 0: there it may touch a window.
func between(p, q state) motion.Zone {
	z := motion.Zone{From: p.at, To: q.at, Origin: p.at, Span: q.at - p.at, Event: -1}
	if q.v == 0 && (p.v != 0 || q.a == 0 && p.a != 0) {
		p, q = q, p
		z.Origin, z.Span = p.at, q.at-p.at
	}
	h := z.Span
	d, v0, v1, a0, a1 := q.f-p.f, h*p.v, h*q.v, h*h*p.a, h*h*q.a
	z.Poly = []float64{p.f, v0, a0 / 2,
		10*d - 6*v0 - 4*v1 - (3*a0-a1)/2,
		-15*d + 8*v0 + 7*v1 + (3*a0-2*a1)/2,
		6*d - 3*(v0+v1) - (a0-a1)/2}
	return z
}

// rigid returns the zone of a run of rigid cells.
func rigid(from, to, level, slope float64) motion.Zone {
	z := motion.Zone{From: from, To: to, Origin: from, Span: to - from, Poly: []float64{level}, Dwell: slope == 0, Event: -1}
	if slope != 0 {
		z.Poly = append(z.Poly, slope*(to-from))
	}
	return z
}

// zones turns the answer into as few zones as it allows.
func (s *search) zones(join bool) []motion.Zone {
	all := s.states()
	var out []motion.Zone
	for i := 0; i < len(s.m.stretches); {
		j := i + 1
		if s.m.stretches[i].rigid {
			for j < len(s.m.stretches) && s.m.stretches[j].rigid {
				j++
			}
			out = append(out, rigid(all[i].at, all[j].at, all[i].f, s.m.cellOf(i).slope))
			i = j
			continue
		}
		for join && j < len(s.m.stretches) && !s.m.stretches[j].rigid && !s.fixed(j) && s.may(all, i, j+1) {
			j++
		}
		out = append(out, between(all[i], all[j]))
		i = j
	}
	return out
}

// fixed reports whether a fact stands at the start of a stretch.
func (s *search) fixed(i int) bool {
	if k := s.m.node[i]; k >= 0 {
		n := s.line.nodes[k]
		return n.f.is || n.v.is || n.a.is
	}
	return false
}

// near is the share of the peak acceleration that joining may move it by.
const near = 2e-3

// may reports whether one quintic may stand for stretches i to j-1.
func (s *search) may(all []state, i, j int) bool {
	z := between(all[i], all[j])
	for k := i; k < j; k++ {
		p, q := at(z, all[k].at), at(z, all[k+1].at)
		if k > i && math.Abs(p.a-all[k].a) > near*s.peakA {
			return false
		}
		c, b := s.m.cellOf(k), bernstein(p, q)
		for _, x := range b {
			if x < c.lo-same*s.line.size || x > c.hi+same*s.line.size {
				return false
			}
		}
		h := q.at - p.at
		for m := range 3 {
			if math.Abs(60/(h*h*h)*(b[m+3]-3*b[m+2]+3*b[m+1]-b[m])) > s.limitJ*(1+slack) {
				return false
			}
		}
		for m := range 4 {
			if math.Abs(20/(h*h)*(b[m+2]-2*b[m+1]+b[m])) > s.limitA*(1+slack) {
				return false
			}
		}
	}
	return true
}

// at evaluates a zone's polynomial.
func at(z motion.Zone, deg float64) state {
	u := (deg - z.Origin) / z.Span
	var f, v, a float64
	for k := len(z.Poly) - 1; k >= 0; k-- {
		a = a*u + v
		v = v*u + f
		f = f*u + z.Poly[k]
	}
	return state{deg, f, v / z.Span, 2 * a / (z.Span * z.Span)}
}

// bernstein returns the coefficients of the lift between two states of one quintic.
func bernstein(p, q state) [6]float64 {
	h := q.at - p.at
	return [6]float64{p.f, p.f + h*p.v/5, p.f + 2*h*p.v/5 + h*h*p.a/20,
		q.f - 2*h*q.v/5 + h*h*q.a/20, q.f - h*q.v/5, q.f}
}
