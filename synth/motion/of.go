package motion

import (
	"fmt"
	"math"
)

// Of returns the cycle of zones that were made elsewhere: from partial facts or from a
// table. They must cover one turn, each beginning where the one before ends, the first
// at 0 <= From < 360, and be finite. Their Event should be -1: they belong to no event.
//
// Of does not refuse a step between zones: see Junctions.
func Of(zones []Zone) (*Cycle, error) {
	if len(zones) == 0 {
		return nil, fmt.Errorf("a cycle needs at least one zone")
	}
	c := &Cycle{min: math.Inf(1), max: math.Inf(-1)}
	for i, z := range zones {
		if i > 0 && z.From != zones[i-1].To {
			return nil, fmt.Errorf("zone %d begins at cam angle %g, the one before ends at %g", i+1, z.From, zones[i-1].To)
		}
		if !(z.From < z.To) || z.Span == 0 {
			return nil, fmt.Errorf("zone %d covers %g to %g with a span of %g", i+1, z.From, z.To, z.Span)
		}
		z = z.scaled(1, 0) // a copy, with at least one coefficient
		lo, hi := z.Lifts()
		if math.IsNaN(lo+hi) || math.IsInf(lo, 0) || math.IsInf(hi, 0) {
			return nil, fmt.Errorf("zone %d is not finite", i+1)
		}
		c.min, c.max = math.Min(c.min, lo), math.Max(c.max, hi)
		c.zones = append(c.zones, z)
	}
	first, last := zones[0].From, zones[len(zones)-1].To
	if !(first >= 0 && first < 360) || math.Abs(last-first-360) > angleSlack {
		return nil, fmt.Errorf("the zones cover cam angles %g to %g; they must cover 360 degrees", first, last)
	}
	c.zones[len(zones)-1].To = first + 360
	return c, nil
}
