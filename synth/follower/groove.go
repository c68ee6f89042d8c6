package follower

// Groove is a roller follower, translating or swinging, in a track with two walls: the
// pitch curve, pressure angle and linkage are the roller's, and both walls are parallels
// of the pitch curve.
type Groove struct {
	Kind
	Clearance float64 // groove width less roller diameter, length, at least 0, shared by both walls
}

// Walls returns where the two walls are, as distances outside the pitch curve, length:
// the inner one negative.
func (g Groove) Walls() (inner, outer float64) {
	half := g.Radius() + g.Clearance/2
	return -half, half
}
