package spec

import (
	"fmt"
	"math"
	"strings"
)

// Velocities where events meet: what each event brings to a joint, which of two neighbors
// takes the other's, and whether they meet.

// roundSpeed is how far a velocity written for half a law may be from the one its lift
// and angle fix: half a unit in the sixth digit, as messages print them.
const roundSpeed = 5e-6

// degreesPerSecond of the camshaft.
func (s *Spec) degreesPerSecond() float64 { return s.Camshaft.Speed * fullTurn / 60 }

// joint is what one end of an event brings: its velocity, length/degree.
type joint struct {
	v    float64
	free bool // takes the neighbor's velocity
	soft bool // a polynomial's, which may be moved by rounding
}

// finishVelocities gives every event its velocities in length/degree and reports whether
// all are known.
func (r *reader) finishVelocities(s *Spec) bool {
	before := r.count
	joints := make([][2]joint, len(r.events)) // start and end of each event
	for i := range r.events {
		joints[i] = r.joints(s, &r.events[i])
	}
	if r.count > before {
		return false
	}
	slack := r.steepest() * roundShare
	for i := range joints {
		next := (i + 1) % len(joints)
		end, start := &joints[i][1], &joints[next][0]
		switch {
		case end.free && start.free:
			r.faultAt(r.events[i].where.path+".to_velocity", Fault{
				Found:   fmt.Sprintf("matched, and from_velocity: matched in motion.events[%d] as well", next+1),
				Allowed: "a velocity given on one side of a joint", Advice: "write the number, length/s, in one of them"})
		case end.free:
			end.v = start.v
			r.checkMatched(s, &r.events[i], "to_velocity", end.v)
		case start.free:
			start.v = end.v
			r.checkMatched(s, &r.events[next], "from_velocity", start.v)
		case end.soft && math.Abs(end.v-start.v) <= slack:
			end.v = start.v
		case start.soft && math.Abs(end.v-start.v) <= slack:
			start.v = end.v
		}
	}
	for i := range r.events {
		d, ends := &r.events[i], joints[i]
		for k := range ends { // at a tiny speed, or of a tiny angle, it may overflow
			ends[k].v = max(-math.MaxFloat64, min(ends[k].v, math.MaxFloat64))
		}
		if d.from.given {
			d.FromVelocity = &ends[0].v
		}
		if d.to.given {
			d.ToVelocity = &ends[1].v
		}
		for _, one := range []stated{d.from, d.to} {
			d.Timed = d.Timed || d.Law.Name == Polynomial && one.perSecond != 0
		}
	}
	return r.count == before
}

// joints returns what the two ends of an event bring, and finds velocities against the
// event's way, and such as half a law cannot have.
func (r *reader) joints(s *Spec, d *draft) (ends [2]joint) {
	if d.Kind == Dwell {
		return ends
	}
	if len(d.stated()) == 0 && d.Law.Name != Polynomial {
		ends[0].v, ends[1].v = r.endSpeeds(d.Event)
		return ends
	}
	for i, one := range []stated{d.from, d.to} {
		if !one.given {
			continue
		}
		key := []string{"from_velocity", "to_velocity"}[i]
		if one.perSecond*d.way() < 0 {
			r.faultAt(d.where.path+"."+key, Fault{
				Found:   fmt.Sprintf("%s in a %s", figure(one.perSecond), d.Kind),
				Allowed: map[EventKind]string{Rise: "0 or above", Fall: "0 or below"}[d.Kind] + ": velocities are positive where the lift grows, negative where it falls",
				Advice:  "write " + figure(-one.perSecond)})
			continue
		}
		if speed, half := r.vocabulary.half(d.Law.Name); half {
			ends[i].v = d.way() * speed * d.Lift / d.Over
			r.checkHalf(s, d, key, speed, one)
			continue
		}
		ends[i] = joint{v: one.perSecond / s.degreesPerSecond(), free: one.matched, soft: !one.matched}
	}
	return ends
}

// way is +1 for an event that rises and -1 for one that falls.
func (e Event) way() float64 {
	if e.Kind == Fall {
		return -1
	}
	return 1
}

// checkHalf holds a velocity written for half a law to the one that lift and angle fix.
func (r *reader) checkHalf(s *Spec, d *draft, key string, half float64, one stated) {
	fixed := d.way() * half * d.Lift / d.Over * s.degreesPerSecond()
	if one.matched || math.Abs(one.perSecond-fixed) <= roundSpeed*math.Abs(fixed) {
		return
	}
	f := Fault{Found: fmt.Sprintf("%s with half a %s %s of %s %s over %s degrees", figure(one.perSecond), d.Law.Name, d.Kind, figure(d.Lift), s.Units.Short(), figure(tidy(d.Over))),
		Allowed: fmt.Sprintf("%s, which lift and angle fix, or matched", speed(fixed)), Advice: "for an end at rest take it out"}
	if one.perSecond != 0 {
		f.Advice = "for " + figure(one.perSecond) + " " + r.meets(s, d.Event, one.perSecond/s.degreesPerSecond())
	}
	r.faultAt(d.where.path+"."+key, f)
}

// meets says with what angle or lift half a law has a velocity, length/degree.
func (r *reader) meets(s *Spec, e Event, v float64) string {
	half, _ := r.vocabulary.half(e.Law.Name)
	return fmt.Sprintf("write over: %s or %s: %s", figure(half*e.Lift/math.Abs(v)), e.Kind, figure(math.Abs(v)*e.Over/half))
}

// checkMatched refuses a velocity taken from a neighbor that goes the other way.
func (r *reader) checkMatched(s *Spec, d *draft, key string, v float64) {
	if v*d.way() < 0 {
		r.faultAt(d.where.path+"."+key, Fault{
			Found:   fmt.Sprintf("matched, beside a velocity of %s %s/s", speed(v*s.degreesPerSecond()), s.Units.Short()),
			Allowed: fmt.Sprintf("matched in a %s only beside an event that goes the same way, or is at rest where they meet", d.Kind)})
	}
}

// steepest returns the largest mean velocity of the events, length/degree.
func (r *reader) steepest() float64 {
	most := 0.0
	for _, d := range r.events {
		if d.Kind != Dwell {
			most = max(most, d.Lift/d.Over)
		}
	}
	return most
}

// checkSpeeds finds jumps in velocity between neighbors, the last and the first
// event included.
func (r *reader) checkSpeeds(s *Spec) {
	events, at := s.Motion.Events, s.Motion.StartAt
	slack, perSecond := r.steepest()*roundShare, s.degreesPerSecond()
	for i, e := range events {
		last := (i + len(events) - 1) % len(events)
		_, before := r.endSpeeds(events[last])
		after, _ := r.endSpeeds(e)
		if !(math.Abs(after-before) <= slack) {
			r.faultAt(fmt.Sprintf("motion.events[%d]", i+1), Fault{
				Found: fmt.Sprintf("a jump in velocity from %s to %s %s/s where this %s begins, at cam angle %s",
					speed(before*perSecond), speed(after*perSecond), s.Units.Short(), e.Kind, figure(tidy(math.Mod(at, fullTurn)))),
				Allowed: "neighbors whose velocities meet",
				Advice:  r.jumpAdvice(s, last, i, before, after)})
		}
		at += e.Over
	}
}

// jumpAdvice says how two neighbors could meet, whose velocities there are before and
// after.
func (r *reader) jumpAdvice(s *Spec, first, second int, before, after float64) string {
	a, b := s.Motion.Events[first], s.Motion.Events[second]
	rest := "laws that start and end at rest: " + strings.Join(r.vocabulary.restLaws(), ", ")
	_, halfA := r.vocabulary.half(a.Law.Name)
	_, halfB := r.vocabulary.half(b.Law.Name)
	in := func(i int) string { return fmt.Sprintf(" in motion.events[%d]", i+1) }
	switch {
	case a.Kind != b.Kind && b.FromVelocity != nil && after != 0:
		return "the follower stands still at a dwell and where it turns: take out from_velocity" + in(second)
	case a.Kind != b.Kind && a.ToVelocity != nil && before != 0:
		return "the follower stands still at a dwell and where it turns: take out to_velocity" + in(first)
	case a.Kind != b.Kind:
		return rest
	case halfA && a.ToVelocity != nil && after != 0:
		return "to meet it" + in(first) + " " + r.meets(s, a, after)
	case halfB && b.FromVelocity != nil && before != 0:
		return "to meet it" + in(second) + " " + r.meets(s, b, before)
	case a.Law.Name == Polynomial || before == 0:
		return "write to_velocity: matched" + in(first) + insteadOfLaw(a)
	case b.Law.Name == Polynomial || after == 0:
		return "write from_velocity: matched" + in(second) + insteadOfLaw(b)
	}
	return fmt.Sprintf("put a %s between them without a law: {%s: , over: , from_velocity: matched, to_velocity: matched}", a.Kind, a.Kind)
}

// insteadOfLaw adds that the event's law goes out, where it has one.
func insteadOfLaw(e Event) string {
	if e.Law.Name == Polynomial {
		return ""
	}
	return " in place of its law"
}

// speed prints a velocity with six significant digits.
func speed(x float64) string { return fmt.Sprintf("%.6g", x+0) }

// endSpeeds returns the velocity of an event at its two ends, lift per degree. A
// fall is h S(1-u): the law's ends change places and the sign turns.
func (r *reader) endSpeeds(e Event) (start, end float64) {
	if e.Kind == Dwell {
		return 0, 0
	}
	if e.FromVelocity != nil || e.ToVelocity != nil || e.Law.Name == Polynomial {
		return given(e.FromVelocity), given(e.ToVelocity)
	}
	if r.vocabulary.EndSpeeds == nil {
		return 0, 0
	}
	start, end = r.vocabulary.EndSpeeds(e.Law)
	mean := e.Lift / e.Over
	if e.Kind == Fall {
		return -mean * end, -mean * start
	}
	return mean * start, mean * end
}

// given returns a velocity, or 0 for one that was left out.
func given(v *float64) float64 {
	if v == nil {
		return 0
	}
	return *v
}
