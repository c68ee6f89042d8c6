package floor

import (
	"math"

	"lobewright/synth/taylor"
)

// spot encloses a point of the curve.
type spot struct{ x, y taylor.Interval }

func (s *survey) enclose(n node) spot {
	x, y := s.curve.Over(n.piece, taylor.Exactly(math.Min(n.t, s.pieces[n.piece].To)), 0)
	return spot{x.Range(), y.Range()}
}

// inAxes returns the spot from origin o in axes of the vectors (c, s) and (-s, c), whose length
// is about 1 and taken into account as it is, and |P|².
func (p spot) inAxes(o spot, c, s taylor.Interval) (x, y, square taylor.Interval) {
	dx, dy := p.x.Sub(o.x), p.y.Sub(o.y)
	return dx.Mul(c).Add(dy.Mul(s)), dy.Mul(c).Sub(dx.Mul(s)), dx.Sqr().Add(dy.Sqr())
}

// abs encloses |a|.
func abs(a taylor.Interval) taylor.Interval { return taylor.Interval{Lo: a.Mig(), Hi: a.Mag()} }

// refusal is a lower bound of the left side of the package comment's inequality over an upper bound of
// the right: above 1 it proves that no circle and no line is within eps of all of the four nodes q and of m.
// Otherwise there is no proof; 0 when a condition of the inequality fails.
//
// With axes of length a² = c²+s² the coordinates of a vector v are (v·e)/a²; b_x, b_y are b·e/a², so
// b·P = b_x x + b_y y as before and b_x² + b_y² = |b|²/a².
func (s *survey) refusal(q [4]node, m node) float64 {
	ia, ib := widest(q)
	chord := q[ib].p.Sub(q[ia].p).Unit()
	c, sn := taylor.Exactly(chord.X), taylor.Exactly(chord.Y)
	o := s.enclose(m)
	var x, y, sq [4]taylor.Interval
	var rough [4]local
	for i, n := range q {
		x[i], y[i], sq[i] = s.enclose(n).inAxes(o, c, sn)
		rough[i] = local{x[i].Mid(), y[i].Mid(), sq[i].Mid() / 2}
	}
	u, _ := weights(rough)
	one, two, eps := taylor.Exactly(1), taylor.Exactly(2), taylor.Exactly(s.eps)
	// k is an upper bound of the curvature, f of |F| at the nodes.
	half := x[ib].Sub(x[ia]).Sqr().Add(y[ib].Sub(y[ia]).Sqr()).Div(c.Sqr().Add(sn.Sqr())).Sqrt().Div(two).Sub(eps)
	if !(half.Lo > 0) {
		return 0
	}
	k := one.Div(half)
	k = taylor.Exactly(k.Hi)
	f := eps.Add(eps.Sqr().Mul(k).Div(two))
	f = taylor.Exactly(f.Hi)
	room := one.Add(two.Mul(k).Mul(f)).Sqrt().Div(c.Sqr().Add(sn.Sqr()).Sqrt()) // |b|/a at most
	bx := two.Mul(f).Add(k.Div(two).Mul(abs(sq[ib].Sub(sq[ia])))).
		Add(taylor.Exactly(room.Hi).Mul(abs(y[ib].Sub(y[ia])))).Div(x[ib].Sub(x[ia]))
	if !(bx.Hi < 1) {
		return 0
	}
	bx = taylor.Exactly(bx.Hi)
	by := one.Sub(two.Mul(k).Mul(f)).Div(c.Sqr().Add(sn.Sqr())).Sub(bx.Sqr())
	if !(by.Lo > 0) {
		return 0
	}
	var size, sy, sx, s1, s2 taylor.Interval
	for i := range u {
		w := taylor.Exactly(u[i])
		size, s1 = size.Add(abs(w)), s1.Add(w)
		sx, sy, s2 = sx.Add(w.Mul(x[i])), sy.Add(w.Mul(y[i])), s2.Add(w.Mul(sq[i]))
	}
	found := by.Sqrt().Mul(abs(sy))
	most := f.Mul(size.Add(abs(s1))).Add(k.Div(two).Mul(abs(s2))).Add(bx.Mul(abs(sx)))
	return taylor.Exactly(found.Lo).Div(taylor.Exactly(most.Hi)).Lo
}

// widest returns the two nodes furthest apart, in order.
func widest(q [4]node) (a, b int) {
	far := -1.0
	for i := range q {
		for j := i + 1; j < len(q); j++ {
			if d := q[i].p.Dist(q[j].p); d > far {
				a, b, far = i, j, d
			}
		}
	}
	return a, b
}
