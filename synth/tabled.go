package synth

import (
	"errors"
	"fmt"
	"math"
	"path/filepath"
	"slices"

	"lobewright/synth/gate"
	"lobewright/synth/motion"
	"lobewright/synth/smooth"
	"lobewright/synth/spec"
)

// smoothed is a table, and what smoothing did to it.
type smoothed struct {
	table  smooth.Table
	report smooth.Report
	raised float64 // by which the whole curve was raised to keep it at or above 0, length
}

// Table returns the motion's table, its angles in degrees and its lifts; nothing when the
// motion is not a table.
func (c *Cam) Table() (angles, lifts []float64) {
	if c.smoothed == nil {
		return nil, nil
	}
	return c.smoothed.table.Angle, c.smoothed.table.Lift
}

func fromTable(s *spec.Spec) (completed, error) {
	t := s.Motion.Table
	table, faults := smooth.Read(t.Data, t.Smoothing)
	if len(faults) > 0 {
		var out spec.Faults
		for _, f := range faults {
			out = append(out, spec.Fault{File: beside(s.File, t.File), Line: f.Line, Column: f.Column, Found: f.Found, Allowed: f.Allowed, Advice: f.Advice})
		}
		return completed{}, out
	}
	for i, l := range table.Lift {
		if l < -t.Smoothing {
			return completed{}, tooLow(s, table.Line[i], l, table.Angle[i])
		}
	}
	curve, report, err := smooth.Fit(table, t.Smoothing)
	var tight smooth.TooClose
	if errors.As(err, &tight) {
		return completed{}, spec.Faults{{File: s.File, Line: t.Place.Line, Column: t.Place.Column, Path: "motion.table.smoothing",
			Found:   fmt.Sprintf("%g, which a smooth curve of up to %d pieces does not keep to", t.Smoothing, smooth.MostPieces),
			Allowed: "a smoothing that covers the table's own scatter", Advice: fmt.Sprintf("%.2g would do, in %d pieces", tight.Needed, tight.Pieces)}}
	}
	if err != nil {
		return completed{}, fmt.Errorf("%s:%d:%d: motion.table: %w", s.File, t.Place.Line, t.Place.Column, err)
	}
	return raised(s, table, curve, report)
}

// raised makes the cycle; a curve that dips below 0 by less than the rows leave room for
// is raised as a whole.
func raised(s *spec.Spec, table smooth.Table, curve smooth.Curve, report smooth.Report) (completed, error) {
	t := s.Motion.Table
	zones := make([]motion.Zone, len(curve.Pieces))
	for i, p := range curve.Pieces {
		zones[i] = motion.Zone{From: p.From, To: p.To, Origin: p.Origin, Span: p.Span, Poly: slices.Clone(p.Poly), Dwell: len(p.Poly) == 1, Event: -1}
	}
	cycle, err := motion.Of(zones)
	if err != nil {
		return completed{}, fmt.Errorf("%s:%d:%d: motion.table: %w", s.File, t.Place.Line, t.Place.Column, err)
	}
	up := -cycle.MinLift()
	if up <= 0 {
		return completed{cycle: cycle, smoothed: &smoothed{table, report, 0}}, nil
	}
	for i, r := range report.Residual { // a residual is row less curve
		if r-up < -t.Smoothing {
			return completed{}, tooLow(s, table.Line[i], table.Lift[i], table.Angle[i])
		}
	}
	for i := range zones {
		zones[i].Poly[0] += up
	}
	if cycle, err = motion.Of(zones); err != nil {
		return completed{}, err
	}
	return completed{cycle: cycle, smoothed: &smoothed{table, report, up}}, nil
}

func tooLow(s *spec.Spec, line int, lift, angle float64) error {
	return spec.Faults{{File: beside(s.File, s.Motion.Table.File), Line: line, Column: 1, Found: fmt.Sprintf("the lift %g at cam angle %g, where the curve would go below 0", lift, angle),
		Allowed: "lifts of 0 or more, within the smoothing: lift 0 is the lowest of the cycle", Advice: "raise the whole table"}}
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
	if c.smoothed == nil {
		return nil
	}
	r, u, w, s := c.smoothed.report, c.unit(), c.Omega(), c.spec.Motion.Table.Smoothing
	text := fmt.Sprintf("%d rows became %d pieces, %d of them dwells; the rows were moved by %.3g %s root mean square, the most by %.3g at line %d of %s (allowed %g); the rows scatter by about %.2g %s, which leaves about %.3g %s/s² of noise in the acceleration",
		len(r.Residual), r.Pieces, r.Dwells, r.RMS, u, math.Abs(r.Moved.Residual), r.Moved.Line, c.spec.Motion.Table.File, s, r.Scatter, u, r.Floor.RMS*w*w, u)
	if up := c.smoothed.raised; up > 0 {
		text += fmt.Sprintf("; the whole curve was raised by %.2g %s to keep its lowest lift at 0", up, u)
	}
	f := []gate.Finding{{ID: "smoothed-table", CamAngle: camAngle(r.Moved.Angle), Text: text}}
	if r.Coarse {
		f = append(f, gate.Finding{ID: "table-too-coarse", CamAngle: camAngle(r.Open.From),
			Text: fmt.Sprintf("the table is too coarse for its own curvature: between cam angles %.4g° and %.4g° its rows leave the lift open by about %.2g %s, more than the smoothing of %g; give more rows there", camAngle(r.Open.From), camAngle(r.Open.To), r.Open.Lift, u, s)})
	}
	if share := r.Floor.RMS / c.Peaks().A; share > noisy || s < 0.6*r.Place {
		f = append(f, gate.Finding{ID: "table-noise", CamAngle: math.NaN(),
			Text: fmt.Sprintf("the smoothing of %g follows the table's own scatter (about %.2g %s; its last place is %.2g): %.2g %% of the peak acceleration is noise; raise the smoothing", s, r.Scatter, u, r.Place, 100*share)})
	}
	return f
}

// noisy is the share of the peak acceleration from which noise is a finding (common
// practice, no source).
const noisy = 0.05
