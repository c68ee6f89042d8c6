package svg

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
)

// Sizes of the deviation chart in mm.
const (
	devHeight = 34.0 // unrolled deviation
	accHeight = 24.0 // acceleration error
	liftPanel = 16.0 // lift error
	ringSide  = 50.0 // polar trace
	ringMean  = 15.0 // radius of zero deviation
	ringSwing = 7.0  // radius of the largest value drawn
	shareRoom = 12.0 // labels in percent
	legendRow = 4.2
	blockGap  = 6.0
)

// Deviation draws the deviation of every written path around the cam: unrolled over
// cam angle against the zone and the certified bound, as an exaggerated trace
// around the axis, and below it the follower's errors in lift and in acceleration, this
// as a share of the design's peak. The error names what is missing or not finite.
func Deviation(d DeviationChart) ([]byte, error) {
	if err := d.check(); err != nil {
		return nil, err
	}
	const top = 20.0
	height := top
	for _, p := range d.Paths {
		height += p.height() + blockGap
	}
	height += 4
	c := newCanvas(chartWidth, height, "Deviation of the written paths of "+d.name(" revision "),
		"Normal deviation over cam angle against the zone, and the follower's acceleration error")
	heading(c, d.Head, "deviation of the written paths")
	y := top
	for i, p := range d.Paths {
		c.group(fmt.Sprintf("path-%d", i+1))
		d.block(c, p, y)
		c.end()
		y += p.height() + blockGap
	}
	return c.bytes()
}

func (p PathDeviation) height() float64 {
	h := titleRoom + legendRow + devHeight + 5
	if len(p.LiftError) > 0 {
		h += titleRoom + liftPanel + 5
	}
	if len(p.AccelerationError) > 0 {
		h += titleRoom + accHeight + 5
	}
	return math.Max(h, titleRoom+legendRow+ringSide)
}

func (d DeviationChart) check() error {
	if err := d.Head.check("deviation chart"); err != nil {
		return err
	}
	if err := checkEvents("deviation chart", d.Events); err != nil {
		return err
	}
	if len(d.Paths) == 0 {
		return fmt.Errorf("svg: deviation chart: there is no path; hand in at least one")
	}
	if !(d.Chord > 0) || math.IsInf(d.Chord, 0) {
		return fmt.Errorf("svg: deviation chart: the zone is %v; it must be above 0 and finite", d.Chord)
	}
	if !finite(d.DesignPeak) {
		return fmt.Errorf("svg: deviation chart: the design's peak is %v; it must be finite", d.DesignPeak)
	}
	for _, p := range d.Paths {
		name := "deviation chart, " + p.Name
		if err := checkRuns(name, p.unrolled(1)); err != nil {
			return err
		}
		if !(p.Bound >= 0) || math.IsInf(p.Bound, 0) {
			return fmt.Errorf("svg: %s: the bound is %v; it must be at least 0 and finite", name, p.Bound)
		}
		if err := checkRuns(name+", acceleration error", p.AccelerationError); err != nil && len(p.AccelerationError) > 0 {
			return err
		}
		if err := checkRuns(name+", lift error", p.LiftError); err != nil && len(p.LiftError) > 0 {
			return err
		}
		for _, r := range p.Runs {
			for _, s := range r {
				if !finite(s.Polar) {
					return fmt.Errorf("svg: %s: the polar angle at cam angle %g is %v; it must be finite", name, s.CamAngle, s.Polar)
				}
			}
		}
	}
	return nil
}

// unrolled is the deviation over cam angle, times f.
func (p PathDeviation) unrolled(f float64) []Run {
	var runs []Run
	for _, r := range p.Runs {
		run := make(Run, 0, len(r))
		for _, s := range r {
			run = append(run, Sample{s.CamAngle, s.Value * f})
		}
		runs = append(runs, run)
	}
	return runs
}

// small is the unit deviations are printed in: millionths of a meter or of an inch.
func (h Head) small() (f float64, unit string) {
	if h.Units == "inch" {
		return 1e6, "µin"
	}
	return 1e3, "µm"
}

// block draws one path, its top at y.
func (d DeviationChart) block(c *canvas, p PathDeviation, y float64) {
	c.doing(p.Name)
	f, unit := d.small()
	runs := p.unrolled(f)
	least, greatest, _ := extremes(runs)
	top := math.Max(math.Max(d.Chord, p.Bound)*f, math.Max(greatest.Value, -least.Value))
	title := p.Name
	if p.Blocks != "" {
		title += ": " + p.Blocks
	}
	text, size := fitted(title, chartWidth-2*chartMargin, titleSize+0.3, 1.8, true)
	c.text(pt{chartMargin, y + 3}, text, font{size: size, bold: true})
	y += titleRoom
	d.legend(c, p, y+2, least, greatest)
	y += legendRow
	right := chartWidth - chartMargin - ringSide - shareRoom
	const room = 1.15
	scale, prefix := factor(top)
	a := axes{c: c, b: box{chartMargin + axisRoom, y, right, y + devHeight}, lo: -room * top, hi: room * top, unit: scale}
	a.frame(d.Events, true)
	c.text(pt{chartMargin + 2.6, y + devHeight/2}, "Deviation, "+prefix+unit, font{size: axisSize, anchor: "middle", turned: true})
	for _, side := range []float64{-1, 1} {
		a.level(side*d.Chord*f, pen{width: 0.35, color: red, dash: dashed})
		a.level(side*p.Bound*f, pen{width: 0.3, dash: chain1})
	}
	a.series(runs, pen{width: 0.4, color: blue}, nil)
	trace{c: c, m: pt{chartWidth - chartMargin - ringSide/2, y + ringSide/2}, top: top / f}.draw(p, d.Chord)
	last := a.b
	below := func(height float64) box {
		top := last.y1 + 5 + titleRoom
		last = box{last.x0, top, last.x1, top + height}
		return last
	}
	if len(p.LiftError) > 0 {
		d.lift(c, p, below(liftPanel))
	}
	if len(p.AccelerationError) > 0 {
		d.acceleration(c, p, below(accHeight))
	}
	angleTitle(c, last)
}

// level draws a horizontal line across the panel.
func (a axes) level(v float64, p pen) { a.c.line(pt{a.b.x0, a.y(v)}, pt{a.b.x1, a.y(v)}, p) }

// legend names the lines, each with a piece of itself.
func (d DeviationChart) legend(c *canvas, p PathDeviation, y float64, least, greatest Sample) {
	f, unit := d.small()
	entries := []struct {
		p    pen
		text string
	}{
		{pen{width: 0.35, color: red, dash: dashed}, "zone ±" + figures(d.Chord*f) + " " + unit},
		{pen{width: 0.3, dash: chain1}, "certified bound ±" + figures(p.Bound*f)},
		{pen{width: 0.4, color: blue}, "found outside " + found(greatest) + ", inside " + found(least)},
	}
	x := chartMargin
	for _, e := range entries {
		c.line(pt{x, y - 0.8}, pt{x + 8, y - 0.8}, e.p)
		text, size := fitted(e.text, chartWidth-chartMargin-x-9, axisSize, 1.5, false)
		c.text(pt{x + 9, y}, text, font{size: size})
		x += 9 + widthOf(text, size, false) + 4
	}
}

// found says a value and where it is.
func found(s Sample) string { return figures(s.Value) + " at " + num(s.CamAngle, 1) + "°" }

// trace is the exaggerated trace around the axis.
type trace struct {
	c   *canvas
	m   pt
	top float64 // the largest value drawn, length
}

func (r trace) at(polar, v float64) pt {
	s, c := math.Sincos(polar * math.Pi / 180)
	d := ringMean + ringSwing*v/r.top
	return pt{r.m.x + d*c, r.m.y - d*s}
}

func (r trace) draw(p PathDeviation, chord float64) {
	r.c.circle(r.m, ringMean, pen{width: 0.18, color: gray, class: byPolar})
	for _, v := range []float64{-chord, chord} {
		r.c.circle(r.m, ringMean+ringSwing*v/r.top, pen{width: 0.3, color: red, dash: dashed})
	}
	for a := 0.0; a < 360; a += 90 {
		u := plane.Unit(plane.Degrees(a))
		e := r.at(a, r.top*1.25)
		r.c.line(r.at(a, -r.top), r.at(a, r.top*1.1), pen{width: 0.12, color: gray})
		r.c.text(pt{e.x + u.X*0.4, e.y + axisSize*0.36}, num(a, 0)+"°", font{size: axisSize * 0.85, anchor: anchorOf(u)})
	}
	t := &track{}
	for _, run := range p.Runs {
		for j, s := range run {
			if j == 0 {
				t.move(r.at(s.Polar, s.Value))
			} else {
				t.lineTo(r.at(s.Polar, s.Value))
			}
		}
	}
	r.c.path(t, pen{width: 0.35, color: blue})
	for i, text := range []string{"by polar", "angle,", "exaggerated"} {
		r.c.text(pt{r.m.x, r.m.y - 1.6 + 2.8*float64(i)}, text, font{size: 1.9, anchor: "middle", color: gray})
	}
}

func anchorOf(u plane.Vector) string {
	switch {
	case u.X > 0.5:
		return ""
	case u.X < -0.5:
		return "end"
	}
	return "middle"
}

// lift draws the follower's lift error.
func (d DeviationChart) lift(c *canvas, p PathDeviation, b box) {
	f, unit := d.small()
	if d.LiftUnit == "deg" {
		f, unit = 1e3, "10⁻³ deg"
	}
	runs := make([]Run, len(p.LiftError))
	for i, r := range p.LiftError {
		for _, s := range r {
			runs[i] = append(runs[i], Sample{s.CamAngle, s.Value * f})
		}
	}
	least, greatest, _ := extremes(runs)
	lo, hi := ranged(least.Value, greatest.Value)
	scale, prefix := factor(math.Max(-lo, hi))
	a := axes{c: c, b: b, lo: lo, hi: hi, unit: scale}
	title := "Follower lift error, " + prefix + unit + " (most " + found(Sample{greatest.CamAngle, greatest.Value / scale}) +
		", least " + found(Sample{least.CamAngle, least.Value / scale}) + ")"
	text, size := fitted(title, b.width()+shareRoom, titleSize, 1.6, false)
	c.text(pt{b.x0, b.y0 - 1.6}, text, font{size: size})
	a.frame(d.Events, true)
	a.series(runs, pen{width: 0.35, color: blue}, nil)
}

// acceleration draws the follower's acceleration error, with its share of the
// design's peak on the right.
func (d DeviationChart) acceleration(c *canvas, p PathDeviation, b box) {
	least, greatest, _ := extremes(p.AccelerationError)
	lo, hi := ranged(least.Value, greatest.Value)
	f, prefix := factor(math.Max(-lo, hi))
	a := axes{c: c, b: b, lo: lo, hi: hi, unit: f}
	title := "Follower acceleration error, " + prefix + d.AccelerationUnit
	if d.DesignPeak > 0 {
		title += " (right: share of the design's peak, " + figures(d.DesignPeak/f) + ")"
	}
	text, size := fitted(title, b.width()+shareRoom, titleSize, 1.6, false)
	c.text(pt{b.x0, b.y0 - 1.6}, text, font{size: size, bold: false})
	a.frame(d.Events, true)
	a.series(p.AccelerationError, pen{width: 0.35, color: blue}, nil)
	if d.DesignPeak > 0 {
		a.shares(d.DesignPeak)
	}
}

// angleTitle names the angle axis under a panel.
func angleTitle(c *canvas, b box) {
	c.text(pt{b.center().x, b.y1 + 1.6 + 2.2*axisSize}, "Cam angle, degrees", font{size: axisSize, anchor: "middle"})
}

// shares labels the right side in percent of the peak.
func (a axes) shares(peak float64) {
	lo, hi := 100*a.lo/peak, 100*a.hi/peak
	step := niceStep(hi-lo, 4)
	for k := math.Ceil(lo / step); k*step <= hi; k++ {
		y := a.y(k * step * peak / 100)
		a.c.line(pt{a.b.x1, y}, pt{a.b.x1 + 1, y}, pen{width: 0.2})
		a.c.text(pt{a.b.x1 + 1.6, y + axisSize*0.36}, tick(k*step, step)+" %", font{size: axisSize})
	}
}
