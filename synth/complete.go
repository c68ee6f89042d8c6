package synth

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"lobewright/synth/gate"
	"lobewright/synth/motion"
	"lobewright/synth/partial"
	"lobewright/synth/spec"
)

// completed is a motion made from a spec, in whichever of its forms it is given, and what
// is to be said of the making.
type completed struct {
	cycle      *motion.Cycle
	completion *Completion // of facts
	smoothed   *smoothed   // of a table
}

func complete(s *spec.Spec) (completed, error) {
	switch {
	case len(s.Motion.Points) > 0:
		return fromPoints(s)
	case s.Motion.Table != nil:
		return fromTable(s)
	}
	cycle, err := fromEvents(s)
	return completed{cycle: cycle}, err
}

// Completion tells how near to the optimum a motion is that was completed from facts.
// Peaks are at the camshaft's speed: length/s² and length/s³.
type Completion struct {
	Jerk      bool    // the peak jerk was minimized, else the peak acceleration
	Reached   float64 // the peak that was minimized
	Least     float64 // no motion that meets the facts has a smaller one: a proven bound
	JerkLimit float64 // the jerk was held to this; +Inf when it was minimized
	LeastJerk float64 // no motion that meets the facts has a smaller peak jerk
}

// Share returns by how much the peak reached may exceed the least possible, as a share.
func (c Completion) Share() float64 {
	if c.Reached == 0 {
		return 0
	}
	return c.Reached/c.Least - 1
}

// Completion returns how the motion was completed, or nil when nothing was left to
// complete.
func (c *Cam) Completion() *Completion { return c.completion }

func fromPoints(s *spec.Spec) (completed, error) {
	facts := make([]partial.Fact, len(s.Motion.Points))
	for i, f := range s.Motion.Points {
		facts[i] = partial.Fact{From: f.From, To: f.To, Lift: f.Lift, Velocity: f.Velocity, Acceleration: f.Acceleration, Above: f.Above, Below: f.Below, ID: i}
	}
	if conflict := partial.Conflict(facts); conflict != nil {
		return completed{}, conflictFault(s, conflict)
	}
	m := s.Motion
	r, err := partial.Solve(partial.Problem{Facts: facts, Jerk: m.LeastJerk, JerkRatio: m.JerkRatio})
	if errors.Is(err, partial.ErrTooHard) {
		a, b := closest(m.Points)
		return completed{}, spec.Faults{{File: s.File, Line: a.Place.Line, Column: a.Place.Column, Path: "motion.points",
			Found:   fmt.Sprintf("facts too hard to meet (the closest two are at cam angles %.6g and %.6g)", a.From, b.From),
			Allowed: "facts that a follower could be carried through", Advice: "leave more degrees between them, or take one out"}}
	}
	if err != nil {
		return completed{}, fmt.Errorf("%s:%d:%d: motion.points: %w", s.File, m.Place.Line, m.Place.Column, err)
	}
	cycle, err := motion.Of(r.Zones)
	if err != nil {
		return completed{}, fmt.Errorf("%s:%d:%d: motion.points: %w", s.File, m.Place.Line, m.Place.Column, err)
	}
	w := s.Camshaft.Speed * 6 // degrees a second
	c := &Completion{Jerk: m.LeastJerk, Reached: r.Acceleration * w * w, Least: r.LeastAcceleration * w * w,
		JerkLimit: r.JerkLimit * w * w * w, LeastJerk: r.LeastJerk * w * w * w}
	if m.LeastJerk {
		c.Reached, c.Least = r.Jerk*w*w*w, c.LeastJerk
	}
	return completed{cycle: cycle, completion: c}, nil
}

// closest returns the two neighbors in cam angle with the least room between them.
func closest(facts []spec.Fact) (a, b spec.Fact) {
	sorted := slices.Clone(facts)
	slices.SortStableFunc(sorted, func(p, q spec.Fact) int {
		switch {
		case p.From < q.From:
			return -1
		case p.From > q.From:
			return 1
		}
		return 0
	})
	least := math.Inf(1)
	a, b = sorted[0], sorted[0]
	for i := range sorted {
		p, q := sorted[i], sorted[(i+1)%len(sorted)]
		room := q.From - p.To
		if room <= 0 {
			room += 360
		}
		if room > 1e-9 && room < least {
			least, a, b = room, p, q
		}
	}
	return a, b
}

// conflictFault names a set of facts that no motion can meet.
func conflictFault(s *spec.Spec, conflict []partial.Fact) error {
	var words []string
	first := spec.Place{Line: s.Motion.Place.Line, Column: s.Motion.Place.Column}
	found := false
	for _, f := range conflict {
		if f.ID == partial.Floor {
			words = append(words, "the lift is nowhere below 0 (implied)")
			continue
		}
		p := s.Motion.Points[f.ID]
		if !found || p.Place.Line < first.Line || p.Place.Line == first.Line && p.Place.Column < first.Column {
			first, found = p.Place, true
		}
		words = append(words, fmt.Sprintf("line %d (%s)", p.Place.Line, factText(p, s)))
	}
	text := "facts that no motion can meet together: " + strings.Join(words, "; ")
	advice := "change one of them: without any one of these the others can be met"
	if len(words) == 1 {
		text, advice = "a fact that no motion can meet: "+words[0], "change it"
	}
	return spec.Faults{{File: s.File, Line: first.Line, Column: first.Column, Path: "motion.points", Found: text, Advice: advice}}
}

// factText says a fact in words.
func factText(f spec.Fact, s *spec.Spec) string {
	u, w := liftUnit(s), s.Camshaft.Speed*6
	var parts []string
	add := func(x *float64, scale float64, format string) {
		if x != nil {
			parts = append(parts, fmt.Sprintf(format, *x*scale))
		}
	}
	at := fmt.Sprintf("at %g°", f.From)
	lift, velocity := "lift %.6g "+u, "velocity %.6g "+u+"/s"
	if !f.Point {
		at = fmt.Sprintf("from %g° to %g°", f.From, math.Mod(f.To, 360))
		if f.To == 360 {
			at = fmt.Sprintf("from %g° to 360°", f.From)
		}
		lift, velocity = "held at "+lift, "carried at "+velocity
	}
	add(f.Lift, 1, lift)
	add(f.Velocity, w, velocity)
	add(f.Acceleration, w*w, "acceleration %.6g "+u+"/s²")
	add(f.Above, 1, "above %.6g "+u)
	add(f.Below, 1, "below %.6g "+u)
	return at + ": " + strings.Join(parts, ", ")
}

// completionFinding says what was minimized and how near to the least possible it is.
func (c *Cam) completionFinding() *gate.Finding {
	k := c.completion
	if k == nil || k.Reached == 0 {
		return nil
	}
	what, unit, u := "acceleration", "/s²", c.LiftUnit()
	if k.Jerk {
		what, unit = "jerk", "/s³"
	}
	text := fmt.Sprintf("the motion was completed from %d facts with the least peak %s: %.5g %s%s reached, and no motion that meets the facts can have less than %.5g (proven), so it is within %.2g %% of the optimum",
		len(c.spec.Motion.Points), what, k.Reached, u, unit, k.Least, 100*k.Share())
	if !k.Jerk {
		text += fmt.Sprintf("; the jerk was held to %.5g %s/s³, %.4g times a proven least of %.5g", k.JerkLimit, u, k.JerkLimit/k.LeastJerk, k.LeastJerk)
	}
	return &gate.Finding{ID: "completed-motion", CamAngle: math.NaN(), Text: text}
}
