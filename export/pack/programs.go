package pack

import (
	"fmt"
	"math"
	"sync"

	"lobewright/gcode"
	"lobewright/gcode/read"
	"lobewright/gcode/write"
	"lobewright/synth"
	"lobewright/synth/gate"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/fit"
)

// program is one NC program after it has been read back and verified.
type program struct {
	index  int // in the spec, from 0
	name   string
	data   []byte
	plan   gcode.Program
	expect gcode.Expect
	result gcode.Result
	theory float64
	finish *written // nil when the last cut does not go all around in one piece
}

// short names the program within the part: "1-mill".
func (p program) short() string { return fmt.Sprintf("%d-%s", p.index+1, p.process()) }

// process is the operation's own word for what it does.
func (p program) process() gcode.Process {
	if p.expect.Process == gcode.Slot {
		return gcode.Mill
	}
	if p.expect.Grinds {
		return "grind"
	}
	return p.expect.Process
}

// tried is what became of an operation: a program, or why there is none.
type tried struct {
	program program
	err     error
	skipped bool // its tool cannot reach, which its gate has refused already
}

// startPrograms plans, writes, reads back and verifies one program an operation, each on
// its own thread: they share nothing but what the job has settled before. The function
// returned waits for them.
func (j *job) startPrograms() func() []tried {
	all := make([]tried, len(j.spec.Operations))
	n := 0
	for _, g := range j.gates {
		if g.ID == "reach" && n < len(all) {
			all[n].skipped = !g.Pass
			n++
		}
	}
	var wait sync.WaitGroup
	for i := range all {
		if !all[i].skipped {
			wait.Go(func() { all[i].program, all[i].err = j.bestProgram(i) })
		}
	}
	return func() []tried {
		wait.Wait()
		return all
	}
}

// addPrograms adds the programs in the order of the spec, and their gates.
func (j *job) addPrograms(all []tried) {
	for i, t := range all {
		switch {
		case t.skipped:
		case t.err != nil:
			j.gates = append(j.gates, gate.Gate{ID: "program", Value: 0, Limit: 1, AtLeast: true, CamAngle: math.NaN(), Polar: math.NaN(),
				Text: fmt.Sprintf("operation %d (%s) cannot be programmed: %v", i+1, j.spec.Operations[i].Process, t.err)})
		default:
			j.programs = append(j.programs, t.program)
			j.gates = append(j.gates, j.programGates(t.program)...)
		}
	}
}

// bestProgram tries ever tighter fits until what was read back has no failure that a
// tighter fit could mend, and returns the try with the fewest when none is free of them.
func (j *job) bestProgram(i int) (program, error) {
	var best program
	var failed error
	for _, share := range attempts() {
		eps := j.fitTo(share, j.spec.Control.Decimals)
		if eps == 0 {
			eps = j.chord * share // the grid alone is too coarse: show by how much
		}
		p, err := j.tryProgram(i, eps)
		if err != nil {
			failed = err
			continue
		}
		if best.data == nil || p.faults() < best.faults() {
			best = p
		}
		if best.faults() == 0 {
			break
		}
	}
	if best.data == nil {
		return best, failed
	}
	return best, nil
}

// faults counts the failures that a tighter fit may mend.
func (p program) faults() int {
	n := 0
	for _, f := range p.result.Failures {
		if f.ID == "deviation" || f.ID == "clearance" || f.ID == "reach" {
			n++
		}
	}
	return n
}

func (j *job) tryProgram(i int, eps float64) (program, error) {
	if j.drum() {
		return j.tryDrumProgram(i, eps)
	}
	op := j.operation(i, eps)
	part, machine := j.part(op, i), j.machine()
	plan, err := gcode.Plan(part, op, machine)
	if err != nil {
		return program{}, err
	}
	name := fmt.Sprintf("%s.%d-%s.nc", j.spec.Part, i+1, j.spec.Operations[i].Process)
	return j.proveProgram(program{index: i, name: name, plan: plan, expect: gcode.Expected(part, op, machine, j.chord)},
		j.tampered(name, write.Program(plan)))
}

// proveProgram reads a program back from its bytes and holds it against what was
// planned and against the exact curves.
func (j *job) proveProgram(p program, data []byte) (program, error) {
	p.data = data
	back, err := read.Parse(p.data, j.ownLines(p.index)...)
	if err != nil {
		return p, fmt.Errorf("%s: %w", p.name, err)
	}
	if err := gcode.Differs(p.plan, back); err != nil {
		return p, fmt.Errorf("%s: %w", p.name, err)
	}
	if j.drum() {
		return j.verifyDrum(p, back)
	}
	if p.result, err = gcode.Verify(back, p.expect); err != nil {
		return p, fmt.Errorf("%s: %w", p.name, err)
	}
	exact := j.toolPath(p.result.FinishOffset)
	switch o := j.spec.Operations[p.index]; {
	case o.Axes == "polar":
		p.theory = j.leastSpirals(exact)
	case o.Moves == "lines":
		p.theory = fit.Theory(exact, j.chord, chain.Line)
	default:
		p.theory = fit.Theory(exact, j.chord, chain.Arc)
	}
	if loop, ok := oneTurn(p.result.Finish, math.Pow10(-j.spec.Control.Decimals)); ok {
		p.finish = &written{file: p.name, curve: "last pass", exact: exact, path: loop, deviation: p.result.Deviation,
			theory: p.theory, toPitch: -exact.Left()}
		if p.finish.spirals = p.spirals(); p.finish.spirals == 0 {
			p.finish.floor = j.floor(exact)
		}
	}
	return p, nil
}

// oneTurn cuts a path that overlaps its own start down to the closed turn, and
// heals the line that the start split in two: its halves bend by the rounding of
// the split point, no more than a count of the grid.
func oneTurn(p chain.Path, count float64) (chain.Path, bool) {
	for i := range p {
		if p[i].To == p[0].From {
			return healed(append(chain.Path(nil), p[:i+1]...), count), i > 0
		}
	}
	return nil, false
}

func healed(p chain.Path, count float64) chain.Path {
	first, last := p[0], p[len(p)-1]
	if len(p) < 3 || first.Kind != chain.Line || last.Kind != chain.Line {
		return p
	}
	whole := first.To.Sub(last.From)
	if math.Abs(whole.Unit().Cross(first.From.Sub(last.From))) > count {
		return p
	}
	p[0] = chain.Element{Kind: chain.Line, From: last.From, To: first.To}
	return p[:len(p)-1]
}

// ownLines are the lines that the spec declares to be the user's own in operation i.
func (j *job) ownLines(i int) []string {
	c := j.spec.Control
	own := append(append([]string(nil), c.ProgramStart...), c.ProgramEnd...)
	if w := j.spec.Operations[i].Slots; w != nil {
		for _, l := range append([]string{w.Thread, w.CutWire}, w.Conditions...) {
			if l != "" {
				own = append(own, l)
			}
		}
	}
	return own
}

func (j *job) machine() gcode.Machine {
	c := j.spec.Control
	return gcode.Machine{Decimals: c.Decimals, AbsoluteArcs: c.AbsoluteArcs, ArcMismatch: c.ArcMismatch,
		BlockNumbers: c.BlockNumbers, MaxBlocks: c.MaxBlocks, SafeZ: c.SafeZ,
		RotaryDecimals: c.RotaryDecimals, RotaryModulo: c.RotaryModulo, RotaryTable: c.RotarySense == "table", RotarySpeed: c.RotarySpeed,
		Limits:     gcode.Limits{Radius: c.LargestRadius, Chord: c.LeastChord, Sweep: c.SplitAngle, Bytes: c.MaxBytes, Line: c.LineLength},
		RadiusArcs: c.RadiusArcs, Path: gcode.PathMode(c.PathMode), PathBlend: c.PathTolerance, Start: c.ProgramStart, End: c.ProgramEnd, Semicolons: c.Semicolons,
		RotaryRate: c.RotaryAcceleration, InverseSeconds: c.InverseSeconds}
}

func (j *job) part(op gcode.Operation, i int) gcode.Part {
	s := j.spec
	p := gcode.Part{Name: s.Part, Title: s.Title, Revision: s.Revision, Inch: s.Units == spec.Inch, Thickness: s.Cam.Thickness,
		CamClockwise: s.Camshaft.Clockwise, StartAt: j.startAt(s.Operations[i]),
		Curve: func(offset float64) gcode.Curve { return j.toolPath(offset) }}
	if j.cam.Grooved() {
		p.GrooveDepth, p.GrooveWidth = s.Cam.GrooveDepth, j.cam.GrooveWidth()
	}
	if s.Blank != nil {
		p.BlankDiameter, p.ClampRadius = s.Blank.Diameter, s.Blank.ClampRadius
	}
	if s.Cam.Bore != nil {
		p.BoreDiameter = s.Cam.Bore.Diameter
	}
	return p
}

// operation turns an operation of the spec into one of the planner, its paths fitted to eps.
func (j *job) operation(i int, eps float64) gcode.Operation {
	o := j.spec.Operations[i]
	op := gcode.Operation{
		Number: i + 1, Process: gcode.Process(o.Process), Compensation: gcode.Compensation(o.Compensation), Feed: o.Feed,
		Tool: o.Tool, ToolDiameter: o.ToolDiameter, SpindleSpeed: o.SpindleSpeed, PlungeFeed: o.PlungeFeed, StepDown: o.StepDown,
		Stock: j.stocks(i), Direction: gcode.Direction(o.Direction), WireDiameter: o.WireDiameter, Offsets: o.Offsets,
	}
	settings(&op, o)
	if j.cam.Grooved() && op.Process == gcode.Mill {
		op.Process = gcode.Slot
	}
	if o.Tab != nil {
		op.Tab = gcode.Tab{Width: o.Tab.Width, At: o.Tab.At}
	}
	if w := o.Slots; w != nil {
		op.Slots = gcode.Slots{Thread: w.Thread, Cut: w.CutWire, Conditions: w.Conditions}
	}
	if o.StartHole != nil {
		op.StartHole = gcode.StartHole{Radius: o.StartHole.Radius, At: o.StartHole.At}
	}
	if o.Axes == "polar" {
		j.polarAxes(&op, o, eps)
		return op
	}
	if o.Moves == "lines" {
		op.Path = func(offset float64) (chain.Path, error) { return fit.Lines(j.toolPath(offset), eps, j.rough.options()) }
		return op
	}
	pitch, err := j.pitchFit(eps)
	op.Path = func(offset float64) (chain.Path, error) {
		if err != nil {
			return nil, err
		}
		return pitch.Offset(j.toolPath(offset).Left())
	}
	return op
}

// toolPath is the path of a tool's center at a distance outside the contour; in a groove
// outside its pitch curve.
func (j *job) toolPath(offset float64) *synth.Curve {
	if j.cam.Grooved() {
		return j.cam.FromPitch(offset)
	}
	return j.cam.Parallel(offset)
}

// startAt is where a milled pass begins: as the spec says, else in the middle of the
// longest low dwell, else where the contour's curvature changes least.
func (j *job) startAt(o spec.Operation) float64 {
	if o.StartAt != nil {
		return *o.StartAt
	}
	longest, at := 0.0, math.NaN()
	for i, z := range j.cam.Cycle().Zones() {
		if z.Dwell && z.To-z.From > longest && j.cam.LiftIn(i, z.From).S <= lowLift*j.cam.Cycle().MaxLift() {
			longest, at = z.To-z.From, (z.From+z.To)/2
		}
	}
	if !math.IsNaN(at) {
		return plane.Wrap360(at)
	}
	least := math.Inf(1)
	contour := j.cam.Contour()
	for deg := 0.0; deg < 360; deg++ {
		zone, t := j.cam.Cycle().Zone(deg)
		if d := math.Abs(contour.At(zone, t).DK); d < least {
			least, at = d, deg
		}
	}
	return at
}

// lowLift is the share of the lift up to which a dwell counts as low: rounding.
const lowLift = 1e-9

// programGates turns what was proven of a program into gates: deviation, arc
// mismatch, block count, clearance, and whatever else failed.
func (j *job) programGates(p program) []gate.Gate {
	r, u := p.result, j.spec.Units.Short()
	none := math.NaN()
	more := map[int]int{} // how many failures each gate stands for besides its own
	gates := []gate.Gate{j.deviationGate(p.short(), p.name, r.Deviation.Bound, r.Deviation.At)}
	gates = append(gates, gate.Gate{ID: "arc-mismatch", Of: p.short(), Value: r.ArcMismatch, Limit: j.spec.Control.ArcMismatch, Unit: u, CamAngle: none, Polar: none,
		Pass: r.ArcMismatch <= j.spec.Control.ArcMismatch,
		Text: fmt.Sprintf("largest difference of an arc's end radii in %s (line %d); give control.decimals one more digit", p.name, r.ArcMismatchLine)})
	if limit := j.spec.Control.MaxBlocks; limit > 0 {
		gates = append(gates, gate.Gate{ID: "block-count", Of: p.short(), Value: float64(r.Blocks), Limit: float64(limit), CamAngle: none, Polar: none,
			Pass: r.Blocks <= limit, Text: fmt.Sprintf("blocks of %s; allow a larger chord, fewer passes or a larger max_blocks", p.name)})
	}
	gates = append(gates, j.rotaryGates(p)...)
	kinds := map[string]int{} // index of the gate that names the first failure of its kind
	for _, f := range r.Failures {
		if j.judged(p, f) {
			continue
		}
		if i, ok := kinds[f.ID]; ok {
			more[i]++
			continue
		}
		kinds[f.ID] = len(gates)
		gates = append(gates, gate.Gate{ID: f.ID, Of: p.short(), Value: f.Value, Limit: f.Limit, Unit: failureUnit(f.ID, u), AtLeast: f.Value < f.Limit, CamAngle: f.CamAngle, Polar: j.polarOf(f.CamAngle),
			Text: fmt.Sprintf("%s, line %d: %s", p.name, f.Line, f.Text)})
	}
	for i, n := range more {
		gates[i].Text += fmt.Sprintf(" (and %d more of the kind)", n)
	}
	if _, failed := kinds["clearance"]; !failed {
		gates = append(gates, gate.Gate{ID: "clearance", Of: p.short(), Value: r.Clearance, Limit: 0, Unit: u, AtLeast: true, CamAngle: none, Polar: none, Pass: true,
			Text: fmt.Sprintf("least margin of approaches, leads, plunges and rapids in %s to the finished contour, bore and clamp (line %d)", p.name, r.ClearanceLine)})
	}
	return gates
}

// rotaryGates hold the rotary axis against the limits that the spec gives.
func (j *job) rotaryGates(p program) []gate.Gate {
	spin, c, none := p.result.Rotary, j.spec.Control, math.NaN()
	if p.expect.Rotary == 0 {
		return nil
	}
	one := func(id, unit, what string, value, limit float64, line int) gate.Gate {
		return gate.Gate{ID: id, Of: p.short(), Value: value, Limit: limit, Unit: unit, CamAngle: none, Polar: none, Pass: value <= limit,
			Text: fmt.Sprintf("largest %s of the rotary axis in %s (line %d); take a lower feed", what, p.name, line)}
	}
	var gates []gate.Gate
	if c.RotarySpeed > 0 {
		gates = append(gates, one("rotary-speed", "deg/min", "speed", spin.Speed, c.RotarySpeed, spin.SpeedLine))
	}
	if c.RotaryAcceleration > 0 {
		gates = append(gates, one("rotary-acceleration", "deg/s²", "acceleration, from one move to the next,", spin.Rate, c.RotaryAcceleration, spin.RateLine))
	}
	return gates
}

// failureUnit is the unit of a failure's value and limit; length is the part's.
func failureUnit(id, length string) string {
	switch id {
	case "lead", "coverage":
		return "deg"
	case "words", "feed":
		return ""
	}
	return length
}

// judged reports whether a failure is already told by a gate of its own: a path that
// deviates inwards also comes too near to its contour, by no more than it deviates.
func (j *job) judged(p program, f gcode.Failure) bool {
	fails := !(p.result.Deviation.Bound <= j.chord)
	switch f.ID {
	case "arc-mismatch", "block-count", "rotary-speed", "rotary-acceleration":
		return true
	case "deviation":
		return fails
	case "reach":
		return fails && f.Limit+j.chord-f.Value <= p.result.Deviation.Bound
	}
	return false
}

func (j *job) polarOf(camAngle float64) float64 {
	if math.IsNaN(camAngle) {
		return camAngle
	}
	return j.polar(camAngle)
}
