package synth

import (
	"fmt"
	"math"

	"lobewright/synth/gate"
	"lobewright/synth/spec"
)

// Peaks are the largest absolute values of the motion's derivatives, length a
// radian, radian² and radian³, with their cam angles in degrees. J is +Inf when the
// acceleration jumps.
type Peaks struct{ V, VAt, A, AAt, J, JAt float64 }

// Peaks returns the peaks of the motion over the cycle.
func (c *Cam) Peaks() Peaks {
	p := c.cycle.Peaks()
	peaks := Peaks{p.Velocity.Value, p.Velocity.At, p.Acceleration.Value, p.Acceleration.At, p.Jerk.Value, p.Jerk.At}
	for _, x := range c.cycle.Junctions() {
		if x.AccelerationStep() != 0 {
			peaks.J, peaks.JAt = math.Inf(1), x.At
			break
		}
	}
	return peaks
}

// smallRadiusShare is the share of the roller's radius below which a convex
// radius of the contour is a finding (common practice, no source).
const smallRadiusShare = 0.5

// Findings are facts worth knowing that refuse nothing.
func (c *Cam) Findings() []gate.Finding {
	var f []gate.Finding
	w := c.Omega()
	for _, j := range c.cycle.Junctions() {
		if step := j.AccelerationStep(); step != 0 {
			f = append(f, gate.Finding{ID: "acceleration-jump", CamAngle: camAngle(j.At),
				Text: fmt.Sprintf("the acceleration jumps by %.4g %s/s² (from %.4g to %.4g)", step*w*w, c.LiftUnit(), j.Acceleration[0]*w*w, j.Acceleration[1]*w*w)})
		}
	}
	f = append(f, c.overshoots()...)
	if x := c.completionFinding(); x != nil {
		f = append(f, *x)
	}
	f = append(f, c.tableFindings()...)
	if x := c.harmfulOffset(); x != nil {
		f = append(f, *x)
	}
	f = append(f, c.dwellAngles()...)
	if x := c.smallRadius(); x != nil {
		f = append(f, *x)
	}
	if what := c.tiedToSpeed(); what != "" {
		f = append(f, gate.Finding{ID: "tied-to-speed", CamAngle: math.NaN(),
			Text: fmt.Sprintf("%s: at another camshaft speed than %g rpm the contour would be another", what, c.spec.Camshaft.Speed)})
	}
	return f
}

// overshoots finds polynomials that go past the lifts their events name.
func (c *Cam) overshoots() []gate.Finding {
	var f []gate.Finding
	for i, z := range c.zones {
		if z.Event < 0 || c.spec.Motion.Events[z.Event].Law.Name != spec.Polynomial {
			continue
		}
		from, to := c.LiftIn(i, z.From).S, c.LiftIn(i, z.To).S
		lo, hi := z.Lifts()
		for _, past := range []float64{hi - math.Max(from, to), math.Min(from, to) - lo} {
			if past > 1e-9*(hi-lo) {
				f = append(f, gate.Finding{ID: "overshoot", CamAngle: camAngle(z.From),
					Text: fmt.Sprintf("this %s goes %.4g %s past its own end, because of the velocities at its ends", c.spec.Motion.Events[z.Event].Kind, past, c.LiftUnit())})
			}
		}
	}
	return f
}

// tiedToSpeed says what in the spec ties the geometry to the camshaft's speed.
func (c *Cam) tiedToSpeed() string {
	for _, e := range c.spec.Motion.Events {
		if e.Timed {
			return "an event is given as a time, or with a velocity per second"
		}
	}
	for _, p := range c.spec.Motion.Points {
		if p.Timed {
			return "a fact is given as a velocity or an acceleration per second"
		}
	}
	return ""
}

// harmfulOffset compares the worse of rise and fall with what the same offset on the other side, or
// none, would give.
func (c *Cam) harmfulOffset() *gate.Finding {
	if c.spec.Follower.Offset == 0 {
		return nil
	}
	worst := func(d *Cam) float64 { return math.Max(d.steepest(1).value, d.steepest(-1).value) }
	straight, without := *c.spec, *c
	straight.Follower.Offset = 0
	f, err := newFollower(&straight)
	if err != nil {
		return nil
	}
	without.follower, without.made = f, nil
	have, none := worst(c), worst(&without)
	if have <= none {
		return nil
	}
	return &gate.Finding{ID: "harmful-offset", CamAngle: math.NaN(),
		Text: fmt.Sprintf("the offset raises the worse pressure angle of rise and fall from %.2f° to %.2f°; for this turning direction the other side or a smaller offset is better", none, have)}
}

// smallRadius finds a contour that is sharp against its roller.
func (c *Cam) smallRadius() *gate.Finding {
	roller := c.spec.Follower.RollerDiameter / 2
	radius, at := c.leastRound() // an undercut contour is the undercut gate's affair
	if roller == 0 || !(radius > 0 && radius < smallRadiusShare*roller) {
		return nil
	}
	return &gate.Finding{ID: "small-radius", CamAngle: camAngle(at.t),
		Text: fmt.Sprintf("the contour's convex radius of curvature falls to %.4g %s, below half the roller's radius: high contact stress", radius, c.unit())}
}

// dwellAngles reports the pressure angle of every dwell, which is not gated.
func (c *Cam) dwellAngles() []gate.Finding {
	var f []gate.Finding
	for i, z := range c.zones {
		if a := c.PressureAngleIn(i, z.From).Deg(); z.Dwell && a != 0 {
			f = append(f, gate.Finding{ID: "pressure-angle-in-dwell", CamAngle: camAngle(z.From),
				Text: fmt.Sprintf("the pressure angle in the dwell from %.4g° to %.4g° is %.2f° (not gated)", camAngle(z.From), camAngle(z.To), a)})
		}
	}
	return f
}
