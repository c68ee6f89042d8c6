package gcode

import (
	"fmt"
	"strings"
)

// header returns the comments before the first block. They hold what the person
// at the machine must compare with the set-up; none of it is read by the control.
func header(part Part, op Operation, m Machine) []string {
	h, unit, turn := heading(part.Name, part.Revision, part.Title, part.Inch, part.CamClockwise)
	h = append(h,
		fmt.Sprintf("OPERATION %d %s XY", op.Number, op.Process),
		"UNITS "+unit,
		"SEEN ON THE MARKED FACE. X0 Y0 CAMSHAFT AXIS. Z TOWARDS THE VIEWER",
		"CAM TURNS "+turn+" SEEN SO. A MIRRORED PART IS SCRAP",
		arcText(m),
	)
	h = append(h, body(part, m)...)
	switch op.Process {
	case Wire:
		h = append(h, wireText(part, op, m)...)
	case Slot:
		h = append(h, slotText(part, op, m)...)
	default:
		h = append(h, millText(part, op, m)...)
	}
	for _, r := range registers(op) {
		h = append(h, fmt.Sprintf("SET D%d %s %s", r.Number, m.text(r.Value), r.Text))
	}
	return append(h, cautions(op)...)
}

// heading names the part; unit and turn are the words for its unit and the camshaft's turning direction.
func heading(name, revision, title string, inch, clockwise bool) (h []string, unit, turn string) {
	unit, turn = "MM", "COUNTERCLOCKWISE"
	if inch {
		unit = "INCH"
	}
	if clockwise {
		turn = "CLOCKWISE"
	}
	h = []string{"PART " + name + " REVISION " + revision}
	if title != "" {
		h = append(h, "TITLE "+title)
	}
	return h, unit, turn
}

// text prints a length with the decimals of the control.
func (m Machine) text(x float64) string { return m.grid().Format(counts(m.grid(), x)) }

// list prints lengths.
func (m Machine) list(xs []float64) string {
	parts := make([]string, len(xs))
	for i, x := range xs {
		parts[i] = m.text(x)
	}
	return strings.Join(parts, " ")
}

func arcText(m Machine) string {
	if m.RadiusArcs {
		return "R RADIUS OF THE ARC, UP TO HALF A TURN"
	}
	if m.AbsoluteArcs {
		return "I J ABSOLUTE ARC CENTERS"
	}
	return "I J FROM THE START OF THE ARC"
}

// body describes the blank.
func body(part Part, m Machine) []string {
	h := []string{"THICKNESS " + m.text(part.Thickness)}
	if part.BlankDiameter > 0 {
		h = append(h, "BLANK DIAMETER "+m.text(part.BlankDiameter))
	} else {
		h = append(h, "BLANK NOT GIVEN. CHECK THAT EVERY PLUNGE IS CLEAR OF IT")
	}
	if part.BoreDiameter > 0 {
		h = append(h, "BORE DIAMETER "+m.text(part.BoreDiameter))
	}
	if part.ClampRadius > 0 {
		h = append(h, "CLAMP WITHIN RADIUS "+m.text(part.ClampRadius))
	}
	return h
}

func millText(part Part, op Operation, m Machine) []string {
	h := []string{
		fmt.Sprintf("TOOL T%d DIAMETER %s RIGHT-HAND", op.Tool, m.text(op.ToolDiameter)),
		"Z0 TOP OF BLANK. SAFE Z " + m.text(m.SafeZ),
		"CUTS " + m.text(op.breakthrough(part)) + " BELOW THE PART",
		"STOCK LEFT BY EACH PASS " + m.list(op.Stock),
		fmt.Sprintf("%s CUTTING. EACH PASS RUNS %g DEGREES PAST ITS START", op.Direction, op.overlap()),
		"COMPENSATION " + compText(op),
		feedText(op),
	}
	if last := op.Stock[len(op.Stock)-1]; last > 0 {
		h = append(h, "NOT FINISHED. "+m.text(last)+" IS LEFT ON THE CONTOUR")
	}
	return h
}

func slotText(part Part, op Operation, m Machine) []string {
	h := []string{
		fmt.Sprintf("TOOL T%d DIAMETER %s RIGHT-HAND, CUTS OVER CENTER", op.Tool, m.text(op.ToolDiameter)),
		fmt.Sprintf("GROOVE WIDTH %s DEPTH %s", m.text(part.GrooveWidth), m.text(part.GrooveDepth)),
		"Z0 TOP OF BLANK. SAFE Z " + m.text(m.SafeZ),
		fmt.Sprintf("ON THE PITCH CURVE %d TURNS TO AND FRO, EACH RAMPED DOWN OVER %g DEGREES", len(slotDepths(part, op, m.grid())), rampDegrees),
	}
	if part.fills(op) {
		h = append(h, "THE GROOVE IS AS WIDE AS THE TOOL. MEASURE IT AND ITS RUNOUT")
	} else {
		h = append(h, "THEN ALONG BOTH WALLS. STOCK LEFT BY EACH PASS "+m.list(op.Stock),
			fmt.Sprintf("%s CUTTING, THE OUTER WALL AGAINST THE INNER ONE. EACH RUNS %g DEGREES PAST ITS START", op.Direction, slotOverlap))
	}
	h = append(h, "COMPENSATION "+compText(op), "F IS THE FEED OF THE TOOL CENTER")
	if last := op.Stock[len(op.Stock)-1]; last > 0 {
		h = append(h, "NOT FINISHED. "+m.text(last)+" IS LEFT ON THE WALLS")
	}
	return h
}

func wireText(part Part, op Operation, m Machine) []string {
	h := []string{
		"WIRE DIAMETER " + m.text(op.WireDiameter),
		"OFFSETS OF THE PASSES " + m.list(op.Offsets),
		fmt.Sprintf("TAB %s WIDE AT %g DEGREES. START HOLE AT RADIUS %s, %g DEGREES",
			m.text(op.Tab.Width), op.Tab.At, m.text(op.StartHole.Radius), op.StartHole.At),
		"COMPENSATION " + compText(op),
		"THE CAM IS THE PIECE THAT DROPS",
		"GENERATOR CONDITIONS AND THREADING BELONG TO THE MACHINE.",
		"PUT THEM AT EACH SLOT",
	}
	if op.Feed == 0 {
		h = append(h, "NO F WORD. THE GENERATOR SETS THE FEED")
	}
	return h
}

// feedText says what F means.
func feedText(op Operation) string {
	if op.ContourFeed {
		return "F IS SCALED ON ARCS. THE FEED IS HELD AT THE CONTOUR. THE CONTROL MUST NOT SCALE IT AGAIN"
	}
	return "F IS THE FEED OF THE TOOL CENTER"
}

func compText(op Operation) string {
	switch op.Compensation {
	case CompWear:
		return "WEAR. TOOL-CENTER PATH, D HOLDS THE SMALL DIFFERENCE"
	case CompControl:
		return "CONTROL. CONTOUR WRITTEN, D HOLDS THE WHOLE OFFSET"
	}
	return "NONE. TOOL-CENTER PATH WRITTEN"
}

// registers returns the D table: what the registers hold for the first part.
func registers(op Operation) []Register {
	value := func(whole float64) float64 {
		if op.Compensation == CompWear {
			return 0
		}
		return whole
	}
	switch {
	case op.Compensation == CompPath:
		return nil
	case op.Process == Wire:
		var rs []Register
		for i, o := range op.Offsets {
			rs = append(rs, Register{i + 1, value(o), fmt.Sprintf("WIRE OFFSET OF PASS %d", i+1)})
		}
		return rs
	case op.Compensation == CompWear:
		return []Register{{op.Tool, 0, "WEAR ONLY, NOT THE RADIUS"}}
	}
	return []Register{{op.Tool, op.radius(), "TOOL RADIUS"}}
}

// cautions after practice of machine builders' manuals; common practice, no source.
func cautions(op Operation) []string {
	h := []string{"CAUTION. NOT VERIFIED ON THIS MACHINE. CHECK UNITS, DATUM,"}
	if op.Process == Wire {
		h = append(h, "TURNING DIRECTION, WIRE DIAMETER, OFFSETS. RUN WITHOUT POWER FIRST.",
			"FIRST PART IN SCRAP. MEASURE, THEN RELEASE")
	} else {
		h = append(h, "TURNING DIRECTION, TOOL DIAMETER, D AND H REGISTERS, CLAMP.",
			"RUN DRY, SINGLE BLOCK, LOW RAPID, HAND ON FEED HOLD.",
			"FIRST PART IN SOFT MATERIAL. MEASURE, THEN RELEASE")
	}
	return append(h, "A ROTATING CAM AND ITS FOLLOWER ARE A NIP POINT. GUARD THEM",
		"LOCAL RULES, THE MACHINE MANUAL AND THE LICENSED OR RESPONSIBLE PERSON DECIDE")
}
