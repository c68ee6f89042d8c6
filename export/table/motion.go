package table

// MotionRow is the follower at one cam angle, at the camshaft's speed.
type MotionRow struct {
	CamAngle     float64 // degrees the camshaft has turned in its direction of rotation
	Lift         float64 // length, or degrees for a swinging follower
	Velocity     float64 // lift per second
	Acceleration float64 // lift per second squared
	Jerk         float64 // lift per second cubed
}

func (r MotionRow) fields() []field {
	return []field{
		{"cam_angle", r.CamAngle, angle},
		{"lift", r.Lift, plain},
		{"velocity", r.Velocity, plain},
		{"acceleration", r.Acceleration, plain},
		{"jerk", r.Jerk, plain},
	}
}

// Motion prints the motion table. lengthDecimals (0 to LargestDecimals) are
// the decimals of the lift and of its three derivatives alike: at a crawl the
// derivatives are smaller than the lift, and a column must not fade to zero.
// Rows must be in order of cam angle; where acceleration or jerk jumps, two rows share it,
// before and after. NaN and infinite figures are refused.
func Motion(rows []MotionRow, lengthDecimals int) ([]byte, error) {
	return write("motion", len(rows), lengthDecimals, func(i int) []field { return rows[i].fields() })
}
