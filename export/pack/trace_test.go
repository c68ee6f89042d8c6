package pack

import (
	"math"
	"testing"
)

// checkTrace: the deviation chart shows every written path over the whole turn, without gaps, and never
// beyond what was certified.
func checkTrace(t *testing.T, j *job) {
	const rounding = 1e-6 // degrees
	all := []written{j.outline.paths[0]}
	for _, p := range j.programs {
		if p.finish != nil {
			all = append(all, *p.finish)
		}
	}
	for _, w := range all {
		at := 0.0
		for _, run := range j.trace(w.exact, w.path) {
			for _, s := range run {
				if s.CamAngle < at-rounding || s.CamAngle > at+90 {
					t.Fatalf("%s, %s: from %v to %v", w.file, w.curve, at, s.CamAngle)
				}
				if at = s.CamAngle; math.Abs(s.Value) > w.deviation.Bound*(1+rounding) {
					t.Errorf("%s, %s: %v at %v°, certified %v", w.file, w.curve, s.Value, at, w.deviation.Bound)
				}
			}
		}
		if math.Abs(at-360) > 2 {
			t.Errorf("%s, %s: the trace ends at %v°", w.file, w.curve, at)
		}
	}
}

// The chart's scales on the right are per degree of cam angle: at n rpm a degree takes 1/(6 n) s.
func TestScalesPerDegree(t *testing.T) {
	_, j, err := work(readSample(t, samplesFolder+"/stick-lift.yaml"), options())
	if err != nil {
		t.Fatal(err)
	}
	c := j.motionChart(j.head(true))
	const peak = 14 * 1.75960338595 / 90 // mm/deg: modified sine, velocity factor as published (see synth/evidence)
	if got := c.Velocity.Peaks[1].Value * c.Velocity.Second.Factor; math.Abs(got-peak) > 1e-9 || c.Velocity.Second.Unit != "mm/deg" {
		t.Errorf("peak velocity %v %s, want %v mm/deg", got, c.Velocity.Second.Unit, peak)
	}
	const jerk = 14 * 69.4663572887 / (90 * 90 * 90)
	if got := c.Jerk.Peaks[1].Value * c.Jerk.Second.Factor; math.Abs(got-jerk) > 1e-9*jerk || c.Jerk.Second.Unit != "mm/deg³" {
		t.Errorf("peak jerk %v %s, want %v mm/deg³", got, c.Jerk.Second.Unit, jerk)
	}
}
