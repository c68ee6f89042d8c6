package pack

import "fmt"

// followerText names the follower with its size.
func (j *job) followerText() string {
	f, u := j.spec.Follower, j.spec.Units.Short()
	switch f.Kind {
	case "translating-knife":
		return "translating knife edge"
	case "translating-mushroom":
		return fmt.Sprintf("translating mushroom of face radius %g %s, head diameter %g %s", f.FaceRadius, u, f.HeadDiameter, u)
	case "translating-flat":
		return fmt.Sprintf("translating flat face %g %s wide", f.FaceWidth, u)
	case "swinging-roller":
		return fmt.Sprintf("swinging roller of diameter %g %s on an arm of %g %s", f.RollerDiameter, u, f.ArmLength, u)
	case "swinging-flat":
		return fmt.Sprintf("swinging flat face, offset %g %s, from %g to %g %s of its pivot's foot", f.FaceOffset, u, f.Face.From, f.Face.To, u)
	}
	return fmt.Sprintf("translating roller of diameter %g %s", f.RollerDiameter, u)
}

// placeText says where the follower stands.
func (j *job) placeText() string {
	f, u := j.spec.Follower, j.spec.Units.Short()
	if j.drum() {
		return "its axis radial, moving along the camshaft away from the datum end"
	}
	if f.Swings() {
		side := "above (+Y)"
		if f.Below {
			side = "below (-Y)"
		}
		sense := "leading: the cam's surface runs towards the pivot"
		if j.trails() {
			sense = "trailing: the cam's surface runs away from the pivot"
		}
		return fmt.Sprintf("pivot on +X at %g %s from the camshaft axis, touching %s the center line, %s", f.PivotDistance, u, side, sense)
	}
	switch {
	case f.Offset > 0:
		return fmt.Sprintf("offset %g %s to the left (+Y), looking along the lift", f.Offset, u)
	case f.Offset < 0:
		return fmt.Sprintf("offset %g %s to the right (-Y), looking along the lift", -f.Offset, u)
	}
	return "on the axis's line"
}

// liftUnit is the unit of lifts where it is not that of lengths, else nothing.
func (j *job) liftUnit() string {
	if j.cam.Swings() {
		return j.cam.LiftUnit()
	}
	return ""
}
