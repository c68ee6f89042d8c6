package svg

import (
	"fmt"
	"math"
	"strings"

	"lobewright/synth/plane"
)

// Sizes of charts in mm.
const (
	chartWidth  = 190.0
	axisSize    = 2.2 // tick labels
	titleSize   = 2.7 // title of a panel
	headSize    = 4.0 // title of the figure
	axisRoom    = 16.0
	secondRoom  = 13.0 // scale on the right of a motion panel
	titleRoom   = 5.2
	chartMargin = 6.0
)

// axes is one panel: a plot area over cam angle 0 to 360 and a range of values.
type axes struct {
	c      *canvas
	b      box
	lo, hi float64
	unit   float64 // values are divided by this for the tick labels
}

func (a axes) x(angle float64) float64 { return a.b.x0 + a.b.width()*angle/360 }
func (a axes) y(v float64) float64     { return a.b.y1 - a.b.height()*(v-a.lo)/(a.hi-a.lo) }
func (a axes) at(s Sample) pt          { return pt{a.x(s.CamAngle), a.y(s.Value)} }

// inside reports whether a value is in the panel's range.
func (a axes) inside(v float64) bool { return v >= a.lo && v <= a.hi }

// niceStep is the least of 1, 2, 5 times a power of ten that divides span in at most n parts.
func niceStep(span float64, n int) float64 {
	raw := span / float64(n)
	p := math.Pow(10, math.Floor(math.Log10(raw)))
	if p == 0 { // below the least float
		return span
	}
	for _, m := range []float64{1, 2, 5} {
		if m*p >= raw*(1-1e-12) { // a span that is n steps but for rounding takes n steps
			return m * p
		}
	}
	return 10 * p
}

// ranged widens lo..hi to include zero and leaves room for labels.
func ranged(lo, hi float64) (float64, float64) {
	lo, hi = math.Min(lo, 0), math.Max(hi, 0)
	if lo == hi {
		return -1, 1
	}
	const room = 0.14
	d := hi - lo
	if lo < 0 {
		lo -= room * d
	}
	if hi > 0 {
		hi += room * d
	}
	return lo, hi
}

// frame draws the panel's grid, the tick labels and the event boundaries.
func (a axes) frame(events []Event, angles bool) {
	for _, e := range events {
		if from := plane.Wrap360(e.From); from > 0 {
			x := a.x(from)
			a.c.line(pt{x, a.b.y0}, pt{x, a.b.y1}, pen{width: 0.18, color: gray, dash: "0.6 0.9"})
		}
	}
	step := niceStep(a.hi-a.lo, 5)
	for k := math.Ceil(a.lo / step); k*step <= a.hi; k++ {
		v := k * step
		y := a.y(v)
		if k != 0 {
			a.c.line(pt{a.b.x0, y}, pt{a.b.x1, y}, pen{width: 0.1, color: pale})
		}
		a.c.line(pt{a.b.x0 - 1, y}, pt{a.b.x0, y}, pen{width: 0.2})
		a.c.text(pt{a.b.x0 - 1.6, y + axisSize*0.36}, tick(v/a.unit, step/a.unit), font{size: axisSize, anchor: "end"})
	}
	if a.inside(0) {
		a.c.line(pt{a.b.x0, a.y(0)}, pt{a.b.x1, a.y(0)}, pen{width: 0.25, color: gray})
	}
	for t := 0.0; t <= 360; t += 30 {
		x := a.x(t)
		a.c.line(pt{x, a.b.y1}, pt{x, a.b.y1 + 1}, pen{width: 0.2})
		if angles {
			a.c.text(pt{x, a.b.y1 + 1.6 + axisSize}, num(t, 0), font{size: axisSize, anchor: "middle"})
		}
	}
	a.c.rect(a.b, pen{width: 0.25, class: overAngle})
}

// tick prints an axis value with the decimals its step needs.
func tick(v, step float64) string {
	if math.Abs(v) < step*1e-6 { // zero but for rounding
		return "0"
	}
	if step < 1e-5 { // more decimals than the margin holds
		return power(v)
	}
	return num(v, int(math.Max(0, math.Ceil(-math.Log10(step)-1e-9))))
}

// series draws runs, with a vertical step where one run ends at the angle at which
// the next begins, and at 0 where the end of the cycle meets its start.
func (a axes) series(runs []Run, p pen, l *layout) {
	t := &track{}
	for i, r := range runs {
		for j, s := range r {
			q := a.at(s)
			joined := i > 0 && j == 0 && meets(runs[i-1], s)
			if j > 0 || joined {
				t.lineTo(q)
			} else {
				t.move(q)
			}
			a.note(l, runs, i, j)
		}
	}
	if first, last, ok := ends(runs); ok && first.CamAngle == 0 && last.CamAngle == 360 && first.Value != last.Value {
		t.move(pt{a.x(0), a.y(last.Value)})
		t.lineTo(pt{a.x(0), a.y(first.Value)})
	}
	a.c.path(t, p)
}

// note tells the layout about the stroke that ends at sample j of run i.
func (a axes) note(l *layout, runs []Run, i, j int) {
	switch {
	case l == nil:
	case j > 0:
		l.stroke(a.at(runs[i][j-1]), a.at(runs[i][j]))
	case i > 0 && meets(runs[i-1], runs[i][0]):
		l.stroke(a.at(runs[i-1][len(runs[i-1])-1]), a.at(runs[i][0]))
	}
}

// meets reports whether a run ends at the cam angle of s.
func meets(r Run, s Sample) bool {
	const same = 1e-9 // degrees; junctions are the same float up to rounding
	return len(r) > 0 && math.Abs(r[len(r)-1].CamAngle-s.CamAngle) <= same
}

// ends are the first and the last sample of all runs.
func ends(runs []Run) (first, last Sample, ok bool) {
	for _, r := range runs {
		if len(r) == 0 {
			continue
		}
		if !ok {
			first, ok = r[0], true
		}
		last = r[len(r)-1]
	}
	return first, last, ok
}

// extremes are the greatest and the least sample.
func extremes(runs []Run) (least, greatest Sample, ok bool) {
	for _, r := range runs {
		for _, s := range r {
			if !ok || s.Value < least.Value {
				least = s
			}
			if !ok || s.Value > greatest.Value {
				greatest = s
			}
			ok = true
		}
	}
	return least, greatest, ok
}

// checkRuns refuses a series with a sample that is not finite or off the cycle.
func checkRuns(name string, runs []Run) error {
	n := 0
	for _, r := range runs {
		for _, s := range r {
			n++
			if !finite(s.Value) {
				return fmt.Errorf("svg: %s: the value at cam angle %g is %v; it must be finite", name, s.CamAngle, s.Value)
			}
			if !(s.CamAngle >= 0 && s.CamAngle <= 360) {
				return fmt.Errorf("svg: %s: cam angle %v; allowed are 0 to 360 degrees", name, s.CamAngle)
			}
		}
	}
	if n == 0 {
		return fmt.Errorf("svg: %s: the series is empty; hand in at least one run of samples", name)
	}
	return nil
}

// factor is the power of 1000 that brings values of size v to at most five digits, and its name.
func factor(v float64) (float64, string) {
	f, exponent := 1.0, 0
	for v/f >= 1e5 && exponent < 30 {
		f, exponent = f*1000, exponent+3
	}
	return f, powerName(exponent)
}

// reduced is factor for sizes that may be small too: those below 0.1 are brought above it.
func reduced(v float64) (float64, string) {
	f, exponent := 1.0, 0
	for v > 0 && v/f < 0.1 && exponent > -30 {
		f, exponent = f/1000, exponent-3
	}
	if exponent < 0 {
		return f, powerName(exponent)
	}
	return factor(v)
}

// powerName is a power of ten before a unit, nothing for 1.
func powerName(exponent int) string {
	if exponent == 0 {
		return ""
	}
	up := strings.NewReplacer("-", "⁻", "0", "⁰", "1", "¹", "2", "²", "3", "³", "4", "⁴", "5", "⁵", "6", "⁶", "7", "⁷", "8", "⁸", "9", "⁹")
	return "10" + up.Replace(fmt.Sprint(exponent)) + " "
}

// second labels the right side in another unit and returns that unit with its power of ten.
func (a axes) second(s Scale) string {
	lo, hi := a.lo*s.Factor, a.hi*s.Factor
	f, prefix := reduced(math.Max(math.Abs(lo), math.Abs(hi)))
	step := niceStep(hi-lo, 4)
	for k := math.Ceil(lo / step); k*step <= hi; k++ {
		y := a.y(k * step / s.Factor)
		a.c.line(pt{a.b.x1, y}, pt{a.b.x1 + 1, y}, pen{width: 0.2})
		a.c.text(pt{a.b.x1 + 1.6, y + axisSize*0.36}, tick(k*step/f, step/f), font{size: axisSize, color: gray})
	}
	return prefix + s.Unit
}

// heading writes the figure's title lines and returns the y below them.
func heading(c *canvas, h Head, what string) float64 {
	c.doing("heading")
	width := chartWidth - 2*chartMargin
	y := chartMargin + headSize*0.8
	if !h.Released {
		stamp := "NOT RELEASED"
		w := widthOf(stamp, headSize, true) + 4
		b := box{chartWidth - chartMargin - w, chartMargin - 1.2, chartWidth - chartMargin, chartMargin + headSize + 0.8}
		c.rect(b, pen{width: 0.6, color: red})
		c.text(pt{b.center().x, y}, stamp, font{size: headSize, bold: true, color: red, anchor: "middle"})
		width -= w + 3
	}
	text, size := fitted(h.name(", revision ")+": "+what, width, headSize, 2, true)
	c.text(pt{chartMargin, y}, text, font{size: size, bold: true})
	turns := "counterclockwise"
	if h.Clockwise {
		turns = "clockwise"
	}
	y += 4.6
	line := h.Title + ". Camshaft " + num(h.Speed, 3) + " rpm, " + turns + " seen on the marked face."
	text, size = fitted(line, chartWidth-2*chartMargin, titleSize, 1.8, false)
	c.text(pt{chartMargin, y}, text, font{size: size, color: gray})
	return y + 3
}

// checkHead refuses a head that cannot be printed.
func (h Head) check(figure string) error {
	if h.Units != "mm" && h.Units != "inch" {
		return fmt.Errorf("svg: %s: units are %q; allowed are mm and inch", figure, h.Units)
	}
	if !finite(h.Speed) {
		return fmt.Errorf("svg: %s: speed is %v; it must be finite", figure, h.Speed)
	}
	return nil
}

// checkEvents refuses events whose boundaries cannot be drawn.
func checkEvents(figure string, events []Event) error {
	for i, e := range events {
		if !finite(e.From, e.To) {
			return fmt.Errorf("svg: %s: event %d runs from %v to %v; both must be finite", figure, i+1, e.From, e.To)
		}
	}
	return nil
}
