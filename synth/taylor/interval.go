// Package taylor is truncated Taylor arithmetic of order 5 on floats (F) and
// on intervals with outward rounding (I), and the intervals themselves.
//
// The problem: a cam needs the first three or four derivatives of its contour,
// exactly, and the certificate of a written path needs rigorous bounds of them
// over whole stretches of cam angle. Finite differences lose half the digits
// and bound nothing; formulas derived by hand must be derived again for every
// follower. Truncated Taylor arithmetic (R. E. Moore, Interval Analysis,
// Prentice-Hall 1966, chapter 11; A. Griewank and A. Walther, Evaluating
// Derivatives, SIAM 2008, chapter 13) takes the textbook formula of the position and
// carries all derivatives along; evaluated on intervals it encloses them.
package taylor

import "math"

// Interval is a closed interval of reals, Lo <= Hi. Every operation returns an
// interval that contains all results of the exact operation on members of its
// operands. Results above 1e300 in size are outside its promise.
type Interval struct{ Lo, Hi float64 }

const (
	// ulp is at least one unit in the last place relative to any normal float:
	// x + ulp*|x|, rounded to nearest, is at or above the float after x.
	ulp = 1.0 / (1 << 52)
	// tiny replaces results that may have lost digits to underflow.
	tiny = 1e-290
	// trigSlack bounds the error of math.Sin and math.Cos for |x| < 2^29; the
	// Cephes rational forms used there are good to about 2.3e-16 absolute.
	trigSlack = 1e-15
)

// Exactly returns the interval that holds x alone.
func Exactly(x float64) Interval { return Interval{x, x} }

// Around returns an interval that contains [x-r, x+r].
func Around(x, r float64) Interval { return Interval{down(x - r), up(x + r)} }

// Hull returns the least interval that contains a and b.
func Hull(a, b Interval) Interval { return Interval{math.Min(a.Lo, b.Lo), math.Max(a.Hi, b.Hi)} }

func up(x float64) float64   { return x + math.Abs(x)*ulp }
func down(x float64) float64 { return x - math.Abs(x)*ulp }

// Mid returns a point of the interval near its middle.
func (a Interval) Mid() float64 { return a.Lo + (a.Hi-a.Lo)/2 }

// Width returns an upper bound of Hi - Lo.
func (a Interval) Width() float64 { return up(a.Hi - a.Lo) }

// Mag returns the largest absolute value in the interval.
func (a Interval) Mag() float64 { return math.Max(math.Abs(a.Lo), math.Abs(a.Hi)) }

// Mig returns the smallest absolute value in the interval.
func (a Interval) Mig() float64 {
	if a.Lo <= 0 && a.Hi >= 0 {
		return 0
	}
	return math.Min(math.Abs(a.Lo), math.Abs(a.Hi))
}

// Has reports whether x lies in the interval.
func (a Interval) Has(x float64) bool { return a.Lo <= x && x <= a.Hi }

// Add returns an enclosure of a + b.
func (a Interval) Add(b Interval) Interval { return Interval{down(a.Lo + b.Lo), up(a.Hi + b.Hi)} }

// Sub returns an enclosure of a - b, the operands independent.
func (a Interval) Sub(b Interval) Interval { return Interval{down(a.Lo - b.Hi), up(a.Hi - b.Lo)} }

// Neg returns -a, exactly.
func (a Interval) Neg() Interval { return Interval{-a.Hi, -a.Lo} }

// Mul returns an enclosure of a * b.
func (a Interval) Mul(b Interval) Interval {
	if (a.Lo == 0 && a.Hi == 0) || (b.Lo == 0 && b.Hi == 0) {
		return Interval{}
	}
	p, q, r, s := a.Lo*b.Lo, a.Lo*b.Hi, a.Hi*b.Lo, a.Hi*b.Hi
	lo, hi := math.Min(math.Min(p, q), math.Min(r, s)), math.Max(math.Max(p, q), math.Max(r, s))
	return guarded(lo, hi)
}

// guarded widens [lo, hi] outwards, by at least tiny where underflow may have
// taken digits.
func guarded(lo, hi float64) Interval {
	if lo > -tiny && lo < tiny {
		lo = -tiny
	}
	if hi > -tiny && hi < tiny {
		hi = tiny
	}
	return Interval{down(lo), up(hi)}
}

// Div returns an enclosure of a / b; the whole line when b holds 0.
func (a Interval) Div(b Interval) Interval {
	if b.Lo <= 0 && b.Hi >= 0 {
		return Interval{math.Inf(-1), math.Inf(1)}
	}
	if a.Lo == 0 && a.Hi == 0 {
		return Interval{}
	}
	p, q, r, s := a.Lo/b.Lo, a.Lo/b.Hi, a.Hi/b.Lo, a.Hi/b.Hi
	return guarded(math.Min(math.Min(p, q), math.Min(r, s)), math.Max(math.Max(p, q), math.Max(r, s)))
}

// Sqr returns an enclosure of a*a, both factors the same member.
func (a Interval) Sqr() Interval {
	lo, hi := a.Mig(), a.Mag()
	s := guarded(lo*lo, hi*hi)
	if s.Lo < 0 {
		s.Lo = 0
	}
	return s
}

// Sqrt returns an enclosure of the root of the non-negative part of a; NaN
// ends when a is wholly negative.
func (a Interval) Sqrt() Interval {
	if a.Hi < 0 {
		return Interval{math.NaN(), math.NaN()}
	}
	lo := 0.0
	if a.Lo > 0 {
		lo = down(math.Sqrt(a.Lo))
	}
	return Interval{lo, up(math.Sqrt(a.Hi))}
}

// SinCos returns enclosures of sine and cosine of a, in radians, |a| < 2^29.
func (a Interval) SinCos() (sin, cos Interval) {
	return trig(a, math.Sin, math.Pi/2), trig(a, math.Cos, 0)
}

// trig encloses a function with period 2 pi, maximum 1 at peak and minimum -1
// half a period later.
func trig(a Interval, f func(float64) float64, peak float64) Interval {
	if !(a.Hi-a.Lo < 2*math.Pi) {
		return Interval{-1, 1}
	}
	p, q := f(a.Lo), f(a.Hi)
	lo, hi := math.Min(p, q)-trigSlack, math.Max(p, q)+trigSlack
	if crosses(a, peak) {
		hi = 1
	}
	if crosses(a, peak+math.Pi) {
		lo = -1
	}
	return Interval{math.Max(lo, -1), math.Min(hi, 1)}
}

// crosses reports whether a may contain p + 2 pi k for some integer k.
func crosses(a Interval, p float64) bool {
	const near = 1e-9 // far above the rounding of the division, so a near miss counts as a hit
	return math.Floor((a.Hi-p)/(2*math.Pi)+near) >= math.Ceil((a.Lo-p)/(2*math.Pi)-near)
}

// PiOver180 encloses pi/180, radians a degree.
func PiOver180() Interval {
	const x = math.Pi / 180
	return Interval{down(x), up(x)}
}
