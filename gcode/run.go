package gcode

import (
	"fmt"
	"math"
	"slices"

	"lobewright/gcode/read"
	"lobewright/synth/plane"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
)

// run is a sequence of feed moves at one height, with the cut in it at
// [first, last); the moves before and after are leads and links.
type run struct {
	moves       []read.Move
	first, last int
	cut         Cut
	register    int // D number it must use under compensation
	clockwise   bool
}

func (r run) loop() []read.Move { return r.moves[r.first:r.last] }

// cut certifies the moves of the run that cut, and its place all the same in
// Result.Cuts when nothing can be certified.
func (v *verifier) certify(r run) CutResult {
	loop := r.loop()
	c := CutResult{Offset: r.cut.Offset, Z: r.cut.Z, First: loop[0].LineNo, Last: loop[len(loop)-1].LineNo, Clockwise: r.clockwise}
	for _, m := range loop {
		v.compensated(m, r)
		if m.Kind == read.Arc {
			c.Arcs++
		} else {
			c.Lines++
		}
	}
	v.tangent(r, r.first)
	v.tangent(r, r.last)
	path := elements(loop)
	back := r.clockwise == v.x.CamClockwise // the contour runs the other way with growing cam angle
	if back {
		path = path.Reverse()
	}
	if known, ok := v.same(path, r); ok {
		c.Deviation = known
	} else {
		var err error
		if c.Deviation, err = certify.Stretch(v.x.Curve(r.cut.Stock), path); err != nil {
			c.Deviation.Bound = math.Inf(1)
			_, t := v.outline.near(loop[0].From)
			v.fail("deviation", c.Deviation.Bound, v.x.Eps, t, v.lineOf(err, loop, back), "the cut does not follow its curve: %v", err)
		}
	}
	if d := c.Deviation; d.Bound > v.x.Eps && !math.IsInf(d.Bound, 1) {
		i := d.Segment
		if back {
			i = len(loop) - 1 - i
		}
		v.fail("deviation", d.Bound, v.x.Eps, d.At, loop[i].LineNo, "the cut is %.6g from its curve, allowed are %.6g", d.Bound, v.x.Eps)
	}
	v.res.Cuts = append(v.res.Cuts, c)
	v.res.Finish, v.res.FinishOffset = path, r.cut.Stock
	return c
}

// leadBreak is the largest break of the tangent between a lead and its cut, rad: a
// degree, above what rounding makes of the smallest wire lead and below what leaves
// a mark.
const leadBreak = math.Pi / 180

// tangent holds the joint before move i of the run, between a lead and the cut.
func (v *verifier) tangent(r run, i int) {
	if i <= 0 || i >= len(r.moves) {
		return
	}
	a, b := element(r.moves[i-1]).EndTangent(), element(r.moves[i]).StartTangent()
	if turn := math.Abs(math.Atan2(a.Cross(b), a.Dot(b))); turn > leadBreak {
		lead := r.moves[i]
		if i == r.first {
			lead = r.moves[i-1]
		}
		_, t := v.outline.near(r.moves[i].From)
		v.fail("lead", turn*180/math.Pi, leadBreak*180/math.Pi, t, lead.LineNo, "the lead is not tangent to the cut: it turns by %.4g degrees there", turn*180/math.Pi)
	}
}

// same returns the certificate of the cut before, when this one repeats it deeper.
func (v *verifier) same(path chain.Path, r run) (certify.Deviation, bool) {
	n := len(v.res.Cuts)
	if n == 0 || v.res.FinishOffset != r.cut.Stock || math.IsInf(v.res.Cuts[n-1].Deviation.Bound, 1) || !slices.Equal(v.res.Finish, path) {
		return certify.Deviation{}, false
	}
	return v.res.Cuts[n-1].Deviation, true
}

// lineOf returns the line of the element an error of certify names, or that of the
// first one.
func (v *verifier) lineOf(err error, loop []read.Move, back bool) int {
	i := 0
	if n, _ := fmt.Sscanf(err.Error(), "element %d", &i); n != 1 || i < 0 || i >= len(loop) {
		return loop[0].LineNo
	}
	if back {
		i = len(loop) - 1 - i
	}
	return loop[i].LineNo
}

// compensated holds compensation, register and feed of a move that cuts.
func (v *verifier) compensated(m read.Move, r run) {
	if want := v.x.comp(r.clockwise); m.Comp != want {
		v.wrong("words", m.LineNo, "the cut is made under %v, expected %v", m.Comp, want)
		return
	}
	if m.Comp == read.Off {
		return
	}
	value, ok := v.x.register(m.D)
	if !ok || m.D != r.register {
		v.fail("words", float64(m.D), float64(r.register), nan(), m.LineNo, "the cut is made with D%d (%.6g), expected D%d", m.D, value, r.register)
	}
}

// centers clears the feed moves [from, to) of a run, moved by the compensation, and
// the outer corner before each. tool is the distance the center must keep.
func (v *verifier) centers(r run, from, to int, tool float64) {
	ms := r.moves
	for i := from; i < to; i++ {
		m, cutting := ms[i], i >= r.first && i < r.last
		id, lead := "clearance", !cutting
		if cutting {
			id = "reach"
		}
		switching := i > 0 && ms[i-1].Comp != m.Comp || i == 0 && m.Comp != read.Off
		d := v.shift(m)
		if switching {
			if i > 0 {
				d = math.Max(math.Abs(d), math.Abs(v.shift(ms[i-1])))
			}
			v.clear(id, element(m), tool+math.Abs(d), m.LineNo, lead)
			v.atClamp(element(m), math.Abs(d), m.LineNo)
			continue
		}
		e, ok := moved(element(m), d)
		if !ok {
			v.fail("reach", math.Abs(d), element(m).Radius(), nan(), m.LineNo, "an arc of radius %.6g under compensation by %.6g turns inside out", element(m).Radius(), math.Abs(d))
			continue
		}
		v.clear(id, e, tool, m.LineNo, lead)
		v.atClamp(e, 0, m.LineNo)
		if i > 0 && d != 0 {
			if corner, outer := around(element(ms[i-1]), element(m), d); outer {
				v.clear(id, corner, tool, m.LineNo, lead)
			}
		}
	}
}

// shift returns how far compensation moves the move to the left.
func (v *verifier) shift(m read.Move) float64 {
	if m.Comp == read.Off {
		return 0
	}
	value, _ := v.x.register(m.D)
	if m.Comp == read.Right {
		return -value
	}
	return value
}

// moved returns e moved by d to the left, and false when it is an arc that would
// turn inside out. A control trims inner corners; what it trims off is kept here,
// and passes the tests by second order of the corner's angle only.
func moved(e chain.Element, d float64) (chain.Element, bool) {
	if d == 0 {
		return e, true
	}
	p, err := chain.Path{e}.Offset(d)
	if err != nil {
		return e, false
	}
	return p[0], true
}

// hairTurn is the angle in radians below which a corner's arc is taken for its chord:
// they differ by d·turn²/8, less than 1e-12 of a tool's radius.
const hairTurn = 1e-6

// around returns the arc about an outer corner between two elements moved by d.
func around(a, b chain.Element, d float64) (chain.Element, bool) {
	u, w := a.EndTangent(), b.StartTangent()
	turn := math.Atan2(u.Cross(w), u.Dot(w))
	from, to := b.From.Add(u.Left().Scale(d)), b.From.Add(w.Left().Scale(d))
	if turn*d >= 0 || from == to {
		return chain.Element{}, false
	}
	if math.Abs(turn) < hairTurn {
		return chain.Element{Kind: chain.Line, From: from, To: to}, true
	}
	return chain.Element{Kind: chain.Arc, From: from, To: to, Center: b.From, CCW: turn > 0}, true
}

// near reports whether both ends and the middle of a move are within the band of a
// distance from the contour.
func (v *verifier) near(m read.Move, distance, band float64) bool {
	if still(m) {
		return false
	}
	for _, p := range []plane.Point{m.From, element(m).PointAt(0.5), m.To} {
		if d, _ := v.outline.near(p); math.Abs(d-distance) > band {
			return false
		}
	}
	return true
}

// closed returns an overlapping turn cut off where it comes back to its start.
func closed(p chain.Path) chain.Path {
	start := p[0].From
	for i := len(p) - 1; i > 0; i-- {
		if f := fraction(p[i], start); f > 0 && p[i].PointAt(f).Dist(start) < p[0].Length() {
			q := append(chain.Path(nil), p[:i+1]...)
			if f < 1 {
				q[i], _ = p[i].Split(f)
			}
			q[i].To = start
			return q
		}
	}
	return p
}
