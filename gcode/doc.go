// Package gcode plans NC programs for a plate cam and proves them after they
// have been read back.
//
// Plan turns a contour and an operation into a Program: typed blocks whose
// coordinates are whole counts of the output grid. gcode/write prints a Program;
// gcode/read, which knows neither this package nor the writer, reads any program
// of the same words; Verify holds what was read against an Expect, which comes
// from the exact curves and the operation, never from the plan.
//
//	program, err := gcode.Plan(part, op, machine)
//	bytes := write.Program(program)
//	back, err := read.Parse(bytes)
//	err = gcode.Differs(program, back)
//	result, err := gcode.Verify(back, gcode.Expected(part, op, machine, eps))
//
// Frame: the cam frame, seen on the marked face; X0 Y0 is the camshaft axis, Z0
// the top of the blank, Z towards the viewer. Lengths are in the unit of the
// spec, feeds in that unit a minute, cam angles in degrees.
package gcode
