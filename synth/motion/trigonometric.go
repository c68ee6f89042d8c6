package motion

import "math"

// The family of sine, constant and cosine acceleration, the shares b, c, d of the
// angle, with a center of constant velocity of share f; b + c + d + f = 1. The
// first half accelerates: a quarter sine on b/2, a constant on c/2, a quarter cosine
// on d/2, nothing on f/2; the second half mirrors it, S(u) = 1 - S(1-u).
//
// With f = 0: R. L. Norton, Cam Design and Manufacturing Handbook, Industrial Press
// 2009, after E. Schmidt 1960 (cited from memory; constants derived again by
// integrating A twice). With f > 0 the same integration gives
//
//	1/Ca = 2[b/2π - b²/π² + c/4 - bc/4 - c²/8 + (1-b-c)d/2π - (d²/π²)(π/2 - 1)]
//	Cv   = Ca[(b+d)/π + c/2]
type scca struct{ b, c, d, f float64 }

// modifiedTrapezoidal: C. N. Neklutin's law, acceleration a trapezoid with its
// corners rounded by sines.
func modifiedTrapezoidal() []Zone { return scca{b: 1.0 / 4, c: 1.0 / 2, d: 1.0 / 4}.zones() }

// modifiedSine: the sine of the cycloid with a longer middle. Direct form, k = 1/(4+π):
//
//	S = k[πu - sin(4πu)/4] to u = 1/8; k[2 + πu - (9/4) sin(4πu/3 + π/3)] to 7/8
func modifiedSine() []Zone { return scca{b: 1.0 / 4, d: 3.0 / 4}.zones() }

// modifiedConstantVelocity is the modified sine with a center of constant
// velocity of share f: sine and cosine keep their ratio of 1 to 3.
func modifiedConstantVelocity(f float64) []Zone {
	return scca{b: (1 - f) / 4, d: 3 * (1 - f) / 4, f: f}.zones()
}

// peaks returns the peak factors of acceleration and velocity.
func (p scca) peaks() (ca, cv float64) {
	b, c, d := p.b, p.c, p.d
	const pi = math.Pi
	ca = 0.5 / (b/(2*pi) - b*b/(pi*pi) + c/4 - b*c/4 - c*c/8 + (1-b-c)*d/(2*pi) - d*d/(pi*pi)*(pi/2-1))
	return ca, ca * ((b+d)/pi + c/2)
}

// zones builds the first half from the source's formulas, mirrors it, and joins
// the two middle zones, one expression about u = 1/2.
func (p scca) zones() []Zone {
	ca, cv := p.peaks()
	b, c, d := p.b, p.c, p.d
	const pi = math.Pi
	var first []Zone
	if b > 0 { // S = Ca[(b/π)u - (b/π)² sin(πu/b)]
		first = append(first, Zone{From: 0, To: b / 2, Span: 1,
			Poly:  []float64{0, ca * b / pi},
			Sines: []Sine{{-ca * (b / pi) * (b / pi), pi / b, 0}}})
	}
	if c > 0 { // S = Ca[u²/2 + b(1/π - 1/2)u + b²(1/8 - 1/π²)]
		first = append(first, Zone{From: b / 2, To: (b + c) / 2, Span: 1,
			Poly: []float64{ca * b * b * (1.0/8 - 1/(pi*pi)), ca * b * (1/pi - 0.5), ca / 2}})
	}
	if p.f == 0 {
		return p.around(first, ca)
	}
	if d > 0 { // w = (π/d)(u - (b+c)/2): S = Ca[(b/π + c/2)u + (d/π)² + b²(1/8 - 1/π²) - (b+c)²/8 - (d/π)² cos w]
		r := ca * (d / pi) * (d / pi)
		level := ca * (b*b*(1.0/8-1/(pi*pi)) - (b+c)*(b+c)/8)
		first = append(first, Zone{From: (b + c) / 2, To: (b + c + d) / 2, Span: 1,
			Poly:  []float64{level + r, ca * (b/pi + c/2)},
			Sines: []Sine{{-r, pi / d, pi/2 - pi/d*(b+c)/2}}})
	}
	n := len(first)
	zones := half(first)
	center := Zone{From: (1 - p.f) / 2, To: (1 + p.f) / 2, Origin: 0.5, Span: 1, Poly: []float64{0.5, cv}}
	return append(append(append([]Zone{}, zones[:n]...), center), zones[n:]...)
}

// around completes a law without constant velocity: the cosine between the halves,
// with x = u - 1/2
//
//	A = -Ca sin(πx/d), S = 1/2 + Ca(b/π + c/2)x + Ca(d/π)² sin(πx/d)
func (p scca) around(first []Zone, ca float64) []Zone {
	n := len(first)
	zones := half(first)
	if p.d == 0 {
		return zones
	}
	middle := Zone{From: (1 - p.d) / 2, To: (1 + p.d) / 2, Origin: 0.5, Span: 1,
		Poly:  []float64{0.5, ca * (p.b/math.Pi + p.c/2)},
		Sines: []Sine{{ca * (p.d / math.Pi) * (p.d / math.Pi), math.Pi / p.d, 0}}}
	return append(append(append([]Zone{}, zones[:n]...), middle), zones[n:]...)
}
