package smooth_test

import (
	"fmt"
	"math"
	"testing"

	"lobewright/synth/smooth"
)

// The tables are made from laws known in closed form (lobewright/synth/motion) and rounded
// as a table would be. What is asked is what a designer would ask: the lift within twice
// the last place, the acceleration within 3 % of its peak over 95 % of the turn, though at
// the ends of rise and fall the jerk of most of these laws jumps; few pieces; flat dwells.

type recovery struct {
	rise, fall string
	lift       float64
	rows       int
	place      float64
	smoothing  float64
	within     float64 // share of the turn asked for
	pieces     int     // at most
}

func (r recovery) String() string {
	return fmt.Sprintf("%s %s lift %g rows %d place %g smoothing %g", r.rise, r.fall, r.lift, r.rows, r.place, r.smoothing)
}

func recoveries() []recovery {
	var out []recovery
	for _, laws := range [][2]string{
		{"modified-sine", "polynomial-3-4-5"}, {"polynomial-3-4-5", "modified-sine"}, {"cycloidal", "polynomial-4-5-6-7"},
		{"modified-trapezoidal", "cycloidal"}, {"polynomial-4-5-6-7", "modified-trapezoidal"},
	} {
		for _, lift := range []float64{5, 12, 20, 50} {
			for _, smoothing := range []float64{0.001, 0.002} {
				out = append(out, recovery{laws[0], laws[1], lift, 360, 0.001, smoothing, 0.95, 44})
			}
		}
		for _, lift := range []float64{0.5, 1, 2} { // inches
			out = append(out, recovery{laws[0], laws[1], lift, 360, 0.0001, 0.0002, 0.95, 44})
		}
		out = append(out, recovery{laws[0], laws[1], 20, 3600, 0.001, 0.002, 0.95, 40})
		out = append(out, recovery{laws[0], laws[1], 20, 360, 0, 0.002, 0.97, 36}) // in full
	}
	return out
}

func TestRecoversALaw(t *testing.T) {
	for _, r := range recoveries() {
		c := cycle(t, r.rise, r.fall, r.lift, 20, 90, 60, 80)
		curve, report, err := smooth.Fit(tabulated(c, r.rows, 0, r.place), r.smoothing)
		if err != nil {
			t.Errorf("%v: %v", r, err)
			continue
		}
		e := compare(c, curve)
		t.Logf("%v: %d pieces, lift error %.5f, acceleration within 3 %% over %.2f %%, error rms %.4g floor %.4g", r, report.Pieces, e.lift, 100*e.within, e.rms, report.Floor.RMS)
		if limit := max(2*r.place, r.smoothing); e.lift > limit {
			t.Errorf("%v: lift is off by %g, want at most %g", r, e.lift, limit)
		}
		if e.within < r.within {
			t.Errorf("%v: acceleration is right over %.2f %% of the turn", r, 100*e.within)
		}
		if report.Pieces > r.pieces {
			t.Errorf("%v: %d pieces, want at most %d", r, report.Pieces, r.pieces)
		}
		if ratio := report.Floor.RMS / e.rms; ratio < 1./8 || ratio > 6 {
			t.Errorf("%v: acceleration is off by %g rms, the report says %g", r, e.rms, report.Floor.RMS)
		}
		if e.lowest < 0 {
			t.Errorf("%v: dips to %g", r, e.lowest)
		}
		if report.Coarse || report.Dwells != 2 {
			t.Errorf("%v: coarse %v, %d dwells", r, report.Coarse, report.Dwells)
		}
		if most := largest(report.Residual); most > r.smoothing+1e-12 || most != math.Abs(report.Moved.Residual) {
			t.Errorf("%v: moved a row by %g, smoothing %g, says %g", r, most, r.smoothing, report.Moved.Residual)
		}
	}
}

func largest(v []float64) (most float64) {
	for _, x := range v {
		most = max(most, math.Abs(x))
	}
	return most
}

// A dwell is level to the bit, at what its rows say, over all but the few degrees in which
// the lift cannot be told from it: below half the last place, lift = jerk*angle³/6 is 1.4
// degrees at most for these rises.
func TestDwellsAreFlat(t *testing.T) {
	const lift, most = 20, 4.0
	c := cycle(t, "modified-sine", "polynomial-3-4-5", lift, 20, 90, 60, 80)
	curve, _, err := smooth.Fit(tabulated(c, 360, 0, 0.001), 0.002)
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []struct{ from, to, level float64 }{{110, 170, lift}, {250, 380, 0}} {
		found := false
		for _, p := range curve.Pieces {
			if len(p.Poly) != 1 || p.Poly[0] != want.level {
				continue
			}
			found = true
			if math.Abs(p.From-want.from) > most || math.Abs(p.To-want.to) > most {
				t.Errorf("level %g from %g to %g, want about %g to %g", want.level, p.From, p.To, want.from, want.to)
			}
		}
		if !found {
			t.Errorf("no piece at level %g", want.level)
		}
	}
}

// The smoothing of half the last place is the least a rounded table can be recovered with,
// and the whole of the rounding is then on the limit.
func TestSmoothingOfHalfTheLastPlace(t *testing.T) {
	c := cycle(t, "modified-sine", "polynomial-3-4-5", 20, 20, 90, 60, 80)
	curve, report, err := smooth.Fit(tabulated(c, 360, 0, 0.001), 0.0005)
	if err != nil {
		t.Fatal(err)
	}
	e := compare(c, curve)
	t.Logf("%d pieces, lift error %.5f, acceleration within 3 %% over %.2f %%", report.Pieces, e.lift, 100*e.within)
	if most := largest(report.Residual); most > 0.0005+1e-12 {
		t.Errorf("moved a row by %g", most)
	}
	if e.lift > 0.002 || e.within < 0.95 || report.Pieces > 50 {
		t.Errorf("lift error %g, acceleration right over %.2f %%, %d pieces", e.lift, 100*e.within, report.Pieces)
	}
}

// A step of acceleration cannot be had from rows a degree apart; it is rounded off within
// a few of them and does no harm elsewhere.
func TestStepOfAcceleration(t *testing.T) {
	c := cycle(t, "simple-harmonic", "simple-harmonic", 20, 20, 90, 60, 80)
	curve, report, err := smooth.Fit(tabulated(c, 360, 0, 0.001), 0.002)
	if err != nil {
		t.Fatal(err)
	}
	if e := compare(c, curve); e.lift > 0.003 || e.within < 0.93 || report.Pieces > 44 {
		t.Errorf("lift error %g, acceleration right over %.2f %%, %d pieces", e.lift, 100*e.within, report.Pieces)
	}
}

// 20 rows of a rise over 30 degrees: a rise with one row in it or two can be anything.
func TestCoarseTable(t *testing.T) {
	c := cycle(t, "modified-sine", "modified-sine", 20, 20, 30, 100, 30)
	curve, report, err := smooth.Fit(tabulated(c, 20, 0, 0.001), 0.002)
	if err != nil {
		t.Fatal(err)
	}
	e := compare(c, curve)
	t.Logf("open by %.3g between %g and %g, in truth off by %.3g", report.Open.Lift, report.Open.From, report.Open.To, e.lift)
	if !report.Coarse || report.Open.Lift < 100*0.002 {
		t.Errorf("coarse %v, open by %g", report.Coarse, report.Open.Lift)
	}
	if e.lift < report.Open.Lift/10 || e.lift > report.Open.Lift*10 {
		t.Errorf("off by %g between rows, the report says %g", e.lift, report.Open.Lift)
	}
	if report.Widest.To-report.Widest.From != 18 {
		t.Errorf("widest step from %g to %g", report.Widest.From, report.Widest.To)
	}
	if most := largest(report.Residual); most > 0.002+1e-12 {
		t.Errorf("moved a row by %g", most)
	}
}
