package motion

import "math"

// Opened returns the same motion with its zones counted from the middle of the longest
// lowest dwell on, of which either half becomes a zone of its own: where a curve that is
// developed is best cut open. Without a dwell at the lowest lift of all dwells the motion is
// returned as it is. The first cam angle is then above -360 and at most 0.
func (c *Cycle) Opened() *Cycle {
	at := -1
	for i, z := range c.zones {
		if !z.Dwell {
			continue
		}
		if at < 0 || z.Poly[0] < c.zones[at].Poly[0] || z.Poly[0] == c.zones[at].Poly[0] && z.To-z.From > c.zones[at].To-c.zones[at].From {
			at = i
		}
	}
	if at < 0 || len(c.zones) < 2 {
		return c
	}
	cut := c.zones[at]
	middle := (cut.From + cut.To) / 2
	second, first := cut, cut
	second.From, second.Origin, second.Span = middle, middle, cut.To-middle
	first.To, first.Span = middle, middle-cut.From
	d := &Cycle{min: c.min, max: c.max, zones: []Zone{second}}
	d.zones = append(d.zones, c.zones[at+1:]...)
	for _, z := range append(append([]Zone(nil), c.zones[:at]...), first) {
		z.From, z.To, z.Origin = z.From+360, z.To+360, z.Origin+360
		d.zones = append(d.zones, z)
	}
	for i := 1; i < len(d.zones); i++ { // adding a turn rounds
		d.zones[i].From = d.zones[i-1].To
	}
	if turns := 360 * math.Ceil(middle/360); turns > 0 { // so that cam angle 0 lies within
		for i := range d.zones {
			z := &d.zones[i]
			z.From, z.To, z.Origin = z.From-turns, z.To-turns, z.Origin-turns
		}
	}
	d.zones[len(d.zones)-1].To = d.zones[0].From + 360
	return d
}
