package motion

import (
	"errors"
	"fmt"
	"math"
	"sort"

	"lobewright/synth/taylor"
)

// Kind says what an event does.
type Kind uint8

const (
	Dwell Kind = iota
	Rise
	Fall
)

// String returns "dwell", "rise" or "fall".
func (k Kind) String() string {
	switch k {
	case Dwell:
		return "dwell"
	case Rise:
		return "rise"
	case Fall:
		return "fall"
	}
	return fmt.Sprintf("kind %d", uint8(k))
}

// Event is one stretch of a cycle.
type Event struct {
	Kind Kind
	Lift float64 // length, above 0; not used by a dwell
	Over float64 // degrees of cam angle, above 0
	Law  Law     // not used by a dwell; a fall runs it backwards, h*S(1-u)
}

const (
	// angleSlack is how far the events' angles may sum from 360 degrees: dozens of
	// angles each written with ten decimals or computed from a time.
	angleSlack = 1e-9
	// liftSlack is how far lifts may miss closing, or two levels meant to be equal
	// may differ, as a share of the largest lift: decimal fractions added up as floats.
	liftSlack = 1e-12
)

// Cycle is the lift over one turn of the cam, in zones that follow each other from
// t0 to t0+360 degrees of cam angle. It is not changed after Join.
type Cycle struct {
	zones    []Zone
	min, max float64
}

// Join puts events one after the other, the first beginning at cam angle startAt
// (degrees, 0 <= startAt < 360) and lift startLift (length), and returns the
// cycle. Angles must sum to 360 within 1e-9 and the lifts must close within
// 1e-12 of the largest; what is missing is taken up by the last event's end.
//
// Adjacent dwells become one zone, which carries the index of the first of them.
// Where the last event and the first are both dwells, they become the cycle's
// first zone, which begins where the last event begins less 360: t0 is then below
// startAt, and may be negative. Otherwise t0 is startAt.
//
// Join does not refuse a step of velocity or a lift below 0: see Junctions and
// MinLift. Its errors are of events, counted from 1.
func Join(startAt, startLift float64, events []Event) (*Cycle, error) {
	if !(startAt >= 0 && startAt < 360) {
		return nil, fmt.Errorf("the first event begins at cam angle %g; it must be at least 0 and below 360", startAt)
	}
	if math.IsNaN(startLift) || math.IsInf(startLift, 0) {
		return nil, fmt.Errorf("the lift at the start is %g; it must be a number", startLift)
	}
	if err := check(events); err != nil {
		return nil, err
	}
	levels, err := liftLevels(startLift, events)
	if err != nil {
		return nil, err
	}
	c := &Cycle{min: levels[0], max: levels[0]}
	for _, l := range levels {
		c.min, c.max = math.Min(c.min, l), math.Max(c.max, l)
	}
	angles := boundaries(startAt, events)
	for i, e := range events {
		c.add(e.zones(i, angles[i], angles[i+1], levels[i], levels[i+1]))
		if e.Kind != Dwell && (e.Law.below > 0 || e.Law.above > 0) {
			low, h := math.Min(levels[i], levels[i+1]), math.Abs(levels[i+1]-levels[i])
			c.min, c.max = math.Min(c.min, low-h*e.Law.below), math.Max(c.max, low+h+h*e.Law.above)
		}
	}
	c.wrap()
	return c, nil
}

// check reports every event that is no event, and angles that do not sum to 360.
func check(events []Event) error {
	var errs []error
	sum := 0.0
	for i, e := range events {
		switch {
		case e.Kind > Fall:
			errs = append(errs, fmt.Errorf("event %d: %v is not known; an event is a dwell, a rise or a fall", i+1, e.Kind))
		case !(e.Over > 0 && e.Over <= 360+angleSlack):
			errs = append(errs, fmt.Errorf("event %d (%v) covers %g degrees; it must cover more than 0 and at most 360", i+1, e.Kind, e.Over))
		case e.Kind != Dwell && !(e.Lift > 0 && !math.IsInf(e.Lift, 1)):
			errs = append(errs, fmt.Errorf("event %d (%v) has lift %g; it must be above 0", i+1, e.Kind, e.Lift))
		case e.Kind != Dwell && len(e.Law.zones) == 0:
			errs = append(errs, fmt.Errorf("event %d (%v) has no law", i+1, e.Kind))
		}
		sum += e.Over
	}
	if len(errs) == 0 && !(math.Abs(sum-360) <= angleSlack) {
		errs = append(errs, fmt.Errorf("the events cover %.10g degrees; they must cover 360", sum))
	}
	return errors.Join(errs...)
}

// liftLevels returns the lift before each event and after the last. A level that
// equals an earlier one but for rounding is made equal to it.
func liftLevels(start float64, events []Event) ([]float64, error) {
	out, largest := []float64{start}, math.Abs(start)
	for _, e := range events {
		l := out[len(out)-1]
		switch e.Kind {
		case Rise:
			l += e.Lift
		case Fall:
			l -= e.Lift
		}
		largest = math.Max(largest, math.Max(math.Abs(l), e.Lift))
		for _, earlier := range out {
			if math.Abs(l-earlier) <= liftSlack*largest {
				l = earlier
				break
			}
		}
		out = append(out, l)
	}
	if end := out[len(out)-1]; end != start {
		return nil, fmt.Errorf("the lift begins at %g and ends at %g; rises and falls must close", start, end)
	}
	return out, nil
}

// boundaries returns the cam angle before each event and after the last, which is
// exactly 360 after the first.
func boundaries(start float64, events []Event) []float64 {
	out, sum := []float64{start}, 0.0
	for _, e := range events {
		sum += e.Over
		out = append(out, start+sum)
	}
	out[len(events)] = start + 360
	return out
}

// zones returns the event's zones between two cam angles and two lifts.
func (e Event) zones(index int, from, to, before, after float64) []Zone {
	if e.Kind == Dwell {
		return []Zone{{From: from, To: to, Origin: from, Span: to - from, Poly: []float64{before}, Dwell: true, Event: index}}
	}
	origin, over, base := from, to-from, before
	if e.Kind == Fall { // the law run backwards in time
		origin, over, base = to, from-to, after
	}
	n := len(e.Law.zones)
	out := make([]Zone, n)
	for i, z := range e.Law.zones {
		z = z.moved(origin, over).scaled(math.Abs(after-before), base)
		z.Event = index
		if e.Kind == Fall {
			i = n - 1 - i
		}
		out[i] = z
	}
	out[0].From, out[n-1].To = from, to
	for i := 1; i < n; i++ {
		out[i].From = out[i-1].To
	}
	return out
}

// add appends zones, merging a dwell with a dwell before it.
func (c *Cycle) add(zones []Zone) {
	if n := len(c.zones); n > 0 && c.zones[n-1].Dwell && zones[0].Dwell {
		last := &c.zones[n-1]
		last.To = zones[0].To
		last.Span = last.To - last.From
		return
	}
	c.zones = append(c.zones, zones...)
}

// wrap merges a last dwell into a first one.
func (c *Cycle) wrap() {
	n := len(c.zones)
	if n < 2 || !c.zones[0].Dwell || !c.zones[n-1].Dwell {
		return
	}
	first := &c.zones[0]
	first.From = c.zones[n-1].From - 360
	first.Origin, first.Span = first.From, first.To-first.From
	c.zones = c.zones[:n-1]
	c.zones[n-2].To = first.From + 360
}

// Zones returns the zones in order of cam angle, each beginning where the one
// before ends, from t0 to t0+360. The caller owns the slice, but shares the
// coefficients, which are not to be changed.
func (c *Cycle) Zones() []Zone { return append([]Zone(nil), c.zones...) }

// Zone brings any cam angle (degrees, finite) into t0 <= t < t0+360 and returns the
// index of the zone that holds it; at a boundary, of the zone that begins there.
func (c *Cycle) Zone(deg float64) (zone int, t float64) {
	t0 := c.zones[0].From
	t = math.Mod(deg-t0, 360)
	if t < 0 {
		t += 360
	}
	if t += t0; t >= t0+360 {
		t = t0
	}
	if deg >= t0 && deg < t0+360 {
		t = deg // not put through the subtraction and addition
	}
	zone = sort.Search(len(c.zones)-1, func(i int) bool { return t < c.zones[i].To })
	return zone, t
}

// At returns lift, velocity, acceleration and jerk at a cam angle (degrees, any):
// length, and length per rad, rad² and rad³. At a boundary it answers for the
// zone that begins there.
func (c *Cycle) At(deg float64) (lift, velocity, acceleration, jerk float64) {
	zone, t := c.Zone(deg)
	f := Eval(c.zones[zone], taylor.FVar(t))
	return f.Deriv(0), perRad(f, 1), perRad(f, 2), perRad(f, 3)
}

// perRad returns the k-th derivative per radian of a series in degrees.
func perRad(f taylor.F, k int) float64 { return f.Deriv(k) * degreesPerRad(k) }

// degreesPerRad returns (180/π)^k.
func degreesPerRad(k int) float64 { return math.Pow(180/math.Pi, float64(k)) }
