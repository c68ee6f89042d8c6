package motion

import (
	"fmt"
	"math"
	"strings"

	"lobewright/synth/taylor"
)

// Law is a motion law S(u) that rises from 0 at u = 0 to 1 at u = 1, u being the
// share of the event's angle. Only a Polynomial may turn back on its way. The zero Law is
// no law; use Named, Trigonometric, FromRest, ToRest or Polynomial.
type Law struct {
	name         string
	zones        []Zone
	symmetric    bool    // Skewed takes it
	handsOver    bool    // made to stand beside neighbors that hold its end velocities
	below, above float64 // how far S goes below 0 and above 1
}

// DefaultConstantShare is the share of constant velocity that
// modified-constant-velocity has when the spec gives none.
const DefaultConstantShare = 0.5

// Names returns the names that Named knows, in the order of the documentation.
func Names() []string {
	return []string{
		"constant-velocity", "parabolic", "simple-harmonic", "double-harmonic", "cycloidal",
		"modified-trapezoidal", "modified-sine", "polynomial-3-4-5", "polynomial-4-5-6-7",
		"modified-constant-velocity",
	}
}

// Named returns the law of that name. constantShare is used by
// modified-constant-velocity alone: the share of the angle at constant velocity,
// 0 <= constantShare < 1. The error says what is allowed.
func Named(name string, constantShare float64) (Law, error) {
	switch name {
	case "constant-velocity":
		return Law{name: name, zones: constantVelocity()}, nil
	case "parabolic":
		return symmetric(name, parabolic()), nil
	case "simple-harmonic":
		return symmetric(name, simpleHarmonic()), nil
	case "double-harmonic":
		return Law{name: name, zones: doubleHarmonic()}, nil
	case "cycloidal":
		return symmetric(name, cycloidal()), nil
	case "modified-trapezoidal":
		return symmetric(name, modifiedTrapezoidal()), nil
	case "modified-sine":
		return symmetric(name, modifiedSine()), nil
	case "polynomial-3-4-5":
		return symmetric(name, polynomial345()), nil
	case "polynomial-4-5-6-7":
		return symmetric(name, polynomial4567()), nil
	case "modified-constant-velocity":
		if !(constantShare >= 0 && constantShare < 1) {
			return Law{}, fmt.Errorf("law modified-constant-velocity: constant_share is %g; it must be at least 0 and below 1", constantShare)
		}
		return symmetric(name, modifiedConstantVelocity(constantShare)), nil
	}
	return Law{}, fmt.Errorf("law %q is not known; the laws are %s, and the trigonometric family {sine, constant, cosine}",
		name, strings.Join(Names(), ", "))
}

func symmetric(name string, zones []Zone) Law {
	return Law{name: name, zones: zones, symmetric: true}
}

// shareSum is how far the shares of the trigonometric family may sum from 1:
// three shares written with ten decimals.
const shareSum = 1e-9

// Trigonometric returns the law of the family sine - constant - cosine
// acceleration with these shares of the angle, each at least 0, sum 1 within
// 1e-9. Its members (0,1,0), (0,0,1), (1/2,0,1/2), (1/4,1/2,1/4) and (1/4,0,3/4) are
// parabolic, simple-harmonic, cycloidal, modified-trapezoidal and modified-sine.
func Trigonometric(sine, constant, cosine float64) (Law, error) {
	sum := sine + constant + cosine
	switch {
	case !(sine >= 0 && constant >= 0 && cosine >= 0):
		return Law{}, fmt.Errorf("law trigonometric: shares are sine %g, constant %g, cosine %g; each must be at least 0", sine, constant, cosine)
	case !(math.Abs(sum-1) <= shareSum):
		return Law{}, fmt.Errorf("law trigonometric: shares sine %g, constant %g, cosine %g sum to %.10g; they must sum to 1", sine, constant, cosine, sum)
	}
	return symmetric("trigonometric", scca{b: sine / sum, c: constant / sum, d: cosine / sum}.zones()), nil
}

// Name returns the law's name; "trigonometric" for the general family, "half " and a
// name for a half law, "" for the zero Law.
func (l Law) Name() string { return l.name }

// Zones returns the law's zones on u in [0, 1], lift 0 to 1. The caller owns them.
func (l Law) Zones() []Zone {
	zones := make([]Zone, len(l.zones))
	for i, z := range l.zones {
		zones[i] = z.scaled(1, 0)
	}
	return zones
}

// At returns S and its first three derivatives by u, 0 <= u <= 1 (u outside is
// brought to the nearer end). At a boundary of zones it answers for the zone that
// begins there.
func (l Law) At(u float64) (s, v, a, j float64) {
	for i, z := range l.zones {
		if u < z.To || i == len(l.zones)-1 {
			f := Eval(z, taylor.FVar(math.Min(math.Max(u, 0), 1)))
			return f.Deriv(0), f.Deriv(1), f.Deriv(2), f.Deriv(3)
		}
	}
	return 0, 0, 0, 0
}

// EndSpeeds returns V = dS/du at u = 0 and u = 1: 0 at both for a law that may
// stand beside a dwell.
func (l Law) EndSpeeds() (start, end float64) {
	_, start, _, _ = l.At(0)
	_, end, _, _ = l.At(1)
	return unlessRounding(start, 1), unlessRounding(end, 1)
}

// rounding is the relative size below which a difference of two evaluated
// quantities is taken for rounding: some thousand units in the last place, and
// far below any step a designer could mean.
const rounding = 1e-11

// unlessRounding returns x, or 0 where x is rounding beside scale.
func unlessRounding(x, scale float64) float64 {
	if math.Abs(x) <= rounding*scale {
		return 0
	}
	return x
}

// half extends the zones of a law on [0, 1/2] to [0, 1] by S(u) = 1 - S(1-u).
func half(zones []Zone) []Zone {
	for i := len(zones) - 1; i >= 0; i-- {
		zones = append(zones, zones[i].moved(1, -1).scaled(-1, 1))
	}
	return zones
}
