package read

import (
	"fmt"
	"math"
	"slices"

	"lobewright/synth/plane"
)

// block executes one block in the order of NISTIR 6556 table 5: feed and speed,
// tool, spindle, coolant, modes, motion, stops.
func (r *reader) block(b *block) error {
	codes, err := b.codes()
	if err != nil {
		return err
	}
	ms, err := b.misc()
	if err != nil {
		return err
	}
	if b.has('O') {
		if err := r.number(b); err != nil {
			return err
		}
	}
	if len(b.g) > 0 || b.has('P') {
		if err := r.modes(b, &codes); err != nil {
			return err
		}
	}
	if err := r.technology(b); err != nil {
		return err
	}
	if err := r.spindle(b, ms); err != nil {
		return err
	}
	if err := r.compensation(b, &codes); err != nil {
		return err
	}
	if err := r.moves(b, &codes); err != nil {
		return err
	}
	r.stops(b, ms)
	return nil
}

// number takes the O word: once, before any move.
func (r *reader) number(b *block) error {
	w, _ := b.get('O')
	v, err := b.whole(w)
	if err != nil {
		return err
	}
	if r.p.Number >= 0 || r.p.Blocks > 1 {
		return b.fault(w, "the program number stands once, in the first block")
	}
	r.p.Number = v
	return nil
}

// modes takes units, plane, distance, center, path and work words.
func (r *reader) modes(b *block, codes *modes) error {
	if c, ok := codes.get(unitsWords); ok {
		if r.unit != 0 && r.unit != c/10 {
			return b.fault(b.g[0], "the units do not change inside a program")
		}
		r.unit = c / 10
	}
	if c, ok := codes.get(distanceWords); ok {
		r.distance = c / 10
	}
	if c, ok := codes.get(centerWords); ok {
		r.centerAbsolute = c == 901
	}
	if c, ok := codes.get(workWords); ok {
		if r.state.Work != 0 && r.state.Work != c/10 {
			return b.fault(b.g[0], "the work coordinate system does not change inside a program")
		}
		r.state.Work = c / 10
	}
	if c, ok := codes.get(feedWords); ok && (c == 930) != r.state.Inverse {
		r.state.Inverse, r.state.Feed = c == 930, 0 // NISTIR 6556 3.5.20: the old F means nothing now
	}
	w, ok := b.get('P')
	if ok && codes.code[pathWords] != 640 {
		return b.fault(w, "P stands with G64 only")
	}
	if c, set := codes.get(pathWords); set {
		r.p.PathMode, r.p.PathBlend = c/10, 0
		if ok {
			if w.value < 0 {
				return b.fault(w, "P of G64 is not below 0")
			}
			r.p.PathBlend = value(w.value)
		}
	}
	return nil
}

// technology takes F, S and T.
func (r *reader) technology(b *block) (err error) {
	if w, ok := b.get('F'); ok {
		if w.value <= 0 {
			return b.fault(w, "a feed is above 0")
		}
		r.state.Feed = float64(w.value) / billion
	}
	if r.state.Speed, err = b.wholeOf('S', r.state.Speed); err != nil {
		return err
	}
	r.pending, err = b.wholeOf('T', r.pending)
	return err
}

// spindle takes the M words that act before the motion.
func (r *reader) spindle(b *block, ms []int) error {
	for i, m := range ms {
		switch m {
		case 6:
			if r.pending < 0 {
				return b.fault(b.m[i], "M6 follows a T word")
			}
			r.state.Tool = r.pending
		case 3:
			r.state.Spindle = 1
		case 4:
			r.state.Spindle = -1
		case 7, 8:
			r.state.Fluid = true
		case 9:
			r.state.Fluid = false
		default:
			continue // after the motion
		}
		r.note(b, m)
	}
	if slices.Contains(ms, 3) && slices.Contains(ms, 4) {
		return b.fault(b.m[0], "M3 and M4 contradict each other")
	}
	return nil
}

func (r *reader) note(b *block, code int) {
	r.p.Misc = append(r.p.Misc, Misc{b.no, code, len(r.p.Moves)})
}

// compensation takes G40 to G42 with D, G43 and G49 with H.
func (r *reader) compensation(b *block, codes *modes) (err error) {
	c, ok := codes.get(compensationWords)
	if w, has := b.get('D'); has && !(ok && c != 400) {
		return b.fault(w, "D stands with G41 or G42")
	}
	if ok {
		r.state.Comp = Comp((c - 400) / 10)
		if r.state.D, err = b.wholeOf('D', r.state.D); err != nil {
			return err
		}
		if r.state.Comp == Off {
			r.state.D = -1
		}
	}
	length, ok := codes.get(lengthWords)
	if w, has := b.get('H'); has && !(ok && length == 430) {
		return b.fault(w, "H stands with G43")
	}
	if ok {
		r.state.H = -1
		if length == 430 {
			r.state.H, err = b.wholeOf('H', 0)
		}
	}
	return err
}

// moves takes the motion word and the axis words.
func (r *reader) moves(b *block, codes *modes) error {
	if c, ok := codes.get(motionWords); ok {
		r.hasMotion = c != 800
		r.motion = c / 10
	}
	if b.held&axes == 0 {
		return nil
	}
	switch {
	case !r.hasMotion:
		return b.fault(b.first(), "a move needs G0, G1, G2 or G3 before it")
	case r.unit == 0:
		return b.fault(b.first(), "G20 or G21 comes before the first move")
	case r.distance == 0:
		return b.fault(b.first(), "G90 or G91 comes before the first move")
	}
	if r.state.Inverse && r.motion != 0 && !b.has('F') {
		return b.fault(b.first(), "under G93 every feed move has its own F")
	}
	return r.move(b)
}

// axes are the letters of a move, a bit each from A.
const axes = 1<<('X'-'A') | 1<<('Y'-'A') | 1<<('Z'-'A') | rotaries | 1<<('I'-'A') | 1<<('J'-'A')

const rotaries = 1 | 1<<('B'-'A') | 1<<('C'-'A')

// first returns the leftmost word of the axes.
func (b *block) first() word {
	var f word
	for _, letter := range []byte("XYZABCIJ") {
		if w, ok := b.get(letter); ok && (f.column == 0 || w.column < f.column) {
			f = w
		}
	}
	return f
}

func (r *reader) move(b *block) error {
	m := Move{LineNo: b.no, N: b.n, State: r.state, Kind: Kind(min(r.motion, 2)), CCW: r.motion == 3,
		HasXY: b.has('X') || b.has('Y'), HasZ: b.has('Z'), KnownXY: r.haveX && r.haveY, KnownZ: r.haveZ}
	if m.Tool < 0 {
		m.Tool = r.pending
	}
	letter, err := r.letter(b)
	if err != nil {
		return err
	}
	m.HasR, m.KnownR, m.FromR = letter != 0, r.haveR, value(r.rotary)
	m.From, m.FromZ = point(r.x, r.y), value(r.z)
	x0, y0 := r.x, r.y
	for _, axis := range []struct {
		letter byte
		at     *int64
		have   *bool
	}{{'X', &r.x, &r.haveX}, {'Y', &r.y, &r.haveY}, {'Z', &r.z, &r.haveZ}, {letter, &r.rotary, &r.haveR}} {
		if err := r.axis(b, axis.letter, axis.at, axis.have); err != nil {
			return err
		}
	}
	m.To, m.ToZ, m.ToR = point(r.x, r.y), value(r.z), value(r.rotary)
	if err := r.center(b, &m, x0, y0); err != nil {
		return err
	}
	r.p.Moves = append(r.p.Moves, m)
	return nil
}

// letter returns the letter of the block's rotary word, 0 when it has none. A program has one
// rotary axis.
func (r *reader) letter(b *block) (byte, error) {
	found := byte(0)
	if b.held&rotaries == 0 {
		return 0, nil
	}
	for _, c := range []byte("ABC") {
		w, ok := b.get(c)
		switch {
		case !ok:
			continue
		case r.p.Rotary != 0 && r.p.Rotary != c:
			return 0, b.fault(w, fmt.Sprintf("the rotary axis of this program is %c; one is read", r.p.Rotary))
		case r.motion == 2 || r.motion == 3:
			return 0, b.fault(w, "a rotary word stands with G0 and G1")
		}
		found, r.p.Rotary = c, c
	}
	return found, nil
}

// maxTravel keeps sums of coordinates exact in a double.
const maxTravel = int64(maxWhole) * billion

func (r *reader) axis(b *block, letter byte, at *int64, have *bool) error {
	w, ok := b.get(letter)
	if !ok {
		return nil
	}
	if r.distance == 91 {
		if !*have {
			return b.fault(w, "an incremental move needs a known start: move there with G90 first")
		}
		*at += w.value
	} else {
		*at = w.value
	}
	if *at > maxTravel || *at < -maxTravel {
		return b.fault(w, fmt.Sprintf("coordinates up to %d are read", maxWhole))
	}
	*have = true
	return nil
}

// center takes I and J.
func (r *reader) center(b *block, m *Move, x0, y0 int64) error {
	i, hasI := b.get('I')
	j, hasJ := b.get('J')
	radius, hasR := b.get('R')
	if hasR && m.Kind != Arc {
		return b.fault(radius, "R stands with G2 or G3")
	}
	if hasR && (hasI || hasJ) {
		return b.fault(radius, "an arc has I and J, or R")
	}
	if hasR {
		return r.byRadius(b, m, radius)
	}
	if m.Kind != Arc {
		if hasI || hasJ {
			return b.fault(b.first(), "I and J stand with G2 or G3")
		}
		return nil
	}
	switch {
	case !hasI && !hasJ:
		return b.fault(b.first(), "an arc needs its center as I and J, or R")
	case r.centerAbsolute && !(hasI && hasJ):
		return b.fault(b.first(), "under G90.1 an arc needs both I and J")
	case !m.KnownXY:
		return b.fault(b.first(), "an arc needs a known start")
	}
	cx, cy := i.value, j.value
	if !r.centerAbsolute {
		cx, cy = cx+x0, cy+y0
	}
	m.Center = point(cx, cy)
	if (cx == x0 && cy == y0) || (cx == r.x && cy == r.y) {
		return b.fault(b.first(), "the center of an arc is not one of its ends")
	}
	return nil
}

// byRadius takes R: the center of the arc of at most half a turn (NISTIR 6556 3.5.3.1; near a half turn the
// center moves by much for little of R, and a negative R asks for more than half).
func (r *reader) byRadius(b *block, m *Move, w word) error {
	if !m.KnownXY {
		return b.fault(w, "an arc needs a known start")
	}
	way := m.To.Sub(m.From)
	half, radius := way.Norm()/2, value(w.value)
	switch {
	case w.value <= 0:
		return b.fault(w, "R is above 0: an arc above half a turn is split")
	case half == 0:
		return b.fault(w, "an arc with R ends elsewhere than it starts")
	case radius < half:
		return b.fault(w, fmt.Sprintf("R is at least half the way from start to end, %.9g", half))
	}
	side := math.Sqrt(math.Max(0, radius*radius-half*half))
	if !m.CCW {
		side = -side
	}
	m.Center = m.From.Add(way.Scale(0.5)).Add(way.Unit().Left().Scale(side))
	return nil
}

// stops takes the M words that act after the motion.
func (r *reader) stops(b *block, ms []int) {
	for _, m := range ms {
		switch m {
		case 0, 1:
		case 5:
			r.state.Spindle = 0
		case 2, 30:
			r.state.Spindle, r.state.Fluid = 0, false
			r.p.Ended = true
		default:
			continue // before the motion
		}
		r.note(b, m)
	}
}

func value(v int64) float64 { return float64(v) / billion }

func point(x, y int64) plane.Point { return plane.Point{X: value(x), Y: value(y)} }
