package tolerance_test

import (
	"math"
	"testing"

	"lobewright/tolerance"
)

// A 3-4-5 triangle and a fixed share, added by hand.
func TestSum(t *testing.T) {
	b := tolerance.Sum([]tolerance.Share{tolerance.OnContour("chord", 0.002, tolerance.Fixed, tolerance.Turn), tolerance.OnContour("positioning", 0.003, tolerance.Variable, tolerance.Turn), tolerance.OnContour("runout", 0.004, tolerance.Variable, tolerance.Turn)}, 0.020, tolerance.FixedPlusRSS)
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"worst case", b.WorstCase, 0.009},
		{"rss", b.RSS, math.Sqrt(29) / 1000},
		{"fixed plus rss", b.FixedPlusRSS, 0.007},
		{"limit", b.Limit, 0.010},
	} {
		if math.Abs(c.got-c.want) > 1e-15 {
			t.Errorf("%s: got %v, want %v", c.name, c.got, c.want)
		}
	}
	if !b.Pass() {
		t.Error("0.007 of 0.010 must pass")
	}
}

func TestChord(t *testing.T) {
	machine := []tolerance.Share{tolerance.OnContour("positioning", 0.006, tolerance.Variable, tolerance.Turn), tolerance.OnContour("runout", 0.008, tolerance.Variable, tolerance.Turn)}
	for _, c := range []struct {
		profile float64
		rule    tolerance.Rule
		want    float64 // negative: nothing left
	}{
		{0.1, tolerance.FixedPlusRSS, 0.01},    // capped at a tenth of the zone
		{0.024, tolerance.FixedPlusRSS, 0.002}, // 0.012 - 0.010
		{0.030, tolerance.Worst, 0.001},        // 0.015 - 0.014
		{0.020, tolerance.FixedPlusRSS, 0},     // just nothing
		{0.018, tolerance.FixedPlusRSS, -1},
	} {
		got, err := tolerance.Chord(machine, c.profile, c.rule)
		if c.want < 0 {
			if err == nil {
				t.Errorf("profile %v: got chord %v, want an error", c.profile, got)
			}
			continue
		}
		if err != nil || math.Abs(got-c.want) > 1e-12 {
			t.Errorf("profile %v, %s: got %v, %v, want %v", c.profile, c.rule, got, err, c.want)
		}
	}
}
