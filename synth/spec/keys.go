package spec

// The keys of the format, in the order a spec is written in.

// rotaryDecimals are the decimals of degrees unless the spec gives others.
const rotaryDecimals = 3

// formatVersion is the only value of the key lobewright.
const formatVersion = 1

// Bounds of the numbers of the format. They are wider than any cam and keep
// absurd figures (and the overflow that follows them) out of the geometry.
const (
	leastLength = 1e-6 // one step of the DXF grid
	mostLength  = 1e4
	mostRate    = 1e12 // limits of velocity, acceleration and jerk
	mostSpeed   = 1e6  // rpm, length/min
)

func length() span     { return span{noun: "a length", lo: leastLength, hi: mostLength} }
func orNoLength() span { return span{noun: "a length", lo: 0, hi: mostLength} }
func eitherWay() span  { return span{noun: "a length", lo: -mostLength, hi: mostLength} }
func rpm() span        { return span{noun: "a speed in rpm", lo: 0, hi: mostSpeed, above: true} }
func perMinute() span  { return span{noun: "a feed in length/min", lo: 0, hi: mostSpeed, above: true} }
func rate(unit string) span {
	return span{noun: "a number in length/" + unit, lo: 0, hi: mostRate, above: true}
}
func camAngle() span {
	return span{noun: "a cam angle in degrees", lo: 0, hi: 360, below: true}
}
func polarAngle() span {
	return span{noun: "a polar angle in degrees", lo: -360, hi: 360}
}
func pressure() span {
	return span{noun: "an angle in degrees", lo: 0, hi: 90, above: true, below: true}
}
func share() span { return span{noun: "a share", lo: 0, hi: 1} }

func specTable(v Vocabulary) table[Spec] {
	return table[Spec]{what: "a spec", fields: []field[Spec]{
		integer("lobewright", "version of this format: 1", formatVersion, formatVersion, func(*Spec) *int { return new(int) }).required(),
		partField(),
		text("title", "free text for the drawing and the sheet, any language", func(s *Spec) *string { return &s.Title }),
		text("revision", "revision of the part, free text", func(s *Spec) *string { return &s.Revision }),
		choice("units", "unit of every length in the spec", []string{string(MM), string(Inch)}, nil,
			func(s *Spec, w string) { s.Units = Units(w) }).required(),
		child("camshaft", "how the camshaft turns", camshaftTable(), func(s *Spec) *Camshaft { return &s.Camshaft }).required(),
		child("motion", "the lift over the cam angle", motionTable(v), func(s *Spec) *Motion { return &s.Motion }).required(),
		child("follower", "the follower", followerTable(v), func(s *Spec) *Follower { return &s.Follower }).required(),
		child("cam", "the body of the cam", camTable(v), func(s *Spec) *Cam { return &s.Cam }).required(),
		child("limits", "what the motion and the contour must keep", limitsTable(), func(s *Spec) *Limits { return &s.Limits }),
		child("tolerance", "the error budget", toleranceTable(), func(s *Spec) *Tolerance { return &s.Tolerance }).required(),
		maybe("blank", "the disk the cam is cut from; needed with operations", blankTable(), func(s *Spec) **Blank { return &s.Blank }),
		list("operations", "the NC programs, one each, in the order of work", operationTable(v),
			func(_ *reader, s *Spec, all []Operation) { s.Operations = all }),
		child("control", "the NC control that reads the programs", controlTable(), func(s *Spec) *Control { return &s.Control }),
		maybe("inspection", "how the finished cam is measured; left out: a table of the contour alone, a row a degree", inspectionTable(), func(s *Spec) **Inspection { return &s.Inspection }),
		text("material", "text for the drawing", func(s *Spec) *string { return &s.Material }),
		text("hardness", "text for the drawing", func(s *Spec) *string { return &s.Hardness }),
		text("finish", "text for the drawing", func(s *Spec) *string { return &s.Finish }),
		text("drawn", "who drew it, text for the drawing", func(s *Spec) *string { return &s.Drawn }),
		text("checked", "who checked it, text for the drawing", func(s *Spec) *string { return &s.Checked }),
		text("date", "date of the drawing, free text; no other date is printed", func(s *Spec) *string { return &s.Date }),
		texts("notes", "lines of text for the drawing and the sheet", func(s *Spec) *[]string { return &s.Notes }),
	}}
}

func camshaftTable() table[Camshaft] {
	return table[Camshaft]{what: "a camshaft", fields: []field[Camshaft]{
		number("speed", "constant speed in rpm", rpm(), func(c *Camshaft) *float64 { return &c.Speed }).required(),
		choice("rotation", "direction of turning, seen on the marked face", []string{"clockwise", "counterclockwise"}, nil,
			func(c *Camshaft, w string) { c.Clockwise = w == "clockwise" }).required(),
	}}
}

// Kinds of followers, by what they have.
const (
	transRoller = "translating-roller"
	transKnife  = "translating-knife"
	mushroom    = "translating-mushroom"
	transFlat   = "translating-flat"
	swingRoller = "swinging-roller"
	swingFlat   = "swinging-flat"
)

func followerTable(v Vocabulary) table[Follower] {
	return table[Follower]{what: "a follower", place: func(f *Follower, p Place) { f.Place = p },
		kinds: v.Followers, name: "kind", kind: byKey("kind", v.Followers, everyFollower()),
		fields: []field[Follower]{
			kindKey("kind", "kind of follower", v.Followers, func(f *Follower, w string) { f.Kind = w }),
			number("roller_diameter", "diameter of the roller, length", length(), func(f *Follower) *float64 { return &f.RollerDiameter }).of(transRoller, swingRoller).required(),
			number("face_radius", "radius of the mushroom's spherical face, length", length(), func(f *Follower) *float64 { return &f.FaceRadius }).of(mushroom).required(),
			number("head_diameter", "diameter of the mushroom's head, length; contact stays within it", length(), func(f *Follower) *float64 { return &f.HeadDiameter }).of(mushroom).required(),
			number("face_width", "width of the face across the follower's line, length, centered on it", length(), func(f *Follower) *float64 { return &f.FaceWidth }).of(transFlat).required(),
			numberOr("free", "offset", "distance of the follower's line from the camshaft axis, length, positive towards +Y, default 0; free: sizing finds the one that allows the smallest base radius", eitherWay(),
				func(f *Follower) *float64 { return &f.Offset }, func(f *Follower) *bool { return &f.OffsetFree }).of(transRoller, transKnife, mushroom),
			number("arm_length", "from the pivot to the roller's center, length", length(), func(f *Follower) *float64 { return &f.ArmLength }).of(swingRoller).required(),
			number("pivot_distance", "from the camshaft axis to the pivot, which lies on +X, length", length(), func(f *Follower) *float64 { return &f.PivotDistance }).of(swingRoller, swingFlat).required(),
			choice("side", "side of the center line the follower touches the cam on, default above (+Y)", []string{"above", "below"}, nil,
				func(f *Follower, w string) { f.Below = w == "below" }).of(swingRoller, swingFlat),
			number("face_offset", "from the pivot to the face's line, length, positive towards the cam, default 0", eitherWay(),
				func(f *Follower) *float64 { return &f.FaceOffset }).of(swingFlat),
			child("face", "the face, along its line from the foot of the pivot", faceTable(), func(f *Follower) *Face { return &f.Face }).of(swingFlat).required(),
		}}
}

func faceTable() table[Face] {
	return table[Face]{what: "a face", fields: []field[Face]{
		number("from", "where the face begins, length from the foot of the pivot towards the cam", eitherWay(), func(f *Face) *float64 { return &f.From }).required(),
		number("to", "where the face ends, length from the foot of the pivot towards the cam", eitherWay(), func(f *Face) *float64 { return &f.To }).required(),
	}}
}

// Kinds of cams.
const (
	plateCam  = "plate"
	grooveCam = "groove"
	barrelCam = "barrel"
)

func camTable(v Vocabulary) table[Cam] {
	return table[Cam]{what: "a cam", place: func(c *Cam, p Place) { c.Place = p },
		kinds: v.Cams, name: "kind", kind: byKey("kind", v.Cams, everyCam()),
		absent: []absent{{name: "keyway", of: "bore"}},
		fields: []field[Cam]{
			kindKey("kind", "kind of cam", v.Cams, func(c *Cam, w string) { c.Kind = w }),
			number("base_radius", "radius of the base circle, which the follower rests on at lift 0, length", length(), func(c *Cam) *float64 { return &c.BaseRadius }).of(plateCam, grooveCam).required(),
			number("radius", "outer radius of the barrel, length", length(), func(c *Cam) *float64 { return &c.Radius }).of(barrelCam).required(),
			number("length", "length of the barrel along the camshaft axis, from the datum end to the marked face", length(), func(c *Cam) *float64 { return &c.Length }).of(barrelCam).required(),
			number("track_position", "from the datum end to the middle of the track at lift 0, length", length(), func(c *Cam) *float64 { return &c.TrackPosition }).of(barrelCam).required(),
			number("thickness", "thickness of the cam, length", length(), func(c *Cam) *float64 { return &c.Thickness }).of(plateCam, grooveCam).required(),
			maybe("bore", "the hole about the camshaft axis", boreTable(), func(c *Cam) **Bore { return &c.Bore }),
			list("holes", "round through holes", holeTable(), func(_ *reader, c *Cam, all []Hole) { c.Holes = all }),
			number("outside_diameter", "outside diameter of the body, length", length(), func(c *Cam) *float64 { return &c.OutsideDiameter }).of(plateCam),
			number("outside_diameter", "outside diameter of the body, length", length(), func(c *Cam) *float64 { return &c.OutsideDiameter }).of(grooveCam).required(),
			number("groove_depth", "depth of the groove from the marked face, of a barrel from its outer radius, length", length(), func(c *Cam) *float64 { return &c.GrooveDepth }).of(grooveCam, barrelCam).required(),
			number("clearance", "groove width less roller diameter, length, shared by both walls", orNoLength(), func(c *Cam) *float64 { return &c.Clearance }).of(grooveCam, barrelCam).required(),
			choice("datum", "none: the cam has no angular datum (no keyway, no hole off the axis), on purpose", []string{"none"}, nil,
				func(c *Cam, _ string) { c.NoDatum = true }),
		}}
}

func boreTable() table[Bore] {
	return table[Bore]{what: "a bore", place: func(b *Bore, p Place) { b.Place = p }, fields: []field[Bore]{
		number("diameter", "diameter of the bore, length", length(), func(b *Bore) *float64 { return &b.Diameter }).required(),
		text("fit", "fit of the bore, text for the drawing: H7", func(b *Bore) *string { return &b.Fit }),
		maybe("keyway", "hub keyway", keywayTable(), func(b *Bore) **Keyway { return &b.Keyway }),
	}}
}

func keywayTable() table[Keyway] {
	return table[Keyway]{what: "a keyway", place: func(k *Keyway, p Place) { k.Place = p }, fields: []field[Keyway]{
		number("width", "width of the keyway, length", length(), func(k *Keyway) *float64 { return &k.Width }).required(),
		number("depth", "depth from the bore circle on the keyway's center line, length", length(), func(k *Keyway) *float64 { return &k.Depth }).required(),
		number("at", "polar angle of its center line, degrees", polarAngle(), func(k *Keyway) *float64 { return &k.At }).required(),
		text("fit", "fit of the width, text for the drawing: JS9", func(k *Keyway) *string { return &k.Fit }),
	}}
}

func holeTable() table[Hole] {
	return table[Hole]{what: "a hole", place: func(h *Hole, p Place) { h.Place = p }, fields: []field[Hole]{
		number("diameter", "diameter of the hole, length", length(), func(h *Hole) *float64 { return &h.Diameter }).required(),
		number("radius", "from the camshaft axis to the hole's center, length", length(), func(h *Hole) *float64 { return &h.Radius }).required(),
		number("at", "polar angle of its center, degrees", polarAngle(), func(h *Hole) *float64 { return &h.At }).required(),
	}}
}

func limitsTable() table[Limits] {
	return table[Limits]{what: "limits", fields: []field[Limits]{
		number("pressure_angle", "largest pressure angle where the follower moves, degrees, default 30 for translating and 35 for swinging followers", pressure(), func(l *Limits) *float64 { return &l.PressureAngle }),
		optional("pressure_angle_return", "largest pressure angle of the falls, degrees; not gated when left out", pressure(), func(l *Limits) **float64 { return &l.PressureAngleReturn }),
		optional("radius_of_curvature", "least convex radius of the contour, length", length(), func(l *Limits) **float64 { return &l.RadiusOfCurvature }),
		optional("velocity", "largest follower velocity, length/s", rate("s"), func(l *Limits) **float64 { return &l.Velocity }),
		optional("acceleration", "largest follower acceleration, length/s²", rate("s²"), func(l *Limits) **float64 { return &l.Acceleration }),
		optional("jerk", "largest follower jerk, length/s³", rate("s³"), func(l *Limits) **float64 { return &l.Jerk }),
		optional("wall", "least material between any two of contour, bore, keyway and holes, length", length(), func(l *Limits) **float64 { return &l.Wall }),
	}}
}

func toleranceTable() table[Tolerance] {
	return table[Tolerance]{what: "a tolerance", place: func(t *Tolerance, p Place) { t.Place = p }, fields: []field[Tolerance]{
		number("profile", "total width of the profile zone, equally disposed about the true contour, length", length(), func(t *Tolerance) *float64 { return &t.Profile }).required(),
		number("chord", "largest normal deviation of a programmed path from the exact path, length; left out: what the budget leaves, at most profile/10", length(), func(t *Tolerance) *float64 { return &t.Chord }),
		percentField(),
		optional("velocity_step", "largest step of the follower's velocity on the written path, length/s", rate("s"), func(t *Tolerance) **float64 { return &t.VelocityStep }),
		maybe("machine_tool", "errors of the machine tool, each plus or minus on the contour", machineTable(), func(t *Tolerance) **MachineTool { return &t.MachineTool }),
		number("phase", "setting of the cam against its angular datum, plus or minus, degrees, default 0", span{noun: "an angle in degrees", lo: 0, hi: 10}, func(t *Tolerance) *float64 { return &t.Phase }),
		number("roller", "error of the roller's diameter, plus or minus, length, default 0", orNoLength(), func(t *Tolerance) *float64 { return &t.Roller }),
		choice("combine", "how the errors add up, default fixed+rss: chord and grid add, the others combine statistically", []string{"fixed+rss", "worst", "rss"}, nil,
			func(t *Tolerance, w string) { t.Combine = w }),
	}}
}

func machineTable() table[MachineTool] {
	return table[MachineTool]{what: "a machine tool", fields: []field[MachineTool]{
		number("resolution", "resolution of the axes, plus or minus, length, default 0", orNoLength(), func(m *MachineTool) *float64 { return &m.Resolution }),
		number("positioning", "positioning error, plus or minus, length, default 0", orNoLength(), func(m *MachineTool) *float64 { return &m.Positioning }),
		number("runout", "runout of spindle and tool, plus or minus, length, default 0", orNoLength(), func(m *MachineTool) *float64 { return &m.Runout }),
		number("tool", "error of the tool's radius, plus or minus, length, default 0", orNoLength(), func(m *MachineTool) *float64 { return &m.Tool }),
	}}
}

func inspectionTable() table[Inspection] {
	return table[Inspection]{what: "an inspection", place: func(i *Inspection, p Place) { i.Place = p }, fresh: Inspection{Step: 1}, fields: []field[Inspection]{
		number("step", "degrees from row to row, a whole part of 360, default 1", span{noun: "an angle in degrees", lo: leastStep, hi: 90}, func(i *Inspection) *float64 { return &i.Step }),
		number("probe_diameter", "diameter of the probe's ball or roller, length; left out: no table for a probe", length(), func(i *Inspection) *float64 { return &i.ProbeDiameter }),
	}}
}

// leastStep bounds a table to 3600 rows.
const leastStep = 0.1

func blankTable() table[Blank] {
	return table[Blank]{what: "a blank", place: func(b *Blank, p Place) { b.Place = p }, fields: []field[Blank]{
		number("diameter", "diameter of the blank, length", length(), func(b *Blank) *float64 { return &b.Diameter }).required(),
		number("clamp_radius", "radius about the camshaft axis that the clamp takes, length; left out: none", length(), func(b *Blank) *float64 { return &b.ClampRadius }),
	}}
}

func operationTable(v Vocabulary) table[Operation] {
	const mill, wire, grind = "mill", "wire", "grind"
	fresh := Operation{Shift: "parallel", Tool: 1, Compensation: "path", Direction: "climb", Moves: "arcs"}
	return table[Operation]{what: "an operation", fresh: fresh, place: func(o *Operation, p Place) { o.Place = p },
		kinds: v.Processes, name: "process", kind: byKey("process", v.Processes, everyProcess()),
		fields: []field[Operation]{
			kindKey("process", "how the contour is cut", v.Processes, func(o *Operation, w string) { o.Process = w }),
			choice("axes", "axes of the machine: xy; polar (a rotary axis and a radial one, for plates); cylinder (a rotary axis and one along it, for barrels); default xy, of grind polar, of a barrel cylinder", everyAxes(), everyAxes(), func(o *Operation, w string) { o.Axes = w }),
			choice("rotary_axis", "letter of the rotary axis: on axes polar default C; on axes cylinder default A (with X along it, Y across), or B with Y along it and X across", []string{"A", "B", "C"}, nil, func(o *Operation, w string) { o.RotaryAxis = w }).of(mill, grind),
			choice("shift", "how a tool narrower than a barrel's groove is moved to its walls, default parallel: by the axial axis and one across it; rotary: by the axial and the rotary axis", []string{"parallel", "rotary"}, nil, func(o *Operation, w string) { o.Shift = w }).of(mill),
			integer("tool", "tool number, default 1", 1, 9999, func(o *Operation) *int { return &o.Tool }).of(mill, grind),
			number("tool_diameter", "diameter of the cutter or the wheel, length", length(), func(o *Operation) *float64 { return &o.ToolDiameter }).of(mill, grind).required(),
			number("spindle_speed", "spindle speed in rpm", rpm(), func(o *Operation) *float64 { return &o.SpindleSpeed }).of(mill, grind).required(),
			number("feed", "feed along the contour, length/min", perMinute(), func(o *Operation) *float64 { return &o.Feed }).of(mill, grind).required(),
			number("feed", "feed along the contour, length/min; left out: the generator sets it, and the program has no F word", perMinute(), func(o *Operation) *float64 { return &o.Feed }).of(wire),
			number("plunge_feed", "feed down into the blank, length/min", perMinute(), func(o *Operation) *float64 { return &o.PlungeFeed }).of(mill, grind).required(),
			number("step_down", "depth of a cut, length; left out: the full thickness at once", length(), func(o *Operation) *float64 { return &o.StepDown }).of(mill),
			numbers("stock", "material left on the contour after each pass, length, not growing, last pass last", orNoLength(), func(o *Operation) *[]float64 { return &o.Stock }).of(mill, grind).required(),
			choice("direction", "direction of cutting, default climb", []string{"climb", "conventional"}, nil, func(o *Operation, w string) { o.Direction = w }).of(mill, grind),
			number("step_over", "widest cut of the passes that first take the blank down to the first stock, as a share of the tool's diameter; left out: no such passes", span{noun: "a share", lo: 0.02, hi: 1}, func(o *Operation) *float64 { return &o.StepOver }).of(mill),
			integer("spring_passes", "how often the last pass is run again, default 0", 0, 9, func(o *Operation) *int { return &o.Spring }).of(mill, grind),
			number("overlap", "how far a pass runs past its start, degrees of cam angle, default 4", span{noun: "degrees", lo: 0.5, hi: 90}, func(o *Operation) *float64 { return &o.Overlap }).of(mill, grind),
			number("breakthrough", "how far the tool goes below the part, length, default 1 mm or 0.04 inch", length(), func(o *Operation) *float64 { return &o.Breakthrough }).of(mill, grind),
			number("flute_length", "length of the cutting edges, held against the depth of the cut; left out: not checked", length(), func(o *Operation) *float64 { return &o.FluteLength }).of(mill),
			choice("feed_at", "where the feed is held, default center: contour scales F on arcs by the radii of tool center and contour", []string{"center", "contour"}, nil, func(o *Operation, w string) { o.FeedAt = w }).of(mill),
			choice("coolant", "coolant while cutting, default none: flood M8, mist M7", []string{"flood", "mist", "none"}, nil, func(o *Operation, w string) { o.Coolant = w }).of(mill, grind),
			integer("program_number", "program number, the O word, default the operation's place in the list", 1, 9999, func(o *Operation) *int { return &o.Program }),
			number("wire_diameter", "diameter of the wire, length", length(), func(o *Operation) *float64 { return &o.WireDiameter }).of(wire).required(),
			numbers("offsets", "wire center to contour for each pass, length, falling, at least the wire's radius", length(), func(o *Operation) *[]float64 { return &o.Offsets }).of(wire).required(),
			maybe("tab", "what holds the part in the blank until it is clamped and cut free", tabTable(), func(o *Operation) **Tab { return &o.Tab }).of(wire).required(),
			maybe("slots", "lines of your own where the wire machine's codes belong", slotsTable(), func(o *Operation) **Slots { return &o.Slots }).of(wire),
			maybe("start_hole", "where the wire is threaded", startHoleTable(), func(o *Operation) **StartHole { return &o.StartHole }).of(wire).required(),
			choice("compensation", "path: tool-center path written; wear: the same with G41/G42 and a small offset; control: contour written; default path", []string{"path", "wear", "control"}, nil,
				func(o *Operation, w string) { o.Compensation = w }),
			optional("start_at_cam_angle", "cam angle where the contour is entered, degrees; left out: middle of the longest low dwell, or where curvature changes least (a wire begins beside its tab)", camAngle(),
				func(o *Operation) **float64 { return &o.StartAt }).of(mill, grind),
			choice("moves", "what the path is made of, default arcs (with lines)", []string{"arcs", "lines"}, nil, func(o *Operation, w string) { o.Moves = w }),
		}}
}

func tabTable() table[Tab] {
	return table[Tab]{what: "a tab", fields: []field[Tab]{
		number("width", "width along the contour, length", length(), func(t *Tab) *float64 { return &t.Width }).required(),
		number("at", "polar angle of its middle, degrees", polarAngle(), func(t *Tab) *float64 { return &t.At }).required(),
	}}
}

func slotsTable() table[Slots] {
	return table[Slots]{what: "wire slots", place: func(s *Slots, p Place) { s.Place = p }, fields: []field[Slots]{
		text("thread", "line that threads the wire", func(s *Slots) *string { return &s.Thread }),
		text("cut_wire", "line that cuts it", func(s *Slots) *string { return &s.CutWire }),
		texts("conditions", "line that sets the generator, for each pass", func(s *Slots) *[]string { return &s.Conditions }),
	}}
}

func startHoleTable() table[StartHole] {
	return table[StartHole]{what: "a start hole", fields: []field[StartHole]{
		number("radius", "from the camshaft axis to its center, length", length(), func(s *StartHole) *float64 { return &s.Radius }).required(),
		number("at", "polar angle of its center, degrees", polarAngle(), func(s *StartHole) *float64 { return &s.At }).required(),
	}}
}

func controlTable() table[Control] {
	return table[Control]{what: "a control", place: func(c *Control, p Place) { c.Place = p },
		fields: []field[Control]{
			text("file", "file of named control settings, its path taken from the spec's folder; keys given here stand above those of the set", func(c *Control) *string { return &c.File }),
			text("set", "name of the settings in that file", func(c *Control) *string { return &c.Set }),
			integer("decimals", "decimals of the coordinates, default 3 in mm and 4 in inch", 2, 6, func(c *Control) *int { return &c.Decimals }),
			choice("arc_center", "how I and J give an arc's center, default incremental", []string{"incremental", "absolute"}, nil,
				func(c *Control, w string) { c.AbsoluteArcs = w == "absolute" }),
			number("arc_mismatch", "largest difference of an arc's start and end radius the control takes, length, default 0.002 mm or 0.0002 inch", length(),
				func(c *Control) *float64 { return &c.ArcMismatch }),
			flag("block_numbers", "number the blocks, default true", func(c *Control) *bool { return &c.BlockNumbers }),
			integer("max_blocks", "most blocks of a program; left out: no limit", 1, 100_000_000, func(c *Control) *int { return &c.MaxBlocks }),
			choice("arc_form", "how an arc is written, default center (I and J); radius: R, of arcs up to half a turn", []string{"center", "radius"}, nil, func(c *Control, w string) { c.RadiusArcs = w == "radius" }),
			number("largest_radius", "largest radius of an arc, length, flatter ones become lines; default 10000", length(), func(c *Control) *float64 { return &c.LargestRadius }),
			number("least_chord", "shortest way from start to end of an arc, length, shorter ones become lines; default 10 counts of the last decimal", length(), func(c *Control) *float64 { return &c.LeastChord }),
			number("split_angle", "largest sweep of an arc, degrees, longer ones are split; default 90", span{noun: "an angle in degrees", lo: 90, hi: 180}, func(c *Control) *float64 { return &c.SplitAngle }),
			integer("max_bytes", "most bytes of a program; left out: no limit", 1, 100_000_000, func(c *Control) *int { return &c.MaxBytes }),
			integer("line_length", "most characters of a line; left out: no limit, comments are at most 78 long", 64, 256, func(c *Control) *int { return &c.LineLength }),
			choice("path_mode", "what the control does at corners of the path: exact G61, blend G64; left out: as it is set", []string{"exact", "blend"}, nil, func(c *Control, w string) { c.PathMode = w }),
			number("path_tolerance", "by how much blending may leave the path, length, written as P with G64; it is a share of the budget", length(), func(c *Control) *float64 { return &c.PathTolerance }),
			texts("program_start", "lines of your own after the first modes, such as G05.1 Q1; they are passed on, not proven, and may not move an axis", func(c *Control) *[]string { return &c.ProgramStart }),
			texts("program_end", "lines of your own before the last modes", func(c *Control) *[]string { return &c.ProgramEnd }),
			choice("comments", "how comments are written, default parentheses", []string{"parentheses", "semicolon"}, nil, func(c *Control, w string) { c.Semicolons = w == "semicolon" }),
			choice("rotary_sense", "what a growing rotary word turns counterclockwise, seen on the marked face: the tool about the work, or the table with the work; needed for axes polar and cylinder, no default", []string{"tool", "table"}, nil,
				func(c *Control, w string) { c.RotarySense = w }),
			integer("rotary_decimals", "decimals of rotary words, default 3", 2, 6, func(c *Control) *int { return &c.RotaryDecimals }),
			choice("rotary_words", "whether rotary words run on, default unwound: past 360 and below 0; modulo: 0 to 360, for an axis that rolls over and goes the short way", []string{"unwound", "modulo"}, nil, func(c *Control, w string) { c.RotaryModulo = w == "modulo" }),
			number("rotary_acceleration", "largest acceleration of the rotary axis, degrees/s2; left out: no limit", span{noun: "degrees/s2", lo: 0, hi: mostRate, above: true}, func(c *Control) *float64 { return &c.RotaryAcceleration }),
			choice("inverse_time", "what F is under G93, default per_minute: one over the minutes of a move; seconds: its seconds", []string{"per_minute", "seconds"}, nil, func(c *Control, w string) { c.InverseSeconds = w == "seconds" }),
			number("rotary_speed", "largest speed of the rotary axis, degrees/min; left out: no limit", span{noun: "degrees/min", lo: 0, hi: mostRate, above: true}, func(c *Control) *float64 { return &c.RotarySpeed }),
			number("safe_z", "height of rapid moves above the top of the blank, length, default 5 mm or 0.2 inch", length(), func(c *Control) *float64 { return &c.SafeZ }),
		}}
}
