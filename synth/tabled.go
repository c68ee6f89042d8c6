package synth

import (
	"errors"
	"fmt"
	"math"
	"path/filepath"

	"lobewright/synth/gate"
	"lobewright/synth/measured"
	"lobewright/synth/motion"
	"lobewright/synth/spec"
)

// Table returns the rows of the motion's table and what smoothing did to them, or
// nothing when the motion is not a table.
func (c *Cam) Table() ([]measured.Row, *measured.Report) { return c.rows, c.smoothed }

func fromTable(s *spec.Spec) (completed, error) {
	t := s.Motion.Table
	rows, faults := measured.Parse(t.Data, t.Smoothing)
	if len(faults) > 0 {
		var out spec.Faults
		for _, f := range faults {
			out = append(out, spec.Fault{File: beside(s.File, t.File), Line: f.Line, Column: f.Column, Found: f.Found, Allowed: f.Allowed, Advice: f.Advice})
		}
		return completed{}, out
	}
	curve, err := measured.Smooth(rows, t.Smoothing)
	var low measured.TooLow
	var noisy measured.TooNoisy
	switch {
	case errors.As(err, &low):
		return completed{}, spec.Faults{{File: beside(s.File, t.File), Line: low.Row.Line, Column: 1, Found: fmt.Sprintf("the lift %g at cam angle %g", low.Row.Lift, low.Row.Angle),
			Allowed: "lifts of 0 or more, within the smoothing: lift 0 is the lowest of the cycle", Advice: "raise the whole table"}}
	case errors.As(err, &noisy):
		return completed{}, spec.Faults{{File: s.File, Line: t.Place.Line, Column: t.Place.Column, Path: "motion.table.smoothing",
			Found:   fmt.Sprintf("%g, which no smooth curve of up to 640 pieces keeps to", t.Smoothing),
			Allowed: "a smoothing that covers the table's own scatter", Advice: fmt.Sprintf("about %.2g would do", noisy.Needed)}}
	case err != nil:
		return completed{}, err
	}
	cycle, err := motion.Of(curve.Zones)
	if err != nil {
		return completed{}, fmt.Errorf("%s:%d:%d: motion.table: %w", s.File, t.Place.Line, t.Place.Column, err)
	}
	return completed{cycle: cycle, rows: rows, smoothed: &curve.Report}, nil
}

// beside is the path of a file that a spec names from its own folder.
func beside(spec, name string) string {
	if filepath.IsAbs(name) {
		return name
	}
	return filepath.Join(filepath.Dir(spec), filepath.FromSlash(name))
}

// tableFindings say what the smoothing did, and what is wrong with the table.
func (c *Cam) tableFindings() []gate.Finding {
	r := c.smoothed
	if r == nil {
		return nil
	}
	u, w, s := c.LiftUnit(), c.Omega(), c.spec.Motion.Table.Smoothing
	f := []gate.Finding{{ID: "smoothed-table", CamAngle: camAngle(r.LargestAt.Angle),
		Text: fmt.Sprintf("%d rows became %d pieces; the rows were moved by %.3g %s root mean square, the most by %.3g at line %d of %s (allowed %g); the table's own noise of about %.2g %s leaves about %.3g %s/s² of noise in the acceleration",
			r.Rows, r.Knots, r.RMS, u, r.Largest, r.LargestAt.Line, c.spec.Motion.Table.File, s, r.NoiseLift, u, r.NoiseAcceleration*w*w, u)}}
	if r.TooCoarse(s) {
		f = append(f, gate.Finding{ID: "table-too-coarse", CamAngle: camAngle(r.BetweenAt.Angle),
			Text: fmt.Sprintf("the table is too coarse for its own curvature: near line %d the lift between rows is known to about %.2g %s only, more than the smoothing of %g; give more rows there", r.BetweenAt.Line, r.Between, u, s)})
	}
	if 2*r.Knots > r.Rows && r.NoiseLift > s {
		f = append(f, gate.Finding{ID: "table-noise", CamAngle: math.NaN(),
			Text: fmt.Sprintf("the rows scatter by about %.2g %s, more than the smoothing of %g lets go: the motion follows the scatter; raise the smoothing", r.NoiseLift, u, s)})
	}
	return f
}
