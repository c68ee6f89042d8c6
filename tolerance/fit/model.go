package fit

import (
	"math"
	"sort"

	"lobewright/synth/plane"
)

// model is the linear model of a stretch: the curve as a function F of arc length s with
// second derivative k - k0, k0 its mean curvature. A chain that runs e to the left of the curve is the
// quadratic spline q = F + e, with second derivatives k_i - k0. What is neglected, k²e, is made up for by measuring
// the chain itself and correcting the goal (search.go).
type model struct {
	stretch
	options Options
	ss      []sample  // growing t and s; both sides of the parts' boundaries
	s       []float64 // arc length of each sample, 0 at the stretch's start
	f, df   []float64 // F and F' there
	ds      []float64 // the length around it, times the square of inv: its plain weight in least squares
	inv     []float64 // 1 over the share of eps allowed there
	u       []float64 // N* up to it, and a little more for flat places
	k0      float64
	length  float64
	count   float64   // N*
	steps   []float64 // arc lengths inside the stretch where the curvature jumps, growing
	anchor  float64   // arc length where the curve starts when that is inside the stretch, else NaN
	jumpA   bool      // the curvature jumps at the left border; closed: at the curve's start
	jumpB   bool      // the curvature jumps at the right border
	period  int       // closed: number of samples of one turn
}

const (
	flatTally   = 0.05 // of the mean count: what flat places get of the first knots
	marginShare = 0.26 // closed: of a turn, what is repeated on either side of it
)

// newModel samples the stretch for a deviation eps and the shares of it that are allowed; most is the curve's
// largest curvature.
func newModel(st stretch, eps, most float64, o Options) (*model, error) {
	m := &model{stretch: st, options: o, anchor: math.NaN()}
	if err := m.sample(eps, most); err != nil {
		return nil, err
	}
	m.integrate()
	m.tally(eps)
	m.mark(most)
	if st.closed {
		m.repeat()
	}
	n := len(m.s)
	m.ds = make([]float64, n)
	for i := range m.ds {
		m.ds[i] = (m.s[min(i+1, n-1)] - m.s[max(i-1, 0)]) / 2 * m.inv[i] * m.inv[i]
	}
	return m, nil
}

// integrate fills s, F' and F: F' is the tangent's angle, F by the trapezium rule with its end
// correction, since the derivative of F' is known.
func (m *model) integrate() {
	n := len(m.ss)
	m.s, m.f, m.df = make([]float64, n), make([]float64, n), make([]float64, n)
	for i := 1; i < n; i++ {
		a, b := &m.ss[i-1], &m.ss[i]
		if a.t < b.t {
			b.s = a.s + step(a.Frame, b.Frame)
		} else {
			b.s = a.s
		}
		m.s[i] = b.s
		m.df[i] = m.df[i-1] + math.Atan2(a.T.Cross(b.T), a.T.Dot(b.T))
	}
	m.length = m.s[n-1]
	m.k0 = m.df[n-1] / m.length
	for i := range m.df {
		m.df[i] -= m.k0 * m.s[i]
		if i > 0 {
			h := m.s[i] - m.s[i-1]
			m.f[i] = m.f[i-1] + h/2*(m.df[i-1]+m.df[i]) + h*h/12*(m.ss[i-1].K-m.ss[i].K)
		}
	}
	if m.closed { // one F'(0) makes F periodic
		lean := m.f[n-1] / m.length
		for i := range m.df {
			m.df[i] -= lean
			m.f[i] -= lean * m.s[i]
		}
	}
}

// tally fills u and the count.
func (m *model) tally(eps float64) {
	density := m.arcsPer(eps)
	m.u, m.inv = make([]float64, len(m.s)), make([]float64, len(m.s))
	for i := range m.s {
		m.inv[i] = 1 / m.options.at(m.ss[i].t)
		if i > 0 {
			m.u[i] = m.u[i-1] + (m.s[i]-m.s[i-1])*(density(m.ss[i-1])+density(m.ss[i]))/2
		}
	}
	m.count = m.u[len(m.u)-1]
	flat := flatTally * math.Max(m.count, 1) / m.length
	for i := range m.u {
		m.u[i] += flat * m.s[i]
	}
}

// arcsPer says how many arcs a unit of length takes at a sample.
func (m *model) arcsPer(eps float64) func(sample) float64 {
	density := arcsPer(eps)
	return func(s sample) float64 { return density(s.Frame) / math.Cbrt(m.options.at(s.t)) }
}

// mark finds the jumps and the anchor.
func (m *model) mark(most float64) {
	for i := 1; i < len(m.ss); i++ {
		if a, b := m.ss[i-1], m.ss[i]; a.t == b.t && jumps(a.Frame, b.Frame, most) {
			m.steps = append(m.steps, m.s[i])
		}
	}
	for i, p := range m.parts {
		if i > 0 && p.piece == 0 {
			m.anchor = m.s[sort.Search(len(m.ss), func(j int) bool { return m.ss[j].t >= p.From })]
		}
	}
	first, last := m.ss[0].Frame, m.ss[len(m.ss)-1].Frame
	m.jumpA = m.left.dwell && jumps(m.left.frame, first, most) || m.closed && jumps(last, first, most)
	m.jumpB = m.right.dwell && jumps(last, m.right.frame, most)
}

// repeat puts a share of the turn on either side of a closed stretch, so that its knots may
// begin anywhere near the curve's start.
func (m *model) repeat() {
	n := len(m.ss) - 1 // the last is the first again
	m.period = n
	old := *m
	m.ss, m.s, m.f, m.df, m.u, m.inv = nil, nil, nil, nil, nil, nil
	take := func(from, to int, turns float64) {
		for i := from; i < to; i++ {
			q := old.ss[i]
			q.s, q.t = q.s+turns*m.length, q.t+turns*turnDegrees
			m.ss, m.s, m.f, m.df = append(m.ss, q), append(m.s, q.s), append(m.f, old.f[i]), append(m.df, old.df[i])
			m.u, m.inv = append(m.u, old.u[i]+turns*old.u[n]), append(m.inv, old.inv[i])
		}
	}
	take(sort.SearchFloat64s(old.s, (1-marginShare)*m.length), n, -1)
	take(0, n, 0)
	take(0, sort.SearchFloat64s(old.s, marginShare*m.length), 1)
}

// before returns value and slope of the left dwell's circle at arc length s.
func (m *model) before(s float64) (q, slope float64) {
	c := m.left.frame.K - m.k0
	return m.f[0] + s*(m.df[0]+c*s/2), m.df[0] + c*s
}

// beyond returns those of the right dwell's circle.
func (m *model) beyond(s float64) (q, slope float64) {
	n := len(m.s) - 1
	s -= m.length
	c := m.right.frame.K - m.k0
	return m.f[n] + s*(m.df[n]+c*s/2), m.df[n] + c*s
}

// index returns the last sample at or before s, the first when there is none.
func (m *model) index(s float64) int {
	return max(sort.Search(len(m.s), func(i int) bool { return m.s[i] > s })-1, 0)
}

// between interpolates values of the samples linearly at arc length s.
func (m *model) between(s float64, value func(i int) float64) float64 {
	i := min(m.index(s), len(m.s)-2)
	a := value(i)
	if d := m.s[i+1] - m.s[i]; d > 0 {
		return a + (value(i+1)-a)*(s-m.s[i])/d
	}
	return a
}

func (m *model) tAt(s float64) float64 { return m.between(s, func(i int) float64 { return m.ss[i].t }) }
func (m *model) uAt(s float64) float64 { return m.between(s, func(i int) float64 { return m.u[i] }) }

// sAt returns the arc length at which u has a value.
func (m *model) sAt(u float64) float64 {
	i := min(max(sort.SearchFloat64s(m.u, u), 1), len(m.u)-1)
	d := m.u[i] - m.u[i-1]
	if d <= 0 {
		return m.s[i]
	}
	return m.s[i-1] + (m.s[i]-m.s[i-1])*(u-m.u[i-1])/d
}

// valueAt returns F and F' at arc length s, by Taylor's formula from the sample before.
func (m *model) valueAt(s float64) (f, slope float64) {
	i := m.index(s)
	d, k, dk := s-m.s[i], m.ss[i].K-m.k0, m.ss[i].DK
	return m.f[i] + d*(m.df[i]+d*(k/2+d*dk/6)), m.df[i] + d*(k+d*dk/2)
}

// frameAt returns the curve at arc length s, and its parameter.
func (m *model) frameAt(s float64) (plane.Frame, float64) {
	t := m.tAt(s)
	local := t
	if m.closed {
		local -= turnDegrees * math.Floor((t-m.parts[0].From)/turnDegrees)
	}
	i := sort.Search(len(m.parts)-1, func(i int) bool { return local < m.parts[i].To })
	p := m.parts[i]
	return p.frame(m.curve, math.Max(p.From, math.Min(p.To, local))), t
}
