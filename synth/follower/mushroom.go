package follower

import "math"

// TranslatingMushroom is a head with a spherical face whose center lies on the line of
// its stem and moves along it: a roller that does not turn, of which only the head is
// there.
type TranslatingMushroom struct {
	Line
	FaceRadius   float64 // length, above 0
	HeadDiameter float64 // length, above 0, below twice the face radius
}

// NewTranslatingMushroom returns the follower that rests on the base circle at lift 0 as
// a roller of the face's radius would. Fails, with a *Misfit, when the offset is not
// smaller than base radius plus face radius, or when the head is not narrower than
// the sphere of its face.
func NewTranslatingMushroom(baseRadius, faceRadius, headDiameter, offset float64, clockwise bool) (TranslatingMushroom, error) {
	prime := baseRadius + faceRadius
	f := TranslatingMushroom{newLine(prime, offset, clockwise), faceRadius, headDiameter}
	if err := (Misfit{"head_diameter", headDiameter, 0, 2 * faceRadius, "the head is narrower than the sphere of its face"}).within(); err != nil {
		return f, err
	}
	return f, offsetWithin(prime, offset)
}

// Radius returns the face's radius, length.
func (f TranslatingMushroom) Radius() float64 { return f.FaceRadius }

// Contact returns how far from the stem's line the head is touched, length, positive
// towards +Y: the sine of the pressure angle times the face radius, on the side the cam
// comes from. It must stay within half the head's diameter.
func (f TranslatingMushroom) Contact(lift, slope float64) float64 {
	return f.Sense() * f.FaceRadius * math.Sin(float64(f.PressureAngle(lift, slope)))
}
