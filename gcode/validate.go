package gcode

import (
	"fmt"
	"math"
)

// maxLength bounds lengths and feeds, in units and units a minute, so that counts
// of a grid of nine decimals stay exact.
const maxLength = 1e6

// validate refuses what no program can be made of. The spec's reader has its own,
// kinder checks; these keep a caller's slip from becoming a file.
func validate(part Part, op Operation, m Machine) error {
	if part.Curve == nil || op.Path == nil {
		return fmt.Errorf("operation %d: Part.Curve and Operation.Path must be set", op.Number)
	}
	checks := []check{
		{"thickness", part.Thickness, true}, {"blank diameter", part.BlankDiameter, false},
		{"clamp radius", part.ClampRadius, false}, {"safe Z", m.SafeZ, true}, {"feed", op.Feed, op.Process == Mill},
	}
	if op.Process == Wire {
		checks = append(checks, wireChecks(op)...)
	} else {
		checks = append(checks, millChecks(op)...)
	}
	for _, c := range checks {
		if !(c.value >= 0 && c.value < maxLength) || (c.positive && c.value == 0) {
			return fmt.Errorf("operation %d: %s is %g: a number above 0 and below %g is allowed", op.Number, c.name, c.value, float64(maxLength))
		}
	}
	switch {
	case m.Decimals < 0 || m.Decimals > 9:
		return fmt.Errorf("%d decimals: 0 to 9 can be written", m.Decimals)
	case op.ContourFeed && (op.Process != Mill || op.Compensation == CompControl):
		return fmt.Errorf("operation %d: a feed held at the contour is of a milled tool-center path", op.Number)
	case op.Coolant != 0 && op.Coolant != 7 && op.Coolant != 8:
		return fmt.Errorf("operation %d: coolant M%d: M7 and M8 turn it on", op.Number, op.Coolant)
	case op.Program < 0 || op.Program > 9999:
		return fmt.Errorf("operation %d: program number %d: 1 to 9999 can be one", op.Number, op.Program)
	case !(op.Overlap >= 0 && op.Overlap <= 90) || !(op.Breakthrough >= 0 && op.Breakthrough < maxLength):
		return fmt.Errorf("operation %d: overlap %g degrees, breakthrough %g", op.Number, op.Overlap, op.Breakthrough)
	case op.Number < 1 || op.Number > 9999:
		return fmt.Errorf("operation number %d: 1 to 9999 can be a program number", op.Number)
	case op.Process != Mill && op.Process != Wire && op.Process != Slot:
		return fmt.Errorf("process %q: mill, slot and wire have programs", op.Process)
	case op.Process == Slot && !(part.GrooveDepth > 0 && part.GrooveDepth < maxLength):
		return fmt.Errorf("operation %d: groove depth %g", op.Number, part.GrooveDepth)
	case op.Process == Slot && op.Compensation != CompPath:
		return fmt.Errorf("operation %d: compensation %q: a groove is cut on its pitch curve, with path", op.Number, op.Compensation)
	case op.Process == Slot && !(part.GrooveWidth >= op.ToolDiameter*(1-wholeWidth)):
		return fmt.Errorf("operation %d: a tool of diameter %g in a groove %g wide", op.Number, op.ToolDiameter, part.GrooveWidth)
	case op.Process == Slot && part.fills(op) && (len(op.Stock) != 1 || op.Stock[0] != 0):
		return fmt.Errorf("operation %d: stock %v: a tool of the groove's width leaves none, write [0]", op.Number, op.Stock)
	case op.Compensation != CompPath && op.Compensation != CompWear && op.Compensation != CompControl:
		return fmt.Errorf("operation %d: compensation %q: path, wear and control are known", op.Number, op.Compensation)
	case op.Process == Mill && op.Direction != Climb && op.Direction != Conventional:
		return fmt.Errorf("operation %d: direction %q: climb and conventional are known", op.Number, op.Direction)
	case len(op.centers()) == 0:
		return fmt.Errorf("operation %d: no passes: give the stock or the offset of each", op.Number)
	case math.IsNaN(part.StartAt) || math.IsInf(part.StartAt, 0):
		return fmt.Errorf("operation %d: start angle %g", op.Number, part.StartAt)
	}
	return nil
}

type check struct {
	name     string
	value    float64
	positive bool
}

func millChecks(op Operation) []check {
	cs := []check{{"tool number", float64(op.Tool), true}, {"tool diameter", op.ToolDiameter, true},
		{"spindle speed", op.SpindleSpeed, true}, {"plunge feed", op.PlungeFeed, true}, {"step down", op.StepDown, false}}
	for i, s := range op.Stock {
		cs = append(cs, check{fmt.Sprintf("stock of pass %d", i+1), s, false})
	}
	return cs
}

func wireChecks(op Operation) []check {
	cs := []check{{"wire diameter", op.WireDiameter, true}, {"tab width", op.Tab.Width, true}, {"start hole radius", op.StartHole.Radius, true}}
	for i, o := range op.Offsets {
		cs = append(cs, check{fmt.Sprintf("offset of pass %d", i+1), o, true})
	}
	return cs
}
