package taylor_test

import (
	"math"
	"math/big"
	"testing"

	"lobewright/synth/taylor"
	"pgregory.net/rapid"
)

// f is a function with every operation in it: sqrt(2 + sin t) / (1 + t^2) * cos t.
func f[T taylor.Scalar[T]](t T) T {
	s, c := t.SinCos()
	return t.Of(2).Add(s).Sqrt().Div(t.Of(1).Add(t.Mul(t))).Mul(c)
}

// Against the derivatives of closed forms: sin, and 1/(1+t) whose k-th
// coefficient is (-1)^k/(1+t)^(k+1).
func TestClosedForms(t *testing.T) {
	x := taylor.FVar(0.7)
	s, _ := x.SinCos()
	inv := x.Of(1).Div(x.Of(1).Add(x))
	root := x.Mul(x).Mul(x).Mul(x).Sqrt() // t^2
	for k := 0; k <= taylor.Order; k++ {
		if got, want := s.Deriv(k), math.Sin(0.7+float64(k)*math.Pi/2); math.Abs(got-want) > 1e-14 {
			t.Errorf("sin, derivative %d: got %v, want %v", k, got, want)
		}
		if got, want := inv.C[k], math.Pow(-1, float64(k))/math.Pow(1.7, float64(k+1)); math.Abs(got-want) > 1e-14 {
			t.Errorf("1/(1+t), coefficient %d: got %v, want %v", k, got, want)
		}
		want := []float64{0.49, 1.4, 1, 0, 0, 0}[k]
		if got := root.C[k]; math.Abs(got-want) > 1e-13 {
			t.Errorf("sqrt(t^4), coefficient %d: got %v, want %v", k, got, want)
		}
	}
}

// The interval series over [a,b] encloses the float series at every point in it.
func TestEnclosure(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lo := rapid.Float64Range(-3, 3).Draw(t, "lo")
		w := rapid.Float64Range(0, 0.3).Draw(t, "width")
		p := rapid.Float64Range(0, 1).Draw(t, "at")
		iv := f(taylor.IVar(taylor.Interval{Lo: lo, Hi: lo + w}, taylor.Order))
		fv := f(taylor.FVar(min(lo+p*w, lo+w)))
		d := f(taylor.IVar(taylor.Interval{Lo: lo, Hi: lo + w}, taylor.Order)).D()
		for k := 0; k <= taylor.Order; k++ {
			slack := 1e-12 * (1 + math.Abs(fv.C[k])) // rounding of the float series itself
			if fv.C[k] < iv.C[k].Lo-slack || fv.C[k] > iv.C[k].Hi+slack {
				t.Fatalf("coefficient %d: %v outside %v", k, fv.C[k], iv.C[k])
			}
		}
		if d.N != taylor.Order-1 {
			t.Fatalf("order after D: %d", d.N)
		}
	})
}

// Outward rounding against exact rational arithmetic.
func TestOutwardRounding(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := rapid.Float64Range(-1e6, 1e6).Draw(t, "a")
		b := rapid.Float64Range(-1e6, 1e6).Draw(t, "b")
		ra, rb := new(big.Rat).SetFloat64(a), new(big.Rat).SetFloat64(b)
		hold := func(op string, got taylor.Interval, want *big.Rat) {
			if new(big.Rat).SetFloat64(got.Lo).Cmp(want) > 0 || new(big.Rat).SetFloat64(got.Hi).Cmp(want) < 0 {
				t.Fatalf("%v %s %v: %v does not contain the exact result", a, op, b, got)
			}
		}
		x, y := taylor.Exactly(a), taylor.Exactly(b)
		hold("+", x.Add(y), new(big.Rat).Add(ra, rb))
		hold("-", x.Sub(y), new(big.Rat).Sub(ra, rb))
		hold("*", x.Mul(y), new(big.Rat).Mul(ra, rb))
		hold("sqr", x.Sqr(), new(big.Rat).Mul(ra, ra))
		if math.Abs(b) > 1e-250 { // results above 1e300 are outside the promise
			hold("/", x.Div(y), new(big.Rat).Quo(ra, rb))
		}
		r := taylor.Exactly(math.Abs(a)).Sqrt()
		if l := new(big.Rat).SetFloat64(r.Lo); l.Mul(l, l).Cmp(new(big.Rat).Abs(ra)) > 0 {
			t.Fatalf("sqrt %v: low end %v too high", a, r.Lo)
		}
		if h := new(big.Rat).SetFloat64(r.Hi); h.Mul(h, h).Cmp(new(big.Rat).Abs(ra)) < 0 {
			t.Fatalf("sqrt %v: high end %v too low", a, r.Hi)
		}
	})
}

func TestTrigExtremes(t *testing.T) {
	s, c := taylor.Interval{Lo: 1, Hi: 4}.SinCos()
	if s.Hi != 1 || c.Lo != -1 || s.Lo > math.Sin(4) || c.Hi < math.Cos(1) {
		t.Errorf("sin, cos of [1,4]: %v, %v", s, c)
	}
	if got := (taylor.Interval{Lo: -1, Hi: 1}).Div(taylor.Interval{Lo: -1, Hi: 1}); !math.IsInf(got.Hi, 1) {
		t.Errorf("division by an interval with 0: %v", got)
	}
}
