package table

// ProbeRow is what a probe finds on the rotary table at one table angle. The probe's ball or roller
// touches the contour, and its center lies on a fixed ray from the camshaft axis: +X when the table
// stands at 0 and the cam in the cam frame.
type ProbeRow struct {
	TableAngle float64 // degrees the table has turned, in the sense the header names
	PolarAngle float64 // of the probe's center in the cam frame, degrees; printed in 0 <= a < 360

	ProbeWall            // of a plate cam its contour, of a groove the inner wall
	Outer     *ProbeWall // the outer wall of a groove; all rows have it, or none
}

// ProbeWall is the probe's center on one wall: its distance from the camshaft axis on a true wall
// and on the two bounds of the profile zone, length.
type ProbeWall struct {
	Radius, Lower, Upper float64
	Difference           float64 // Radius of the next row less this one's; the last row's next is the first
}

func (w ProbeWall) fields(prefix string) []field {
	return []field{
		{prefix + "probe_radius", w.Radius, plain},
		{prefix + "lower_limit", w.Lower, plain},
		{prefix + "upper_limit", w.Upper, plain},
		{prefix + "first_difference", w.Difference, plain},
		{prefix + "reading", 0, blank},
		{prefix + "reading_difference", 0, blank},
	}
}

// Probe prints the table a probe is held against; the columns for readings are left empty.
// clockwise is the sense in which the table turns, as seen on the marked face; the header
// says it. Otherwise as Inspection, with the table angle in place of the cam angle.
func Probe(rows []ProbeRow, clockwise bool, lengthDecimals int) ([]byte, error) {
	sense := "table_angle_counterclockwise"
	if clockwise {
		sense = "table_angle_clockwise"
	}
	return write("probe", len(rows), lengthDecimals, func(i int) []field {
		r := rows[i]
		f := append([]field{{sense, r.TableAngle, angle}, {"polar_angle", r.PolarAngle, turn}}, r.ProbeWall.fields("")...)
		if r.Outer != nil {
			f = append(f, r.Outer.fields("outer_")...)
		}
		return f
	})
}
