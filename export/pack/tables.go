package pack

import (
	"math"
	"slices"

	"lobewright/export/table"
	"lobewright/synth/plane"
)

// tableDecimals is what the tables print of a length: 0.1 nm or 0.1 µin steps carry
// the exact curve to any instrument.
const tableDecimals = 6

// stop is a cam angle at which a table has a row, and the zone it is asked of.
type stop struct {
	angle float64 // 0 <= angle < 360, degrees
	zone  int
	t     float64 // the same angle within the zone
}

// stops returns cam angles 0 to 360 by step, and every junction from both sides.
func (j *job) stops(step float64) []stop {
	jumps := map[float64]bool{}
	for _, x := range j.cam.Cycle().Junctions() {
		jumps[plane.Wrap360(x.At)] = true
	}
	zones := j.cam.Cycle().Zones()
	var all []stop
	n := int(math.Round(360 / step))
	seen := map[float64]bool{}
	for i := range n {
		seen[360*float64(i)/float64(n)] = true
	}
	angles := make([]float64, 0, n+len(jumps))
	for i := range n {
		angles = append(angles, 360*float64(i)/float64(n))
	}
	for _, x := range j.cam.Cycle().Junctions() {
		if a := plane.Wrap360(x.At); !seen[a] {
			seen[a] = true
			angles = insert(angles, a)
		}
	}
	for _, a := range angles {
		zone, t := j.cam.Cycle().Zone(a)
		if jumps[a] {
			before := (zone + len(zones) - 1) % len(zones)
			all = append(all, stop{a, before, zones[before].To})
		}
		all = append(all, stop{a, zone, t})
	}
	return all
}

// insert puts a into a sorted list.
func insert(list []float64, a float64) []float64 {
	i := len(list)
	for i > 0 && list[i-1] > a {
		i--
	}
	return append(list[:i], append([]float64{a}, list[i:]...)...)
}

// motionTable is <part>.motion.csv: per second at the camshaft's speed.
func (j *job) motionTable() ([]byte, error) {
	w := j.cam.Omega()
	var rows []table.MotionRow
	for _, s := range j.stops(0.25) {
		l := j.cam.LiftIn(s.zone, s.t)
		rows = append(rows, table.MotionRow{CamAngle: s.angle, Lift: l.S, Velocity: l.V * w, Acceleration: l.A * w * w, Jerk: l.J * w * w * w})
	}
	return table.Motion(slices.CompactFunc(rows, func(a, b table.MotionRow) bool {
		return same(a.CamAngle, b.CamAngle, a.Acceleration-b.Acceleration, a.Jerk-b.Jerk)
	}), tableDecimals)
}

// inspectionTable is <part>.inspection.csv.
func (j *job) inspectionTable() ([]byte, error) {
	pitch, contour := j.cam.Pitch(), j.cam.Contour()
	var rows []table.InspectionRow
	step := 1.0
	if i := j.spec.Inspection; i != nil {
		step = i.Step
	}
	for _, s := range j.stops(step) {
		p, k := pitch.At(s.zone, s.t), contour.At(s.zone, s.t)
		rows = append(rows, table.InspectionRow{
			CamAngle: s.angle, Lift: j.cam.LiftIn(s.zone, s.t).S,
			CenterX: p.P.X, CenterY: p.P.Y, NoCenter: !j.cam.HasCenter(), ContourX: k.P.X, ContourY: k.P.Y,
			Radius: j.radiusOf(k.P), PolarAngle: j.polarOfPoint(k.P),
			NormalAngle:       plane.Wrap360(j.outward(k).Angle().Deg()),
			PressureAngle:     j.cam.PressureAngleIn(s.zone, s.t).Deg(),
			RadiusOfCurvature: j.convex(k) * 1 / math.Abs(k.K),
			Outer:             j.outerWall(s.zone, s.t),
		})
	}
	return table.Inspection(slices.CompactFunc(rows, func(a, b table.InspectionRow) bool {
		return same(a.CamAngle, b.CamAngle, a.RadiusOfCurvature-b.RadiusOfCurvature)
	}), tableDecimals)
}

// outerWall is the point of a groove's outer wall, whose material is outside: its normal
// points towards the camshaft, and it is convex where the inner wall is hollow.
func (j *job) outerWall(zone int, t float64) *table.WallPoint {
	if !j.cam.Grooved() {
		return nil
	}
	k := j.cam.OuterWall().At(zone, t)
	return &table.WallPoint{X: k.P.X, Y: k.P.Y, Radius: j.radiusOf(k.P), PolarAngle: j.polarOfPoint(k.P),
		NormalAngle: plane.Wrap360(j.outward(k).Angle().Deg() + 180), RadiusOfCurvature: -j.convex(k) / math.Abs(k.K)}
}

// radiusOf and polarOfPoint say where a point of a curve is on the cam: those of a barrel are
// developed.
func (j *job) radiusOf(p plane.Point) float64 {
	if b, ok := j.cam.Barrel(); ok {
		return b.OuterRadius
	}
	return p.Radius()
}

func (j *job) polarOfPoint(p plane.Point) float64 {
	if b, ok := j.cam.Barrel(); ok {
		return plane.Wrap360(p.X / b.OuterRadius * 180 / math.Pi)
	}
	return p.PolarAngle()
}

// same reports whether the two rows of a junction would print alike: one is enough then.
func same(a, b float64, differences ...float64) bool {
	const printed = 0.5e-6 // half of the last of tableDecimals
	for _, d := range differences {
		if !(math.Abs(d) < printed) {
			return false
		}
	}
	return a == b
}

// outward returns the unit normal that points out of the cam.
func (j *job) outward(f plane.Frame) plane.Vector {
	if j.cam.OutsideIsLeft() {
		return f.T.Left()
	}
	return f.T.Left().Neg()
}

// convex returns +1 where the frame's curve bulges away from the camshaft, -1 where it is hollow.
func (j *job) convex(f plane.Frame) float64 {
	if j.cam.OutsideIsLeft() == (f.K < 0) {
		return 1
	}
	return -1
}
