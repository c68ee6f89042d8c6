package spec

import (
	"fmt"
	"math"
	"slices"
)

// Rounding allowed in sums over a cycle: a thousand events, each rounded once
// at 360 degrees (2^-44 each), stay below it; no written decimal does.
const (
	roundDegrees = 1e-9
	roundShare   = 1e-9 // of the largest lift, or of the largest speed
)

const fullTurn = 360 // degrees

// degreesPerMillisecond of a shaft at one rpm.
const degreesPerMillisecond = fullTurn / 60e3

// finishMotion turns the events read into those of the spec and checks the cycle.
func (r *reader) finishMotion(s *Spec) {
	for i := range r.events {
		r.checkLaw(&r.events[i])
	}
	whole := len(r.events) > 0 && r.ok("motion.events")
	r.finishAngles(s)
	moving := whole && r.ok("camshaft.speed") && r.finishVelocities(s)
	for _, d := range r.events {
		s.Motion.Events = append(s.Motion.Events, d.Event)
	}
	r.finishPoints(s)
	if whole && r.ok("motion.start_lift") {
		r.checkLifts(s)
	}
	if moving && r.vocabulary.EndSpeeds != nil {
		r.checkSpeeds(s)
	}
}

// finishAngles converts times, gives rest its angle and holds the sum to 360
// degrees.
func (r *reader) finishAngles(s *Spec) {
	path := "motion.events"
	rests, timed, sum := 0, false, 0.0
	for i := range r.events {
		d := &r.events[i]
		if d.rest {
			if rests++; rests > 1 {
				r.faultAt(d.where.path+".dwell", Fault{Found: "rest a second time", Allowed: "one rest in a cycle",
					Advice: "write an angle here, or in the other"})
			}
		}
		if d.Timed {
			timed = true
			d.Over = d.ms * s.Camshaft.Speed * degreesPerMillisecond
		}
		sum += d.Over
	}
	if len(r.events) == 0 || !r.ok(path) || timed && !r.ok("camshaft.speed") {
		return
	}
	missing := fullTurn - sum
	if i := slices.IndexFunc(r.events, func(d draft) bool { return d.rest }); i >= 0 {
		r.events[i].Over = missing
		if missing <= roundDegrees {
			r.faultAt(r.events[i].where.path+".dwell", Fault{
				Found:   fmt.Sprintf("a rest of %s degrees: the other events sum to %s", figure(tidy(missing)), figure(tidy(sum))),
				Allowed: "a rest above 0 degrees", Advice: "shorten the other events, or take the rest out"})
		}
	} else if math.Abs(missing) > roundDegrees {
		f := Fault{Found: "events that sum to " + figure(tidy(sum)) + " degrees", Allowed: "a sum of 360 degrees"}
		if missing > 0 {
			f.Advice = figure(tidy(missing)) + " degrees are missing: lengthen an event, or write dwell: rest"
		} else {
			f.Advice = figure(tidy(-missing)) + " degrees are too much: shorten an event"
		}
		r.faultAtKey(path, f)
	}
}

// tidy takes rounding errors off a sum of written decimals.
func tidy(x float64) float64 {
	const decimals = 1e9
	return math.Round(x*decimals)/decimals + 0
}

// checkLifts holds the lift to 0 or above at every event's end, and the cycle closed.
func (r *reader) checkLifts(s *Spec) {
	largest := s.Motion.StartLift
	for _, e := range s.Motion.Events {
		largest = max(largest, e.Lift)
	}
	tolerance := largest * roundShare
	var up, down float64
	for i, e := range s.Motion.Events {
		switch e.Kind {
		case Rise:
			up += e.Lift
		case Fall:
			down += e.Lift
		}
		if lift := s.Motion.StartLift + up - down; e.Kind == Fall && lift < -tolerance {
			r.faultAt(fmt.Sprintf("motion.events[%d].fall", i+1), Fault{
				Found:   fmt.Sprintf("a lift of %s %s where this fall ends", figure(tidy(lift)), s.Units),
				Allowed: "lifts of 0 or more: lift 0 is the lowest of the cycle",
				Advice:  "make the fall smaller, or say a higher motion.start_lift"})
		}
	}
	if open := up - down; math.Abs(open) > tolerance {
		word := "above"
		if open < 0 {
			word = "below"
		}
		r.faultAtKey("motion.events", Fault{
			Found: fmt.Sprintf("lifts that do not close: rises of %s and falls of %s end the cycle %s %s %s its start",
				figure(tidy(up)), figure(tidy(down)), figure(tidy(math.Abs(open))), s.Units, word),
			Allowed: "rises and falls of the same sum"})
	}
}
