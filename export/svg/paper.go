package svg

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Strokes. Widths are of the ISO 128 series (0.18, 0.25, 0.35, 0.5, 0.7 mm); colors
// stay apart in gray print and dashes tell them apart where they do not.
const (
	ink    = "#111111"
	gray   = "#666666"
	pale   = "#c8c8c8"
	blue   = "#1b4f8a"
	red    = "#a31515"
	chain1 = "6 1.2 0.8 1.2" // long chain line: centers, pitch curve
	dashed = "2.4 1.2"
)

// margin is the distance of the border from the sheet's edge in mm.
const margin = 8.0

// Room kept around the cam for ticks and callouts, in mm.
const (
	sideRoom  = 18.0
	aboveRoom = 12.0
	bandRoom  = 9.0  // caption over the view
	stampRoom = 17.0 // NOT RELEASED under the caption
)

// paper is a sheet, landscape.
type paper struct {
	name         string
	w, h, column float64 // mm
}

// sheets lists the sheets there are.
func sheets() []paper {
	return []paper{{"A4", 297, 210, 92}, {"A3", 420, 297, 118}, {"Letter", 279.4, 215.9, 92}}
}

// papersFor lists the sheets a drawing may stand on, smallest first: the one that is wanted, else those of
// the units.
func papersFor(units, wanted string) []paper {
	var fit []paper
	for _, p := range sheets() {
		if p.name == wanted || wanted == "" && (p.name == "Letter") == (units == "inch") {
			fit = append(fit, p)
		}
	}
	return fit
}

// view maps the cam frame to the sheet.
type view struct {
	origin pt
	k      float64 // mm on the sheet per unit of length
}

func (v view) at(p plane.Point) pt { return pt{v.origin.x + v.k*p.X, v.origin.y - v.k*p.Y} }

// scale is a standard scale, sheet to part.
type scale struct{ sheet, part float64 }

func (s scale) String() string { return fmt.Sprintf("%g:%g", s.sheet, s.part) }

// enlargements and reductions are those of ISO 5455 for mm; inch drawings halve.
func enlargements(units string) []scale {
	if units == "inch" {
		return []scale{{16, 1}, {8, 1}, {4, 1}, {2, 1}, {1, 1}}
	}
	return []scale{{50, 1}, {20, 1}, {10, 1}, {5, 1}, {2, 1}, {1, 1}}
}

// reduction is the n-th one, n from 1: 1:2, 1:5, 1:10, ... or 1:2, 1:4, 1:8, ...
func reduction(units string, n int) scale {
	if units == "inch" {
		return scale{1, math.Pow(2, float64(n))}
	}
	return scale{1, []float64{1, 2, 5}[n%3] * math.Pow(10, float64(n/3))}
}

// most is the number of reductions tried: down to 1:5 000 000 or 1:2^20.
const most = 20

// choose picks the sheet and scale. Full scale comes first: on the smallest sheet that
// holds it, enlarged as far as that sheet allows; else the least reduction that the
// largest sheet holds, on the smallest sheet that holds it too.
func choose(units, sheet string, w, h float64, released bool) (paper, scale, error) {
	all := papersFor(units, sheet)
	if len(all) == 0 {
		return paper{}, scale{}, fmt.Errorf("svg: drawing: the sheet is %q; allowed are A4, A3 and Letter", sheet)
	}
	for _, p := range all {
		for _, s := range enlargements(units) {
			if p.takes(units, w, h, s, released) {
				return p, s, nil
			}
		}
	}
	for n := 1; n <= most; n++ {
		s := reduction(units, n)
		if !all[len(all)-1].takes(units, w, h, s, released) {
			continue
		}
		for _, p := range all {
			if p.takes(units, w, h, s, released) {
				return p, s, nil
			}
		}
	}
	return paper{}, scale{}, fmt.Errorf("svg: the cam is %g by %g %s, no standard scale brings it on a sheet", w, h, units)
}

func (p paper) takes(units string, w, h float64, s scale, released bool) bool {
	k := s.sheet / s.part * unitMM(units)
	f := p.room(released)
	return w*k <= f.width() && h*k <= f.height()
}

// field is the inside of the border left of the column.
func (p paper) field() box { return box{margin, margin, p.w - margin - p.column, p.h - margin} }

// room is the part of the field that the view itself may fill.
func (p paper) room(released bool) box {
	f := p.field()
	top := bandRoom
	if !released {
		top += stampRoom
	}
	return box{f.x0 + sideRoom, f.y0 + top + aboveRoom, f.x1 - sideRoom, f.y1 - aboveRoom}
}

// unitMM is the length of the unit in mm.
func unitMM(units string) float64 {
	if units == "inch" {
		return 25.4
	}
	return 1
}

// arcStep is the largest sweep of one written arc: below half a turn, so that an
// SVG arc is never ambiguous.
const arcStep = 2 * math.Pi / 3

// flatSagitta is the sagitta in mm of the sheet below which an arc is drawn as a line.
const flatSagitta = 0.0005

// walk hands the element to line and arc as parts of at most arcStep.
func walk(e chain.Element, line func(to plane.Point), arc func(to plane.Point, r float64)) {
	r := e.From.Dist(e.Center)
	if e.Kind == chain.Line || r == 0 {
		line(e.To)
		return
	}
	a := math.Atan2(e.From.Y-e.Center.Y, e.From.X-e.Center.X)
	sweep := sweepOf(e)
	n := int(math.Ceil(math.Abs(sweep)/arcStep - 1e-12)) // a full circle stays three parts
	for i := 1; i < n; i++ {
		s, c := math.Sincos(a + sweep*float64(i)/float64(n))
		arc(plane.Point{X: e.Center.X + r*c, Y: e.Center.Y + r*s}, r)
	}
	arc(e.To, r)
}

// sweepOf is the turn of an arc in radians, positive counterclockwise; equal ends are a full turn.
func sweepOf(e chain.Element) float64 {
	a := math.Atan2(e.From.Y-e.Center.Y, e.From.X-e.Center.X)
	b := math.Atan2(e.To.Y-e.Center.Y, e.To.X-e.Center.X)
	d := b - a
	if e.CCW && d <= 0 {
		d += 2 * math.Pi
	}
	if !e.CCW && d >= 0 {
		d -= 2 * math.Pi
	}
	return d
}

// track turns a path into SVG path data.
func (v view) track(path chain.Path, closed bool) *track {
	t := &track{}
	if len(path) == 0 {
		return t
	}
	t.move(v.at(path[0].From))
	for _, e := range path {
		last := e.From
		walk(e, func(to plane.Point) { t.lineTo(v.at(to)) }, func(to plane.Point, r float64) {
			if sag := v.k * last.Dist(to) * last.Dist(to) / (8 * r); sag < flatSagitta {
				t.lineTo(v.at(to))
			} else {
				t.arcTo(v.at(to), v.k*r, !e.CCW)
			}
			last = to
		})
	}
	if closed {
		t.close()
	}
	return t
}

// points samples a path, about a degree of each arc apart, in the cam frame.
func points(path chain.Path) []plane.Point {
	var ps []plane.Point
	for _, e := range path {
		ps = append(ps, e.From)
		r := e.From.Dist(e.Center)
		if e.Kind == chain.Line || r == 0 {
			const parts = 16
			for i := 1; i < parts; i++ {
				u := float64(i) / parts
				ps = append(ps, e.From.Add(e.To.Sub(e.From).Scale(u)))
			}
			ps = append(ps, e.To)
			continue
		}
		a := math.Atan2(e.From.Y-e.Center.Y, e.From.X-e.Center.X)
		sweep := sweepOf(e)
		n := int(math.Abs(sweep)*180/math.Pi) + 1
		for i := 1; i <= n; i++ {
			s, c := math.Sincos(a + sweep*float64(i)/float64(n))
			ps = append(ps, plane.Point{X: e.Center.X + r*c, Y: e.Center.Y + r*s})
		}
	}
	return ps
}
