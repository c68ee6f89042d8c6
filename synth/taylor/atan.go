package taylor

import "math"

// Atan returns the angle in radians, between -pi/2 and pi/2, whose tangent is a: its
// derivative is a'/(1 + a²).
func (a F) Atan() F {
	d := a.D().Div(a.Of(1).Add(a.Mul(a)))
	c := a.Of(math.Atan(a.C[0]))
	for k := 1; k <= Order; k++ {
		c.C[k] = d.C[k-1] / float64(k)
	}
	return c
}

// Atan encloses the angle in radians, between -pi/2 and pi/2, whose tangent is a.
func (a I) Atan() I {
	c := a.Const(a.C[0].Atan())
	square := a.Mul(a)
	square.C[0] = a.C[0].Sqr()
	d := a.D().Div(a.Of(1).Add(square))
	for k := 1; k <= a.N; k++ {
		c.C[k] = d.C[k-1].Div(Exactly(float64(k)))
	}
	return c
}

// Atan returns an enclosure of the inverse tangent of a, radians.
func (a Interval) Atan() Interval {
	return Interval{math.Atan(a.Lo) - trigSlack, math.Atan(a.Hi) + trigSlack}
}
