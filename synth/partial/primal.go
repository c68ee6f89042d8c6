package partial

import (
	"math"

	"lobewright/synth/qp"
)

// Between two points of the mesh the lift is the quintic with the lift, velocity and
// acceleration of both (Hermite form): continuous in acceleration whatever the values
// are, every fact is simply a value, and the class holds the cubic splines with
// piecewise constant jerk, among which the optimum of peak jerk lies when the knots
// are where it switches. Peaks and windows are held through Bernstein coefficients,
// between which a polynomial lies (G. Farin, Curves and Surfaces for CAGD, cited from
// memory): of the lift six, of the acceleration four, of the jerk three, all linear in
// the values. So what the program finds holds everywhere, not at samples.

// linear is an affine function of the unknowns.
type linear struct {
	terms []term
	c     float64
}

type term struct {
	i int
	v float64
}

// combine returns the sum of w[k]*l[k].
func combine(w []float64, l ...linear) linear {
	out := linear{terms: make([]term, 0, 7)}
	for k, x := range l {
		out.c += w[k] * x.c
		for _, t := range x.terms {
			out = out.plus(t.i, w[k]*t.v)
		}
	}
	return out
}

// plus adds v times unknown i.
func (l linear) plus(i int, v float64) linear {
	for k := range l.terms {
		if l.terms[k].i == i {
			l.terms[k].v += v
			return l
		}
	}
	l.terms = append(l.terms, term{i, v})
	return l
}

// at evaluates the function.
func (l linear) at(x []float64) float64 {
	s := l.c
	for _, t := range l.terms {
		s += t.v * x[t.i]
	}
	return s
}

// primal is the program whose unknowns are the free values at the points of a mesh.
//
// The values themselves would make a poor basis: the jerk is a third difference of
// lifts that agree in all but their last digits, and the matrix of the program has a
// condition that grows with the sixth power of the number of points. So inside a cell
// the unknowns are hierarchical (H. Yserentant, On the multi-level splitting of finite
// element spaces, Numer. Math. 49 (1986), cited from memory): at the middle point, how
// far its values are from the quintic through the ends of the cell; at the middle of each
// half, how far from the quintic through the ends of the half; and so on. That quintic is
// the least rough curve between its ends, so the levels are orthogonal in the integral of
// the squared jerk, and with unknowns of the size of the jerk they make, nothing cancels.
type primal struct {
	m       *mesh
	f, v, a []linear // of each point
	names   int      // unknowns
	jerk1   float64  // size of the jerk an unknown stands for
}

func newPrimal(m *mesh) *primal {
	n := len(m.stretches)
	p := &primal{m: m, f: make([]linear, n), v: make([]linear, n), a: make([]linear, n)}
	inner := make([]int, n) // first unknown of each inner point
	for i := 0; i < n; i++ {
		if j := p.end(i); j > i+1 {
			p.name(inner, i, j)
		}
	}
	p.size()
	p.ends()
	for i := 0; i < n; i++ {
		if j := p.end(i); j > i+1 {
			p.fill(inner, i, j)
		}
	}
	return p
}

// end returns the point behind the cell that begins at point i, or i when none does.
func (p *primal) end(i int) int {
	if p.m.node[i] < 0 {
		return i
	}
	for i++; i < len(p.m.node) && p.m.node[i] < 0; i++ {
	}
	return i
}

// name numbers the unknowns of the points between i and j, finer levels first: then the
// factor of the matrix stays within what each coarse point spans.
func (p *primal) name(inner []int, i, j int) {
	if j-i < 2 {
		return
	}
	mid := (i + j) / 2
	p.name(inner, i, mid)
	p.name(inner, mid, j)
	inner[mid] = p.names
	p.names += 3
}

// size sets the jerk that an unknown stands for.
func (p *primal) size() {
	size := p.m.line.size
	if size == 0 {
		size = 1
	}
	for _, c := range p.m.line.cells {
		if w := c.to - c.from; !c.rigid {
			p.jerk1 = math.Max(p.jerk1, size/(w*w*w))
		}
	}
}

// ends gives the points where cells meet their values, known or unknown.
func (p *primal) ends() {
	runs, cells := make(map[int]linear), p.m.line.cells
	for i, k := range p.m.node {
		if k < 0 {
			continue
		}
		at, h := p.m.line.nodes[k], math.Inf(1)
		for _, c := range []cell{cells[k], cells[(k+len(cells)-1)%len(cells)]} {
			if !c.rigid {
				h = math.Min(h, c.to-c.from)
			}
		}
		if first, ok := runs[at.run]; ok && at.run >= 0 && !at.f.is {
			p.f[i] = combine([]float64{1, 1}, first, linear{c: at.rise})
		} else {
			p.f[i] = p.value(at.f, p.jerk1*h*h*h)
			if at.run >= 0 {
				runs[at.run] = combine([]float64{1, 1}, p.f[i], linear{c: -at.rise})
			}
		}
		p.v[i], p.a[i] = p.value(at.v, p.jerk1*h*h), p.value(at.a, p.jerk1*h)
	}
}

// value is a new unknown in the given unit, or the known value.
func (p *primal) value(k known, unit float64) linear {
	if k.is {
		return linear{c: k.x}
	}
	p.names++
	return linear{terms: []term{{p.names - 1, unit}}}
}

// fill gives the points between i and j their values.
func (p *primal) fill(inner []int, i, j int) {
	if j-i < 2 {
		return
	}
	mid, to := (i+j)/2, j%len(p.f)
	a, b, h := p.m.stretches[i].from, p.m.stretches[j-1].to, p.m.stretches[mid].from-p.m.stretches[i].from
	var w [3][6]float64 // value, velocity, acceleration at the middle by the six values of the ends
	for k, e := range [6][6]float64{{0: 1}, {1: 1}, {2: 1}, {3: 1}, {4: 1}, {5: 1}} {
		s := at(between(state{a, e[0], e[1], e[2]}, state{b, e[3], e[4], e[5]}), p.m.stretches[mid].from)
		w[0][k], w[1][k], w[2][k] = s.f, s.v, s.a
	}
	ends := []linear{p.f[i], p.v[i], p.a[i], p.f[to], p.v[to], p.a[to]}
	const share = 1.0 / 60
	p.f[mid] = combine(w[0][:], ends...).plus(inner[mid], share*p.jerk1*h*h*h)
	p.v[mid] = combine(w[1][:], ends...).plus(inner[mid]+1, share*p.jerk1*h*h)
	p.a[mid] = combine(w[2][:], ends...).plus(inner[mid]+2, share*p.jerk1*h)
	p.fill(inner, i, mid)
	p.fill(inner, mid, j)
}

// lift returns the six Bernstein coefficients of the lift on stretch i.
func (p *primal) lift(i int) [6]linear {
	j, h := p.m.next(i), p.m.stretches[i].width()
	return [6]linear{
		p.f[i],
		combine([]float64{1, h / 5}, p.f[i], p.v[i]),
		combine([]float64{1, 2 * h / 5, h * h / 20}, p.f[i], p.v[i], p.a[i]),
		combine([]float64{1, -2 * h / 5, h * h / 20}, p.f[j], p.v[j], p.a[j]),
		combine([]float64{1, -h / 5}, p.f[j], p.v[j]),
		p.f[j],
	}
}

// acceleration returns the four Bernstein coefficients of the acceleration.
func (p *primal) acceleration(i int) [4]linear {
	b, h := p.lift(i), p.m.stretches[i].width()
	w := 20 / (h * h)
	j := p.m.next(i)
	return [4]linear{p.a[i], combine([]float64{w, -2 * w, w}, b[1], b[2], b[3]), combine([]float64{w, -2 * w, w}, b[2], b[3], b[4]), p.a[j]}
}

// jerk returns the three Bernstein coefficients of the jerk.
func (p *primal) jerk(i int) [3]linear {
	b, h := p.lift(i), p.m.stretches[i].width()
	w := 60 / (h * h * h)
	var out [3]linear
	for k := range out {
		out[k] = combine([]float64{-w, 3 * w, -3 * w, w}, b[k], b[k+1], b[k+2], b[k+3])
	}
	return out
}

// limits are what the program holds; an infinite one is not held. least says which of
// the peaks is the unknown to be made least, if any.
type limits struct {
	acceleration, jerk float64
	least              goal
}

// goal is what is minimized.
type goal uint8

const (
	roughness     goal = iota // the mean square of the jerk, under the limits
	leastPeakA                // the peak of the acceleration
	leastPeakJerk             // the peak of the jerk
)

// program writes the program of the limits. unit is the size of the peak that is
// minimized, for scale.
func (p *primal) program(l limits, unit float64) qp.Problem {
	out := qp.Problem{N: p.names}
	peak := -1
	if l.least != roughness {
		peak = out.N
		out.N++
	}
	out.C = make([]float64, out.N)
	if peak >= 0 {
		out.C[peak] = 1
	}
	for i, s := range p.m.stretches {
		if s.rigid {
			continue
		}
		c := p.m.cellOf(i)
		shared := 0 // coefficients that are also the next stretch's first
		if j := p.m.next(i); p.m.node[j] < 0 {
			shared = 1
		}
		lift, acceleration := p.lift(i), p.acceleration(i)
		for _, b := range lift[:len(lift)-shared] {
			within(&out, b, c.lo, math.Inf(1))
			within(&out, b, math.Inf(-1), c.hi)
		}
		jerk := p.jerk(i)
		if l.least == leastPeakA || !math.IsInf(l.acceleration, 1) {
			for _, b := range acceleration[:len(acceleration)-shared] {
				p.hold(&out, b, l.acceleration, unit, peak, l.least == leastPeakA)
			}
		}
		if l.least == leastPeakJerk || !math.IsInf(l.jerk, 1) {
			for _, b := range jerk {
				p.hold(&out, b, l.jerk, unit, peak, l.least == leastPeakJerk)
			}
		}
		if l.least == roughness {
			square(&out, jerk, s.width())
		}
	}
	for i, k := range p.m.node { // a run whose lift is free
		if k >= 0 && p.m.line.nodes[k].run >= 0 && !p.m.line.nodes[k].f.is {
			within(&out, p.f[i], p.m.line.nodes[k].lo, math.Inf(1))
			within(&out, p.f[i], math.Inf(-1), p.m.line.nodes[k].hi)
		}
	}
	normalizeQ(&out)
	return out
}

// hold keeps |b| to a limit, or to the unknown peak.
func (p *primal) hold(out *qp.Problem, b linear, limit, unit float64, peak int, minimized bool) {
	if !minimized {
		within(out, b, -limit, limit)
		return
	}
	within(out, combine([]float64{1}, b).plus(peak, -unit), math.Inf(-1), 0)
	within(out, combine([]float64{-1}, b).plus(peak, -unit), math.Inf(-1), 0)
}

// within adds the rows lo <= b <= hi. A b without unknowns is a fact, which the
// timeline has judged.
func within(out *qp.Problem, b linear, lo, hi float64) {
	if len(b.terms) == 0 {
		return
	}
	if !math.IsInf(hi, 1) {
		out.G, out.H = append(out.G, b.row(1)), append(out.H, hi-b.c)
	}
	if !math.IsInf(lo, -1) {
		out.G, out.H = append(out.G, b.row(-1)), append(out.H, b.c-lo)
	}
}

// row returns the linear part times by.
func (l linear) row(by float64) qp.Row {
	var r qp.Row
	for _, t := range l.terms {
		r.I, r.V = append(r.I, t.i), append(r.V, by*t.v)
	}
	return r
}

// square adds the integral of the squared jerk over a stretch of width h to Q and C:
// the Bernstein coefficients weighed by the integrals of products of the basis.
func square(out *qp.Problem, jerk [3]linear, h float64) {
	weight := [3][3]float64{{1, 0.5, 1.0 / 6}, {0.5, 2.0 / 3, 0.5}, {1.0 / 6, 0.5, 1}}
	for a, ja := range jerk {
		for b, jb := range jerk {
			w := weight[a][b] * h / 5
			for _, s := range ja.terms {
				out.C[s.i] += w * s.v * jb.c
				for _, t := range jb.terms {
					if t.i <= s.i {
						out.Q = append(out.Q, qp.Term{I: s.i, J: t.i, V: w * s.v * t.v})
					}
				}
			}
		}
	}
}

// normalizeQ scales a quadratic objective so that its largest entry is 1, and adds up
// entries of one place.
func normalizeQ(p *qp.Problem) {
	if len(p.Q) == 0 {
		return
	}
	sum := make(map[[2]int]float64)
	var order [][2]int
	most := 0.0
	for _, t := range p.Q {
		at := [2]int{t.I, t.J}
		if _, seen := sum[at]; !seen {
			order = append(order, at)
		}
		sum[at] += t.V
		most = math.Max(most, math.Abs(sum[at]))
	}
	p.Q = p.Q[:0]
	for _, at := range order {
		p.Q = append(p.Q, qp.Term{I: at[0], J: at[1], V: sum[at] / most})
	}
	for i := range p.C {
		p.C[i] /= most
	}
}
