package motion

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// An opened cycle is the same motion: at any cam angle lift and derivatives are those of before,
// its zones cover one turn in order, begin above -360 and at most at 0, and begin in the middle
// of a dwell where there is one at the lowest lift.
func TestOpened(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		law, err := Named("modified-sine", 0)
		if err != nil {
			t.Fatal(err)
		}
		over := rapid.Float64Range(40, 100)
		rise, fall, high := over.Draw(t, "rise"), over.Draw(t, "fall"), rapid.Float64Range(5, 60).Draw(t, "high")
		events := []Event{{Kind: Rise, Lift: 10, Over: rise, Law: law}, {Kind: Dwell, Over: high}, {Kind: Fall, Lift: 10, Over: fall, Law: law},
			{Kind: Dwell, Over: 360 - rise - fall - high}}
		turned := rapid.IntRange(0, 3).Draw(t, "first")
		events = append(events[turned:len(events):len(events)], events[:turned]...)
		low := []float64{0, 10, 10, 0}[turned]
		c, err := Join(rapid.Float64Range(0, 359).Draw(t, "start"), low, events)
		if err != nil {
			t.Fatal(err)
		}
		d := c.Opened()
		zones := d.Zones()
		if first := zones[0].From; !(first > -360 && first <= 0) || zones[len(zones)-1].To != first+360 {
			t.Fatalf("from %v to %v", first, zones[len(zones)-1].To)
		}
		for i, z := range zones {
			if i > 0 && z.From != zones[i-1].To {
				t.Fatalf("zone %d begins at %v, the one before ends at %v", i, z.From, zones[i-1].To)
			}
		}
		if !zones[0].Dwell || !zones[len(zones)-1].Dwell || zones[0].Poly[0] != 0 || math.Abs(zones[0].To-zones[0].From-(zones[len(zones)-1].To-zones[len(zones)-1].From)) > 1e-9 {
			t.Fatalf("not opened in the middle of the low dwell: %+v", zones)
		}
		at := rapid.Float64Range(-400, 800).Draw(t, "at")
		s, v, a, _ := c.At(at)
		s2, v2, a2, _ := d.At(at)
		if math.Abs(s-s2) > 1e-9 || math.Abs(v-v2) > 1e-7 || math.Abs(a-a2) > 1e-4 {
			t.Fatalf("at %v: %v %v %v, before %v %v %v", at, s2, v2, a2, s, v, a)
		}
	})
}
