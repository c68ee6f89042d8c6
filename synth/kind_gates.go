package synth

import (
	"fmt"
	"math"

	"lobewright/synth/follower"
	"lobewright/synth/gate"
	"lobewright/synth/plane"
)

// kindGates are the gates that only some kinds of follower have: contact within the face
// or head, an arm that closes, a pivot and an arm that the cam does not run into.
func (c *Cam) kindGates() []gate.Gate {
	var g []gate.Gate
	switch f := c.follower.(type) {
	case follower.TranslatingMushroom:
		g = append(g, c.contactGate(-f.HeadDiameter/2, f.HeadDiameter/2, "head", "a larger head_diameter"))
	case follower.TranslatingFlat:
		g = append(g, c.contactGate(-f.FaceWidth/2, f.FaceWidth/2, "face", "a larger face_width"))
	case follower.SwingingFlat:
		g = append(g, c.contactGate(f.From, f.To, "face", "a longer face"))
	}
	if f, ok := c.follower.(follower.Swinging); ok {
		g = append(g, c.swingGate(f))
		if c.Grooved() { // the arm runs over the face of the body
			return g
		}
		g = append(g, c.pivotGate())
		if roller, ok := f.(follower.SwingingRoller); ok {
			g = append(g, c.armGate(roller))
		}
	}
	return g
}

// contactGate holds the place of contact to a face, from and to as Kind.Contact counts.
func (c *Cam) contactGate(from, to float64, what, advice string) gate.Gate {
	middle, half := (from+to)/2, (to-from)/2
	p := largest(c.Contour().pieces, every, func(i int, t float64) float64 {
		l := c.LiftIn(i, t)
		return math.Abs(c.follower.Contact(l.S, l.V) - middle)
	})
	l := c.LiftIn(p.piece, p.t)
	return gate.Gate{ID: "contact", Value: p.value, Limit: half, Unit: c.unit(), CamAngle: camAngle(p.t), Polar: c.polarAt(p.piece, p.t), Pass: p.value <= half,
		Text: fmt.Sprintf("largest distance of the contact from the middle of the %s, there at %.4g %s; allowed is half the %s: take %s or lengthen the event",
			what, c.follower.Contact(l.S, l.V), c.unit(), what, advice)}
}

// swingGate: the lift must stay below the swing at which more of it would no longer take
// the follower away from the camshaft.
func (c *Cam) swingGate(f follower.Swinging) gate.Gate {
	p := largest(c.Contour().pieces, every, func(i int, t float64) float64 { return c.LiftIn(i, t).S })
	return gate.Gate{ID: "swing", Value: p.value, Limit: f.MaxSwing(), Unit: "deg", CamAngle: camAngle(p.t), Polar: c.polarAt(p.piece, p.t), Pass: p.value < f.MaxSwing(),
		Text: "largest swing against that at which arm and camshaft would be in line, and more lift would bring the follower back; take a longer pivot_distance or less lift"}
}

// pivotGate: the pivot must stay outside the contour all the way round.
func (c *Cam) pivotGate() gate.Gate {
	con := c.Contour()
	far := con.largest(every, func(i int, t float64) float64 { return con.At(i, t).P.Radius() })
	pivot := c.spec.Follower.PivotDistance
	return gate.Gate{ID: "pivot", Value: pivot - far.value, Limit: 0, Unit: c.unit(), AtLeast: true, CamAngle: camAngle(far.t), Polar: c.polarAt(far.piece, far.t), Pass: pivot > far.value,
		Text: "room between the pivot and the largest radius of the contour; it must hold the pivot's boss: take a longer pivot_distance"}
}

// armSteps is how many places of the turn and of the arm are looked at: a clearance by
// sampling, a hundredth of the arm apart.
const armSteps = 360

// armGate: the line from the pivot to the roller's edge must not cross the contour.
func (c *Cam) armGate(f follower.SwingingRoller) gate.Gate {
	con := c.Contour()
	outline := make([]plane.Point, 0, armSteps)
	for k := range armSteps {
		zone, t := c.cycle.Zone(float64(k) * 360 / armSteps)
		outline = append(outline, con.At(zone, t).P)
	}
	least, at := math.Inf(1), 0.0
	for k := range armSteps {
		deg := float64(k) * 360 / armSteps
		zone, t := c.cycle.Zone(deg)
		center := c.Pitch().At(zone, t).P
		pivot := plane.Polar(f.PivotDistance, plane.Degrees(f.Sense()*deg))
		// The roller covers the last of the arm: it is the pitch curve's affair.
		end := center.Add(pivot.Sub(center).Scale(math.Min(1, f.RollerRadius/f.ArmLength)))
		for _, p := range outline {
			if d := toSegment(p, pivot, end); d < least {
				least, at = d, deg
			}
		}
		if inside(center.Add(pivot.Sub(center).Scale(0.5)), outline) || inside(end, outline) {
			least, at = -1, deg
			break
		}
	}
	zone, t := c.cycle.Zone(at)
	return gate.Gate{ID: "arm", Value: least, Limit: 0, Unit: c.unit(), AtLeast: true, CamAngle: camAngle(at), Polar: c.polarAt(zone, t), Pass: least > 0,
		Text: "room between the arm's center line and the contour; half the arm's width must fit into it, unless the arm runs beside the cam: take a longer arm_length or another pivot_distance"}
}

// toSegment is the distance of p from the segment from a to b.
func toSegment(p, a, b plane.Point) float64 {
	v := b.Sub(a)
	u := math.Min(1, math.Max(0, p.Sub(a).Dot(v)/v.Dot(v)))
	return p.Dist(a.Add(v.Scale(u)))
}

// inside reports whether p lies inside a polygon, by the crossings of a ray.
func inside(p plane.Point, polygon []plane.Point) bool {
	in := false
	for i, a := range polygon {
		b := polygon[(i+1)%len(polygon)]
		if (a.Y > p.Y) != (b.Y > p.Y) && p.X < a.X+(p.Y-a.Y)/(b.Y-a.Y)*(b.X-a.X) {
			in = !in
		}
	}
	return in
}
