package pack

import (
	"fmt"
	"math"

	"lobewright/export/sheet"
	"lobewright/export/svg"
	"lobewright/synth"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
	"lobewright/tolerance/chain"
)

// figures draws the three SVG files. released says what is stamped on them.
func (j *job) figures(released bool) (sheet.Figures, error) {
	var f sheet.Figures
	var err error
	head := j.head(released)
	if f.Drawing, err = svg.Drawing(j.drawingData(head)); err != nil {
		return f, fmt.Errorf("drawing: %w", err)
	}
	if f.Motion, err = svg.Motion(j.motionChart(head)); err != nil {
		return f, fmt.Errorf("motion chart: %w", err)
	}
	if j.outline != nil {
		if f.Deviation, err = svg.Deviation(j.deviationChart(head)); err != nil {
			return f, fmt.Errorf("deviation chart: %w", err)
		}
	}
	f.Turn = j.turn()
	return f, nil
}

// turnStep is the step of the moving figure's samples, degrees.
const turnStep = 0.5

// turn is the moving figure of the sheet; a contour that cannot be written does not move.
func (j *job) turn() *sheet.Turn {
	if j.outline == nil {
		return nil
	}
	rest := j.cam.AtRest()
	t := &sheet.Turn{Clockwise: j.spec.Camshaft.Clockwise, Contour: j.shape(j.cam.Contour()), Center: j.cam.HasCenter(), Roller: j.cam.Follower().Radius(),
		Datum: rest.X, Offset: rest.Y, Step: turnStep}
	arm, face := j.linkageAtRest()
	for _, bar := range append(arm, face...) {
		t.Bars = append(t.Bars, sheet.Bar{From: bar[0], To: bar[1]})
	}
	if j.cam.Swings() {
		t.Pivot, t.Below = j.spec.Follower.PivotDistance, j.spec.Follower.Below
	}
	if b, ok := j.cam.Barrel(); ok {
		t.Developed = &sheet.Developed{PerDegree: b.Sense() * b.OuterRadius * math.Pi / 180, Length: j.spec.Cam.Length}
		t.Datum, t.Offset = 0, j.spec.Cam.TrackPosition
		t.Outer = j.shape(j.cam.OuterWall())
		j.turnSeries(t)
		return t
	}
	if j.cam.Grooved() {
		t.Outer, t.Outside = j.shape(j.cam.OuterWall()), j.spec.Cam.OutsideDiameter
	}
	t.Hub = j.hub()
	for i := range j.spec.Cam.Holes {
		t.Holes = append(t.Holes, j.cam.HoleCircle(i))
	}
	t.Tools = j.toolPaths()
	zone, at := j.cam.Cycle().Zone(0)
	t.Zero = j.cam.Contour().At(zone, at).P
	j.turnSeries(t)
	return t
}

// turnSeries samples the motion, and where the contour is touched.
func (j *job) turnSeries(t *sheet.Turn) {
	w := j.cam.Omega()
	for k := range int(360/turnStep) + 1 {
		zone, at := j.cam.Cycle().Zone(float64(k) * turnStep)
		polar := j.polarOfPoint(j.cam.Contour().At(zone, at).P)
		if k > 0 {
			last := t.Polar[k-1]
			polar = last + plane.Wrap360(polar-last+180) - 180
		}
		t.Polar = append(t.Polar, polar)
		l := j.cam.LiftAt(float64(k) * turnStep)
		t.Lift, t.Velocity, t.Acceleration = append(t.Lift, l.S), append(t.Velocity, l.V*w), append(t.Acceleration, l.A*w*w)
	}
}

// hub is the bore with its keyway as one closed path, empty without a bore.
func (j *job) hub() chain.Path {
	b := j.spec.Cam.Bore
	if b == nil {
		return nil
	}
	if b.Keyway != nil {
		return j.keywayOutline()
	}
	right, left := plane.Point{X: b.Diameter / 2}, plane.Point{X: -b.Diameter / 2}
	return chain.Path{{Kind: chain.Arc, From: right, To: left, CCW: true}, {Kind: chain.Arc, From: left, To: right, CCW: true}}
}

func (j *job) head(released bool) svg.Head {
	s := j.spec
	return svg.Head{Part: s.Part, Title: s.Title, Revision: s.Revision, Units: string(s.Units), Speed: s.Camshaft.Speed,
		Clockwise: s.Camshaft.Clockwise, SHA256: s.SHA256, Released: released}
}

func (j *job) drawingData(head svg.Head) svg.DrawingData {
	s := j.spec
	d := svg.DrawingData{
		Head: head, Material: s.Material, Hardness: s.Hardness, Finish: s.Finish, Date: s.Date, Drawn: s.Drawn, Checked: s.Checked,
		Thickness: s.Cam.Thickness, OutsideDiameter: s.Cam.OutsideDiameter,
		Contours:   []chain.Path{j.shape(j.cam.Contour())},
		BaseRadius: s.Cam.BaseRadius, Offset: s.Follower.Offset,
		Profile: s.Tolerance.Profile, NoDatum: s.Cam.NoDatum, Events: j.events(), Notes: s.Notes, Cautions: drawingCautions(),
	}
	if s.Follower.Kind != "translating-roller" {
		d.Follower, d.Swings = j.followerText()+", "+j.placeText(), j.cam.Swings()
	}
	d.Linkage, d.Sheet = j.linkageData(), j.opt.Sheet
	if j.opt.ToolPaths {
		d.ToolPaths = j.toolPaths()
	}
	if j.cam.HasPitchCurve() && s.Follower.FaceRadius == 0 {
		d.PitchCurve, d.RollerDiameter, d.Roller = j.shape(j.cam.Pitch()), 2*j.cam.Follower().Radius(), j.cam.AtRest()
	}
	if j.cam.Grooved() {
		d.Contours = append(d.Contours, j.shape(j.cam.OuterWall()))
	}
	if j.cam.Grooved() && !j.drum() {
		d.Notes = append([]string{fmt.Sprintf("Groove %.6g wide, %g deep from the marked face.", j.cam.GrooveWidth(), s.Cam.GrooveDepth)}, d.Notes...)
	}
	if d.Barrel = j.barrelData(); d.Barrel != nil {
		d.Roller = plane.Point{X: j.xOf(0), Y: s.Cam.TrackPosition}
	}
	zone, t := j.cam.Cycle().Zone(0)
	d.Zero = j.cam.Contour().At(zone, t).P
	if b := s.Cam.Bore; b != nil {
		d.Bore = &svg.Bore{Diameter: b.Diameter, Fit: b.Fit}
		if k := b.Keyway; k != nil {
			d.Bore.Keyway = &svg.Keyway{Width: k.Width, Depth: k.Depth, At: k.At, Fit: k.Fit}
		}
	}
	for _, h := range s.Cam.Holes {
		d.Holes = append(d.Holes, svg.Hole{Diameter: h.Diameter, Radius: h.Radius, At: h.At})
	}
	return d
}

// shape is a curve for drawing: what was proven, or for a cam that cannot be
// written the curve at every half degree, of an undercut contour what would be left of it.
func (j *job) shape(c *synth.Curve) chain.Path {
	if j.outline != nil {
		for _, w := range j.outline.paths {
			if w.exact.Left() == c.Left() {
				return w.path
			}
		}
	}
	if j.drum() {
		return j.drumDraft(c)
	}
	var p chain.Path
	if c.Left() == j.cam.Contour().Left() {
		if left, ok := j.cam.Shortfall(); ok { // what would really be cut
			for i, q := range left.Trimmed {
				p = append(p, chain.Element{Kind: chain.Line, From: q, To: left.Trimmed[(i+1)%len(left.Trimmed)]})
			}
			return p
		}
	}
	const step = 0.5
	at := func(deg float64) plane.Point {
		zone, t := j.cam.Cycle().Zone(deg)
		return c.At(zone, t).P
	}
	for deg := 0.0; deg < 360; deg += step {
		p = append(p, chain.Element{Kind: chain.Line, From: at(deg), To: at(math.Mod(deg+step, 360))})
	}
	return p
}

// events lists the events of the motion in words, with where each begins on the contour.
func (j *job) events() []svg.Event {
	s := j.spec
	if len(s.Motion.Events) == 0 {
		return j.stretches()
	}
	from := s.Motion.StartAt
	var out []svg.Event
	for _, e := range s.Motion.Events {
		text := "dwell"
		if e.Kind != spec.Dwell {
			text = fmt.Sprintf("%s %.6g %s, %s", e.Kind, e.Lift, j.cam.LiftUnit(), lawText(e))
		}
		zone, t := j.cam.Cycle().Zone(from)
		at := plane.Wrap360(from)
		out = append(out, svg.Event{From: at, To: at + e.Over, Text: text, Start: j.cam.Contour().At(zone, t).P})
		from += e.Over
	}
	return out
}

// lawText names the law of an event with what changes it.
func lawText(e spec.Event) string {
	text := e.Law.Name
	if e.Law.Name != spec.Polynomial && (e.FromVelocity != nil || e.ToVelocity != nil) {
		text = "half " + text
	}
	if e.Inflection != 0 {
		text += fmt.Sprintf(", inflection at %.4g", e.Inflection)
	}
	return text
}

// runs samples a quantity over 0 to 360, a run for each zone, so that jumps stay jumps.
func (j *job) runs(f func(zone int, t float64) float64) []svg.Run {
	const step = 0.5
	var first, rest []svg.Run // a zone that passes 360 is cut there
	for i, z := range j.cam.Cycle().Zones() {
		n := int(math.Ceil((z.To - z.From) / step))
		var a, b svg.Run
		for k := range n + 1 {
			t := z.From + (z.To-z.From)*float64(k)/float64(n)
			turn := math.Floor(z.From / 360)
			at := t - 360*turn
			if at <= 360 {
				a = append(a, svg.Sample{CamAngle: at, Value: f(i, t)})
			}
			if at >= 360 {
				if len(b) == 0 && at > 360 {
					v := f(i, 360*(turn+1))
					a, b = append(a, svg.Sample{CamAngle: 360, Value: v}), append(b, svg.Sample{CamAngle: 0, Value: v})
				}
				b = append(b, svg.Sample{CamAngle: at - 360, Value: f(i, t)})
			}
		}
		rest = append(rest, a)
		if len(b) > 1 {
			first = append(first, b)
		}
	}
	all := append(first, rest...)
	for i := 1; i < len(all); i++ { // in order of cam angle
		for k := i; k > 0 && all[k][0].CamAngle < all[k-1][0].CamAngle; k-- {
			all[k], all[k-1] = all[k-1], all[k]
		}
	}
	return all
}

// curve is a panel of the motion chart: its samples, and its least and greatest value
// where they truly are, between the samples.
func (j *job) curve(unit string, limits []svg.Limit, f func(zone int, t float64) float64) svg.Curve {
	const rounding = 1e-9 // of the other peak: a value that is 0 but for rounding is no peak
	c := svg.Curve{Unit: unit, Limits: limits, Runs: j.runs(f), Peaks: []svg.Sample{}}
	low, least := j.greatest(func(zone int, t float64) float64 { return -f(zone, t) })
	high, most := j.greatest(f)
	if least > rounding*math.Abs(most) {
		c.Peaks = append(c.Peaks, svg.Sample{CamAngle: low, Value: -least})
	}
	if most > rounding*math.Abs(least) {
		c.Peaks = append(c.Peaks, svg.Sample{CamAngle: high, Value: most})
	}
	return c
}

// greatest finds the greatest value over the cycle: the best of close samples, then
// the golden section between its neighbors.
func (j *job) greatest(f func(zone int, t float64) float64) (at, value float64) {
	const step = 0.5
	zone, best := 0, -math.MaxFloat64
	zones := j.cam.Cycle().Zones()
	var lo, hi float64
	for i, z := range zones {
		n := int(math.Ceil((z.To - z.From) / step))
		h := (z.To - z.From) / float64(n)
		for k := range n + 1 {
			t := z.From + h*float64(k)
			if v := f(i, t); v > best+1e-12*math.Abs(best) {
				zone, best, at = i, v, t
				lo, hi = math.Max(z.From, t-h), math.Min(z.To, t+h)
			}
		}
	}
	const golden = 0.6180339887498949
	for hi-lo > 1e-7 {
		a, b := hi-golden*(hi-lo), lo+golden*(hi-lo)
		if f(zone, a) >= f(zone, b) {
			hi = b
		} else {
			lo = a
		}
	}
	if v := f(zone, (lo+hi)/2); v > best+1e-12*math.Abs(best) {
		at, best = (lo+hi)/2, v
	}
	return plane.Wrap360(at), best
}

func (j *job) motionChart(head svg.Head) svg.MotionChart {
	w, u, l := j.cam.Omega(), j.cam.LiftUnit(), j.spec.Limits
	contour := j.cam.Contour()
	both := func(limit *float64) []svg.Limit {
		if limit == nil {
			return nil
		}
		return []svg.Limit{{Value: *limit}, {Value: -*limit}}
	}
	c := svg.MotionChart{
		Head:          head,
		Lift:          j.curve(u, nil, func(z int, t float64) float64 { return j.cam.LiftIn(z, t).S }),
		Velocity:      j.curve(u+"/s", both(l.Velocity), func(z int, t float64) float64 { return j.cam.LiftIn(z, t).V * w }),
		Acceleration:  j.curve(u+"/s²", both(l.Acceleration), func(z int, t float64) float64 { return j.cam.LiftIn(z, t).A * w * w }),
		Jerk:          j.curve(u+"/s³", both(l.Jerk), func(z int, t float64) float64 { return j.cam.LiftIn(z, t).J * w * w * w }),
		PressureAngle: j.curve("deg", []svg.Limit{{Value: l.PressureAngle}}, func(z int, t float64) float64 { return j.cam.PressureAngleIn(z, t).Deg() }),
		Radius: svg.Curve{Unit: j.spec.Units.Short(), Runs: j.runs(func(z int, t float64) float64 {
			f := contour.At(z, t)
			return j.convex(f) * math.Abs(f.K)
		})},
		Events: j.events(),
	}
	perSecond := j.spec.Camshaft.Speed * 6 // degrees
	for i, to := range []*svg.Curve{&c.Velocity, &c.Acceleration, &c.Jerk} {
		to.Second = &svg.Scale{Unit: u + "/deg" + []string{"", "²", "³"}[i], Factor: math.Pow(perSecond, -float64(i+1))}
	}
	for _, x := range j.cam.Cycle().Junctions() {
		step := func(to *[]svg.Step, pair [2]float64, scale float64) {
			if pair[0] != pair[1] {
				*to = append(*to, svg.Step{CamAngle: plane.Wrap360(x.At), Before: pair[0] * scale, After: pair[1] * scale})
			}
		}
		step(&c.Acceleration.Steps, x.Acceleration, w*w)
		step(&c.Jerk.Steps, x.Jerk, w*w*w)
	}
	c.Lift.Marks, c.Velocity.Marks, c.Acceleration.Marks = j.knowns()
	if r := l.PressureAngleReturn; r != nil {
		c.PressureAngle.Limits = append(c.PressureAngle.Limits, svg.Limit{Value: -*r})
	}
	if r := l.RadiusOfCurvature; r != nil {
		c.Radius.Limits = []svg.Limit{{Value: *r}}
	}
	radii := contour.Radii()
	const cusp = 1e-9 // of the base radius: a contour that turns on the spot, but for rounding
	for _, r := range []struct{ value, sign, at float64 }{{radii.Convex, 1, radii.ConvexAt}, {radii.Concave, -1, radii.ConcaveAt}} {
		switch {
		case math.IsInf(r.value, 1):
		case r.value < cusp*j.spec.Cam.BaseRadius:
			c.Radius.Peaks = append(c.Radius.Peaks, svg.Sample{CamAngle: plane.Wrap360(r.at)})
		default:
			c.Radius.Peaks = append(c.Radius.Peaks, svg.Sample{CamAngle: plane.Wrap360(r.at), Value: r.sign * r.value})
		}
	}
	return c
}

func drawingCautions() []string {
	return []string{
		"Check units, turning direction and angular datum before cutting.",
		"Cam and follower are nip points: guard them.",
	}
}
