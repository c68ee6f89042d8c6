// Package motion holds the motion laws of the field, joins them into the cycle
// of a cam, and reduces both to one form: zones of polynomial plus sinusoids,
// as data, evaluated by one piece of code on floats and on intervals.
//
// The floats of a zone are the motion: whatever a law's constants lose to
// rounding (about 1e-16 of the lift) is lost once, here, and every room that
// evaluates the zone, by Taylor series or by enclosure, sees the same curve.
package motion

import (
	"math"

	"lobewright/synth/taylor"
)

// Sine is the term Amp*sin(Freq*u + Phase): Amp in length, Freq and Phase in
// radians, u normalized by its zone.
type Sine struct{ Amp, Freq, Phase float64 }

// Zone is a stretch of cam angle on which the lift is one analytic expression in
// u = (deg - Origin)/Span. Laws use the same type with u in [0, 1] in place of
// the cam angle and a total lift of 1.
//
// Origin need not be From: a law is written about the point where its terms
// cancel least (the dwell it leaves or reaches, or its middle), so that lift
// meets the neighboring dwell to about 1e-16 of the lift.
type Zone struct {
	From, To     float64   // cam angle, degrees, From < To
	Origin, Span float64   // degrees; Span is not 0, and negative where a law runs backwards
	Poly         []float64 // coefficients by growing power of u, length
	Sines        []Sine
	Dwell        bool // the lift is constant here
	Event        int  // index of the event in the list given to Join, for messages
}

// Eval returns the lift of the zone at deg (cam angle, degrees) with its
// derivatives per degree: the one evaluator of every motion. On taylor.I it
// encloses the lift over the whole interval. It does not check that deg lies in
// the zone: the expression is analytic and goes on beyond both ends.
func Eval[T taylor.Scalar[T]](z Zone, deg T) T {
	u := deg.Sub(deg.Of(z.Origin)).Div(deg.Of(z.Span))
	sum := deg.Of(0)
	for i := len(z.Poly) - 1; i >= 0; i-- { // Horner
		if i < len(z.Poly)-1 {
			sum = sum.Mul(u)
		}
		sum = sum.Add(deg.Of(z.Poly[i]))
	}
	for _, s := range z.Sines {
		sin, _ := u.Scale(s.Freq).Add(deg.Of(s.Phase)).SinCos()
		sum = sum.Add(sin.Scale(s.Amp))
	}
	return sum
}

// bound returns an upper bound, by the triangle inequality, of the k-th
// derivative per unit of the zone's parameter, where |u| <= 1. It is the scale
// against which a difference of k-th derivatives counts as rounding.
func (z Zone) bound(k int) float64 {
	sum := 0.0
	for i := k; i < len(z.Poly); i++ {
		c := math.Abs(z.Poly[i])
		for j := 0; j < k; j++ {
			c *= float64(i - j)
		}
		sum += c
	}
	for _, s := range z.Sines {
		sum += math.Abs(s.Amp) * math.Pow(math.Abs(s.Freq), float64(k))
	}
	return sum / math.Pow(math.Abs(z.Span), float64(k))
}

// scaled returns the zone with its lift multiplied by h and raised by base.
func (z Zone) scaled(h, base float64) Zone {
	poly := make([]float64, max(len(z.Poly), 1))
	for i, c := range z.Poly {
		poly[i] = h * c
	}
	poly[0] += base
	sines := make([]Sine, len(z.Sines))
	for i, s := range z.Sines {
		sines[i] = Sine{h * s.Amp, s.Freq, s.Phase}
	}
	z.Poly, z.Sines = poly, sines
	return z
}

// moved returns the zone with its parameter u replaced by from + over*u; a
// negative over runs it backwards.
func (z Zone) moved(from, over float64) Zone {
	a, b := from+over*z.From, from+over*z.To
	z.From, z.To = math.Min(a, b), math.Max(a, b)
	z.Origin, z.Span = from+over*z.Origin, over*z.Span
	return z
}
