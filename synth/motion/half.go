package motion

import (
	"fmt"
	"math"
	"strings"
)

// The half laws of M. Kloomok and R. V. Muffley, Product Engineering 1955 (names cited
// from memory; C-1, H-2 and how they are joined: H. A. Rothbart ed., Cam Design
// Handbook, McGraw-Hill 2004, p. 85) have one end at rest and one at speed, where their
// acceleration is 0. The speed is fixed by lift L and angle β: 2L/β for the
// cycloidal C-1 and C-2, (π/2)L/β for the harmonic H-1 and H-2.

// HalfNames returns the laws of which FromRest and ToRest know the halves.
func HalfNames() []string { return []string{"simple-harmonic", "cycloidal"} }

// FromRest returns the half of the named law that starts at rest and ends at speed.
//
//	C-1: S = u - sin(πu)/π, V = 1 - cos πu, A = π sin πu
//	H-1: S = 1 - cos(πu/2), V = (π/2) sin(πu/2), A = (π²/4) cos(πu/2)
func FromRest(name string) (Law, error) {
	switch name {
	case "cycloidal":
		return halfLaw(name, c1()), nil
	case "simple-harmonic": // -cos as a sine a quarter turn on
		return halfLaw(name, Zone{From: 0, To: 1, Span: 1, Poly: []float64{1}, Sines: []Sine{{-1, math.Pi / 2, math.Pi / 2}}}), nil
	}
	return Law{}, noHalf(name)
}

// ToRest returns the half of the named law that starts at speed and ends at rest.
//
//	C-2: S = u + sin(πu)/π, V = 1 + cos πu, A = -π sin πu
//	H-2: S = sin(πu/2), V = (π/2) cos(πu/2), A = -(π²/4) sin(πu/2)
func ToRest(name string) (Law, error) {
	switch name {
	case "cycloidal": // C-2(u) = 1 - C-1(1-u), about the dwell it reaches
		return halfLaw(name, c1().moved(1, -1).scaled(-1, 1)), nil
	case "simple-harmonic":
		return halfLaw(name, Zone{From: 0, To: 1, Span: 1, Poly: []float64{0}, Sines: []Sine{{1, math.Pi / 2, 0}}}), nil
	}
	return Law{}, noHalf(name)
}

func c1() Zone {
	return Zone{From: 0, To: 1, Span: 1, Poly: []float64{0, 1}, Sines: []Sine{{-1 / math.Pi, math.Pi, 0}}}
}

func halfLaw(name string, z Zone) Law {
	return Law{name: "half " + name, zones: []Zone{z}, handsOver: true}
}

func noHalf(name string) error {
	return fmt.Errorf("law %q has no half from rest to speed or back; the laws that have are %s", name, strings.Join(HalfNames(), ", "))
}
