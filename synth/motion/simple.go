package motion

import "math"

// constantVelocity: S = u. Its acceleration is an impulse at both ends.
func constantVelocity() []Zone {
	return []Zone{{From: 0, To: 1, Span: 1, Poly: []float64{0, 1}}}
}

// parabolic, of constant acceleration, has the least peak acceleration of all
// laws between dwells (H. A. Rothbart ed., Cam Design Handbook, McGraw-Hill 2004,
// p. 34-35, eqs 2.17-2.19):
//
//	S = 2u², V = 4u, A = 4 up to u = 1/2; then mirrored
func parabolic() []Zone {
	return half([]Zone{{From: 0, To: 0.5, Span: 1, Poly: []float64{0, 0, 2}}})
}

// simpleHarmonic is the projection of uniform motion on a circle:
//
//	S = (1 - cos πu)/2, V = (π/2) sin πu, A = (π²/2) cos πu
//
// It is written about its middle, x = 2u - 1: S = 1/2 + sin(πx/2)/2.
func simpleHarmonic() []Zone {
	return []Zone{{From: 0, To: 1, Origin: 0.5, Span: 0.5, Poly: []float64{0.5}, Sines: []Sine{{0.5, math.Pi / 2, 0}}}}
}

// doubleHarmonic (Rothbart 2004, p. 46, eqs 2.61-2.63; the factor 2 that its eq. 2.64
// lacks is restored in J) leaves a dwell softly and arrives with A = -π², for a
// rise that turns into a fall at once:
//
//	S = (1 - cos πu)/2 - (1 - cos 2πu)/8
//	V = (π/2)(sin πu - sin 2πu / 2)
//	A = (π²/2)(cos πu - cos 2πu)
//	J = (π³/2)(2 sin 2πu - sin πu)
//
// The cosines are written as sines a quarter turn on; 1/2 - 1/8 = 3/8 is the constant.
func doubleHarmonic() []Zone {
	return []Zone{{From: 0, To: 1, Span: 1, Poly: []float64{0.375}, Sines: []Sine{
		{-0.5, math.Pi, math.Pi / 2},
		{0.125, 2 * math.Pi, math.Pi / 2},
	}}}
}

// cycloidal (Rothbart 2004, p. 45, eqs 2.57-2.60):
//
//	S = u - sin 2πu / 2π, V = 1 - cos 2πu, A = 2π sin 2πu, J = 4π² cos 2πu
//
// It is written about its middle, x = 2u - 1: S = 1/2 + x/2 + sin(πx)/2π.
func cycloidal() []Zone {
	return []Zone{{From: 0, To: 1, Origin: 0.5, Span: 0.5, Poly: []float64{0.5, 0.5}, Sines: []Sine{{0.5 / math.Pi, math.Pi, 0}}}}
}
