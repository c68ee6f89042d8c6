package synth

import (
	"math"
	"testing"

	"lobewright/synth/plane"
)

// The unrolled curve has the polar angle and the radius of the curve's own points, tangent and curvature
// agree with differences of them, and X goes on by a whole turn.
func TestUnrolled(t *testing.T) {
	for _, name := range []string{"stick-lift", "box-pusher", "tray-tilt", "flap-press"} {
		c := cut(t, name)
		curve := c.Parallel(8)
		u, err := curve.Unrolled()
		if err != nil {
			t.Fatal(err)
		}
		pieces := u.Pieces()
		last := len(pieces) - 1
		turn := u.At(last, pieces[last].To).P.X - u.At(0, pieces[0].From).P.X
		if math.Abs(turn-u.Sense()*2*math.Pi*u.Scale()) > 1e-9*u.Scale() {
			t.Errorf("%s: X goes on by %g", name, turn)
		}
		for i, p := range pieces {
			for k := 1; k < 20; k++ {
				at := p.From + (p.To-p.From)*float64(k)/20
				f, q := u.At(i, at), curve.At(i, at).P
				if off := math.Remainder(f.P.X/u.Scale()-math.Atan2(q.Y, q.X), 2*math.Pi); math.Abs(off) > 1e-12 || math.Abs(f.P.Y-q.Radius()) > 1e-12*u.Scale() {
					t.Fatalf("%s at %g: %v for %v", name, at, f.P, q)
				}
				const h = 1e-3
				a, b := u.At(i, at-h), u.At(i, at+h)
				v := b.P.Sub(a.P)
				if off := math.Abs(v.Unit().Cross(f.T)); off > 1e-6 {
					t.Errorf("%s at %g: tangent off by %g", name, at, off)
				}
				bend := math.Atan2(a.T.Cross(b.T), a.T.Dot(b.T)) / v.Norm()
				rate := (b.K - a.K) / v.Norm()
				if math.Abs(bend-f.K) > 1e-5*(1/u.Scale()+math.Abs(f.K)) || math.Abs(rate-f.DK) > 1e-3*(1/(u.Scale()*u.Scale())+math.Abs(f.DK)) {
					t.Errorf("%s at %g: curvature %g and rate %g, by differences %g and %g", name, at, f.K, f.DK, bend, rate)
				}
				// A step square to the curve is as much larger here as Shrinks says.
				g := curve.At(i, at)
				step := g.P.Add(g.T.Left().Scale(1e-6))
				there := plane.Point{X: u.Scale() * (f.P.X/u.Scale() + math.Atan2(q.X*step.Y-q.Y*step.X, q.X*step.X+q.Y*step.Y)), Y: step.Radius()}
				if grown := math.Abs(there.Sub(f.P).Dot(f.T.Left())) / 1e-6; math.Abs(grown-u.Shrinks(i, at)) > 1e-4 || grown < 1-1e-4 {
					t.Errorf("%s at %g: a step grows by %g, said %g", name, at, grown, u.Shrinks(i, at))
				}
			}
		}
	}
}
