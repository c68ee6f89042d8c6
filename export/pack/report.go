package pack

import (
	"cmp"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"math"
	"slices"
	"strings"

	"lobewright/export/sheet"
	"lobewright/export/table"
	"lobewright/gcode"
	"lobewright/synth/gate"
	"lobewright/synth/plane"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
)

// add appends a gate that holds a value at a cam angle to at most a limit.
func (j *job) add(id string, value, limit float64, unit string, at float64, text string) {
	j.gates = append(j.gates, gate.Gate{ID: id, Value: value, Limit: limit, Unit: unit, CamAngle: plane.Wrap360(at), Polar: j.polarOf(at),
		Pass: value <= limit, Text: text})
}

// finish draws, tabulates and reports what the steps before found.
func (j *job) finish() (*Pack, error) {
	p := &Pack{Part: j.spec.Part, Passed: true}
	for _, g := range j.gates {
		p.Passed = p.Passed && g.Pass
	}
	released := p.Passed && !j.opt.Draft
	figures, err := j.figures(released)
	if err != nil {
		return nil, err
	}
	motion, err := j.motionTable()
	if err != nil {
		return nil, err
	}
	inspection, err := j.inspectionTable()
	if err != nil {
		return nil, err
	}
	probe := j.probe()
	p.Report = j.report(released)
	p.Report.Probe = j.probeFacts(probe)
	name := func(tail string) string { return j.spec.Part + "." + tail }
	look := []File{{name("svg"), figures.Drawing}, {name("motion.svg"), figures.Motion}}
	if figures.Deviation != nil {
		look = append(look, File{name("error.svg"), figures.Deviation})
	}
	if j.outline != nil {
		p.Files = append(p.Files, File{j.outline.name, j.outline.data})
	}
	p.Files = append(p.Files, look...)
	for _, q := range j.programs {
		p.Files = append(p.Files, File{q.name, q.data})
	}
	p.Files = append(p.Files, File{name("inspection.csv"), inspection}, File{name("motion.csv"), motion})
	if len(probe) > 0 {
		data, err := table.Probe(probe, j.spec.Camshaft.Clockwise, tableDecimals)
		if err != nil {
			return nil, err
		}
		p.Files = append(p.Files, File{name("probe.csv"), data})
	}
	if p.Report.Released {
		for _, f := range p.Files {
			sum := sha256.Sum256(f.Data)
			p.Report.Files = append(p.Report.Files, f.Name)
			p.Report.FileHashes = append(p.Report.FileHashes, sheet.FileHash{Name: f.Name, SHA256: hex.EncodeToString(sum[:])})
		}
		p.Report.Files = append(p.Report.Files, name("report.html"), name("report.json"), "manifest.json")
	}
	html, err := sheet.HTML(p.Report, figures)
	if err != nil {
		return nil, err
	}
	jsonData, err := p.Report.JSON()
	if err != nil {
		return nil, err
	}
	p.draft = append(slices.Clone(look), File{name("report.html"), html})
	p.Files = append(p.Files, File{name("report.html"), html}, File{name("report.json"), jsonData})
	return p, nil
}

func (j *job) report(released bool) sheet.Report {
	s := j.spec
	r := sheet.Report{
		LiftUnit: j.liftUnit(),
		Tool:     j.opt.Tool, Part: s.Part, Title: s.Title, Revision: s.Revision, Units: string(s.Units), SpecSHA256: s.SHA256, Released: released,
		Camshaft: sheet.Camshaft{Speed: s.Camshaft.Speed, Rotation: j.rotation()},
		Facts:    j.facts(), Gates: sheet.Gates(j.gates), Findings: sheet.Findings(j.findings),
		Contour: j.contourFacts(), Motion: j.motionFacts(), Budget: j.budgetFacts(),
		Tolerance: sheet.Tolerance{Profile: s.Tolerance.Profile, Chord: j.chord}, Notes: s.Notes, Cautions: cautions(), Files: []string{},
	}
	for _, e := range j.events() {
		to := e.To
		if to > 360 {
			to -= 360
		}
		r.Events = append(r.Events, sheet.Event{From: e.From, To: to, Text: e.Text})
	}
	if j.outline != nil {
		for _, w := range j.outline.paths {
			r.Paths = append(r.Paths, j.pathFacts(w))
		}
	}
	for _, p := range j.programs {
		if p.finish != nil {
			r.Paths = append(r.Paths, j.pathFacts(*p.finish))
		}
		r.Operations = append(r.Operations, j.operationFacts(p))
	}
	return r
}

func (j *job) facts() []sheet.Fact {
	s, u := j.spec, j.spec.Units.Short()
	var f []sheet.Fact
	add := func(name, format string, args ...any) {
		f = append(f, sheet.Fact{Name: name, Text: fmt.Sprintf(format, args...)})
	}
	add("Camshaft", "%g rpm, %s as seen on the marked face", s.Camshaft.Speed, j.rotation())
	add("Follower", "%s, %s", j.followerText(), j.placeText())
	if stroke := j.cam.Stroke(); stroke > 0 {
		add("Stroke", "%.6g %s of the roller center along its arc, for %.6g deg of swing", stroke, u, j.cam.Cycle().MaxLift())
	}
	if j.drum() {
		add("Barrel", "outer radius %g %s, length %g %s; the track at lift 0 is %g %s from the datum end", s.Cam.Radius, u, s.Cam.Length, u, s.Cam.TrackPosition, u)
		add("Groove", "width %.6g %s (roller and %g of clearance, half on each wall), depth %g %s", j.cam.GrooveWidth(), u, s.Cam.Clearance, s.Cam.GrooveDepth, u)
	} else {
		add("Base circle", "radius %g %s", s.Cam.BaseRadius, u)
	}
	if j.cam.HasPitchCurve() && !j.drum() {
		add("Prime circle", "radius %g %s", j.cam.Prime(), u)
	}
	if !j.drum() {
		add("Thickness", "%g %s", s.Cam.Thickness, u)
	}
	if j.cam.Grooved() && !j.drum() {
		add("Groove", "width %.6g %s (roller and %g of clearance, half on each wall), depth %g %s, outside diameter %g %s", j.cam.GrooveWidth(), u, s.Cam.Clearance, s.Cam.GrooveDepth, u, s.Cam.OutsideDiameter, u)
	}
	if b := s.Cam.Bore; b != nil {
		text := fmt.Sprintf("diameter %g %s %s", b.Diameter, u, b.Fit)
		if k := b.Keyway; k != nil {
			text += fmt.Sprintf(", keyway %g %s x %g at %g°", k.Width, k.Fit, k.Depth, k.At)
		}
		add("Bore", "%s", text)
	}
	for _, t := range [][2]string{{"Material", s.Material}, {"Hardness", s.Hardness}, {"Finish", s.Finish}, {"Drawn", s.Drawn}, {"Checked", s.Checked}, {"Date", s.Date}} {
		if t[1] != "" {
			add(t[0], "%s", t[1])
		}
	}
	return f
}

func (j *job) contourFacts() sheet.Contour {
	k := j.cam.Contour()
	r := k.Radii()
	c := sheet.Contour{Length: k.Length(), Area: k.Area(), LeastConvexRadius: sheet.Maybe(r.Convex), LeastConcaveRadius: sheet.Maybe(r.Concave), Junctions: []float64{}}
	for _, x := range j.cam.Cycle().Junctions() {
		c.Junctions = append(c.Junctions, plane.Wrap360(x.At))
	}
	slices.Sort(c.Junctions)
	return c
}

// motionFacts: the jerk is that inside the zones; jumps of the acceleration are findings.
func (j *job) motionFacts() sheet.Motion {
	p, w := j.cam.Cycle().Peaks(), j.cam.Omega()
	m := sheet.Motion{PeakVelocity: p.Velocity.Value * w, PeakAcceleration: p.Acceleration.Value * w * w, PeakJerk: p.Jerk.Value * w * w * w, Jumps: []sheet.Jump{}}
	for _, x := range j.cam.Cycle().Junctions() {
		if a, k := x.AccelerationStep(), x.Jerk[1]-x.Jerk[0]; a != 0 || k != 0 {
			m.Jumps = append(m.Jumps, sheet.Jump{CamAngle: plane.Wrap360(x.At), Acceleration: a * w * w, Jerk: k * w * w * w})
		}
	}
	slices.SortStableFunc(m.Jumps, func(a, b sheet.Jump) int { return cmp.Compare(a.CamAngle, b.CamAngle) })
	if c := j.cam.Completion(); c != nil {
		m.Completion = &sheet.Completion{Minimized: "acceleration", Reached: c.Reached, Least: c.Least, JerkLimit: sheet.Maybe(c.JerkLimit), LeastJerk: c.LeastJerk}
		if c.Jerk {
			m.Completion.Minimized = "jerk"
		}
	}
	return m
}

// deviationFacts turns left and right of travel with growing cam angle into outside and inside.
func (j *job) deviationFacts(d certify.Deviation) sheet.Deviation {
	out, in := d.Left, d.Right
	if !j.cam.OutsideIsLeft() {
		out, in = in, out
	}
	// A cut that follows nothing has no bound; a release never holds one.
	return sheet.Deviation{Bound: math.Min(d.Bound, math.MaxFloat64), Outside: out, Inside: -in, CamAngle: sheet.Maybe(plane.Wrap360(d.At))}
}

// blocks counts what the path was written in: a move of two axes of different kinds is a line.
func (w written) blocks() (lines, arcs int) {
	if w.spirals > 0 {
		return w.spirals, 0
	}
	return counts(w.path)
}

func counts(p chain.Path) (lines, arcs int) {
	for _, e := range p {
		if e.Kind == chain.Arc {
			arcs++
		} else {
			lines++
		}
	}
	return lines, arcs
}

func (j *job) pathFacts(w written) sheet.Path {
	lines, arcs := w.blocks()
	p := sheet.Path{File: w.file, Curve: w.curve, Lines: lines, Arcs: arcs, Theory: w.theory, SegmentsFloor: w.floor, Deviation: j.deviationFacts(w.deviation)}
	if r, ok := j.follows[w.file+w.curve]; ok {
		p.Follower = j.reported(r)
	}
	return p
}

func (j *job) operationFacts(p program) sheet.Operation {
	op, u := j.spec.Operations[p.index], j.spec.Units.Short()
	r := p.result
	o := sheet.Operation{File: p.name, Process: op.Process, Axes: op.Axes, Blocks: r.Blocks, Lines: r.Lines, Arcs: r.Arcs, Bytes: r.Bytes,
		PathLength: r.PathLength, Seconds: r.Seconds, ArcMismatch: r.ArcMismatch, Deviation: j.deviationFacts(r.Deviation)}
	if p.finish != nil {
		if f, ok := j.follows[p.name+p.finish.curve]; ok {
			o.Follower = j.reported(f)
		}
	}
	set := func(name, format string, args ...any) {
		o.Setup = append(o.Setup, sheet.Fact{Name: name, Text: fmt.Sprintf(format, args...)})
	}
	switch op.Axes {
	case "polar":
		set("Work zero", "X0 camshaft axis, X plus outwards through the tool; Z0 top of the blank; the radial axis goes through the camshaft axis")
	case "cylinder":
		set("Work zero", "axial 0 datum end, plus towards the marked face; Z0 outer radius; the tool's axis radial")
	default:
		set("Work zero", "X0 Y0 camshaft axis, angular datum at its polar angle, seen on the marked face; Z0 top of the blank")
	}
	if op.Axes == "polar" || op.Axes == "cylinder" {
		carries := "turns the tool counterclockwise about the work"
		if j.spec.Control.RotarySense == "table" {
			carries = "turns the table with the work counterclockwise"
		}
		words := "run on past 360, so the axis must not roll over"
		if j.spec.Control.RotaryModulo {
			words = "stay within a turn, so the axis must roll over and go the short way"
		}
		set("Rotary axis", "%s0 with polar angle 0 under the tool; growing %s %s, seen on the marked face: the other sense is a mirrored cam; its words %s", op.RotaryAxis, op.RotaryAxis, carries, words)
	}
	set("View", "on the marked face, which is the Z0 face; a part cut from its back is mirrored")
	set("Turning direction", "the camshaft turns %s, seen so", j.rotation())
	if op.Process == "wire" {
		o.NotFinished = false
		set("Wire", "diameter %g %s", op.WireDiameter, u)
		set("Start hole", "radius %g %s at polar angle %g°", op.StartHole.Radius, u, op.StartHole.At)
		set("Tab", "%g %s wide at polar angle %g°; clamp the part at the stop before it is cut", op.Tab.Width, u, op.Tab.At)
	} else {
		o.NotFinished = op.Stock[len(op.Stock)-1] > 0
		tool := "Tool"
		if op.Process == "grind" {
			tool = "Wheel"
		}
		set(tool, "T%d, diameter %g %s, %g rpm, feed %g %s/min, plunge %g %s/min", op.Tool, op.ToolDiameter, u, op.SpindleSpeed, op.Feed, u, op.PlungeFeed, u)
		set("Start", "cam angle %.4g°", j.startAt(op))
		set("Stock", "left on the contour by the passes in turn: %s %s", strings.Trim(fmt.Sprint(j.stocks(p.index)), "[]"), u)
	}
	if !j.drum() {
		big := j.cam.LargestTool()
		o.LargestTool = sheet.Maybe(big.Diameter)
		switch {
		case math.IsInf(big.Diameter, 1):
			set("Largest tool", "any diameter reaches every flank")
		case big.Leaves > 0:
			set("Largest tool", "diameter %.5g %s reaches every flank, bound at cam angle %.1f°; one of %.5g %s would leave %.3g %s at %.1f°", big.Diameter, u, big.CamAngle, big.Larger, u, big.Leaves, u, big.LeavesAt)
		default:
			set("Largest tool", "diameter %.5g %s", big.Diameter, u)
		}
	}
	if b := j.spec.Blank; b != nil {
		set("Blank", "diameter %g %s, clamp inside radius %g %s", b.Diameter, u, b.ClampRadius, u)
	}
	set("First part", "check zeros, registers and tool; run dry above the work, single block, low rapid, hand on feed hold; cut soft material; measure it by the inspection table; correct, then release")
	for _, d := range p.plan.Registers {
		o.Offsets = append(o.Offsets, sheet.Register{Name: fmt.Sprintf("D%d", d.Number), Value: d.Value, Text: d.Text})
	}
	for i, c := range r.Cuts {
		o.Passes = append(o.Passes, j.passFacts(p, i, c))
	}
	return o
}

func (j *job) passFacts(p program, i int, c gcode.CutResult) sheet.Pass {
	f := sheet.Pass{Number: i + 1, Offset: c.Offset, Word: compensationWord(p.expect, c.Clockwise), Lines: c.Lines, Arcs: c.Arcs}
	switch p.expect.Process {
	case gcode.Mill:
		f.Stock = c.Offset - p.expect.Radius
	case gcode.Slot: // the offset is from the pitch curve
		f.Stock = p.expect.HalfWidth - p.expect.Radius - math.Abs(c.Offset)
		if math.Abs(f.Stock) < 1e-9 {
			f.Stock = 0
		}
	}
	if !math.IsInf(c.Deviation.Bound, 0) {
		d := j.deviationFacts(c.Deviation)
		f.Deviation = &d
	}
	return f
}

func compensationWord(x gcode.Expect, clockwise bool) string {
	switch {
	case x.Compensation == gcode.CompPath:
		return ""
	case clockwise:
		return "G41"
	}
	return "G42"
}

// cautions are printed on the sheet. ISO 12100 and ISO 14120 (machine guarding),
// ISO 23125, ISO 16090-1 and ISO 28881 (turning, milling and electro-discharge machines).
func cautions() []string {
	return []string{
		"A control does what the program says and rarely detects a mistake. These programs were proven against the exact contour, not on your machine.",
		"Before cutting check units, work zero, angular datum, turning direction, view side, tool or wire diameter, offset registers and clamp clearance.",
		"Prove out dry: single block, low rapid, hand on feed hold; cut the first part in soft material, measure it, then release.",
		"Rotating cams and followers are nip and shear points: guard them (ISO 12100, ISO 14120).",
		"Local rules, the machine's manual and the responsible licensed person decide (ISO 23125, ISO 16090-1, ISO 28881).",
	}
}
