// Package follower holds the follower kinds, one small file each: the follower
// seen from the cam, as Taylor values, so that every derivative and every
// rigorous enclosure of the curves comes from the textbook's one formula.
//
// The machine frame has the camshaft axis at its origin and Z towards the viewer; a
// translating follower moves along +X, a swinging one has its pivot on +X. At cam
// angle 0 the cam frame is the machine frame; a point fixed in the machine, seen from
// the cam, turns by +θ when the cam turns clockwise, by -θ when it turns
// counterclockwise. All curves are in the cam frame.
//
// Lift is in length for a translating follower and in degrees of swing for a swinging
// one; slopes are lift per radian of cam angle.
//
// Of a roller (a knife edge is one of radius 0, a mushroom one that does not turn) the
// base curve is the path of the center, and the contour is its parallel, one radius
// nearer to the cam. A flat face has no center: its base curve is the contour itself,
// the envelope of the face's line.
package follower

import (
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// Kind is a follower, complete with its geometry. Of a barrel all curves are in the
// developed plane.
type Kind interface {
	// Sense returns by which sign machine points turn in the cam frame as the cam angle
	// grows: +1 when the cam turns clockwise, -1 otherwise.
	Sense() float64

	// F returns the base curve as series in the cam angle in degrees: the path of the
	// center, or the contour under a flat face. The latter has a derivative of the
	// lift in it: one order less than lift has is meaningful.
	F(deg, lift taylor.F) (x, y taylor.F)

	// I encloses what F computes, over an interval of cam angle. For a flat face its
	// order is one less than that of lift.
	I(deg, lift taylor.I) (x, y taylor.I)

	// Radius returns how far inside the base curve the contour lies, length: 0 for a
	// knife edge and for flat faces.
	Radius() float64

	// PressureAngle returns the angle between the contact normal and the velocity that
	// growing lift gives the center (of a flat face: the point of the follower at the
	// contact). It is positive when the side force pushes towards the cam's turning
	// direction, and beyond 90° either way where the follower cannot be driven.
	PressureAngle(lift, slope float64) plane.Angle

	// Contact returns where on the follower it is touched, length: on a flat face or a
	// mushroom how far from the follower's line, positive towards +Y; on a swinging face
	// how far along it from the foot of the pivot; 0 for rollers and knife edges.
	Contact(lift, slope float64) float64

	// OnArc returns what the follower does on an arc of the base curve: see Reading.
	OnArc(theta float64, arc plane.Frame) (r Reading, ok bool)
}

// Face is a Kind with a flat face. Its contour is given by its support function,
// which has one derivative of the lift less in it than the contour has, and stays
// regular where the contour cusps: see Contour, RadiusOfCurvature and FaceFrame.
type Face interface {
	Kind

	// SupportF returns the distance of the face's line from the camshaft axis, and the
	// polar angle of its normal, away from the cam, in radians in the cam frame.
	SupportF(deg, lift taylor.F) (p, phi taylor.F)

	// SupportI encloses what SupportF computes.
	SupportI(deg, lift taylor.I) (p, phi taylor.I)
}

// Swinging is what swinging followers say beside.
type Swinging interface {
	Kind

	// MaxSwing returns the lift in degrees, above 0, at which more lift would no longer
	// take the follower away from the camshaft: every lift must stay below it.
	MaxSwing() float64
}

// sense returns the sign of Kind.Sense.
func sense(clockwise bool) float64 {
	if clockwise {
		return 1
	}
	return -1
}

// side returns +1 for a follower above the center line, -1 below.
func side(above bool) float64 {
	if above {
		return 1
	}
	return -1
}
