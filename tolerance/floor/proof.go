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
func (s *survey) refusal(q [4]node, m node) float64 {
	ia, ib := widest(q)
	chord := q[ib].p.Sub(q[ia].p).Unit()
	v := view{c: taylor.Exactly(chord.X), s: taylor.Exactly(chord.Y)}
	o := s.enclose(m)
	var rough [4]local
	for i, n := range q {
		v.x[i], v.y[i], v.square[i] = s.enclose(n).inAxes(o, v.c, v.s)
		rough[i] = local{v.x[i].Mid(), v.y[i].Mid(), v.square[i].Mid() / 2}
	}
	b, ok := v.limits(ia, ib, taylor.Exactly(s.eps))
	if !ok {
		return 0
	}
	u, _ := weights(rough)
	var size, s0, sx, sy, s2 taylor.Interval
	for i := range u {
		w := taylor.Exactly(u[i])
		size, s0 = size.Add(abs(w)), s0.Add(w)
		sx, sy, s2 = sx.Add(w.Mul(v.x[i])), sy.Add(w.Mul(v.y[i])), s2.Add(w.Mul(v.square[i]))
	}
	found := b.y.Mul(abs(sy))
	most := b.f.Mul(size.Add(abs(s0))).Add(halved(b.k).Mul(abs(s2))).Add(b.x.Mul(abs(sx)))
	return taylor.Exactly(found.Lo).Div(taylor.Exactly(most.Hi)).Lo
}

// view is four points in axes of length a about the origin m.
type view struct {
	c, s         taylor.Interval
	x, y, square [4]taylor.Interval // square is |P|²
}

// bounds hold for every circle and line within eps of the four nodes and m: at most k, f = eps' and |b_x| = x, and
// at least |b_y| = y.
type bounds struct{ k, f, x, y taylor.Interval }

// limits bounds what a circle or line can be, by the chord from node a to node b; false when the chord is too short
// or stands askew in the axes. With axes of length a² = c²+s² the coordinates of P are (P·e)/a; let b_x, b_y be
// b·e/a², so that b·P = b_x x + b_y y for x = P·e, as before, and b_x² + b_y² = |b|²/a².
func (v *view) limits(a, b int, eps taylor.Interval) (bounds, bool) {
	one, axis := taylor.Exactly(1), v.c.Sqr().Add(v.s.Sqr())
	dx, dy := v.x[b].Sub(v.x[a]), v.y[b].Sub(v.y[a])
	half := halved(dx.Sqr().Add(dy.Sqr()).Div(axis).Sqrt()).Sub(eps)
	if !(half.Lo > 0 && dx.Lo > 0) {
		return bounds{}, false
	}
	k := upper(one.Div(half))
	f := upper(eps.Add(halved(eps.Sqr().Mul(k))))
	kf := k.Mul(f)
	whole := upper(one.Add(kf).Add(kf).Div(axis).Sqrt()) // |b|/a at most
	x := upper(f.Add(f).Add(halved(k).Mul(abs(v.square[b].Sub(v.square[a])))).Add(whole.Mul(abs(dy))).Div(dx))
	y := one.Sub(kf).Sub(kf).Div(axis).Sub(x.Sqr())
	if !(y.Lo > 0) {
		return bounds{}, false
	}
	return bounds{k, f, x, y.Sqrt()}, true
}

func halved(a taylor.Interval) taylor.Interval { return a.Mul(taylor.Exactly(0.5)) }
func upper(a taylor.Interval) taylor.Interval  { return taylor.Exactly(a.Hi) }

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
