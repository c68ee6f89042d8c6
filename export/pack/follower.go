package pack

import (
	"fmt"
	"math"

	"lobewright/export/sheet"
	"lobewright/export/svg"
	"lobewright/synth/follower"
	"lobewright/synth/gate"
	"lobewright/synth/plane"
	"lobewright/tolerance/follow"
)

// run is what the follower does on a written path.
type run struct {
	err     follow.Error
	samples []follow.Sample
	lines   bool // more lines than arcs: the acceleration on it is wrong at any tolerance
}

// linkage is the follower as something to be run over a path.
func (j *job) linkage() follow.Follower {
	if j.drum() {
		return j.drumLinkage()
	}
	switch f := j.cam.Follower().(type) {
	case follower.TranslatingRoller:
		return follow.Roller{Offset: f.Offset, Datum: f.Datum, Clockwise: f.Clockwise}
	case follower.TranslatingKnife:
		return follow.Roller{Offset: f.Offset, Datum: f.Datum, Clockwise: f.Clockwise}
	case follower.TranslatingMushroom:
		return follow.Roller{Offset: f.Offset, Datum: f.Datum, Clockwise: f.Clockwise}
	default:
		on := func(theta float64, arc plane.Frame) (lift, v, a float64, at plane.Point, ok bool) {
			r, ok := f.OnArc(theta, arc)
			return r.Lift, r.Velocity, r.Acceleration, r.At, ok
		}
		k := follow.Kind{On: on, Near: j.nearBase(), Sense: f.Sense()}
		if !j.cam.HasCenter() {
			k.Kinks = 0.5
		}
		return k
	}
}

// nearBase returns a function that finds the cam angle, to a degree or so, at which the
// design is nearest to a point of its base curve.
func (j *job) nearBase() func(plane.Point) float64 {
	var at []plane.Point
	for deg := range 360 {
		zone, t := j.cam.Cycle().Zone(float64(deg))
		at = append(at, j.cam.Pitch().At(zone, t).P)
	}
	return func(p plane.Point) float64 {
		best := 0
		for i := range at {
			if at[i].Dist(p) < at[best].Dist(p) {
				best = i
			}
		}
		return float64(best)
	}
}

// follower runs the follower over a written path.
func (j *job) follower(w written) (run, error) {
	centers, err := follow.Centers(w.path, w.toPitch)
	if err != nil {
		return run{}, fmt.Errorf("%s, %s: %w", w.file, w.curve, err)
	}
	lift := func(t float64) (s, ds, dds float64) {
		l := j.cam.LiftAt(t)
		return l.S, l.V, l.A
	}
	var jumps []float64
	for _, x := range j.cam.Cycle().Junctions() {
		if x.AccelerationStep() != 0 {
			jumps = append(jumps, x.At)
		}
	}
	e, samples, err := follow.Compare(j.linkage(), centers, lift, j.cam.Cycle().Zones()[0].From, jumps...)
	if err != nil {
		return run{}, fmt.Errorf("%s, %s: %w", w.file, w.curve, err)
	}
	lines, arcs := w.blocks()
	return run{e, samples, lines > arcs}, nil
}

// reported turns a run into the report's figures, per second at the camshaft's speed.
func (j *job) reported(r run) *sheet.Follower {
	w := j.cam.Omega()
	f := &sheet.Follower{Lift: r.err.Lift, Velocity: r.err.Velocity * w, VelocityStep: r.err.VelocityStep * w, Acceleration: r.err.Acceleration * w * w}
	if peak := j.cam.Peaks().A; peak > 0 {
		f.AccelerationShare = r.err.Acceleration / peak
	}
	return f
}

// errorRuns are the follower's errors in lift and in acceleration for the deviation chart.
func (j *job) errorRuns(r run) (lift, acceleration []svg.Run) {
	w := j.cam.Omega()
	var s, a svg.Run
	flush := func() {
		if len(s) > 0 {
			lift, acceleration, s, a = append(lift, s), append(acceleration, a), nil, nil
		}
	}
	for _, p := range r.samples {
		at := plane.Wrap360(p.At)
		if n := len(s); n > 0 && at < s[n-1].CamAngle {
			flush()
		}
		s, a = append(s, svg.Sample{CamAngle: at, Value: p.Lift}), append(a, svg.Sample{CamAngle: at, Value: p.Acceleration * w * w})
	}
	flush()
	if len(lift) > 1 {
		lift, acceleration = append(lift[1:], lift[0]), append(acceleration[1:], acceleration[0])
	}
	return lift, acceleration
}

func (j *job) deviationChart(head svg.Head) svg.DeviationChart {
	w, u := j.cam.Omega(), j.cam.LiftUnit()
	c := svg.DeviationChart{Head: head, Chord: j.chord, DesignPeak: j.cam.Peaks().A * w * w, AccelerationUnit: u + "/s²", LiftUnit: u, Events: j.events()}
	shown := []written{j.outline.paths[0]}
	for _, p := range j.programs {
		if p.finish != nil {
			shown = append(shown, *p.finish)
		}
	}
	for _, p := range shown {
		lines, arcs := p.blocks()
		d := svg.PathDeviation{Name: p.file + ", " + p.curve, Runs: j.trace(p.exact, p.path), Bound: p.deviation.Bound,
			Blocks: fmt.Sprintf("%d arcs, %d lines", arcs, lines)}
		if r, ok := j.follows[p.file+p.curve]; ok {
			d.LiftError, d.AccelerationError = j.errorRuns(r)
		}
		c.Paths = append(c.Paths, d)
	}
	return c
}

// runFollower runs the follower over everything that was written and returns the
// largest of each error.
func (j *job) runFollower() follow.Error {
	j.follows, j.unknown = map[string]run{}, nil
	all := append([]written(nil), j.outline.paths...)
	for _, p := range j.programs {
		if p.finish != nil {
			all = append(all, *p.finish)
		}
	}
	var worst follow.Error
	for _, w := range all {
		if j.drum() && w.toPitch != 0 {
			continue // a wall of a barrel is no parallel of what the roller's center runs on
		}
		r, err := j.follower(w)
		if err != nil {
			// The path is proven; only what the follower does on it is not known.
			j.unknown = append(j.unknown, gate.Finding{ID: "follower-unknown", CamAngle: math.NaN(), Text: err.Error()})
			worst.Acceleration, worst.VelocityStep = math.Inf(1), math.Inf(1)
			continue
		}
		j.follows[w.file+w.curve] = r
		worst.Lift = math.Max(worst.Lift, r.err.Lift)
		if r.err.Acceleration > worst.Acceleration {
			worst.Acceleration, worst.AccelerationAt = r.err.Acceleration, r.err.AccelerationAt
		}
		if r.err.VelocityStep > worst.VelocityStep {
			worst.VelocityStep, worst.VelocityStepAt = r.err.VelocityStep, r.err.VelocityStepAt
		}
	}
	return worst
}

// followerGates holds the errors against the limits the tolerance sets for them.
func (j *job) followerGates(e follow.Error) {
	t, w := j.spec.Tolerance, j.cam.Omega()
	if t.Acceleration != nil {
		share := e.Acceleration / j.cam.Peaks().A
		j.add("follower-acceleration", share, *t.Acceleration, "", e.AccelerationAt,
			"largest acceleration error of the follower on any written path, as a share of the design's peak; blocks were added where it is felt for as long as that helped; take arcs, more decimals, or accept a larger share")
	}
	if t.VelocityStep != nil {
		j.add("velocity-step", e.VelocityStep*w, *t.VelocityStep, j.cam.LiftUnit()+"/s", e.VelocityStepAt,
			"largest velocity step of the follower at a joint of any written path; take arcs instead of lines, or more decimals")
	}
}
