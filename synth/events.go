package synth

import (
	"fmt"

	"lobewright/synth/motion"
	"lobewright/synth/spec"
)

func lawOf(l spec.Law) (motion.Law, error) {
	if l.Name == "trigonometric" {
		return motion.Trigonometric(l.Sine, l.Constant, l.Cosine)
	}
	return motion.Named(l.Name, l.ConstantShare)
}

// halfLaws are the laws that can be run by half, with the speed they reach.
func halfLaws() []spec.HalfLaw {
	var half []spec.HalfLaw
	for _, name := range motion.HalfNames() {
		if l, err := motion.FromRest(name); err == nil {
			_, speed := l.EndSpeeds()
			half = append(half, spec.HalfLaw{Name: name, Speed: speed})
		}
	}
	return half
}

// eventLaw returns the law of a rise or fall, in the law's own direction: a fall runs it
// backwards, so that its start is the law's end.
func eventLaw(e spec.Event) (motion.Law, error) {
	from, to, inflection := e.FromVelocity, e.ToVelocity, e.Inflection
	unit := e.Over / e.Lift // of velocities in units of lift over angle
	if e.Kind == spec.Fall {
		from, to, inflection, unit = to, from, 1-inflection, -unit
	}
	switch {
	case e.Law.Name == spec.Polynomial:
		return motion.Polynomial(velocity(from)*unit, velocity(to)*unit)
	case from != nil && to != nil:
		return motion.Law{}, fmt.Errorf("half the law %s has one end at rest; it has from_velocity and to_velocity", e.Law.Name)
	case to != nil:
		return motion.FromRest(e.Law.Name)
	case from != nil:
		return motion.ToRest(e.Law.Name)
	}
	law, err := lawOf(e.Law)
	if err != nil || e.Inflection == 0 {
		return law, err
	}
	return law.Skewed(inflection)
}

// velocity returns a velocity, or 0 for one that was not given.
func velocity(v *float64) float64 {
	if v == nil {
		return 0
	}
	return *v
}

func fromEvents(s *spec.Spec) (*motion.Cycle, error) {
	events := make([]motion.Event, len(s.Motion.Events))
	for i, e := range s.Motion.Events {
		events[i] = motion.Event{Kind: kindOf(e.Kind), Lift: e.Lift, Over: e.Over}
		if e.Kind == spec.Dwell {
			continue
		}
		law, err := eventLaw(e)
		if err != nil {
			return nil, fmt.Errorf("%s:%d:%d: motion.events[%d]: %w", s.File, e.Law.Place.Line, e.Law.Place.Column, i+1, err)
		}
		events[i].Law = law
	}
	cycle, err := motion.Join(s.Motion.StartAt, s.Motion.StartLift, events)
	if err != nil {
		return nil, fmt.Errorf("%s:%d:%d: %w", s.File, s.Motion.Place.Line, s.Motion.Place.Column, err)
	}
	return cycle, belowZero(s, cycle)
}

// roundLift is how far below 0 rounding may take a lift, as a share of the largest: what the
// spec's reader allows in sums of lifts.
const roundLift = 1e-9

// belowZero refuses a motion that goes below lift 0, which a polynomial may do between
// ends that do not.
func belowZero(s *spec.Spec, cycle *motion.Cycle) error {
	if cycle.MinLift() >= -roundLift*cycle.MaxLift() {
		return nil
	}
	at, i := cycle.Lowest()
	e := s.Motion.Events[i]
	return spec.Faults{{File: s.File, Line: e.Place.Line, Column: e.Place.Column, Path: fmt.Sprintf("motion.events[%d]", i+1),
		Found:   fmt.Sprintf("a lift of %.6g %s at cam angle %.6g, the lowest of this %s", cycle.MinLift(), liftUnit(s), camAngle(at), e.Kind),
		Allowed: "lifts of 0 or more: lift 0 is the lowest of the cycle",
		Advice:  "a smaller velocity at its ends, a larger lift or a shorter angle brings it up, or a higher motion.start_lift"}}
}
