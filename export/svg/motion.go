package svg

import (
	"cmp"
	"fmt"
	"math"
	"slices"
)

// panelHeight is the height of one plot area in mm; panelGap follows it.
const (
	panelHeight = 30.0
	panelGap    = 3.6
)

// panel is one series ready to draw.
type panel struct {
	name   string
	note   string // after the title, in gray
	curve  Curve  // Runs hold what is drawn
	lo, hi float64
}

// Motion draws lift, velocity, acceleration, jerk, pressure angle and the contour's
// radius of curvature over cam angle, six panels on a sheet of 190 mm width. The
// error names a series that is empty or holds a value that is not finite.
func Motion(m MotionChart) ([]byte, error) {
	if err := m.Head.check("motion chart"); err != nil {
		return nil, err
	}
	if err := checkEvents("motion chart", m.Events); err != nil {
		return nil, err
	}
	panels, err := m.panels()
	if err != nil {
		return nil, err
	}
	const top, foot = 24.0, 10.0
	height := top + float64(len(panels))*(titleRoom+panelHeight+panelGap) + foot
	c := newCanvas(chartWidth, height, "Motion of "+m.name(" revision "),
		"Lift, velocity, acceleration, jerk, pressure angle and radius of curvature over cam angle")
	heading(c, m.Head, "motion")
	eventNames(c, m.Events, top-1.5)
	for i, p := range panels {
		y := top + float64(i)*(titleRoom+panelHeight+panelGap) + titleRoom
		c.group(fmt.Sprintf("panel-%d", i+1))
		c.doing(p.name)
		p.draw(c, box{chartMargin + axisRoom, y, chartWidth - chartMargin - secondRoom, y + panelHeight}, m.Events, i == len(panels)-1)
		c.end()
	}
	c.text(pt{(chartMargin + axisRoom + chartWidth - chartMargin - secondRoom) / 2, height - 3}, "Cam angle, degrees",
		font{size: titleSize, anchor: "middle"})
	return c.bytes()
}

// eventNames writes the events over the first panel where they fit their stretch; one
// that runs past 360 stands on its longer part.
func eventNames(c *canvas, events []Event, y float64) {
	c.doing("event names")
	a := axes{b: box{chartMargin + axisRoom, 0, chartWidth - chartMargin - secondRoom, 1}}
	l := newLayout(box{chartMargin, 0, chartWidth - chartMargin, y + 1})
	for _, e := range events {
		lo, hi := a.x(math.Max(0, e.From)), a.x(math.Min(360, e.To))
		if l2, h2 := a.x(math.Max(0, e.From-360)), a.x(math.Min(360, e.To-360)); h2-l2 > hi-lo {
			lo, hi = l2, h2
		}
		stretch := box{lo, y - axisSize, hi, y}
		if hi-lo < 6 || !l.free(stretch.grown(-textGap)) {
			continue
		}
		l.block(stretch)
		text, size := fitted(e.Text, hi-lo-1.5, axisSize, 1.6, false)
		c.text(pt{(lo + hi) / 2, y}, text, font{size: size, anchor: "middle", color: gray})
	}
}

// panels checks every series and works out the ranges.
func (m MotionChart) panels() ([]panel, error) {
	named := []struct {
		name string
		c    Curve
	}{
		{"Lift", m.Lift}, {"Velocity", m.Velocity}, {"Acceleration", m.Acceleration}, {"Jerk", m.Jerk},
		{"Pressure angle", m.PressureAngle}, {"Radius of curvature of the contour", m.Radius},
	}
	var ps []panel
	for i, n := range named {
		if err := checkRuns("motion chart, "+n.name, n.c.Runs); err != nil {
			return nil, err
		}
		if err := checkRuns("motion chart, peaks of "+n.name, []Run{n.c.Peaks}); err != nil && len(n.c.Peaks) > 0 {
			return nil, err
		}
		for _, t := range n.c.Steps {
			if !finite(t.CamAngle, t.Before, t.After) {
				return nil, fmt.Errorf("svg: motion chart, %s: a step from %v to %v at cam angle %v; all must be finite", n.name, t.Before, t.After, t.CamAngle)
			}
		}
		if s := n.c.Second; s != nil && !(s.Factor > 0 && finite(s.Factor)) {
			return nil, fmt.Errorf("svg: motion chart, %s: the second scale is %v of the first; it must be above 0 and finite", n.name, s.Factor)
		}
		if err := checkMarks("motion chart, "+n.name, n.c.Marks); err != nil {
			return nil, err
		}
		for _, l := range n.c.Limits {
			if !finite(l.Value, l.From, l.To) {
				return nil, fmt.Errorf("svg: motion chart, %s: a limit is %v from %v to %v; all must be finite", n.name, l.Value, l.From, l.To)
			}
		}
		if i < len(named)-1 {
			ps = append(ps, plain(n.name, n.c))
		} else {
			ps = append(ps, radius(n.name, n.c))
		}
	}
	return ps, nil
}

// plain is a panel of the samples as they are.
func plain(name string, c Curve) panel {
	least, greatest, _ := extremes(c.Runs)
	lo, hi := least.Value, greatest.Value
	const farOff = 2.5 // a limit this many times beyond the curve would flatten it
	size := math.Max(math.Abs(lo), math.Abs(hi))
	for _, l := range c.Limits {
		if math.Abs(l.Value) <= farOff*size {
			lo, hi = math.Min(lo, l.Value), math.Max(hi, l.Value)
		}
	}
	for _, m := range c.Marks { // windows and facts stay on the chart
		lo, hi = math.Min(lo, m.Value), math.Max(hi, m.Value)
	}
	if c.Peaks == nil {
		if least.Value < 0 {
			c.Peaks = append(c.Peaks, least)
		}
		if greatest.Value > 0 {
			c.Peaks = append(c.Peaks, greatest)
		}
	}
	lo, hi = ranged(lo, hi)
	return panel{name: name, curve: c, lo: lo, hi: hi}
}

// radius turns curvature into radius. A radius runs to infinity at an inflection, so
// it is drawn up to a few times its median and cut there, in curvature, where
// the series is smooth.
func radius(name string, c Curve) panel {
	const medians = 4.0
	var sizes []float64
	for _, r := range c.Runs {
		for _, s := range r {
			if s.Value != 0 {
				sizes = append(sizes, 1/math.Abs(s.Value))
			}
		}
	}
	if len(sizes) == 0 {
		sizes = []float64{1}
	}
	slices.Sort(sizes)
	far := medians * sizes[len(sizes)/2]
	for _, l := range c.Limits {
		far = math.Max(far, 1.2*math.Abs(l.Value))
	}
	far = niceStep(far, 1)
	least, greatest, _ := extremes(c.Runs)
	lo, hi := 0.0, far
	if least.Value < 0 {
		lo = -far
	}
	if c.Peaks == nil {
		c.Peaks = tightest(least, greatest)
	}
	runs := []Run{}
	for _, r := range c.Runs {
		runs = append(runs, radii(r, 1/far)...)
	}
	c.Runs = runs
	note := "convex positive"
	if lo < 0 {
		note = "convex positive, concave negative"
	}
	if least.Value < 1/far {
		note += "; beyond " + figures(far) + " not drawn"
	}
	return panel{name: name, note: note, curve: c, lo: lo, hi: hi}
}

// tightest labels the least convex and the least concave radius.
func tightest(least, greatest Sample) []Sample {
	ps := []Sample{}
	if greatest.Value > 0 {
		ps = append(ps, Sample{greatest.CamAngle, 1 / greatest.Value})
	}
	if least.Value < 0 {
		ps = append(ps, Sample{least.CamAngle, 1 / least.Value})
	}
	return ps
}

// radii turns a run of curvature into runs of radius whose curvature is at least k
// in size; between samples the curvature is taken as straight.
func radii(r Run, k float64) []Run {
	var runs []Run
	var run Run
	add := func(angle, v float64) { run = append(run, Sample{angle, 1 / v}) }
	flush := func() {
		if len(run) > 1 {
			runs = append(runs, run)
		}
		run = nil
	}
	for i, s := range r {
		if i > 0 {
			p := r[i-1]
			levels := []float64{k, -k}
			if p.Value < s.Value {
				levels = []float64{-k, k}
			}
			for _, level := range levels {
				if (p.Value-level)*(s.Value-level) >= 0 {
					continue
				}
				u := (level - p.Value) / (s.Value - p.Value)
				add(p.CamAngle+u*(s.CamAngle-p.CamAngle), level)
				if len(run) > 1 { // the crossing leaves the range
					flush()
				}
			}
		}
		if math.Abs(s.Value) >= k {
			add(s.CamAngle, s.Value)
		} else {
			flush()
		}
	}
	flush()
	return runs
}

// draw puts the panel into b.
func (p panel) draw(c *canvas, b box, events []Event, angles bool) {
	f, prefix := factor(math.Max(math.Abs(p.lo), math.Abs(p.hi)))
	a := axes{c: c, b: b, lo: p.lo, hi: p.hi, unit: f}
	title := p.name + ", " + prefix + p.curve.Unit
	right := ""
	if p.curve.Second != nil {
		right = "right: " + a.second(*p.curve.Second)
	}
	c.text(pt{b.x0, b.y0 - 1.6}, title, font{size: titleSize, bold: true})
	x := b.x0 + widthOf(title, titleSize, true) + 2
	a.frame(events, angles)
	l := newLayout(b.grown(-0.6))
	a.under(p.curve.Marks)
	off := p.limits(a, l)
	if note := joinNotes(joinNotes(joinNotes(right, p.note), legend(p.curve.Marks)), off); note != "" {
		text, size := fitted(note, b.x1-x, axisSize, 1.6, false)
		c.text(pt{x, b.y0 - 1.6}, text, font{size: size, color: gray})
	}
	a.series(p.curve.Runs, pen{width: 0.45, color: blue}, l)
	a.over(p.curve.Marks, l)
	for _, s := range p.curve.Peaks {
		a.peak(s, l)
	}
	p.limitTexts(a, l)
	p.steps(a, l)
}

// leastStep is the share of the panel's height below which a jump is not seen and not labeled.
const leastStep = 0.03

// steps labels the jumps that can be seen with their size and angle where there is room, the
// largest first.
func (p panel) steps(a axes, l *layout) {
	size := func(s Step) float64 { return math.Abs(s.After - s.Before) }
	steps := slices.DeleteFunc(slices.Clone(p.curve.Steps), func(s Step) bool { return size(s) < leastStep*(a.hi-a.lo) })
	slices.SortStableFunc(steps, func(s, t Step) int { return cmp.Compare(size(t), size(s)) })
	for _, s := range steps {
		mid := math.Min(math.Max((s.Before+s.After)/2, a.lo), a.hi)
		text := "steps by " + figures((s.After-s.Before)/a.unit) + " at " + num(s.CamAngle, 2) + "°"
		w := wish{at: pt{a.x(s.CamAngle), a.y(mid)}, away: 0, w: widthOf(text, axisSize, false), h: axisSize, near: 0.8, far: 12, direct: true}
		if sp, ok := l.place(w); ok {
			a.c.text(pt{sp.box.x0, sp.box.y1 - axisSize*0.2}, text, font{size: axisSize, color: gray})
		}
	}
}

func joinNotes(a, b string) string {
	if a != "" && b != "" {
		return a + "; " + b
	}
	return a + b
}

// limits draws the limits that are in range and says which are not.
func (p panel) limits(a axes, l *layout) string {
	off := ""
	for _, m := range p.curve.Limits {
		if !a.inside(m.Value) {
			off = joinNotes(off, limitText(m, a.unit)+" (off the chart)")
			continue
		}
		from, to := span(m)
		q, r := pt{a.x(from), a.y(m.Value)}, pt{a.x(to), a.y(m.Value)}
		a.c.line(q, r, pen{width: 0.35, color: red, dash: dashed})
		l.stroke(q, r)
	}
	return off
}

// limitTexts labels the limits that are in range.
func (p panel) limitTexts(a axes, l *layout) {
	for _, m := range p.curve.Limits {
		if !a.inside(m.Value) {
			continue
		}
		from, to := span(m)
		text := limitText(m, a.unit)
		for _, u := range []float64{0.5, 0.15, 0.85, 0.3, 0.7} {
			at := pt{a.x(from + u*(to-from)), a.y(m.Value)}
			w := wish{at: at, away: -math.Pi / 2, w: widthOf(text, axisSize, false), h: axisSize, near: 1.8, far: 4, direct: true}
			if s, ok := l.place(w); ok {
				a.c.text(pt{s.box.x0, s.box.y1 - axisSize*0.2}, text, font{size: axisSize, color: red})
				break
			}
		}
	}
}

func span(m Limit) (from, to float64) {
	if m.From == 0 && m.To == 0 {
		return 0, 360
	}
	return math.Max(0, m.From), math.Min(360, m.To)
}

func limitText(m Limit, unit float64) string {
	if m.Text != "" {
		return m.Text
	}
	return "limit " + figures(m.Value/unit)
}

// peak marks a sample and labels it with value and angle.
func (a axes) peak(s Sample, l *layout) {
	if !a.inside(s.Value) {
		return
	}
	q := a.at(s)
	a.c.circle(q, 0.7, pen{width: 0.25, fill: "#ffffff"})
	text := figures(s.Value/a.unit) + " at " + num(s.CamAngle, 2) + "°"
	away := -math.Pi / 2
	if s.Value < 0 {
		away = math.Pi / 2
	}
	w := wish{at: q, away: away, w: widthOf(text, axisSize, false), h: axisSize, near: 2, far: 30, direct: true,
		rowsAtEdge: axisSize / 2}
	if sp, ok := l.place(w); ok {
		a.c.text(pt{sp.box.x0, sp.box.y1 - axisSize*0.2}, text, font{size: axisSize})
	}
}
