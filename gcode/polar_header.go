package gcode

import "fmt"

// header says what the person at the machine must compare with the set-up.
func (p polarPlan) header() []string {
	part, op, m := p.part, p.op, p.m
	h, unit, turn := heading(part.Name, part.Revision, part.Title, part.Inch, part.CamClockwise)
	process, tool := "MILL", "TOOL T%d DIAMETER %s RIGHT-HAND"
	if op.Grinds {
		process, tool = "GRIND", "WHEEL T%d DIAMETER %s AS IT IS DRESSED"
	}
	h = append(h,
		fmt.Sprintf("OPERATION %d %s ON A ROTARY AND A RADIAL AXIS", op.Number, process),
		"UNITS "+unit+" AND DEGREES",
		"X0 CAMSHAFT AXIS, X PLUS OUTWARDS THROUGH THE TOOL. Z TOWARDS THE VIEWER OF THE MARKED FACE",
		"THE RADIAL AXIS GOES THROUGH THE CAMSHAFT AXIS. CHECK THAT NOTHING IS BESIDE IT",
	)
	h = append(h, m.turns(op.Rotary, turn)...)
	h = append(h, body(part, m)...)
	h = append(h,
		fmt.Sprintf(tool, op.Tool, m.text(op.ToolDiameter)),
		"X IS THE CENTER OF THE TOOL. ANOTHER DIAMETER NEEDS ANOTHER PROGRAM",
		"Z0 TOP OF BLANK. SAFE Z "+m.text(m.SafeZ),
		"CUTS "+m.text(op.breakthrough(part))+" BELOW THE PART",
		"STOCK LEFT BY EACH PASS "+m.list(op.Stock),
		fmt.Sprintf("%s CUTTING. EACH PASS RUNS %g DEGREES PAST ITS START", op.Direction, op.overlap()),
		"EACH COMES IN ALONG X AND SLIDES ON AND OFF WHILE THE WORK TURNS",
		"FEED "+m.text(op.Feed)+" AT THE CONTOUR, IN INVERSE TIME G93: "+inverseText(m),
	)
	if last := op.Stock[len(op.Stock)-1]; last > 0 {
		h = append(h, "NOT FINISHED. "+m.text(last)+" IS LEFT ON THE CONTOUR")
	}
	return append(h, cautions(op)...)
}

// inverseText says what F means under G93.
func inverseText(m Machine) string {
	if m.InverseSeconds {
		return "F IS THE SECONDS OF EACH MOVE"
	}
	return "F IS ONE OVER THE MINUTES OF EACH MOVE"
}
