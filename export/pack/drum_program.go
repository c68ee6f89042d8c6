package pack

import (
	"fmt"
	"math"

	"lobewright/gcode"
	"lobewright/gcode/read"
	"lobewright/gcode/write"
	"lobewright/synth"
	"lobewright/synth/spec"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/fit"
)

// drumAxis is the path of the axis of a tool of a diameter, at a distance from the camshaft axis, both lengths.
func (j *job) drumAxis(i int, diameter float64) func(p gcode.DrumPass, z float64) *synth.Curve {
	rotary := j.spec.Operations[i].Shift == "rotary"
	return func(p gcode.DrumPass, z float64) *synth.Curve {
		return j.cam.ToolAxis(synth.DrumTool{Radius: diameter/2 + p.Stock, Side: p.Side, Rotary: rotary, At: z})
	}
}

// drumPart is the barrel as an operation sees it, its paths fitted to eps.
func (j *job) drumPart(i int, eps float64) gcode.Drum {
	s, op := j.spec, j.spec.Operations[i]
	axis := j.drumAxis(i, op.ToolDiameter)
	return gcode.Drum{Name: s.Part, Title: s.Title, Revision: s.Revision, Inch: s.Units == spec.Inch, CamClockwise: s.Camshaft.Clockwise,
		Radius: s.Cam.Radius, Length: s.Cam.Length, Depth: s.Cam.GrooveDepth, Width: j.cam.GrooveWidth(), Begins: j.begins(),
		Axis: func(p gcode.DrumPass, z float64) gcode.Curve { return axis(p, z) },
		Path: func(p gcode.DrumPass) (chain.Path, error) {
			path, err := fit.Lines(axis(p, s.Cam.Radius), eps, j.rough.options())
			if err != nil {
				return nil, fmt.Errorf("pass at %d, stock %g: %w", p.Side, p.Stock, err)
			}
			return path, nil
		}}
}

// tryDrumProgram plans, writes and proves one program of a barrel.
func (j *job) tryDrumProgram(i int, eps float64) (program, error) {
	op, part, machine := j.drumOperation(i), j.drumPart(i, eps), j.machine()
	plan, err := gcode.PlanDrum(part, op, machine)
	if err != nil {
		return program{}, err
	}
	p := program{index: i, name: fmt.Sprintf("%s.%d-%s.nc", j.spec.Part, i+1, j.spec.Operations[i].Process), plan: plan}
	return j.proveProgram(p, j.tampered(p.name, write.Program(plan)))
}

// drumOperation is an operation of the spec as one on a barrel.
func (j *job) drumOperation(i int) gcode.Operation {
	o := j.spec.Operations[i]
	op := gcode.Operation{Number: i + 1, Process: gcode.Slot, Compensation: gcode.Compensation(o.Compensation), Feed: o.Feed, Tool: o.Tool,
		ToolDiameter: o.ToolDiameter, SpindleSpeed: o.SpindleSpeed, PlungeFeed: o.PlungeFeed, StepDown: o.StepDown, Stock: j.stocks(i),
		Direction: gcode.Direction(o.Direction), Rotary: o.RotaryAxis[0], RotaryShift: o.Shift == "rotary"}
	settings(&op, o)
	return op
}

// verifyDrum holds a program against the exact paths of its tool, which is that of the operation.
func (j *job) verifyDrum(p program, back *read.Program) (program, error) {
	return j.verifyDrumTool(p, back, j.spec.Operations[p.index].ToolDiameter)
}

// verifyDrumTool does so with a tool of another diameter (a length) than the operation's in the machine.
func (j *job) verifyDrumTool(p program, back *read.Program, diameter float64) (program, error) {
	expect := gcode.ExpectedDrum(j.drumPart(p.index, j.chord), j.drumOperation(p.index), j.machine(), j.chord)
	axis := j.drumAxis(p.index, diameter)
	expect.Axis, expect.Expect.Radius = func(p gcode.DrumPass, z float64) gcode.Curve { return axis(p, z) }, diameter/2
	result, err := gcode.VerifyDrum(back, expect)
	if err != nil {
		return p, fmt.Errorf("%s: %w", p.name, err)
	}
	p.expect, p.result = expect.Expect, result
	exact := j.cam.Pitch()
	p.theory = fit.Theory(exact, j.chord, chain.Line)
	if result.Finish != nil && result.FinishOffset == 0 {
		p.result.Finish = j.firstTurn(result.Finish)
		p.finish = &written{file: p.name, curve: "last pass", exact: exact, path: p.result.Finish, deviation: result.Deviation, theory: p.theory, floor: j.floor(exact)}
	}
	return p, nil
}

// firstTurn cuts a path of the development that runs on down to one turn.
func (j *job) firstTurn(p chain.Path) chain.Path {
	b, _ := j.cam.Barrel()
	turn := b.Sense() * 2 * math.Pi * b.OuterRadius
	end := p[0].From.X + turn
	for i, e := range p {
		if (e.To.X-end)*turn < 0 {
			continue
		}
		q := append(chain.Path(nil), p[:i+1]...)
		if share := (end - e.From.X) / (e.To.X - e.From.X); share < 1 {
			q[i].To = e.From.Add(e.To.Sub(e.From).Scale(share))
		}
		return q
	}
	return p
}

// wallShift is the largest error of a barrel's walls that shifting a narrow tool leaves, over all
// operations, length. One that is refused for it is not counted twice.
func (j *job) wallShift() float64 {
	most := 0.0
	for _, g := range j.gates {
		if g.ID == "wall-error" && g.Pass {
			most = max(most, g.Value)
		}
	}
	return most
}
