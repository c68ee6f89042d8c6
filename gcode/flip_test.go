package gcode_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"lobewright/gcode"
	"lobewright/gcode/read"
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Two hundred digits of each program are changed. What Verify lets pass is held
// against samples of what the tool would do, worked out here: a cut stays within
// two Eps of the cut as planned, nothing comes nearer to the contour than its
// stock allows, nothing moves in Z. What passes Differs too makes the same moves.
func TestFlippedDigits(t *testing.T) {
	m := job{part(ellipse), mill(ellipse), machine(), 0.004}
	m.op.Stock, m.op.StepDown, m.op.Path = []float64{0}, 0, ellipse.fitted(24)
	c := job{part(eccentric), mill(eccentric), machine(), 0.002}
	c.op.Stock, c.op.StepDown = []float64{0.2, 0}, 0
	c.op.Compensation, c.op.Path, c.part.ClampRadius = gcode.CompControl, eccentric.fitted(3), 10
	w := job{part(eccentric), wire(eccentric), machine(), 0.002}
	w.op.Path, w.op.Offsets = eccentric.fitted(3), []float64{0.19, 0.13}
	for name, j := range map[string]job{"mill path": m, "mill control": c, "wire": w} {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			flips(t, j)
		})
	}
}

func flips(t *testing.T, j job) {
	plan, text, good := j.program(t)
	rng := rand.New(rand.NewPCG(7, 1))
	unread, refused, differ, same := 0, 0, 0, 0
	for range 200 {
		bad, at := flip(text, rng)
		back, err := read.Parse(bad)
		if err != nil {
			unread++
			continue
		}
		if len(j.verify(t, back).Failures) > 0 {
			refused++
			continue
		}
		if fault := j.harm(good, back); fault != "" {
			t.Errorf("byte %d, now %q: passed Verify, but %s", at, line(bad, at), fault)
		}
		if gcode.Differs(plan, back) != nil {
			differ++
			continue
		}
		if !sameMoves(good, back) {
			t.Errorf("byte %d, now %q: passed Differs, but moves differ", at, line(bad, at))
		}
		same++
	}
	t.Logf("%d not readable, %d refused by Verify, %d by Differs alone, %d make the same moves", unread, refused, differ, same)
	if refused < 20 || same == 200 {
		t.Errorf("only %d refused: the flips do not reach the moves", refused)
	}
}

// flip changes one digit outside the comments into another one.
func flip(text []byte, rng *rand.Rand) ([]byte, int) {
	bad := append([]byte(nil), text...)
	for {
		i := rng.IntN(len(bad))
		if bad[i] < '0' || bad[i] > '9' || inComment(bad, i) {
			continue
		}
		bad[i] = '0' + (bad[i]-'0'+byte(1+rng.IntN(9)))%10
		return bad, i
	}
}

func inComment(b []byte, i int) bool {
	for ; i >= 0 && b[i] != '\n' && b[i] != ')'; i-- {
		if b[i] == '(' {
			return true
		}
	}
	return false
}

func line(b []byte, at int) string {
	from, to := at, at
	for from > 0 && b[from-1] != '\n' {
		from--
	}
	for b[to] != '\n' {
		to++
	}
	return string(b[from:to])
}

func sameMoves(a, b *read.Program) bool {
	if len(a.Moves) != len(b.Moves) {
		return false
	}
	for i := range a.Moves {
		x, y := a.Moves[i], b.Moves[i]
		x.N, y.N = 0, 0
		if x != y {
			return false
		}
	}
	return true
}

// harm says what is wrong with a program as cut, by samples; empty when nothing is.
func (j job) harm(good, back *read.Program) string {
	if len(good.Moves) != len(back.Moves) {
		return "moves are missing"
	}
	least := 0.0 // distance the written path must keep from the contour
	if j.op.Process == gcode.Mill && j.op.Compensation != gcode.CompControl {
		least = j.op.ToolDiameter / 2
	}
	if j.op.Process == gcode.Wire {
		least = j.op.Offsets[len(j.op.Offsets)-1]
	}
	whole := samples(j.part.Curve(0))
	for i, m := range back.Moves {
		g := good.Moves[i]
		if m.Kind == read.Rapid || m.HasZ {
			if math.Min(m.ToZ, j.m.SafeZ) != math.Min(g.ToZ, j.m.SafeZ) {
				return "Z differs"
			}
			continue
		}
		if m.Feed != g.Feed || m.Spindle != g.Spindle || m.Comp != g.Comp || m.D != g.D {
			return "a modal word differs"
		}
		if asElement(m) == asElement(g) {
			continue
		}
		for k := range 17 {
			p := asElement(m).PointAt(float64(k) / 16)
			d := fromPolygon(p, whole)
			if d < least-2*j.eps {
				return "the tool cuts into the contour"
			}
			q := asElement(g).PointAt(float64(k) / 16)
			if e := math.Abs(fromPolygon(q, whole) - d); e > 2*j.eps && cutting(asElement(g), whole, j) {
				return "the cut moves off its curve"
			}
		}
	}
	return ""
}

// cutting reports whether the planned move follows the contour.
func cutting(e chain.Element, whole []plane.Point, j job) bool {
	far := 1.0 // below the least distance of a lead's outer end, above every stock
	if j.op.Process == gcode.Wire {
		far = 0.25
	}
	if j.op.Process == gcode.Mill && j.op.Compensation != gcode.CompControl {
		far += j.op.ToolDiameter / 2
	}
	return fromPolygon(e.From, whole) < far && fromPolygon(e.To, whole) < far
}

func asElement(m read.Move) chain.Element {
	e := chain.Element{From: m.From, To: m.To}
	if m.Kind == read.Arc {
		e.Kind, e.Center, e.CCW = chain.Arc, m.Center, m.CCW
	}
	return e
}

// samples are points of the curve so dense that the polygon is 1e-5 from it.
func samples(c gcode.Curve) []plane.Point {
	var ps []plane.Point
	for k := range 3600 {
		t := float64(k) / 10
		for i, p := range c.Pieces() {
			if t >= p.From && t < p.To {
				ps = append(ps, c.At(i, t).P)
			}
		}
	}
	return ps
}

// fromPolygon is the distance of p from the polygon.
func fromPolygon(p plane.Point, ps []plane.Point) float64 {
	best, least := 0, math.Inf(1)
	for i, q := range ps {
		if d := p.Dist(q); d < least {
			best, least = i, d
		}
	}
	n := len(ps)
	for _, i := range []int{(best + n - 1) % n, best} {
		a, v := ps[i], ps[(i+1)%n].Sub(ps[i])
		f := math.Max(0, math.Min(1, p.Sub(a).Dot(v)/v.Dot(v)))
		least = math.Min(least, p.Dist(a.Add(v.Scale(f))))
	}
	return least
}
