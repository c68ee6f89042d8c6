package taylor

import "math"

// Order is the highest power kept by F and I.
const Order = 5

// Scalar is what kinematics is written in: one generic function over Scalar
// serves floats (F) and rigorous enclosures (I) alike.
type Scalar[T any] interface {
	Add(T) T
	Sub(T) T
	Mul(T) T
	Div(T) T
	Sqrt() T
	SinCos() (sin, cos T)
	Scale(float64) T // times a float taken as exact
	Of(float64) T    // the constant, taken as exact, with the receiver's order
	D() T            // derivative by the variable of expansion; one order is lost
	Radians() T      // times pi/180, with pi enclosed on intervals
}

// F is a truncated Taylor series on floats: C[k] is the k-th derivative over
// k!. After D the highest coefficients are zero and no longer meaningful.
type F struct{ C [Order + 1]float64 }

// FVar returns the variable itself, expanded about x.
func FVar(x float64) F { return F{[Order + 1]float64{x, 1}} }

// Deriv returns the k-th derivative at the point of expansion, 0 <= k <= Order.
func (a F) Deriv(k int) float64 {
	f := 1.0
	for i := 2; i <= k; i++ {
		f *= float64(i)
	}
	return a.C[k] * f
}

func (F) Of(x float64) F { return F{[Order + 1]float64{x}} }

func (a F) Add(b F) F {
	for k := range a.C {
		a.C[k] += b.C[k]
	}
	return a
}

func (a F) Sub(b F) F {
	for k := range a.C {
		a.C[k] -= b.C[k]
	}
	return a
}

func (a F) Scale(x float64) F {
	for k := range a.C {
		a.C[k] *= x
	}
	return a
}

func (a F) Radians() F { return a.Scale(math.Pi / 180) }

func (a F) Mul(b F) F {
	var c F
	if b.C[2] == 0 && b.C[3] == 0 && b.C[4] == 0 && b.C[5] == 0 { // a linear factor, as in every step of Horner's rule
		c.C[0] = a.C[0] * b.C[0]
		for k := 1; k <= Order; k++ {
			c.C[k] = a.C[k-1]*b.C[1] + a.C[k]*b.C[0]
		}
		return c
	}
	for k := 0; k <= Order; k++ {
		s := 0.0
		for i := 0; i <= k; i++ {
			s += a.C[i] * b.C[k-i]
		}
		c.C[k] = s
	}
	return c
}

// Div is undefined where b is zero: it returns infinities or NaN, as floats do.
func (a F) Div(b F) F {
	var c F
	for k := 0; k <= Order; k++ {
		s := a.C[k]
		for i := 0; i < k; i++ {
			s -= c.C[i] * b.C[k-i]
		}
		c.C[k] = s / b.C[0]
	}
	return c
}

// Sqrt needs a positive value; at 0 the derivatives are infinite or NaN.
func (a F) Sqrt() F {
	var c F
	c.C[0] = math.Sqrt(a.C[0])
	for k := 1; k <= Order; k++ {
		s := a.C[k]
		for i := 1; i < k; i++ {
			s -= c.C[i] * c.C[k-i]
		}
		c.C[k] = s / (2 * c.C[0])
	}
	return c
}

// SinCos takes radians.
func (a F) SinCos() (sin, cos F) {
	sin.C[0], cos.C[0] = math.Sincos(a.C[0])
	for k := 1; k <= Order; k++ {
		var s, c float64
		for i := 1; i <= k; i++ {
			w := float64(i) * a.C[i]
			s += w * cos.C[k-i]
			c -= w * sin.C[k-i]
		}
		sin.C[k], cos.C[k] = s/float64(k), c/float64(k)
	}
	return sin, cos
}

// D returns the derivative by the variable of expansion.
func (a F) D() F {
	var c F
	for k := 0; k < Order; k++ {
		c.C[k] = float64(k+1) * a.C[k+1]
	}
	return c
}

// I is a truncated Taylor series on intervals of order N: C[k], k <= N,
// encloses the k-th derivative over k! at every point of the interval of
// expansion. Operations on series of different order return the lower one.
type I struct {
	N int
	C [Order + 1]Interval
}

// IVar returns the variable itself over t, to order n <= Order.
func IVar(t Interval, n int) I {
	a := I{N: n}
	a.C[0] = t
	if n > 0 {
		a.C[1] = Exactly(1)
	}
	return a
}

// Const returns the constant x with the receiver's order.
func (a I) Const(x Interval) I {
	c := I{N: a.N}
	c.C[0] = x
	return c
}

func (a I) Of(x float64) I { return a.Const(Exactly(x)) }

func (a I) Add(b I) I {
	c := I{N: min(a.N, b.N)}
	for k := 0; k <= c.N; k++ {
		c.C[k] = a.C[k].Add(b.C[k])
	}
	return c
}

func (a I) Sub(b I) I {
	c := I{N: min(a.N, b.N)}
	for k := 0; k <= c.N; k++ {
		c.C[k] = a.C[k].Sub(b.C[k])
	}
	return c
}

func (a I) Scale(x float64) I { return a.by(Exactly(x)) }

func (a I) Radians() I { return a.by(PiOver180()) }

func (a I) by(x Interval) I {
	for k := 0; k <= a.N; k++ {
		a.C[k] = a.C[k].Mul(x)
	}
	return a
}

func (a I) Mul(b I) I {
	c := I{N: min(a.N, b.N)}
	top := c.N // the highest power in b
	for top > 0 && b.C[top] == (Interval{}) {
		top--
	}
	for k := 0; k <= c.N; k++ {
		if k > top {
			s := a.C[k-top].Mul(b.C[top])
			for i := k - top + 1; i <= k; i++ {
				s = s.Add(a.C[i].Mul(b.C[k-i]))
			}
			c.C[k] = s
			continue
		}
		s := a.C[0].Mul(b.C[k])
		for i := 1; i <= k; i++ {
			s = s.Add(a.C[i].Mul(b.C[k-i]))
		}
		c.C[k] = s
	}
	return c
}

// Div returns the whole line in every coefficient when b may be zero.
func (a I) Div(b I) I {
	c := I{N: min(a.N, b.N)}
	for k := 0; k <= c.N; k++ {
		s := a.C[k]
		for i := 0; i < k; i++ {
			s = s.Sub(c.C[i].Mul(b.C[k-i]))
		}
		c.C[k] = s.Div(b.C[0])
	}
	return c
}

func (a I) Sqrt() I {
	c := I{N: a.N}
	c.C[0] = a.C[0].Sqrt()
	twice := c.C[0].Add(c.C[0])
	for k := 1; k <= c.N; k++ {
		s := a.C[k]
		for i := 1; i < k; i++ {
			s = s.Sub(c.C[i].Mul(c.C[k-i]))
		}
		c.C[k] = s.Div(twice)
	}
	return c
}

func (a I) SinCos() (sin, cos I) {
	sin.N, cos.N = a.N, a.N
	sin.C[0], cos.C[0] = a.C[0].SinCos()
	for k := 1; k <= a.N; k++ {
		var s, c Interval
		for i := 1; i <= k; i++ {
			w := a.C[i].Mul(Exactly(float64(i)))
			s = s.Add(w.Mul(cos.C[k-i]))
			c = c.Sub(w.Mul(sin.C[k-i]))
		}
		n := Exactly(float64(k))
		sin.C[k], cos.C[k] = s.Div(n), c.Div(n)
	}
	return sin, cos
}

// D returns the derivative by the variable of expansion; its order is N-1.
func (a I) D() I {
	c := I{N: a.N - 1}
	for k := 0; k < a.N; k++ {
		c.C[k] = a.C[k+1].Mul(Exactly(float64(k + 1)))
	}
	return c
}

// Range encloses the value at every point of expansion, order 0.
func (a I) Range() Interval { return a.C[0] }
