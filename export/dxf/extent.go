package dxf

import (
	"math"
	"unicode/utf8"

	"lobewright/synth/plane"
)

// glyphWidth is the room a character of a text is given in the extents, in
// text heights. It is an estimate: the width depends on the reader's font,
// and few letters are wider than they are tall.
const glyphWidth = 1.0

// box is the smallest upright rectangle about what was added to it.
type box struct{ min, max plane.Point }

func emptyBox() box {
	inf := math.Inf(1)
	return box{plane.Point{X: inf, Y: inf}, plane.Point{X: -inf, Y: -inf}}
}

func (b *box) add(p plane.Point) {
	b.min = plane.Point{X: math.Min(b.min.X, p.X), Y: math.Min(b.min.Y, p.Y)}
	b.max = plane.Point{X: math.Max(b.max.X, p.X), Y: math.Max(b.max.Y, p.Y)}
}

// extent returns the rectangle of the drawing. Lines, circles and arcs, those of
// polylines too, are exact to rounding; a text counts with an estimated width.
func (d Drawing) extent() box {
	b := emptyBox()
	for _, p := range d.Polylines {
		b.addPolyline(p)
	}
	for _, c := range d.Circles {
		b.add(c.Center.Add(plane.Vector{X: c.Radius, Y: c.Radius}))
		b.add(c.Center.Add(plane.Vector{X: -c.Radius, Y: -c.Radius}))
	}
	for _, a := range d.Arcs {
		from, sweep := plane.Degrees(a.From), plane.Degrees(a.sweep())
		start := a.Center.Add(plane.Unit(from).Scale(a.Radius))
		b.add(start)
		b.add(a.Center.Add(plane.Unit(from + sweep).Scale(a.Radius)))
		b.addBulge(start, float64(from)+math.Pi/2, float64(sweep), a.Radius)
	}
	for _, l := range d.Lines {
		b.add(l.From)
		b.add(l.To)
	}
	for _, t := range d.Texts {
		along := plane.Unit(plane.Degrees(t.Angle))
		end := t.At.Add(along.Scale(glyphWidth * t.Height * float64(utf8.RuneCountInString(t.Value))))
		up := along.Left().Scale(t.Height)
		for _, p := range []plane.Point{t.At, end, t.At.Add(up), end.Add(up)} {
			b.add(p)
		}
	}
	return b
}

// sweep returns the angle an arc covers, 0 < sweep < 360 degrees.
func (a Arc) sweep() float64 { return plane.Wrap360(a.To - a.From) }

func (b *box) addPolyline(p Polyline) {
	for i, v := range p.Vertices {
		from := p.Grid.Value(v.P)
		b.add(from)
		if v.Bulge == 0 {
			continue
		}
		to := p.Grid.Value(p.Vertices[(i+1)%len(p.Vertices)].P)
		bulge := v.Bulge
		if bulge < 0 { // the same arc walked the other way
			from, to, bulge = to, from, -bulge
		}
		chord := to.Sub(from)
		sweep := 4 * math.Atan(bulge)
		radius := chord.Norm() * (1 + bulge*bulge) / (4 * bulge)
		b.addBulge(from, float64(chord.Angle())-sweep/2, sweep, radius)
	}
}

// addBulge adds the four outermost points of a counterclockwise arc that lie
// inside it. A point with the outward direction psi is reached when the tangent has
// turned by delta to psi + 90°, and lies 2·r·sin²(delta/2) further out than
// the start. Written so, a flat arc loses no digits to its far center.
func (b *box) addBulge(start plane.Point, tangent, sweep, radius float64) {
	for quarter := range 4 {
		psi := float64(quarter) * math.Pi / 2
		delta := math.Mod(psi+math.Pi/2-tangent, 2*math.Pi)
		if delta < 0 {
			delta += 2 * math.Pi
		}
		if delta >= sweep {
			continue
		}
		half := math.Sin(delta / 2)
		out := 2 * radius * half * half
		switch quarter {
		case 0:
			b.max.X = math.Max(b.max.X, start.X+out)
		case 1:
			b.max.Y = math.Max(b.max.Y, start.Y+out)
		case 2:
			b.min.X = math.Min(b.min.X, start.X-out)
		case 3:
			b.min.Y = math.Min(b.min.Y, start.Y-out)
		}
	}
}
