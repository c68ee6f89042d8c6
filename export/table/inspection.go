package table

// InspectionRow is the cam at one cam angle, for the inspector. All points
// are in the cam frame.
type InspectionRow struct {
	CamAngle float64 // degrees the camshaft has turned in its direction of rotation
	Lift     float64 // length, or degrees for a swinging follower

	CenterX, CenterY float64 // roller center, length; unread when NoCenter is set
	NoCenter         bool    // a flat face has no center: its two columns are left empty

	ContourX, ContourY float64 // contour point touched at this cam angle, length
	Radius             float64 // of the contour point, from the camshaft axis, length
	PolarAngle         float64 // of the contour point, degrees; printed in 0 <= a < 360
	NormalAngle        float64 // polar angle of the outward normal, degrees; likewise
	PressureAngle      float64 // degrees, signed

	// RadiusOfCurvature of the contour at the point, length: positive where
	// the contour is convex, negative where it is hollow. A straight stretch, infinite or of
	// magnitude StraightRadius and more, is written as inf without a sign.
	RadiusOfCurvature float64

	// Outer is the same of the outer wall of a groove; then the columns before are those of the
	// inner wall. All rows have it, or none.
	Outer *WallPoint
}

// WallPoint is a point of a wall, as InspectionRow has it.
type WallPoint struct {
	X, Y, Radius, PolarAngle, NormalAngle, RadiusOfCurvature float64
}

func (r InspectionRow) fields() []field {
	center := plain
	if r.NoCenter {
		center = blank
	}
	f := []field{
		{"cam_angle", r.CamAngle, angle},
		{"lift", r.Lift, plain},
		{"center_x", r.CenterX, center},
		{"center_y", r.CenterY, center},
		{"contour_x", r.ContourX, plain},
		{"contour_y", r.ContourY, plain},
		{"radius", r.Radius, plain},
		{"polar_angle", r.PolarAngle, turn},
		{"normal_angle", r.NormalAngle, turn},
		{"pressure_angle", r.PressureAngle, angle},
		{"radius_of_curvature", r.RadiusOfCurvature, radius},
	}
	if o := r.Outer; o != nil {
		f = append(f, field{"outer_x", o.X, plain}, field{"outer_y", o.Y, plain}, field{"outer_radius", o.Radius, plain},
			field{"outer_polar_angle", o.PolarAngle, turn}, field{"outer_normal_angle", o.NormalAngle, turn},
			field{"outer_radius_of_curvature", o.RadiusOfCurvature, radius})
	}
	return f
}

// Inspection prints the inspection table. lengthDecimals (0 to
// LargestDecimals) are the decimals of lengths and lifts. Rows must be in
// order of cam angle; two may share one at a junction, before and after. NaN
// is refused, and so is an infinite figure other than the radius of curvature.
func Inspection(rows []InspectionRow, lengthDecimals int) ([]byte, error) {
	return write("inspection", len(rows), lengthDecimals, func(i int) []field { return rows[i].fields() })
}
