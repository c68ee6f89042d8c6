package synth

import (
	"math"

	"lobewright/synth/follower"
	"lobewright/synth/taylor"
)

// moved is the motion at one cam angle: lift and its derivatives by the cam angle, in
// length and radians, of swinging followers all in radians. Sin and Cos are those of a
// swing.
type moved[T any] struct{ s, v, a, sin, cos T }

// seen is what the limits ask of a follower at one cam angle. What a kind has not is 0.
type seen[T any] struct {
	n, d    T // the pressure angle is that of (d, n); d is above 0 as long as the follower swings away from the camshaft
	turn, q T // of a center: the pitch curve's curvature is turn/q^(3/2), positive convex
	rho     T // of a face: the contour's radius of curvature, length, positive convex
	touch   T // of a face: where it is touched, length
	unit    T // what the linkage has grown by with the base radius: 1 when it stays
}

// mechanism is a follower seen as a function of the base radius alone, everything else
// of it kept: length in, the limits' terms out. One generic function a kind serves floats
// and enclosures.
type mechanism[T any] func(base T, m moved[T]) seen[T]

// mechanismOf returns the mechanism of a plate cam's follower; ok is false for a kind it
// does not know. With scaled above 0, pivot, arm and face grow with the base radius and are the
// follower's own at base radius scaled.
func mechanismOf[T taylor.Scalar[T]](k follower.Kind, scaled float64) (mechanism[T], bool) {
	switch f := k.(type) {
	case follower.TranslatingRoller:
		return onLine[T](f.Line, f.RollerRadius), true
	case follower.TranslatingKnife:
		return onLine[T](f.Line, 0), true
	case follower.TranslatingMushroom:
		return onLine[T](f.Line, f.FaceRadius), true
	case follower.TranslatingFlat:
		return underFace[T](), true
	case follower.SwingingRoller:
		return onArm[T](f, scaled), true
	case follower.SwingingFlat:
		return underSwing[T](f, scaled), true
	}
	return nil, false
}

// onLine is a center on a line: u = sqrt((Rb+r)² - e²) + s, w = s' - e, tan a = w/u and
// curvature (u² + w(w + s') - u s”)/(u² + w²)^(3/2) (H. A. Rothbart, ed., Cam Design Handbook,
// 2004, pp. 170, 183).
func onLine[T taylor.Scalar[T]](l follower.Line, radius float64) mechanism[T] {
	offset := l.Sense() * l.Offset
	return func(base T, m moved[T]) seen[T] {
		e := base.Of(offset)
		p := base.Add(base.Of(radius))
		u := p.Sub(e).Mul(p.Add(e)).Sqrt().Add(m.s)
		w := m.v.Sub(e)
		q := u.Mul(u).Add(w.Mul(w))
		return seen[T]{n: w, d: u, turn: q.Add(w.Mul(m.v)).Sub(u.Mul(m.a)), q: q, rho: base.Of(0), touch: base.Of(0), unit: base.Of(1)}
	}
}

// underFace is a face square to its line: radius of curvature Rb + s + s”, touched s'
// beside the line (any textbook, cited from memory).
func underFace[T taylor.Scalar[T]]() mechanism[T] {
	return func(base T, m moved[T]) seen[T] {
		zero := base.Of(0)
		return seen[T]{n: zero, d: base.Of(1), turn: zero, q: zero, rho: base.Add(m.s).Add(m.a), touch: m.v, unit: base.Of(1)}
	}
}

// onArm is a center on an arm of length L about a pivot at distance C. With ψ the arm's
// angle from the center line, σ = ±1 for the side and sense, q = 1 - σψ' and
// n = L q - C cos ψ (F. Y. Chen, Mechanics and Design of Cam Mechanisms, 1982, cited from
// memory; the derivatives of the center in polar form, multiplied out)
//
//	cos ψ0 = (C² + L² - Rp²)/(2 C L),  tan a = n/(C sin ψ),  Q = L²q² + C² - 2 C L q cos ψ
//	curvature = (Q - L C ψ” sin ψ - σ L q ψ' n)/Q^(3/2)
func onArm[T taylor.Scalar[T]](f follower.SwingingRoller, scaled float64) mechanism[T] {
	sigma, l, c := f.Sense()*armSide(f.Above), f.ArmLength, f.PivotDistance
	return func(base T, m moved[T]) seen[T] {
		one, unit := base.Of(1), grown(base, scaled)
		arm, pivot := unit.Scale(l), unit.Scale(c)
		p := base.Add(base.Of(f.RollerRadius))
		square, less, more := p.Mul(p), pivot.Sub(arm), pivot.Add(arm)
		twice := arm.Mul(pivot).Scale(2)
		cos0 := arm.Mul(arm).Add(pivot.Mul(pivot)).Sub(square).Div(twice)
		sin0 := square.Sub(less.Mul(less)).Mul(more.Mul(more).Sub(square)).Sqrt().Div(twice)
		sin := sin0.Mul(m.cos).Add(cos0.Mul(m.sin))
		cos := cos0.Mul(m.cos).Sub(sin0.Mul(m.sin))
		lq := one.Sub(m.v.Scale(sigma)).Mul(arm)
		n, d := lq.Sub(pivot.Mul(cos)), pivot.Mul(sin)
		q := n.Mul(n).Add(d.Mul(d))
		turn := q.Sub(arm.Mul(d).Mul(m.a)).Sub(lq.Mul(m.v).Mul(n).Scale(sigma))
		return seen[T]{n: n, d: d, turn: turn, q: q, rho: base.Of(0), touch: base.Of(0), unit: unit}
	}
}

// grown is by what a linkage has grown with the base radius.
func grown[T taylor.Scalar[T]](base T, scaled float64) T {
	if scaled > 0 {
		return base.Scale(1 / scaled)
	}
	return base.Of(1)
}

// underSwing is a face that swings about a pivot at distance C, f off its line. With μ the
// normal's angle from the center line and q = 1 - σψ' (the support function of
// follower.SwingingFlat, multiplied out)
//
//	cos μ0 = (Rb + f)/C,  touched C sin μ/q along the face,  tan a = f q/(C sin μ)
//	radius of curvature = C cos μ - f + C/q² (ψ” sin μ/q - ψ'² cos μ)
//
// It holds for q above 0 only.
func underSwing[T taylor.Scalar[T]](f follower.SwingingFlat, scaled float64) mechanism[T] {
	sigma, c := f.Sense()*armSide(f.Above), f.PivotDistance
	return func(base T, m moved[T]) seen[T] {
		unit, off := grown(base, scaled), base.Of(f.FaceOffset)
		pivot := unit.Scale(c)
		foot := base.Add(off)
		cos0 := foot.Div(pivot)
		sin0 := pivot.Sub(foot).Mul(pivot.Add(foot)).Sqrt().Div(pivot)
		ps := sin0.Mul(m.cos).Sub(cos0.Mul(m.sin)).Mul(pivot) // C sin μ
		pc := cos0.Mul(m.cos).Add(sin0.Mul(m.sin)).Mul(pivot) // C cos μ
		q := base.Of(1).Sub(m.v.Scale(sigma))
		bent := m.a.Mul(ps).Div(q).Sub(m.v.Mul(m.v).Mul(pc)).Div(q.Mul(q))
		zero := base.Of(0)
		return seen[T]{n: off.Mul(q), d: ps, turn: zero, q: zero, rho: pc.Sub(off).Add(bent), touch: ps.Div(q), unit: unit}
	}
}

func armSide(above bool) float64 {
	if above {
		return 1
	}
	return -1
}

// outruns reports whether a swinging face swings as fast as the cam turns, or faster: no cam
// can do that.
func outruns(k follower.Kind, v float64) bool {
	f, ok := k.(follower.SwingingFlat)
	return ok && !(1-f.Sense()*armSide(f.Above)*v > 0)
}

// standing returns the range of base radii, length, for which the follower can stand on the
// base circle at all, both ends out.
func standing(k follower.Kind, scaled float64) (from, to float64) {
	if scaled > 0 {
		return standingScaled(k, scaled)
	}
	switch f := k.(type) {
	case follower.TranslatingRoller:
		return math.Abs(f.Offset) - f.RollerRadius, math.Inf(1)
	case follower.TranslatingKnife:
		return math.Abs(f.Offset), math.Inf(1)
	case follower.TranslatingMushroom:
		return math.Abs(f.Offset) - f.FaceRadius, math.Inf(1)
	case follower.SwingingRoller:
		return math.Abs(f.PivotDistance-f.ArmLength) - f.RollerRadius, f.PivotDistance + f.ArmLength - f.RollerRadius
	case follower.SwingingFlat:
		return -f.PivotDistance - f.FaceOffset, f.PivotDistance - f.FaceOffset
	}
	return 0, math.Inf(1)
}

// standingScaled is standing where pivot and arm grow with the base radius.
func standingScaled(k follower.Kind, scaled float64) (from, to float64) {
	to = math.Inf(1)
	switch f := k.(type) {
	case follower.SwingingRoller: // |c-l|·Rb < Rb + r < (c+l)·Rb
		apart, reach := math.Abs(f.PivotDistance-f.ArmLength)/scaled, (f.PivotDistance+f.ArmLength)/scaled
		if apart > 1 {
			to = f.RollerRadius / (apart - 1)
		}
		if reach <= 1 {
			return 0, 0
		}
		from = f.RollerRadius / (reach - 1)
	case follower.SwingingFlat: // -c·Rb < Rb + f < c·Rb
		c := f.PivotDistance / scaled
		if c <= 1 && f.FaceOffset >= 0 {
			return 0, 0
		}
		from = math.Max(f.FaceOffset/(c-1), -f.FaceOffset/(c+1))
	}
	return from, to
}

// real is a plain number as a taylor.Scalar: a constant, without derivatives.
type real float64

func (a real) Add(b real) real      { return a + b }
func (a real) Sub(b real) real      { return a - b }
func (a real) Mul(b real) real      { return a * b }
func (a real) Div(b real) real      { return a / b }
func (a real) Sqrt() real           { return real(math.Sqrt(float64(a))) }
func (a real) Scale(x float64) real { return a * real(x) }
func (a real) Of(x float64) real    { return real(x) }
func (a real) D() real              { return 0 }
func (a real) Radians() real        { return a * math.Pi / 180 }
func (a real) SinCos() (sin, cos real) {
	s, c := math.Sincos(float64(a))
	return real(s), real(c)
}
