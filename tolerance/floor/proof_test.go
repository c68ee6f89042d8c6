package floor

import (
	"math"
	"testing"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/fit"
	"pgregory.net/rapid"
)

// solve is Cramer's rule for three equations.
func solve(m [3][3]float64, r [3]float64) (x [3]float64) {
	det := func(m [3][3]float64) float64 {
		return m[0][0]*(m[1][1]*m[2][2]-m[1][2]*m[2][1]) - m[0][1]*(m[1][0]*m[2][2]-m[1][2]*m[2][0]) + m[0][2]*(m[1][0]*m[2][1]-m[1][1]*m[2][0])
	}
	d := det(m)
	for j := range x {
		n := m
		for i := range n {
			n[i][j] = r[i]
		}
		x[j] = det(n) / d
	}
	return x
}

// bestCircle searches for the circle or line with the least largest distance from the points: least
// squares over and over, the weights multiplied by the distances left (C. L. Lawson 1961). It shares nothing with the
// package, and what it returns is the plain distance from a circle it has found.
func bestCircle(ps []plane.Point, rounds int) float64 {
	n := len(ps)
	o := ps[n/2]
	u := ps[n-1].Sub(ps[0]).Unit()
	size := ps[n-1].Dist(ps[0])
	w := make([]float64, n)
	d := make([]float64, n)
	for i := range w {
		w[i] = 1
	}
	best := math.Inf(1)
	for range rounds {
		var m [3][3]float64
		var r [3]float64
		for i, p := range ps {
			v := p.Sub(o).Scale(1 / size)
			row := [3]float64{1, u.Dot(v), v.Dot(v)}
			for a := range row {
				r[a] += w[i] * row[a] * u.Cross(v)
				for b := range row {
					m[a][b] += w[i] * row[a] * row[b]
				}
			}
		}
		c := solve(m, r)
		worst, sum := 0.0, 0.0
		for i, p := range ps {
			v := p.Sub(o).Scale(1 / size)
			// y = c0 + c1 x + c2 (x²+y²): a circle; its distance by the value f and the square of the gradient there.
			f := u.Cross(v) - c[0] - c[1]*u.Dot(v) - c[2]*v.Dot(v)
			g2 := 1 + c[1]*c[1] - 4*c[0]*c[2]
			d[i] = size * math.Abs(2*f/(math.Sqrt(g2)+math.Sqrt(math.Max(g2-4*c[2]*f, 0))))
			worst = math.Max(worst, d[i])
			w[i] *= d[i]
			sum += w[i]
		}
		for i := range w {
			w[i] /= sum
		}
		if worst < best {
			best = worst
		}
	}
	return best
}

// dense is n points on what each piece has of a stretch.
func (c curve) dense(from, to float64, n int) []plane.Point {
	var ps []plane.Point
	for turn := range 2 {
		for _, p := range c.pieces {
			a, b := math.Max(from, p.From+360*float64(turn)), math.Min(to, p.To+360*float64(turn))
			for i := range n {
				if a < b {
					ps = append(ps, c.at(a+(b-a)*float64(i)/float64(n-1)))
				}
			}
		}
	}
	return ps
}

// dots is a curve of which piece i is one point.
type dots []plane.Point

func (d dots) Pieces() []plane.Piece           { return make([]plane.Piece, len(d)) }
func (d dots) At(i int, _ float64) plane.Frame { return plane.Frame{P: d[i]} }
func (d dots) Over(i int, t taylor.Interval, order int) (x, y taylor.I) {
	return taylor.I{}.Of(d[i].X), taylor.I{}.Of(d[i].Y)
}

func (d dots) refusal(eps float64) float64 {
	s := &survey{curve: d, pieces: d.Pieces(), eps: eps}
	var ns []node
	for i, p := range d {
		ns = append(ns, node{mark{}, i, p})
	}
	return s.refusal([4]node{ns[0], ns[1], ns[3], ns[4]}, ns[2])
}

// Five points within eps of a circle or line are never refused, however large eps; off by 1 % more
// than eps by turns, they are where eps is small beside their chord.
func TestRefusal(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		share := rapid.Float64Range(-1, 1)
		turn := rapid.Float64Range(0, 6.3).Draw(t, "turn")
		span := rapid.Float64Range(0.01, 6).Draw(t, "span") // of the arc, length for a radius of 10
		bend := rapid.SampledFrom([]float64{0, 1e-3, 1, -1}).Draw(t, "bend")
		eps := math.Pow(10, rapid.Float64Range(-6, 1).Draw(t, "log eps"))
		on := func(s, d float64) plane.Point { // at arc length 10 s, d to the left
			h := 10 * s * bend / 2
			chord := 10 * s
			if h != 0 {
				chord *= math.Sin(h/10) / (h / 10)
			}
			p := plane.Point{X: 3, Y: -7}.Add(plane.Unit(plane.Angle(turn + h/10)).Scale(chord))
			return p.Add(plane.Unit(plane.Angle(turn + 2*h/10)).Left().Scale(d))
		}
		byTurns := rapid.Bool().Draw(t, "by turns") // the worst that can be
		var within dots
		at := []float64{-1, -0.5, 0, 0.5, 1}
		for i := range at {
			s := span / 2 * (at[i] + 0.2*share.Draw(t, "place"))
			d := share.Draw(t, "off")
			if rapid.Bool().Draw(t, "edge") {
				d = math.Copysign(1, d)
			}
			if byTurns && i != 2 {
				d = []float64{1, -1, 0, 1, -1}[i]
			}
			within = append(within, on(s, (1-1e-6)*eps*d))
		}
		if r := within.refusal(eps); r > 1 {
			t.Fatalf("five points within %g refused, share %v", eps, r)
		}
		var beyond dots
		for i, sign := range []float64{1, -1, 0, 1, -1} {
			beyond = append(beyond, on(span/2*at[i], 1.01*eps*sign))
		}
		if r := beyond.refusal(eps); eps < 1e-4*span && span < 3 && r <= 1 {
			t.Fatalf("no proof at eps %g that points 1 %% beyond it do not fit, share %v", eps, r)
		}
	})
}

// No search finds a circle within eps of a stretch that reach refuses, and one finds it for a slightly shorter one.
func TestReachAgainstSearch(t *testing.T) {
	all := []curve{ellipse(60, 35), cyc345(0), cyc345(11), parabolic(0), noDwell(), wavy()}
	rapid.Check(t, func(t *rapid.T) {
		c := all[rapid.IntRange(0, len(all)-1).Draw(t, "curve")]
		eps := math.Pow(10, rapid.Float64Range(-4.3, -1.5).Draw(t, "log eps"))
		s, err := newSurvey(c, c.Pieces(), eps)
		if err != nil {
			t.Fatal(err)
		}
		a := s.nodeAt(mark{0, c.pieces[0].From + rapid.Float64Range(0, 359.9).Draw(t, "from")})
		b, ok := s.reach(a)
		if !ok {
			t.Fatalf("no end of reach from %v", a.t)
		}
		to := b.t + 360*float64(b.turn)
		if d := bestCircle(c.dense(a.t, to, 201), 100); d < eps {
			t.Fatalf("a circle within %g of %g..%g, refused at eps %g", d, a.t, to, eps)
		}
		if d := bestCircle(c.dense(a.t, a.t+0.95*(to-a.t), 101), 300); d > 1.02*eps {
			t.Fatalf("%g..%g is the reach at eps %g; no circle within %g at 0.95 of it", a.t, to, eps, d)
		}
	})
}

// freeArcs counts a chain of free arcs from a start, each found by search and within eps of dense points: an
// upper bound of what the floor is a lower bound of.
func freeArcs(c curve, eps, from float64) int {
	n := 0
	for t := from; t < from+360; n++ {
		lo, hi := t, math.Min(t+130, from+360)
		for hi-lo > 0.02 {
			if m := (lo + hi) / 2; bestCircle(c.dense(t, m, 41), 60) <= eps {
				lo = m
			} else {
				hi = m
			}
		}
		if t = lo; hi == from+360 {
			t = hi
		}
	}
	return n
}

// The floor is not only true but close: free arcs found by search do with at most one more.
func TestTight(t *testing.T) {
	for name, c := range curves() {
		const eps = 0.01
		floor, found := mustFloor(t, c, eps), math.MaxInt
		for _, share := range []float64{0, 4, 8, 12} {
			found = min(found, freeArcs(c, eps, c.pieces[0].From+share))
		}
		t.Logf("%s: floor %d, free arcs found %d, N* %.1f", name, floor, found, fit.Theory(c, eps, chain.Arc))
		if floor > found || floor < found-1 {
			t.Errorf("%s: floor %d, found %d free arcs", name, floor, found)
		}
	}
}
