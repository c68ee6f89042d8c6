// Barrel cams on a rotary table.
//
// The problem: the groove of a barrel is cut by turning the work while the tool moves along it. Two
// axes move in each block, one in degrees and one in lengths, and a control moves both evenly: a
// straight line in the developed plane. A feed in length a minute says nothing then (NISTIR 6556
// 2.1.2.5: it is applied to the linear axes alone, as if the rotary axis stood still), so the
// rotary axis would run away where the track is flat. Every feed move is written in inverse time
// (G93), its F one over the minutes the move takes at the asked feed, measured at the outer radius.
//
// A tool as wide as the groove goes to and fro on the pitch curve, each turn ramped down. A
// narrower one then goes along each wall, once for each stock, shifted as synth/drum_cut.go
// says: the tool slides over from the pitch curve while the work turns by leadDegrees, goes around
// and a little further, and slides back. Each wall is climb-cut unless the spec says otherwise:
// seen along the tool, the material is on the right of a right-hand tool's travel.
//
// Words: rotary A with axial X and across it Y, or rotary B with axial Y and across it X; Z
// along the tool. All coordinates count from the datum end (axial), the angular datum (rotary), the
// outer radius (Z).

package gcode

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Drum is a barrel cam as an operation on it sees it. Lengths in the part's unit.
type Drum struct {
	Name, Title, Revision string
	Inch                  bool
	CamClockwise          bool
	Radius, Length        float64 // outside
	Depth, Width          float64 // of the groove
	Begins                float64 // cam angle, degrees, where every turn begins and the development is cut open

	// Axis returns the path of the tool's axis for a pass, as the plane at a distance z from the
	// camshaft axis sees it: X is z times its polar angle and what the tool is beside it, Y the
	// axial position from the datum end. It covers one turn from Begins on, and is open.
	Axis func(pass DrumPass, z float64) Curve

	// Path returns lines near Axis at the outer radius, in the direction of growing cam angle, every
	// element with its Source.
	Path func(pass DrumPass) (chain.Path, error)
}

// DrumPass is a pass of a barrel's groove.
type DrumPass struct {
	Side  int     // 0 on the pitch curve, -1 along the wall at the datum end, +1 along the other
	Stock float64 // left on the wall, length
}

const (
	leadDegrees = 5.0 // cam angle over which a tool slides to a wall
	mostStep    = 1.0 // degrees of a step of that slide
	// apartDegrees is how near two stations may be: nearer ones would make lines of which rounding
	// gives the direction.
	apartDegrees = 0.02
)

// sense is the sign of the polar angle as the cam angle grows.
func (d Drum) sense() float64 {
	if d.CamClockwise {
		return 1
	}
	return -1
}

// room is how far the tool's axis goes from the pitch curve in a pass, length.
func (d Drum) room(op Operation, stock float64) float64 {
	return math.Max(0, d.Width/2-op.radius()-stock)
}

func (d Drum) fills(op Operation) bool {
	return math.Abs(d.Width-op.ToolDiameter) <= wholeWidth*d.Width
}

// passes along the walls, in their order, with the direction of each along the cam angle.
func (d Drum) walls(op Operation) (all []DrumPass, forward []bool) {
	if d.fills(op) {
		return nil, nil
	}
	climb := op.Direction != Conventional
	for _, s := range op.Stock {
		for _, side := range []int{-1, 1} {
			all = append(all, DrumPass{side, s})
			// The wall at the datum end is on the right of travel towards growing polar angle.
			polar := (side < 0) == climb
			forward = append(forward, polar == (d.sense() > 0))
		}
	}
	return all, forward
}

// depths returns the Z of the turns of a pass, in counts, top first: in steps, the last pass of
// several at once.
func (d Drum) depths(op Operation, g chain.Grid, pass DrumPass) []int64 {
	all := slotDepths(Part{GrooveDepth: d.Depth}, op, g)
	if last := op.Stock[len(op.Stock)-1]; pass.Side != 0 && pass.Stock == last && len(op.Stock) > 1 {
		return all[len(all)-1:]
	}
	return all
}

// station is a vertex of a pass: rotary, axial and cross words in counts, and how far the cam
// has turned since Begins.
type station struct {
	r, axial, across int64
	turned           float64 // degrees
}

// drumPlan makes one program.
type drumPlan struct {
	*emitter
	d     Drum
	op    Operation
	whole int64 // whole turns taken off the rotary words, so that they begin within the first, counts
}

// PlanDrum returns the program of an operation on a barrel. The error says what about the
// operation cannot be programmed.
func PlanDrum(d Drum, op Operation, m Machine) (Program, error) {
	if err := validateDrum(d, op, m); err != nil {
		return Program{}, err
	}
	e := newEmitter(Part{Inch: d.Inch}, op, m)
	e.p.Rotary, e.p.RotaryGrid = op.Rotary, chain.Grid{Decimals: m.RotaryDecimals}
	p := drumPlan{emitter: e, d: d, op: op}
	turn, err := p.stations(DrumPass{})
	if err != nil {
		return Program{}, err
	}
	round := 360 * counts(e.p.RotaryGrid, 1)
	p.whole = int64(math.Floor(float64(turn[0].r)/float64(round))) * round
	e.p.Header = p.header()
	e.begin(op)
	if err := p.slot(); err != nil {
		return Program{}, err
	}
	walls, forward := d.walls(op)
	for i, w := range walls {
		if err := p.wall(w, forward[i]); err != nil {
			return Program{}, err
		}
	}
	e.end(op)
	return *e.p, nil
}

// slot cuts on the pitch curve, to and fro.
func (p drumPlan) slot() error {
	turn, err := p.stations(DrumPass{})
	if err != nil {
		return err
	}
	top := int64(0)
	for k, z := range p.d.depths(p.op, p.grid, DrumPass{}) {
		p.note(fmt.Sprintf("TURN %d DOWN TO %s", k+1, p.grid.Format(z)))
		// A ramp at either end, each with a station where it ends.
		path := append(p.cut(turn, 0, rampDegrees), p.cut(turn, rampDegrees, 360)[1:]...)
		path = append(path, p.cut(turn, 360, 360+rampDegrees)[1:]...)
		path = p.short(path)
		if k%2 == 1 {
			path = reversed(path)
		}
		if k == 0 {
			p.approach(path[0], 0, true)
		}
		start, whole := path[0].turned, 0.0
		for _, s := range path {
			if on := math.Abs(s.turned - start); on <= rampDegrees+1e-3 {
				whole = on
			}
		}
		at, height := path[0], top
		for i, s := range path[1:] {
			feed, next := p.op.Feed, z
			if gone := math.Abs(s.turned - start); gone < whole-1e-9 {
				next = top + int64(math.Round(float64(z-top)*gone/whole))
			}
			if next != height || height != z {
				feed = p.op.PlungeFeed
			}
			p.move(at, s, height, next, feed, i == 0)
			at, height = s, next
		}
		top = z
	}
	p.z(Rapid, p.m.SafeZ, Block{})
	return nil
}

// wall cuts along one wall.
func (p drumPlan) wall(w DrumPass, forward bool) error {
	turn, err := p.stations(w)
	if err != nil {
		return err
	}
	middle, err := p.stations(DrumPass{})
	if err != nil {
		return err
	}
	path := p.slide(middle, turn, -leadDegrees, 0)
	path = append(path, p.cut(turn, 0, 360+slotOverlap)[1:]...)
	path = append(path, p.slide(middle, turn, 360+slotOverlap+leadDegrees, 360+slotOverlap)[1:]...)
	path = p.short(path)
	if !forward {
		path = reversed(path)
	}
	name := "LOWER"
	if w.Side > 0 {
		name = "UPPER"
	}
	for _, z := range p.d.depths(p.op, p.grid, w) {
		p.note(fmt.Sprintf("%s WALL STOCK %s DOWN TO %s", name, p.grid.Format(counts(p.grid, w.Stock)), p.grid.Format(z)))
		p.approach(path[0], z, false)
		at := path[0]
		for i, s := range path[1:] {
			p.move(at, s, z, z, p.op.Feed, i == 0)
			at = s
		}
		p.z(Rapid, p.m.SafeZ, Block{})
	}
	return nil
}

// approach goes over a station and down to a height, in counts.
func (p drumPlan) approach(s station, z int64, first bool) {
	over := Block{Motion: Rapid, R: p.rotaryWord(s.r)}
	p.linear(&over, s, true)
	p.add(over)
	if first {
		p.z(Rapid, p.m.SafeZ, Block{G: []Code{LengthOn}, H: number(p.op.Tool)})
	}
	p.add(Block{G: []Code{FeedPerMinute}, Motion: Straight, Z: count(z), F: p.feed(p.op.PlungeFeed)})
}

// linear sets the axial and cross words; the latter stands still unless the tool goes off center.
func (p drumPlan) linear(b *Block, s station, all bool) {
	axial, across := &b.X, &b.Y
	if p.op.Rotary == 'B' {
		axial, across = across, axial
	}
	*axial = count(s.axial)
	if all || p.offCenter() {
		*across = count(s.across)
	}
}

// offCenter reports whether some pass moves the tool beside the radial line.
func (p drumPlan) offCenter() bool { return !p.d.fills(p.op) && !p.op.RotaryShift }

// move adds a feed move in inverse time.
func (p drumPlan) move(from, to station, z0, z1 int64, feed float64, first bool) {
	b := Block{Motion: Straight, R: p.rotaryWord(to.r)}
	if first {
		b.G = []Code{FeedInverse}
	}
	p.linear(&b, to, false)
	if z1 != z0 {
		b.Z = count(z1)
	}
	b.F = p.inverse(feed, p.length(from, to, z0, z1))
	p.add(b)
}

// inverse is the F word, at least 1 count, of a move of a length over the work at a feed.
func (p drumPlan) inverse(feed, length float64) Count {
	return count(max(1, counts(p.grid, inverseTime(feed, length, p.m.InverseSeconds))))
}

// inverseTime is F under G93.
func inverseTime(feed, length float64, seconds bool) float64 {
	if seconds {
		return 60 * length / feed
	}
	return feed / length
}

// length is how far the tool goes over the work, at the outer radius.
func (p drumPlan) length(from, to station, z0, z1 int64) float64 {
	g := p.grid.Step()
	turn := float64(to.r-from.r) * p.p.RotaryGrid.Step() * math.Pi / 180 * p.d.Radius
	return drumLength(turn, float64(to.axial-from.axial)*g, float64(to.across-from.across)*g, float64(z1-z0)*g)
}

// drumLength is the length of a move of which the parts are given; across the tool moves as the
// work turns, so the two add.
func drumLength(turn, axial, across, z float64) float64 {
	return math.Hypot(math.Hypot(math.Abs(turn)+math.Abs(across), axial), z)
}

// stations puts one turn of a pass on the grids.
func (p drumPlan) stations(pass DrumPass) ([]station, error) {
	path, err := p.d.Path(pass)
	if err != nil {
		return nil, err
	}
	out, err := p.onGrids(path, pass.Side != 0 && !p.op.RotaryShift)
	if err != nil {
		return nil, err
	}
	first, last := out[0], &out[len(out)-1]
	whole := int64(360) * counts(p.p.RotaryGrid, 1)
	if last.r < first.r {
		whole = -whole
	}
	*last = station{first.r + whole, first.axial, first.across, 0}
	var apart []station
	for i, s := range out {
		s.turned = math.Abs(float64(s.r-first.r)) * p.p.RotaryGrid.Step()
		if i > 0 && i < len(out)-1 && s.turned-apart[len(apart)-1].turned < apartDegrees {
			continue
		}
		apart = append(apart, s)
	}
	return apart, nil
}

// onGrids puts the joints of a path on the grids; parallel when the tool leaves the radial line.
func (p drumPlan) onGrids(path chain.Path, parallel bool) (out []station, err error) {
	if !parallel {
		chained, err := p.slid(path, func(v plane.Point) (degrees, length float64) { return p.word(v.X / p.d.Radius), v.Y })
		if err != nil {
			return nil, err
		}
		out = append(out, station{r: chained[0].From.X - p.whole, axial: chained[0].From.Y})
		for _, s := range chained {
			out = append(out, station{r: s.To.X - p.whole, axial: s.To.Y})
		}
		return out, nil
	}
	add := func(v plane.Point, t float64) {
		polar := p.d.sense() * t * math.Pi / 180
		out = append(out, p.station(polar, v.X-p.d.Radius*polar, v.Y))
	}
	add(path[0].From, path[0].Source.From)
	for _, e := range path {
		add(e.To, e.Source.To)
	}
	return out, nil
}

// word is the rotary word, degrees, at a polar angle in radians.
func (p drumPlan) word(polar float64) float64 {
	if p.m.RotaryTable { // the work turns, so the tool goes the other way over it
		return -polar * 180 / math.Pi
	}
	return polar * 180 / math.Pi
}

// station rounds a pose: polar angle (radians), what the tool is beside it towards growing polar
// angle and the axial position (lengths).
func (p drumPlan) station(polar, beside, axial float64) station {
	if p.op.Rotary == 'A' { // Z up, the datum end at the left: growing polar angle is towards -Y
		beside = -beside
	}
	return station{r: counts(p.p.RotaryGrid, p.word(polar)) - p.whole, axial: counts(p.grid, axial), across: counts(p.grid, beside)}
}

// cut returns the stations from one turned angle to another (degrees, from below to), with
// stations at both, of a turn that goes on and on.
func (p drumPlan) cut(turn []station, from, to float64) []station {
	var out []station
	n := len(turn) - 1
	last := turn[n]
	for k := -1; k <= 2; k++ {
		for _, s := range turn[:n] {
			s.r += int64(k) * (last.r - turn[0].r)
			s.turned += 360 * float64(k)
			out = append(out, s)
		}
	}
	at := func(x float64) station {
		i := 1
		for out[i].turned < x {
			i++
		}
		a, b := out[i-1], out[i]
		u := (x - a.turned) / (b.turned - a.turned)
		mid := func(a, b int64) int64 { return a + int64(math.Round(float64(b-a)*u)) }
		s := station{r: mid(a.r, b.r), axial: mid(a.axial, b.axial), across: mid(a.across, b.across)}
		s.turned = a.turned + math.Abs(float64(s.r-a.r))*p.p.RotaryGrid.Step()
		return s
	}
	cut := []station{at(from)}
	end := at(to)
	for _, s := range out {
		if s.turned > cut[0].turned+apartDegrees && s.turned < end.turned-apartDegrees {
			cut = append(cut, s)
		}
	}
	return append(cut, end)
}

// slide returns stations between two turned angles on which the tool goes from the pitch
// curve, at the first, to a pass, at the second; in the order of growing angle.
func (p drumPlan) slide(middle, pass []station, from, to float64) []station {
	n := int(math.Ceil(math.Abs(to-from) / mostStep))
	var out []station
	for i := 0; i <= n; i++ {
		u := float64(i) / float64(n)
		x := from + (to-from)*u
		a, b := p.cut(middle, x, x+1)[0], p.cut(pass, x, x+1)[0]
		mid := func(a, b int64) int64 { return a + int64(math.Round(float64(b-a)*u)) }
		out = append(out, station{r: mid(a.r, b.r), axial: mid(a.axial, b.axial), across: mid(a.across, b.across), turned: x})
	}
	if to < from {
		return reversed(out)
	}
	return out
}

func reversed(s []station) []station {
	out := make([]station, len(s))
	for i := range s {
		out[len(s)-1-i] = s[i]
	}
	return out
}

// validateDrum refuses what no program can be made of.
func validateDrum(d Drum, op Operation, m Machine) error {
	if d.Axis == nil || d.Path == nil {
		return fmt.Errorf("operation %d: Drum.Axis and Drum.Path must be set", op.Number)
	}
	checks := append(millChecks(op), check{"safe Z", m.SafeZ, true}, check{"feed", op.Feed, true}, check{"radius", d.Radius, true},
		check{"groove depth", d.Depth, true}, check{"groove width", d.Width, true})
	for _, c := range checks {
		if !(c.value >= 0 && c.value < maxLength) || (c.positive && c.value == 0) {
			return fmt.Errorf("operation %d: %s is %g: a number above 0 and below %g is allowed", op.Number, c.name, c.value, float64(maxLength))
		}
	}
	switch {
	case m.Decimals < 0 || m.Decimals > 9 || m.RotaryDecimals < 0 || m.RotaryDecimals > 9:
		return fmt.Errorf("%d and %d decimals: 0 to 9 can be written", m.Decimals, m.RotaryDecimals)
	case op.Number < 1 || op.Number > 9999:
		return fmt.Errorf("operation number %d: 1 to 9999 can be a program number", op.Number)
	case op.Rotary != 'A' && op.Rotary != 'B':
		return fmt.Errorf("operation %d: rotary axis %q: A and B have a linear axis along them", op.Number, op.Rotary)
	case op.Compensation != CompPath:
		return fmt.Errorf("operation %d: compensation %q: a barrel's groove is cut on the tool's own path, with path", op.Number, op.Compensation)
	case len(op.Stock) == 0:
		return fmt.Errorf("operation %d: no passes: give the stock of each", op.Number)
	case op.ToolDiameter > d.Width*(1+wholeWidth):
		return fmt.Errorf("operation %d: a tool of diameter %g in a groove %g wide", op.Number, op.ToolDiameter, d.Width)
	case d.fills(op) && (len(op.Stock) != 1 || op.Stock[0] != 0):
		return fmt.Errorf("operation %d: stock %v: a tool of the groove's width leaves none, write [0]", op.Number, op.Stock)
	case d.Depth >= d.Radius:
		return fmt.Errorf("operation %d: a groove %g deep in a radius of %g", op.Number, d.Depth, d.Radius)
	}
	return nil
}
