package gcode

import "fmt"

// header says what the person at the machine must compare with the set-up.
func (p drumPlan) header() []string {
	d, op, m := p.d, p.op, p.m
	h, unit, turn := heading(d.Name, d.Revision, d.Title, d.Inch, d.CamClockwise)
	axial, across := "X", "Y"
	if op.Rotary == 'B' {
		axial, across = across, axial
	}
	h = append(h,
		fmt.Sprintf("OPERATION %d MILL A BARREL CAM", op.Number),
		"UNITS "+unit+" AND DEGREES",
		fmt.Sprintf("%s0 DATUM END, %s PLUS TOWARDS THE MARKED FACE", axial, axial),
	)
	h = append(h, m.turns(op.Rotary, turn)...)
	h = append(h,
		"Z0 OUTER RADIUS "+m.text(d.Radius)+". TOOL AXIS RADIAL, Z PLUS AWAY. SAFE Z "+m.text(m.SafeZ),
		fmt.Sprintf("%s0 TOOL OVER THE CAMSHAFT AXIS", across),
		"BARREL LENGTH "+m.text(d.Length)+", TURNED TO ITS RADIUS",
		fmt.Sprintf("TOOL T%d DIAMETER %s RIGHT-HAND, CUTS OVER CENTER", op.Tool, m.text(op.ToolDiameter)),
		fmt.Sprintf("GROOVE WIDTH %s DEPTH %s", m.text(d.Width), m.text(d.Depth)),
		fmt.Sprintf("ON THE PITCH CURVE %d TURNS TO AND FRO, EACH RAMPED DOWN OVER %g DEGREES", len(d.depths(op, p.grid, DrumPass{})), rampDegrees),
	)
	if d.fills(op) {
		h = append(h, "THE GROOVE IS AS WIDE AS THE TOOL. MEASURE IT AND ITS RUNOUT")
	} else {
		h = append(h, "THEN ALONG BOTH WALLS. STOCK LEFT BY EACH PASS "+m.list(op.Stock),
			fmt.Sprintf("%s CUTTING. EACH SLIDES IN AND OUT OVER %g DEGREES AND RUNS %g PAST ITS START", op.Direction, leadDegrees, slotOverlap))
		if p.offCenter() {
			h = append(h, fmt.Sprintf("%s MOVES THE TOOL OFF CENTER. CHECK ITS SIGN: AT %s PLUS THE TOOL STANDS %s", across, across, besideWord(op.Rotary)))
		} else {
			h = append(h, "SHIFTED BY THE ROTARY AXIS. THE TOOL STAYS ON CENTER")
		}
	}
	h = append(h, "FEED "+m.text(op.Feed)+" AT THE OUTER RADIUS, IN INVERSE TIME G93: "+inverseText(m))
	if last := op.Stock[len(op.Stock)-1]; last > 0 {
		h = append(h, "NOT FINISHED. "+m.text(last)+" IS LEFT ON THE WALLS")
	}
	return append(h, cautions(op)...)
}

// besideWord says where a tool moved along plus of the cross axis stands.
func besideWord(rotary byte) string {
	if rotary == 'A' {
		return "TOWARDS FALLING POLAR ANGLE"
	}
	return "TOWARDS GROWING POLAR ANGLE"
}
