package spec

import (
	"fmt"
	"math"
	"slices"
	"strings"
)

// The three forms of a motion.
const (
	eventsForm = "events"
	pointsForm = "points"
	tableForm  = "table"
)

func motionForms() []string { return []string{eventsForm, pointsForm, tableForm} }

func motionTable(v Vocabulary) table[Motion] {
	return table[Motion]{what: "a motion", place: func(m *Motion, p Place) { m.Place = p },
		kinds: motionForms(), kind: motionForm,
		fields: []field[Motion]{
			list("events", "dwells, rises and falls in order of cam angle; their angles sum to 360 degrees and their lifts close",
				eventTable(v), func(r *reader, _ *Motion, all []draft) { r.events = all }).of(eventsForm).required(),
			number("start_at_cam_angle", "cam angle where the first event begins, degrees, default 0", camAngle(),
				func(m *Motion) *float64 { return &m.StartAt }).of(eventsForm),
			number("start_lift", "lift where the first event begins, length, default 0", orNoLength(),
				func(m *Motion) *float64 { return &m.StartLift }).of(eventsForm),
			list("points", "what is known of the motion, all else free; the lift is nowhere below 0",
				factTable(), func(_ *reader, m *Motion, all []Fact) { m.Points = all }).of(pointsForm).required(),
			choice("minimize", "which peak over the cycle is made least, default acceleration", []string{"acceleration", "jerk"}, nil,
				func(m *Motion, w string) { m.LeastJerk = w == "jerk" }).of(pointsForm),
			number("jerk_ratio", "when the acceleration is minimized, the largest peak jerk as a multiple of the least possible, default 2",
				span{noun: "a number", lo: 1, hi: 1000}, func(m *Motion) *float64 { return &m.JerkRatio }).of(pointsForm),
			maybe("table", "a table of cam angle and lift, measured or computed, smoothed", tableTable(), func(m *Motion) **Table { return &m.Table }).of(tableForm).required(),
		}}
}

const defaultJerkRatio = 2

// motionForm finds the one of events, points and table that stands in a motion.
func motionForm(r *reader, w where) (string, bool) {
	var forms []string
	for _, name := range motionForms() {
		if _, ok := w.find(name); ok {
			forms = append(forms, name)
		}
	}
	f := Fault{Path: w.path, Allowed: "exactly one of " + strings.Join(motionForms(), ", ")}
	switch {
	case len(forms) == 1:
		return forms[0], true
	case len(forms) > 1:
		f.Found = "two kinds of motion, " + strings.Join(forms, " and ")
		f.Advice = "take one out"
	default:
		f.Found = "a motion without events, points or table"
		for i := 0; i+1 < len(w.val.Content) && f.Nearest == ""; i += 2 {
			f.Nearest = nearest(w.val.Content[i].Value, motionForms())
		}
	}
	r.fault(w.place(), f)
	return "", false
}

const (
	pointFact = "angle"
	spanFact  = "span"
)

// speedSpan is a rate either way.
func speedSpan(unit string) span {
	return span{noun: "a number in length/" + unit, lo: -mostRate, hi: mostRate}
}

func factTable() table[Fact] {
	return table[Fact]{what: "a fact", kinds: []string{pointFact, spanFact}, kind: factKind,
		place: func(f *Fact, p Place) { f.Place = p }, after: finishFact,
		fields: []field[Fact]{
			number("at_cam_angle", "cam angle, degrees", camAngle(), func(f *Fact) *float64 { return &f.From }).of(pointFact).required(),
			number("from", "cam angle where the span begins, degrees", camAngle(), func(f *Fact) *float64 { return &f.From }).of(spanFact).required(),
			number("to", "cam angle where the span ends, degrees; at or below from, the span passes 0", span{noun: "a cam angle in degrees", lo: 0, hi: fullTurn},
				func(f *Fact) *float64 { return &f.To }).of(spanFact).required(),
			optional("lift", "lift there, or held over the span, length", orNoLength(), func(f *Fact) **float64 { return &f.Lift }),
			optional("velocity", "velocity there, or carried over the span, length/s, positive rising", speedSpan("s"), func(f *Fact) **float64 { return &f.Velocity }),
			optional("acceleration", "acceleration there, length/s²", speedSpan("s²"), func(f *Fact) **float64 { return &f.Acceleration }).of(pointFact),
			optional("above", "the lift stays at or above this over the span, length", orNoLength(), func(f *Fact) **float64 { return &f.Above }).of(spanFact),
			optional("below", "the lift stays at or below this over the span, length", orNoLength(), func(f *Fact) **float64 { return &f.Below }).of(spanFact),
		}}
}

// factKind tells a fact at an angle from one over a span.
func factKind(r *reader, w where) (string, bool) {
	_, at := w.find("at_cam_angle")
	_, from := w.find("from")
	_, to := w.find("to")
	f := Fault{Path: w.path, Allowed: "at_cam_angle, or from and to"}
	switch {
	case at && !from && !to:
		return pointFact, true
	case !at && (from || to):
		return spanFact, true
	case at:
		f.Found, f.Advice = "at_cam_angle beside from or to in one fact", "make it two facts"
	default:
		f.Found = "a fact without a cam angle"
		for i := 0; i+1 < len(w.val.Content) && f.Nearest == ""; i += 2 {
			f.Nearest = nearest(w.val.Content[i].Value, []string{"at_cam_angle", "from", "to"})
		}
	}
	r.fault(w.place(), f)
	return "", false
}

// finishFact holds a fact to saying one thing, and makes a span that passes 0 end
// above 360.
func finishFact(r *reader, w where, f *Fact, whole bool) {
	_, f.Point = w.find("at_cam_angle")
	if !whole {
		return
	}
	fault := func(found, allowed, advice string) {
		r.fault(w.place(), Fault{Path: w.path, Found: found, Allowed: allowed, Advice: advice})
	}
	if f.Point {
		f.To = f.From
		if f.Lift == nil && f.Velocity == nil && f.Acceleration == nil {
			fault("a cam angle of which nothing is said", "any of lift, velocity, acceleration", "")
		}
		return
	}
	if f.To == f.From {
		fault(fmt.Sprintf("a span from %s to %s", figure(f.From), figure(f.To)), "a span of more than 0 degrees", "for a single cam angle write at_cam_angle")
		return
	}
	if f.To < f.From {
		f.To += fullTurn
	}
	window := f.Above != nil || f.Below != nil
	switch {
	case f.Lift == nil && f.Velocity == nil && !window:
		fault("a span of which nothing is said", "lift (held), velocity (carried), or a window: above, below", "")
	case f.Lift != nil && f.Velocity != nil, window && (f.Lift != nil || f.Velocity != nil):
		fault("a span of which several things are said", "lift (held), or velocity (carried), or a window: above, below", "make it two facts")
	}
}

func tableTable() table[Table] {
	return table[Table]{what: "a table", place: func(t *Table, p Place) { t.Place = p }, fields: []field[Table]{
		tableFileField(),
		number("smoothing", "the most a table point may be moved, length", length(), func(t *Table) *float64 { return &t.Smoothing }).required(),
	}}
}

func tableFileField() field[Table] {
	f := text("file", "the table: CSV with a header, cam angle in degrees and lift in the spec's units; its path is taken from the spec's folder",
		func(t *Table) *string { return &t.File })
	set := f.read
	f.read = func(r *reader, w where, t *Table) {
		t.FilePlace = w.place()
		set(r, w, t)
		if t.File == "" && r.ok(w.path) {
			r.wrong(w, "the name of a CSV file", "")
		}
	}
	return f.required()
}

// finishPoints turns velocities per second into those per degree and looks at what
// facts need of one another. The facts' contradictions are not a matter of reading.
func (r *reader) finishPoints(s *Spec) {
	m := &s.Motion
	if len(m.Points) == 0 || !r.ok("motion.points") {
		return
	}
	if m.JerkRatio == 0 {
		m.JerkRatio = defaultJerkRatio
	}
	lifts := slices.ContainsFunc(m.Points, func(f Fact) bool { return f.Lift != nil })
	if !lifts {
		r.faultAtKey("motion.points", Fault{Found: "facts of which none says a lift", Allowed: "at least one fact with lift",
			Advice: "without it the whole motion could be raised at will"})
	}
	if n := len(m.Points); n > mostFacts {
		r.faultAtKey("motion.points", Fault{Found: fmt.Sprintf("%d facts", n), Allowed: fmt.Sprintf("at most %d facts", mostFacts),
			Advice: "a motion known at so many angles is a table: write motion: {table: {file: , smoothing: }}"})
	}
	if _, given := r.places["motion.jerk_ratio"]; given && m.LeastJerk {
		r.faultAt("motion.jerk_ratio", Fault{Found: "jerk_ratio with minimize: jerk", Allowed: "jerk_ratio only with minimize: acceleration", Advice: "take it out"})
	}
	if !r.ok("camshaft.speed") {
		return
	}
	perSecond := s.Camshaft.Speed * fullTurn / 60 // degrees a second
	for i := range m.Points {
		f := &m.Points[i]
		f.Timed = f.Velocity != nil && *f.Velocity != 0 || f.Acceleration != nil && *f.Acceleration != 0
		f.Velocity = scaledBy(f.Velocity, 1/perSecond)
		f.Acceleration = scaledBy(f.Acceleration, 1/(perSecond*perSecond))
	}
}

// mostFacts of a partial specification.
const mostFacts = 100

func scaledBy(x *float64, by float64) *float64 {
	if x == nil {
		return nil
	}
	y := *x * by
	if math.IsInf(y, 0) {
		y = math.Copysign(math.MaxFloat64, y)
	}
	return &y
}
