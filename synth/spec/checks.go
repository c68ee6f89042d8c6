package spec

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
)

// Checks that compare keys with one another. Each is made only when the values
// it compares were read without a fault, so that one mistake gives one message.

// check makes the checks of the body, the blank and the operations.
func (r *reader) check(s *Spec) {
	r.checkBody(s)
	r.checkBlank(s)
	r.checkInspection(s)
	r.checkControl(s)
	for i := range s.Operations {
		path := fmt.Sprintf("operations[%d]", i+1)
		r.checkAxes(path, s, &s.Operations[i])
		r.checkPasses(path, s, &s.Operations[i])
		r.checkNumber(path, s, i)
		switch op := &s.Operations[i]; op.Process {
		case "mill", "grind":
			r.checkStock(path+".stock", op.Stock)
		case "wire":
			r.checkWire(path, s, op)
		}
	}
}

// checkControl: what goes together, and what a line of the user's own may be.
func (r *reader) checkControl(s *Spec) {
	c := s.Control
	if (c.File == "") != (c.Set == "") && r.ok("control.file", "control.set") {
		r.faultAtKey("control", Fault{Found: "one of file and set", Allowed: "both: the file, and which of its sets"})
	}
	if c.PathTolerance > 0 && c.File == "" && c.PathMode != "blend" && r.ok("control.path_mode", "control.path_tolerance") {
		r.faultAt("control.path_tolerance", Fault{Found: figure(c.PathTolerance), Allowed: "a tolerance with path_mode: blend", Advice: "add it, or take the key out"})
	}
	r.checkLines("control.program_start", c.ProgramStart, c.LineLength)
	r.checkLines("control.program_end", c.ProgramEnd, c.LineLength)
	for i, op := range s.Operations {
		if op.Slots == nil {
			continue
		}
		path := fmt.Sprintf("operations[%d].slots.", i+1)
		for name, line := range map[string]string{"thread": op.Slots.Thread, "cut_wire": op.Slots.CutWire} {
			if line != "" {
				r.checkLine(path+name, line, c.LineLength)
			}
		}
		r.checkLines(path+"conditions", op.Slots.Conditions, c.LineLength)
		if n := len(op.Slots.Conditions); n > len(op.Offsets) && r.ok(path+"conditions") {
			r.faultAt(path+"conditions", Fault{Found: fmt.Sprintf("%d lines", n), Allowed: fmt.Sprintf("one for each pass, %d", len(op.Offsets))})
		}
	}
}

func (r *reader) checkLines(path string, lines []string, length int) {
	for i, l := range lines {
		r.checkLine(fmt.Sprintf("%s[%d]", path, i+1), l, length)
	}
}

var (
	ownLine = regexp.MustCompile(`^[A-Z#][A-Z0-9.,+\-*/=# ]*$`)
	moving  = regexp.MustCompile(`[XYZABCUVWIJK] *[-+.0-9]|\bG0*[0-3]\b|\b[NO][0-9]`)
)

// checkLine: a line of the user's own is of a control's characters, fits its line, and moves no axis by a word that this
// program knows.
func (r *reader) checkLine(path, line string, length int) {
	const mostOwn = 60
	if length == 0 || length > mostOwn {
		length = mostOwn
	}
	if !r.ok(path) {
		return
	}
	switch word := moving.FindString(line); {
	case !ownLine.MatchString(line) || line != strings.TrimSpace(line) || len(line)+len("N99990 ") > length:
		r.faultAt(path, Fault{Found: strconv.Quote(line), Allowed: fmt.Sprintf("a line of capital letters, digits, spaces and . , + - * / = #, of at most %d characters", length-len("N99990 "))})
	case word != "":
		r.faultAt(path, Fault{Found: word + " in " + strconv.Quote(line), Allowed: "words that move no axis and are no block or program number", Advice: "what moves the tool must be proven: leave it to the program"})
	}
}

func (r *reader) checkBody(s *Spec) {
	c := s.Cam
	if kind := s.Follower.Kind; c.Kind == grooveCam && kind != transRoller && kind != swingRoller && r.ok("follower.kind", "cam.kind") {
		r.faultAt("cam.kind", Fault{Found: "groove with the follower " + kind, Allowed: "a groove with " + transRoller + " or " + swingRoller})
	}
	if c.Kind == grooveCam && c.GrooveDepth >= c.Thickness && r.ok("cam.groove_depth", "cam.thickness") {
		r.faultAt("cam.groove_depth", Fault{Found: figure(c.GrooveDepth), Allowed: "a groove shallower than the thickness, which is " + figure(c.Thickness)})
	}
	if c.Kind == barrelCam {
		r.checkBarrel(s)
	}
	if s.Follower.OffsetFree && c.Kind != plateCam && r.ok("follower.offset", "cam.kind") {
		r.faultAt("follower.offset", Fault{Found: "free", Allowed: eitherWay().String(), Advice: "only a plate cam can be sized"})
	}
	if b := c.Bore; b != nil && c.Kind != barrelCam && r.ok("cam.bore.diameter", "cam.base_radius") && b.Diameter/2 >= c.BaseRadius {
		r.faultAt("cam.bore.diameter", Fault{Found: figure(b.Diameter), Allowed: "a bore smaller than the base circle, whose diameter is " + figure(2*c.BaseRadius)})
	}
	if b := c.Bore; b != nil && b.Keyway != nil && r.ok("cam.bore.diameter", "cam.bore.keyway.width") && b.Keyway.Width >= b.Diameter {
		r.faultAt("cam.bore.keyway.width", Fault{Found: figure(b.Keyway.Width), Allowed: "a keyway narrower than the bore, whose diameter is " + figure(b.Diameter)})
	}
	if t := s.Tolerance; t.Roller > 0 && s.Follower.RollerDiameter == 0 && r.ok("follower", "tolerance.roller") {
		r.faultAt("tolerance.roller", Fault{Found: figure(t.Roller), Allowed: "the error of a roller: the follower " + s.Follower.Kind + " has none", Advice: "take the key out"})
	}
	prime := c.BaseRadius + s.Follower.RollerDiameter/2 + s.Follower.FaceRadius
	if c.Kind != barrelCam && r.ok("follower", "cam.base_radius") && math.Abs(s.Follower.Offset) >= prime {
		r.faultAt("follower.offset", Fault{Found: figure(s.Follower.Offset),
			Allowed: "an offset smaller than the prime radius (base radius and roller or face radius), which is " + figure(prime)})
	}
}

// checkBarrel: the follower is a roller on a radial axis, and the groove leaves a core.
func (r *reader) checkBarrel(s *Spec) {
	c, f := s.Cam, s.Follower
	if r.ok("follower.kind", "cam.kind") && f.Kind != transRoller {
		r.faultAt("cam.kind", Fault{Found: "barrel with the follower " + f.Kind, Allowed: "a barrel with " + transRoller})
		return
	}
	if r.ok("follower.offset") && f.Offset != 0 {
		r.faultAt("follower.offset", Fault{Found: figure(f.Offset), Allowed: "0: the roller's axis of a barrel cam is radial", Advice: "take the key out"})
	}
	if r.ok("cam.groove_depth", "cam.radius") && c.GrooveDepth >= c.Radius {
		r.faultAt("cam.groove_depth", Fault{Found: figure(c.GrooveDepth), Allowed: "a groove shallower than the barrel's radius, which is " + figure(c.Radius)})
	} else if r.ok("cam.groove_depth", "cam.radius", "follower.roller_diameter") && f.RollerDiameter+c.Clearance >= 2*(c.Radius-c.GrooveDepth) {
		r.faultAt("cam.groove_depth", Fault{Found: figure(c.GrooveDepth), Allowed: "a groove that leaves a core thicker than the roller with its clearance, which is " + figure(f.RollerDiameter+c.Clearance)})
	}
	if b := c.Bore; b != nil && r.ok("cam.bore.diameter", "cam.groove_depth", "cam.radius") && b.Diameter/2 >= c.Radius-c.GrooveDepth {
		r.faultAt("cam.bore.diameter", Fault{Found: figure(b.Diameter), Allowed: "a bore smaller than the core under the groove, whose diameter is " + figure(2*(c.Radius-c.GrooveDepth))})
	}
}

// checkPasses: what only a plate cam's milling has.
func (r *reader) checkPasses(path string, s *Spec, op *Operation) {
	if op.Process == "mill" && op.Breakthrough == 0 {
		op.Breakthrough = 1
		if s.Units == Inch {
			op.Breakthrough = 0.04
		}
	}
	plate := s.Cam.Kind == plateCam
	if op.StepOver > 0 && !plate && r.ok("cam.kind", path+".step_over") {
		r.faultAt(path+".step_over", Fault{Found: figure(op.StepOver) + " on a cam of kind " + s.Cam.Kind, Allowed: "passes from the blank inwards on a plate cam", Advice: "take it out"})
	}
	if op.FeedAt == "contour" && r.ok("cam.kind", path+".feed_at", path+".compensation") {
		switch {
		case !plate:
			r.faultAt(path+".feed_at", Fault{Found: "contour on a cam of kind " + s.Cam.Kind, Allowed: "center"})
		case op.Compensation == "control":
			r.faultAt(path+".feed_at", Fault{Found: "contour with compensation: control", Allowed: "center: the control moves the path, and its feed", Advice: "use compensation: path or wear"})
		}
	}
}

// checkNumber: no two programs have one number.
func (r *reader) checkNumber(path string, s *Spec, i int) {
	number := func(i int) int {
		if n := s.Operations[i].Program; n > 0 {
			return n
		}
		return i + 1
	}
	for k := range i {
		if number(k) == number(i) {
			r.faultAtKey(path, Fault{Found: fmt.Sprintf("program number %d again, that of operation %d", number(i), k+1), Allowed: "a number of its own", Advice: "give program_number"})
			return
		}
	}
}

// checkAxes: a barrel is milled on a rotary axis and one along it, a plate may be on a rotary and a radial one; the sense of either must be
// told. Other cams are cut in the plane.
func (r *reader) checkAxes(path string, s *Spec, op *Operation) {
	drum := s.Cam.Kind == barrelCam
	if op.Axes == "" {
		switch {
		case drum:
			op.Axes = "cylinder"
		case op.Process == "grind":
			op.Axes = "polar"
		default:
			op.Axes = "xy"
		}
	}
	if !r.ok("cam.kind", path+".process", path+".axes") {
		return
	}
	switch {
	case drum && op.Process != "mill":
		r.faultAtKey(path, Fault{Found: op.Process + " on a barrel", Allowed: "mill: a barrel's groove is milled on axes: cylinder"})
	case drum && op.Axes != "cylinder":
		r.faultAt(path+".axes", Fault{Found: op.Axes + " on a barrel", Allowed: "cylinder"})
	case !drum && op.Axes == "cylinder":
		r.faultAt(path+".axes", Fault{Found: "cylinder on a cam of kind " + s.Cam.Kind, Allowed: allowedAxes(s, op)})
	case op.Process == "grind" && s.Cam.Kind != plateCam:
		r.faultAtKey(path, Fault{Found: "grind on a cam of kind " + s.Cam.Kind, Allowed: "grind on a plate"})
	case op.Axes == "polar" && allowedAxes(s, op) == "xy":
		r.faultAt(path+".axes", Fault{Found: "polar for " + op.Process + " on a cam of kind " + s.Cam.Kind, Allowed: "xy"})
	case op.Process == "grind" && op.Axes != "polar":
		r.faultAt(path+".axes", Fault{Found: op.Axes + " for grind", Allowed: "polar"})
	case op.Axes != "xy" && s.Control.RotarySense == "" && s.Control.File == "" && r.ok("control", "control.rotary_sense"):
		r.faultAtKey(path, Fault{Found: "a rotary axis whose sense is not told", Allowed: "control: {rotary_sense: tool} or {rotary_sense: table}",
			Advice: "the wrong one is a mirrored cam, so there is no default: look at which way the table turns for a growing word"})
	}
	r.checkRotary(path, op)
}

// allowedAxes are those an operation may have on a cam that is no barrel.
func allowedAxes(s *Spec, op *Operation) string {
	switch {
	case op.Process == "grind":
		return "polar"
	case op.Process == "mill" && s.Cam.Kind == plateCam:
		return "xy or polar"
	}
	return "xy"
}

// checkRotary: the letter's default, and what a rotary axis cannot do.
func (r *reader) checkRotary(path string, op *Operation) {
	switch {
	case op.RotaryAxis == "" && op.Axes == "polar":
		op.RotaryAxis = "C"
	case op.RotaryAxis == "":
		op.RotaryAxis = "A"
	case op.Axes == "cylinder" && op.RotaryAxis == "C":
		r.faultAt(path+".rotary_axis", Fault{Found: "C on axes cylinder", Allowed: "A or B, which have a linear axis along them"})
	}
	if op.Axes != "polar" {
		return
	}
	if op.Compensation != "path" && r.ok(path+".compensation") {
		r.faultAt(path+".compensation", Fault{Found: op.Compensation + " on axes polar", Allowed: "path: a control compensates in its plane, and a rotary and a radial axis have none"})
	}
	if op.FeedAt == "contour" && r.ok(path+".feed_at") {
		r.faultAt(path+".feed_at", Fault{Found: "contour on axes polar", Allowed: "center, or none: on axes polar the feed is held at the contour in any case", Advice: "take the key out"})
	}
}

func (r *reader) checkBlank(s *Spec) {
	b := s.Blank
	if b == nil {
		if len(s.Operations) > 0 && r.ok("blank") {
			r.faultAtKey("operations", Fault{Found: "operations without a blank", Allowed: "a map of keys: diameter, clamp_radius",
				Advice: "add blank: {diameter: }, the disk the cam is cut from"})
		}
		return
	}
	if s.Cam.Kind != barrelCam && r.ok("blank.diameter", "cam.base_radius") && b.Diameter/2 <= s.Cam.BaseRadius {
		r.faultAt("blank.diameter", Fault{Found: figure(b.Diameter), Allowed: "a blank larger than the base circle, whose diameter is " + figure(2*s.Cam.BaseRadius)})
	}
	if r.ok("blank.diameter", "blank.clamp_radius") && b.ClampRadius >= b.Diameter/2 {
		r.faultAt("blank.clamp_radius", Fault{Found: figure(b.ClampRadius), Allowed: "a clamp within the blank, whose radius is " + figure(b.Diameter/2)})
	}
}

func (r *reader) checkInspection(s *Spec) {
	i := s.Inspection
	if i == nil {
		return
	}
	if rows := math.Round(360 / i.Step); r.ok("inspection.step") && math.Abs(rows*i.Step-360) > 1e-9 {
		r.faultAt("inspection.step", Fault{Found: figure(i.Step), Allowed: "a step that goes into 360 a whole number of times, such as " + figure(nearestStep(rows))})
	}
	width := s.Follower.RollerDiameter + s.Cam.Clearance
	if s.Cam.Kind == grooveCam && r.ok("inspection.probe_diameter", "follower", "cam.clearance") && i.ProbeDiameter > width {
		r.faultAt("inspection.probe_diameter", Fault{Found: figure(i.ProbeDiameter), Allowed: "a probe that enters the groove, which is " + figure(width) + " wide"})
	}
}

// nearestStep is a step that prints short: 360 over the next count of rows whose step has at most
// two decimals.
func nearestStep(rows float64) float64 {
	for ; rows > 4; rows-- {
		if step := 360 / rows; math.Abs(step*100-math.Round(step*100)) < 1e-9 {
			return step
		}
	}
	return 90
}

func (r *reader) checkStock(path string, stock []float64) {
	if !r.ok(path) {
		return
	}
	for i := 1; i < len(stock); i++ {
		if stock[i] > stock[i-1] {
			r.faultAt(fmt.Sprintf("%s[%d]", path, i+1), Fault{Found: figure(stock[i]) + " after " + figure(stock[i-1]),
				Allowed: "stock that does not grow from pass to pass", Advice: "put the finishing pass last"})
		}
	}
}

func (r *reader) checkWire(path string, s *Spec, op *Operation) {
	if offsets := path + ".offsets"; r.ok(offsets, path+".wire_diameter") {
		for i, off := range op.Offsets {
			at := fmt.Sprintf("%s[%d]", offsets, i+1)
			if off < op.WireDiameter/2 {
				r.faultAt(at, Fault{Found: figure(off), Allowed: "at least the wire's radius, which is " + figure(op.WireDiameter/2),
					Advice: "offsets are from the wire's center to the contour"})
			}
			if i > 0 && off >= op.Offsets[i-1] {
				r.faultAt(at, Fault{Found: figure(off) + " after " + figure(op.Offsets[i-1]),
					Allowed: "offsets that become smaller from pass to pass", Advice: "put the last skim pass last"})
			}
		}
	}
	if hole := path + ".start_hole.radius"; op.StartHole != nil && r.ok(hole, "cam.base_radius") && op.StartHole.Radius <= s.Cam.BaseRadius {
		r.faultAt(hole, Fault{Found: figure(op.StartHole.Radius), Allowed: "a start hole outside the base circle, whose radius is " + figure(s.Cam.BaseRadius),
			Advice: "the wire starts in the waste beside the contour"})
	}
}
