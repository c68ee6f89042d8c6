package pack

import (
	"errors"
	"fmt"
	"math"

	"lobewright/export/sheet"
	"lobewright/gcode"
	"lobewright/gcode/read"
	"lobewright/synth"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
)

// ProveOut reads an NC program, ours or one edited by hand, and holds it against the
// exact contour of the spec and one of its operations (from 1; 0 takes the one the program's
// O number names). A toolDiameter above 0, a length, is the cutter in the machine
// instead of the one of the spec. An error says that the file cannot be read as a
// program or fits no operation.
func ProveOut(s *spec.Spec, file string, data []byte, operation int, toolDiameter float64, tool string) (sheet.ProveOut, error) {
	cam, err := synth.Build(s)
	if err != nil {
		return sheet.ProveOut{}, err
	}
	j := &job{spec: s, cam: cam}
	var own []string // of every operation: which one it is stands in the program
	for i := range s.Operations {
		own = append(own, j.ownLines(i)...)
	}
	back, err := read.Parse(data, own...)
	var at *read.Error
	if errors.As(err, &at) {
		return sheet.ProveOut{}, fmt.Errorf("%s:%d:%d: found %s; %s", file, at.Line, at.Column, at.Found, at.Allowed)
	}
	if err != nil {
		return sheet.ProveOut{}, fmt.Errorf("%s: %w", file, err)
	}
	if operation == 0 {
		operation = operationNumbered(s, back.Number)
	}
	if operation < 1 || operation > len(s.Operations) {
		found := "no program number"
		if back.Number >= 0 {
			found = fmt.Sprintf("program number O%d", back.Number)
		}
		if operation > 0 {
			found = fmt.Sprintf("operation number %d", operation)
		}
		return sheet.ProveOut{}, fmt.Errorf("%s: found %s; allowed: those of the %d operations of %s; say which one with --operation",
			file, found, len(s.Operations), s.File)
	}
	j.allocate()
	i := operation - 1
	if toolDiameter > 0 && s.Operations[i].Process == "wire" {
		return sheet.ProveOut{}, fmt.Errorf("%s: a tool diameter is of a milling operation; operation %d is wire", file, operation)
	}
	head := sheet.ProveOut{Tool: tool, Part: s.Part, Units: string(s.Units), File: file, Operation: operation, Process: s.Operations[i].Process, Chord: j.chord}
	if j.drum() {
		return j.proveOutDrum(i, back, head, toolDiameter)
	}
	op := j.operation(i, j.chord)
	head.ToolDiameter = op.WireDiameter
	if op.Process != gcode.Wire {
		if toolDiameter > 0 {
			op.ToolDiameter = toolDiameter
		}
		head.ToolDiameter = op.ToolDiameter
	}
	expect := gcode.Expected(j.part(op, i), op, j.machine(), j.chord)
	result, err := gcode.Verify(back, expect)
	if err != nil {
		return sheet.ProveOut{}, fmt.Errorf("%s: %w", file, err)
	}
	p := program{index: i, name: file, expect: expect, result: result}
	return j.proveOutFacts(p, head), nil
}

// proveOutDrum holds a program of a barrel.
func (j *job) proveOutDrum(i int, back *read.Program, head sheet.ProveOut, toolDiameter float64) (sheet.ProveOut, error) {
	head.ToolDiameter = j.spec.Operations[i].ToolDiameter
	if toolDiameter > 0 {
		head.ToolDiameter = toolDiameter
	}
	p, err := j.verifyDrumTool(program{index: i, name: head.File}, back, head.ToolDiameter)
	if err != nil {
		return sheet.ProveOut{}, err
	}
	return j.proveOutFacts(p, head), nil
}

// operationNumbered returns the operation, from 1, whose program number is n; 0 when there is none.
func operationNumbered(s *spec.Spec, n int) int {
	for i, o := range s.Operations {
		if o.Program == n || o.Program == 0 && i+1 == n {
			return i + 1
		}
	}
	return 0
}

func (j *job) proveOutFacts(p program, out sheet.ProveOut) sheet.ProveOut {
	r := p.result
	out.Blocks, out.Bytes, out.PathLength, out.Seconds = r.Blocks, r.Bytes, r.PathLength, r.Seconds
	for i, c := range r.Cuts {
		out.Passes = append(out.Passes, j.passFacts(p, i, c))
	}
	if p.finish != nil {
		if run, err := j.follower(*p.finish); err == nil {
			out.Follower = j.reported(run)
		}
	} else if loop, ok := oneTurn(r.Finish, math.Pow10(-j.spec.Control.Decimals)); ok && !j.drum() { // of walls cut apart it is not known
		exact := j.toolPath(r.FinishOffset)
		if run, err := j.follower(written{file: p.name, curve: "last pass", path: loop, toPitch: -exact.Left()}); err == nil {
			out.Follower = j.reported(run)
		}
	}
	for _, f := range r.Failures {
		fault := sheet.Fault{ID: f.ID, Line: f.Line, Value: sheet.Maybe(f.Value), Limit: sheet.Maybe(f.Limit), Text: f.Text}
		if !math.IsNaN(f.CamAngle) {
			fault.CamAngle = sheet.Maybe(plane.Wrap360(f.CamAngle))
		}
		if f.N >= 0 && f.Line > 0 {
			fault.Block = &f.N
		}
		out.Faults = append(out.Faults, fault)
	}
	out.Proven = len(out.Faults) == 0
	return out
}
