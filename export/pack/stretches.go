package pack

import (
	"cmp"
	"fmt"
	"slices"

	"lobewright/export/svg"
	"lobewright/synth/motion"
	"lobewright/synth/plane"
)

// stretches lists what a motion does that is not made of events: where it is held,
// where it is carried, and what was found between.
func (j *job) stretches() []svg.Event {
	var out []svg.Event
	zones := j.cam.Cycle().Zones()
	for i, z := range zones {
		text := j.stretch(z)
		if n := len(out); n > 0 && out[n-1].Text == text {
			out[n-1].To += z.To - z.From
			continue
		}
		from := plane.Wrap360(z.From)
		out = append(out, svg.Event{From: from, To: from + z.To - z.From, Text: text, Start: j.cam.Contour().At(i, z.From).P})
	}
	if n := len(out); n > 1 && out[0].Text == out[n-1].Text {
		out[n-1].To += out[0].To - out[0].From
		out = append(out[n-1:n:n], out[1:n-1]...)
	}
	for i := 1; i < len(out); i++ { // in order of cam angle
		for k := i; k > 0 && out[k].From < out[k-1].From; k-- {
			out[k], out[k-1] = out[k-1], out[k]
		}
	}
	return out
}

func (j *job) stretch(z motion.Zone) string {
	u := j.cam.LiftUnit()
	switch {
	case z.Dwell && j.spec.Motion.Table != nil:
		return fmt.Sprintf("dwell at %.6g %s, from the table", z.Poly[0], u)
	case j.spec.Motion.Table != nil:
		return "smoothed from the table"
	case z.Dwell:
		return fmt.Sprintf("held at %.6g %s", z.Poly[0], u)
	case len(z.Poly) == 2 && len(z.Sines) == 0:
		return fmt.Sprintf("carried at %.6g %s/s", z.Poly[1]/z.Span*j.spec.Camshaft.Speed*6, u)
	}
	return "completed"
}

// knowns are what is known of the motion, for its chart: facts, windows and table points, at the
// camshaft's speed.
func (j *job) knowns() (lift, velocity, acceleration []svg.Mark) {
	w := j.spec.Camshaft.Speed * 6 // degrees a second
	for _, f := range j.spec.Motion.Points {
		kind := svg.MarkHeld
		if f.Point {
			kind = svg.MarkFact
		}
		add := func(to *[]svg.Mark, kind svg.MarkKind, x *float64, scale float64) {
			if x != nil {
				*to = append(*to, svg.Mark{Kind: kind, From: f.From, To: f.To, Value: *x * scale})
			}
		}
		add(&lift, kind, f.Lift, 1)
		add(&velocity, kind, f.Velocity, w)
		add(&acceleration, kind, f.Acceleration, w*w)
		add(&lift, svg.MarkAbove, f.Above, 1)
		add(&lift, svg.MarkBelow, f.Below, 1)
	}
	angles, lifts := j.cam.Table()
	for i, a := range angles {
		at := plane.Wrap360(a)
		lift = append(lift, svg.Mark{Kind: svg.MarkSample, From: at, To: at, Value: lifts[i]})
	}
	slices.SortStableFunc(lift, func(a, b svg.Mark) int { return cmp.Compare(a.From, b.From) })
	return lift, velocity, acceleration
}
