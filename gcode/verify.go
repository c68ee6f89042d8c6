package gcode

import (
	"fmt"
	"math"
	"sort"

	"lobewright/gcode/read"
	"lobewright/synth/plane"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
)

// Verify holds a program as read against what it must do. What it must not do is
// found in Result.Failures, in order of the file; a program with none is proven:
//
//   - every cut is within Eps of its exact parallel curve, both directions, by
//     certify.Stretch, and goes all around;
//   - every other feed move below SafeZ (every one of a wire) keeps the tool's center at
//     least its offset less Eps from the finished contour, and every cut does so
//     from all of the contour, not only from the stretch it follows;
//   - plunges and rapids below SafeZ clear contour, clamp and blank;
//   - in a slot every feed move, the ramps among them, is within Eps of the pitch curve, no
//     deeper than expected, and nothing else goes below SafeZ but straight up and down; along
//     its walls no move comes nearer to either than the tool's radius less Eps;
//   - units, tool, spindle, feeds, depths, compensation, stops and end are those expected.
//
// Compensation is applied as NISTIR 6556 appendix B describes it: a moved element
// for every written one, an arc about every outer corner. While it is switched
// on or off, the tool may be anywhere within the register's value of the written
// line, because controls differ there. The error says that the expectation
// itself is not sound; then nothing is proven.
func Verify(p *read.Program, x Expect) (Result, error) {
	if p == nil || x.Curve == nil || len(x.Cuts) == 0 || !(x.Eps > 0) {
		return Result{}, fmt.Errorf("verify: a program, a curve, cuts and a positive Eps are needed")
	}
	if x.Rotary != 0 && x.Process == Mill {
		return verifyPolar(p, x)
	}
	v := newVerifier(p, x)
	v.run()
	return v.res, nil
}

func newVerifier(p *read.Program, x Expect) *verifier {
	contour := x.Curve(0)
	v := &verifier{p: p, x: x, body: certify.Prepare(contour), outline: newOutline(contour), cleared: map[question]answer{}, band: nearShare * x.Radius}
	v.res.Clearance = math.Inf(1)
	return v
}

// run holds everything in turn.
func (v *verifier) run() {
	v.count()
	v.words()
	v.mismatches()
	switch v.x.Process {
	case Wire:
		v.wire()
	case Slot:
		v.slot()
	default:
		v.mill()
	}
	v.worst()
	v.sort()
}

// sort brings the failures into the order of the file.
func (v *verifier) sort() {
	v.number()
	sort.SliceStable(v.res.Failures, func(i, j int) bool { return v.res.Failures[i].Line < v.res.Failures[j].Line })
}

// verifier collects the verdicts on one program.
type verifier struct {
	p       *read.Program
	x       Expect
	body    *certify.Body
	outline outline
	cleared map[question]answer
	both    []*certify.Body // the walls of a groove
	band    float64         // length: a milled move this near to its cut's distance is part of it
	res     Result
}

// nan marks a value, limit or angle that a failure does not have.
func nan() float64 { return math.NaN() }

func (v *verifier) fail(id string, value, limit, angle float64, line int, format string, args ...any) {
	v.res.Failures = append(v.res.Failures, Failure{id, value, limit, angle, line, -1, fmt.Sprintf(format, args...)})
}

// wrong is a failure without numbers.
func (v *verifier) wrong(id string, line int, format string, args ...any) {
	v.fail(id, nan(), nan(), nan(), line, format, args...)
}

// number gives the failures their block numbers.
func (v *verifier) number() {
	numbers := map[int]int{}
	for _, m := range v.p.Moves {
		numbers[m.LineNo] = m.N
	}
	for i, f := range v.res.Failures {
		if n, ok := numbers[f.Line]; ok {
			v.res.Failures[i].N = n
		}
	}
}

// element returns a move as an element of a path.
func element(m read.Move) chain.Element {
	e := chain.Element{From: m.From, To: m.To}
	if m.Kind == read.Arc {
		e.Kind, e.Center, e.CCW = chain.Arc, m.Center, m.CCW
	}
	return e
}

func elements(ms []read.Move) chain.Path {
	p := make(chain.Path, len(ms))
	for i, m := range ms {
		p[i] = element(m)
	}
	return p
}

// still reports whether the move does not leave its place in the plane.
func still(m read.Move) bool { return m.Kind != read.Arc && m.From == m.To }

// count fills the figures that need no proof, and holds the block count.
func (v *verifier) count() {
	r := &v.res
	r.Blocks, r.Bytes, r.ShortestMove = v.p.Blocks, v.p.Bytes, math.Inf(1)
	rapid := RapidMM
	if v.p.Inch {
		rapid = RapidInch
	}
	minutes, feedKnown := 0.0, true
	for _, m := range v.p.Moves {
		if m.Kind == read.Rapid {
			if m.KnownXY && m.KnownZ {
				minutes += math.Hypot(m.From.Dist(m.To), m.ToZ-m.FromZ) / rapid
			}
			continue
		}
		flat := element(m).Length()
		length := math.Hypot(flat, m.ToZ-m.FromZ)
		r.PathLength += length
		feedKnown = feedKnown && m.Feed > 0
		minutes += length / m.Feed
		if flat > 0 {
			r.ShortestMove = math.Min(r.ShortestMove, flat)
			if m.Kind == read.Arc {
				r.Arcs++
			} else {
				r.Lines++
			}
		}
	}
	if math.IsInf(r.ShortestMove, 1) {
		r.ShortestMove = 0
	}
	if feedKnown {
		r.Seconds = 60 * minutes
	}
	if v.x.MaxBlocks > 0 && r.Blocks > v.x.MaxBlocks {
		v.fail("block-count", float64(r.Blocks), float64(v.x.MaxBlocks), nan(), 0,
			"%d blocks, the control takes %d; allow a larger chord tolerance", r.Blocks, v.x.MaxBlocks)
	}
}

// mismatches holds the radii of every arc at its ends against the control's limit, and its form against what a control may
// take for something else.
func (v *verifier) mismatches() {
	for _, m := range v.p.Moves {
		if m.Kind != read.Arc {
			continue
		}
		v.form(m)
		d := math.Abs(m.From.Dist(m.Center) - m.To.Dist(m.Center))
		if d > v.res.ArcMismatch {
			v.res.ArcMismatch, v.res.ArcMismatchLine = d, m.LineNo
		}
		if !(d <= v.x.ArcMismatch) {
			_, t := v.outline.near(m.To)
			v.fail("arc-mismatch", d, v.x.ArcMismatch, t, m.LineNo, "the arc's radii at start and end differ by %.4g, the control allows %.4g", d, v.x.ArcMismatch)
		}
	}
}

// sweepShare is what rounding the ends of an arc may add to its sweep: a joint slides by 2 % of its shorter neighbor at most.
const sweepShare = 1.03

// form refuses arcs that a control may take for a full circle or does not take at all: ends that are equal or nearer than its limit,
// more than half a turn, a radius above its limit.
func (v *verifier) form(m read.Move) {
	l, e := v.x.Limits, element(m)
	sweep, most := math.Abs(e.Sweep())*180/math.Pi, 180.0
	if l.Sweep > 0 {
		most = math.Min(l.Sweep*sweepShare, most)
	}
	switch chord := m.From.Dist(m.To); {
	case chord == 0 || chord < l.Chord:
		v.fail("arc-form", chord, l.Chord, nan(), m.LineNo, "an arc whose ends are %.6g apart: a control may take it for a full circle", chord)
	case sweep > most:
		v.fail("arc-form", sweep, most, nan(), m.LineNo, "an arc of %.6g degrees; at most %.6g are taken", sweep, most)
	case l.Radius > 0 && e.Radius() > l.Radius:
		v.fail("arc-form", e.Radius(), l.Radius, nan(), m.LineNo, "an arc of radius %.6g; the control takes %.6g", e.Radius(), l.Radius)
	}
}

// worst fills the figure of the cut with the largest bound.
func (v *verifier) worst() {
	for i, c := range v.res.Cuts {
		if i == 0 || c.Deviation.Bound > v.res.Deviation.Bound {
			v.res.Deviation = c.Deviation
		}
	}
}

// question and answer keep the proofs of clearance: the same path is cut at
// several depths.
type question struct {
	e     chain.Element
	least float64
}

type answer struct {
	found, at float64
	err       error
}

// clear proves that the tool's center keeps least from the finished contour on all
// of e, outside it. A lead counts in Result.Clearance, a cut does not: it
// stands at its limit by design.
func (v *verifier) clear(id string, e chain.Element, least float64, line int, lead bool) {
	q := question{e, least}
	a, known := v.cleared[q]
	if !known {
		a.found, a.at, a.err = v.body.Clear(e, least)
		v.cleared[q] = a
	}
	if a.err != nil {
		v.fail(id, nan(), least, a.at, line, "clearance not proven: %v", a.err)
		return
	}
	if lead && a.found-least < v.res.Clearance {
		v.res.Clearance, v.res.ClearanceLine = a.found-least, line
	}
	if !(a.found >= least) {
		v.fail(id, a.found, least, a.at, line, "the tool's center comes to %.6g of the finished contour at cam angle %.4g; it must keep %.6g", a.found, a.at, least)
	}
}

// outside refuses a point inside the contour. With clear on all moves that hang
// together one point speaks for all: none of them crosses the contour.
func (v *verifier) outside(p plane.Point, line int) {
	if v.outline.inside(p) {
		_, t := v.outline.near(p)
		v.fail("clearance", nan(), nan(), t, line, "the tool goes down inside the finished contour")
	}
}
