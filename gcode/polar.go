// Plates on a rotary table.
//
// The problem: the contour is cut by turning the work while the tool, its axis parallel to the camshaft's, moves along one radial
// axis. Two axes of different kinds move in each block, and a control moves both evenly: the tool's center goes along a
// spiral r = a + b·φ. The rotary word is the polar angle of the tool's center, not the cam angle.
//
// Spirals that straddle the exact path by ± the tolerance are found where they are straight (synth.Unrolled). The
// feed is held where the tool touches: every block is written in inverse time (G93), its F one over the minutes in
// which the contour it passes over is cut. The tool comes in along the radial axis, slides down to the path while the work turns, goes around and a little further, and slides off.
//
// Words: the rotary letter (A, B or C), X radial from the camshaft axis, Z along the tool.

package gcode

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

const (
	slideSteps = 6    // blocks of a slide: its distance falls with the square
	slideMost  = 60.0 // degrees of a slide
)

// slideHeight is how far from the path a slide begins, length.
func (p Part) slideHeight() float64 { return p.small(1.5, 0.06) }

// slideDegrees is over what the tool slides to the path and off it, at a distance of its center from the camshaft axis (length):
// 22 mm, which breaks the tangent by some two thirds of a degree.
func (p Part) slideDegrees(radius float64) float64 {
	return math.Min(slideMost, p.small(22, 0.88)/radius*180/math.Pi)
}

// slideBand tells a slide from the path: half of the distance at its last joint, length.
func (p Part) slideBand() float64 { return p.slideHeight() / (slideSteps * slideSteps) / 2 }

// polarPlan makes one program.
type polarPlan struct {
	drumPlan
	part Part
	way  turning
}

func planPolar(part Part, op Operation, m Machine) (Program, error) {
	if err := validatePolar(op, m); err != nil {
		return Program{}, err
	}
	e := newEmitter(part, op, m)
	e.p.Rotary, e.p.RotaryGrid = op.Rotary, chain.Grid{Decimals: m.RotaryDecimals}
	p := polarPlan{drumPlan: drumPlan{emitter: e, op: op}, part: part, way: turningOf(part.CamClockwise, m)}
	e.p.Header = p.header()
	e.begin(op)
	for i := range op.Stock {
		if err := p.pass(i); err != nil {
			return Program{}, fmt.Errorf("pass %d of %d: %w", i+1, len(op.Stock), err)
		}
	}
	e.end(op)
	return *e.p, nil
}

// turning is the sense of the rotary words.
type turning struct {
	cam   float64 // sign of the polar angle as the cam angle grows
	table bool    // growing words turn the work
}

func turningOf(camClockwise bool, m Machine) turning {
	if camClockwise {
		return turning{1, m.RotaryTable}
	}
	return turning{-1, m.RotaryTable}
}

// polar is the polar angle of the tool's center in degrees for a rotary word, and the other way round.
func (t turning) polar(word float64) float64 {
	if t.table {
		return -word
	}
	return word
}

// stations puts one turn of the path at an offset on the grids: axial is the radial word.
func (p polarPlan) stations(offset float64) (turn []station, path []chain.Segment, err error) {
	fitted, scale, err := p.op.Spirals(offset)
	if err != nil {
		return nil, nil, err
	}
	path, err = p.slid(fitted, func(v plane.Point) (degrees, axial float64) { return p.way.polar(v.X / scale * 180 / math.Pi), v.Y })
	if err != nil {
		return nil, nil, fmt.Errorf("path at %g outside the contour: %w", offset, err)
	}
	turn = append(turn, station{r: path[0].From.X, axial: path[0].From.Y})
	for _, s := range path {
		turn = append(turn, station{r: s.To.X, axial: s.To.Y})
	}
	first, last := turn[0], len(turn)-1
	whole := 360 * counts(p.p.RotaryGrid, 1)
	if turn[last].r < first.r {
		whole = -whole
	}
	turn[last] = station{r: first.r + whole, axial: first.axial}
	for i := range turn {
		turn[i].turned = math.Abs(float64(turn[i].r-first.r)) * p.p.RotaryGrid.Step()
	}
	return turn, path, nil
}

// startOf is how far the tool has turned at the cam angle where passes start.
func (p polarPlan) startOf(turn []station, path []chain.Segment) float64 {
	t := p.part.StartAt
	from := path[0].Source.From
	t -= 360 * math.Floor((t-from)/360)
	for i, e := range path {
		if t <= e.Source.To || i == len(path)-1 {
			u := math.Min(1, (t-e.Source.From)/(e.Source.To-e.Source.From))
			return turn[i].turned + u*(turn[i+1].turned-turn[i].turned)
		}
	}
	return 0
}

// pass adds the cuts of one pass.
func (p polarPlan) pass(i int) error {
	offset := p.op.radius() + p.op.Stock[i]
	turn, elements, err := p.stations(offset)
	if err != nil {
		return err
	}
	start := p.startOf(turn, elements)
	from, to := start, start+360+p.op.overlap()
	slide := p.part.slideDegrees(float64(p.cut(turn, from, to)[0].axial) * p.grid.Step())
	path := append(p.slideTo(turn, from-slide, from), p.cut(turn, from, to)...)
	path = p.short(append(path, p.slideTo(turn, to+slide, to)...))
	if p.op.clockwise() == p.part.CamClockwise { // against the cam angle
		path = reversed(path)
	}
	round := 360 * counts(p.p.RotaryGrid, 1)
	turns := int64(math.Floor(float64(path[0].r)/float64(round))) * round
	for i := range path { // every pass begins within the first turn
		path[i].r -= turns
	}
	touch := newTouching(p.part.Curve(offset), p.part.Curve(offset-p.op.radius()), p.way)
	far := count(counts(p.grid, p.part.plungeRadius(p.op, farthest(turn, p.grid))))
	zs := depths(p.part, p.op, p.grid, i)
	for k, z := range zs {
		p.note(fmt.Sprintf("PASS %d STOCK %s DEPTH %d OF %d", i+1, p.grid.Format(counts(p.grid, p.op.Stock[i])), k+1, len(zs)))
		first := path[0]
		p.add(Block{Motion: Rapid, R: p.rotaryWord(first.r), X: far})
		if i == 0 && k == 0 {
			p.z(Rapid, p.m.SafeZ, Block{G: []Code{LengthOn}, H: number(p.op.Tool)})
		}
		p.add(Block{G: []Code{FeedPerMinute}, Motion: Straight, Z: count(z), F: p.feed(p.op.PlungeFeed)})
		p.add(Block{Motion: Straight, X: count(first.axial), F: p.feed(p.op.Feed)})
		for n, s := range path[1:] {
			b := Block{Motion: Straight, R: p.rotaryWord(s.r), X: count(s.axial)}
			if n == 0 {
				b.G = []Code{FeedInverse}
			}
			b.F = p.inverse(p.op.Feed, touch.length(p.polarMove(path[n], s)))
			p.add(b)
		}
		p.add(Block{G: []Code{FeedPerMinute}, Motion: Straight, X: far, F: p.feed(p.op.Feed)})
		p.z(Rapid, p.m.SafeZ, Block{})
	}
	return nil
}

// farthest is how far from the axis the turn goes, length.
func farthest(turn []station, g chain.Grid) float64 {
	most := 0.0
	for _, s := range turn {
		most = math.Max(most, float64(s.axial)*g.Step())
	}
	return most
}

// polarMove is what a control makes of the move from one station to another.
func (p polarPlan) polarMove(a, b station) spiral {
	word := func(s station) float64 { return p.way.polar(float64(s.r) / float64(counts(p.p.RotaryGrid, 1))) }
	far := func(s station) float64 { return float64(s.axial) / float64(counts(p.grid, 1)) }
	return spiral{word(a), word(b), far(a), far(b)}
}

// slideTo returns the stations of a slide, from its outer end at one turned angle to the path at another, without
// that on the path, in the order of growing turned angle.
func (p polarPlan) slideTo(turn []station, outer, on float64) []station {
	height := p.part.slideHeight()
	var out []station
	for i := range slideSteps {
		u := float64(i) / slideSteps
		x := outer + (on-outer)*u
		s := p.cut(turn, x, x+1)[0]
		s.axial += counts(p.grid, height*(1-u)*(1-u))
		out = append(out, s)
	}
	if outer > on {
		return reversed(out)
	}
	return out
}

// touching is the tool's center path and the contour that it cuts, with the stock it leaves.
type touching struct {
	center, contact Curve
	way             turning
	known           map[spiral]float64 // lengths worked out: passes are run again at each depth
}

func newTouching(center, contact Curve, way turning) touching {
	return touching{center, contact, way, map[spiral]float64{}}
}

// length is that of the contour between the places where the tool touches at the ends of a move, and of the move along the
// radial axis that is not the path's own.
func (t touching) length(s spiral) float64 {
	if l, ok := t.known[s]; ok {
		return l
	}
	a, b := t.angle(s.from), t.angle(s.to)
	rise := (s.r1 - pointAt(t.center, b).Radius()) - (s.r0 - pointAt(t.center, a).Radius())
	b += 360 * math.Round(((s.to-s.from)*t.way.cam-(b-a))/360)
	t.known[s] = math.Hypot(t.along(math.Min(a, b), math.Max(a, b)), rise)
	return t.known[s]
}

// angle is the cam angle at which the center's path has a polar angle in degrees; the path is met once by every ray.
func (t touching) angle(polar float64) float64 {
	ray := polarPoint(polar, 1)
	first := t.center.Pieces()[0].From
	aside := func(at float64) float64 {
		p := pointAt(t.center, at)
		return math.Atan2(ray.X*p.Y-ray.Y*p.X, ray.X*p.X+ray.Y*p.Y) * t.way.cam
	}
	// The polar angle runs within half a turn of the cam angle and grows with it: a first step
	// of slope 1 a degree, then Newton's, of the speed that a small difference shows.
	at := first - aside(first)*180/math.Pi
	for range 60 {
		step := aside(at) * 180 / math.Pi
		f := frameAt(t.center, at)
		p := pointAt(t.center, at+1e-4)
		speed := math.Abs(f.P.X*p.Y-f.P.Y*p.X) / (f.P.Radius() * p.Radius()) / 1e-4 * 180 / math.Pi
		at -= step / speed
		if math.Abs(step) < 1e-10 {
			break
		}
	}
	return at
}

// along is the length of the contour between two cam angles, by chords of an arc each.
func (t touching) along(a, b float64) float64 {
	const each = 0.25 // degrees
	n := int(math.Ceil((b - a) / each))
	sum, before := 0.0, frameAt(t.contact, a)
	for i := 1; i <= n; i++ {
		f := frameAt(t.contact, a+(b-a)*float64(i)/float64(n))
		chord := f.P.Dist(before.P)
		x := chord * (f.K + before.K) / 2
		sum, before = sum+chord*(1+x*x/24), f
	}
	return sum
}

// validatePolar refuses what no program of a rotary and a radial axis can be made of.
func validatePolar(op Operation, m Machine) error {
	switch {
	case op.Spirals == nil:
		return fmt.Errorf("operation %d: Operation.Spirals must be set", op.Number)
	case op.Rotary != 'A' && op.Rotary != 'B' && op.Rotary != 'C':
		return fmt.Errorf("operation %d: rotary axis %q: A, B and C are known", op.Number, op.Rotary)
	case m.RotaryDecimals < 0 || m.RotaryDecimals > 9:
		return fmt.Errorf("%d decimals of degrees: 0 to 9 can be written", m.RotaryDecimals)
	case op.Compensation != CompPath:
		return fmt.Errorf("operation %d: compensation %q: a control compensates in its plane, and a rotary and a radial axis have none; take path", op.Number, op.Compensation)
	case op.ContourFeed:
		return fmt.Errorf("operation %d: the feed is held at the contour in any case", op.Number)
	}
	return nil
}
