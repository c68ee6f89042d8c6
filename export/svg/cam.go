package svg

import (
	"math"

	"lobewright/synth/plane"
)

// cam draws the view itself and tells the layout where strokes are.
func (g *drawing) cam() {
	g.c.group("cam")
	g.centers()
	g.circles()
	g.curves()
	g.toolPaths()
	g.roller()
	g.linkage()
	g.bore()
	g.holes()
	g.ticks()
	g.zeroMark()
	g.turning()
	g.c.end()
}

// mark hands a sampled curve to the layout's stroke or edge.
func (g *drawing) mark(ps []plane.Point, to func(p, q pt)) {
	for i := 1; i < len(ps); i++ {
		to(g.v.at(ps[i-1]), g.v.at(ps[i]))
	}
}

// stroke draws a straight line of the view and remembers it.
func (g *drawing) stroke(a, b pt, p pen) {
	g.c.line(a, b, p)
	g.l.stroke(a, b)
}

// ring draws a thin circle of the view and remembers it.
func (g *drawing) ring(m plane.Point, r float64, p pen) {
	g.c.circle(g.v.at(m), g.v.k*r, p)
	ring(g.v.at(m), g.v.k*r, g.l.stroke)
}

// rim draws a circular edge of the part and remembers it.
func (g *drawing) rim(m plane.Point, r float64) {
	g.c.circle(g.v.at(m), g.v.k*r, pen{width: 0.5})
	ring(g.v.at(m), g.v.k*r, g.l.edge)
}

// centers draws the center lines and the follower's line.
func (g *drawing) centers() {
	g.c.doing("center lines")
	reach := g.reach()*g.v.k + 5
	o := g.v.origin
	thin := pen{width: 0.18, dash: chain1, color: gray}
	g.stroke(pt{o.x - reach, o.y}, pt{o.x + reach, o.y}, thin)
	g.stroke(pt{o.x, o.y - reach}, pt{o.x, o.y + reach}, thin)
	if g.d.Offset != 0 {
		g.c.doing("follower line")
		y := o.y - g.v.k*g.d.Offset
		g.stroke(pt{o.x - 6, y}, pt{o.x + reach + 4, y}, pen{width: 0.25, dash: chain1})
	}
}

// reach is the largest radius of contour, pitch curve and circles, length.
func (g *drawing) reach() float64 {
	r := math.Max(g.d.BaseRadius+g.d.RollerDiameter/2, g.d.OutsideDiameter/2)
	for _, ps := range [][]plane.Point{g.contour, g.pitch} {
		for _, p := range ps {
			r = math.Max(r, p.Radius())
		}
	}
	return r
}

// circles draws the base circle, the prime circle and the outside.
func (g *drawing) circles() {
	g.c.doing("base circle")
	g.ring(plane.Point{}, g.d.BaseRadius, pen{width: 0.18})
	if g.d.RollerDiameter > 0 {
		g.c.doing("prime circle")
		g.ring(plane.Point{}, g.d.BaseRadius+g.d.RollerDiameter/2, pen{width: 0.18, dash: dashed})
	}
	if g.d.OutsideDiameter > 0 {
		g.c.doing("outside diameter")
		g.rim(plane.Point{}, g.d.OutsideDiameter/2)
	}
}

// curves draws contour and pitch curve as real arcs.
func (g *drawing) curves() {
	g.c.doing("pitch curve")
	g.c.path(g.v.track(g.d.PitchCurve, true), pen{width: 0.25, dash: chain1, color: blue})
	g.mark(g.pitch, g.l.stroke)
	g.c.doing("contour")
	for _, c := range g.d.Contours {
		g.c.path(g.v.track(c, true), pen{width: 0.7})
		g.mark(points(c), g.l.edge)
	}
}

// roller draws the roller at lift 0.
func (g *drawing) roller() {
	if g.d.RollerDiameter <= 0 {
		return
	}
	g.c.doing("roller")
	g.ring(g.d.Roller, g.d.RollerDiameter/2, pen{width: 0.25, color: blue})
	g.cross(g.d.Roller, 2)
}

// cross marks a center, half mm long on the sheet each way.
func (g *drawing) cross(p plane.Point, half float64) {
	m := g.v.at(p)
	g.c.line(pt{m.x - half, m.y}, pt{m.x + half, m.y}, pen{width: 0.18})
	g.c.line(pt{m.x, m.y - half}, pt{m.x, m.y + half}, pen{width: 0.18})
}

// bore draws the bore with its keyway.
func (g *drawing) bore() {
	b := g.d.Bore
	if b == nil {
		return
	}
	g.c.doing("bore")
	r := b.Diameter / 2
	if b.Keyway == nil {
		g.rim(plane.Point{}, r)
		return
	}
	g.c.doing("keyway")
	k := b.Keyway
	half := k.Width / 2
	along, across := plane.Unit(plane.Degrees(k.At)), plane.Unit(plane.Degrees(k.At)).Left()
	at := func(u, v float64) pt { return g.v.at(plane.Point{}.Add(along.Scale(u)).Add(across.Scale(v))) }
	foot := math.Sqrt(math.Max(0, r*r-half*half))
	t := &track{}
	t.move(at(foot, -half))
	t.lineTo(at(r+k.Depth, -half))
	t.lineTo(at(r+k.Depth, half))
	t.lineTo(at(foot, half))
	t.arcTo(at(-r, 0), g.v.k*r, false)
	t.arcTo(at(foot, -half), g.v.k*r, false)
	t.close()
	g.c.path(t, pen{width: 0.5})
	ring(g.v.origin, g.v.k*r, g.l.edge)
	g.l.edge(at(foot, -half), at(r+k.Depth, -half))
	g.l.edge(at(r+k.Depth, -half), at(r+k.Depth, half))
	g.l.edge(at(r+k.Depth, half), at(foot, half))
}

// holes draws the round holes with center marks.
func (g *drawing) holes() {
	g.c.doing("holes")
	for _, h := range g.d.Holes {
		m := plane.Polar(h.Radius, plane.Degrees(h.At))
		g.rim(m, h.Diameter/2)
		g.cross(m, g.v.k*h.Diameter/2+1.5)
	}
}

// tickLength is the length of an event's tick on the sheet in mm.
const tickLength = 5.0

// outward is the direction from the axis to p, +X at the axis itself.
func outward(p plane.Point) plane.Vector {
	if p.Radius() == 0 {
		return plane.Vector{X: 1}
	}
	return p.Sub(plane.Point{}).Unit()
}

// ticks draws a radial tick where each event begins; in a groove it runs on to the outer wall.
func (g *drawing) ticks() {
	g.c.doing("event ticks")
	for _, e := range g.d.Events {
		a, u := g.v.at(e.Start), outward(e.Start)
		g.stroke(pt{a.x - 2*u.X, a.y + 2*u.Y}, g.tickEnd(e), pen{width: 0.25})
	}
}

// tickEnd is the outer end of an event's tick on the sheet.
func (g *drawing) tickEnd(e Event) pt {
	u, from := outward(e.Start), e.Start
	if len(g.d.Contours) > 1 {
		wall := nearestPolar(points(g.d.Contours[1]), e.Start.PolarAngle())
		from = plane.Point{}.Add(u.Scale(math.Max(wall.Radius(), e.Start.Radius())))
	}
	a := g.v.at(from)
	return pt{a.x + tickLength*u.X, a.y - tickLength*u.Y}
}

// zeroMark draws the stamped mark just inside the contour at cam angle 0.
func (g *drawing) zeroMark() {
	g.c.doing("zero mark")
	u := outward(g.d.Zero)
	a := g.v.at(g.d.Zero)
	in := func(d, side float64) pt { return pt{a.x - d*u.X + side*u.Y, a.y + d*u.Y + side*u.X} }
	g.c.polygon(ink, in(1.2, 0), in(4.2, 1.3), in(4.2, -1.3))
	g.l.stroke(in(1, 0), in(4.2, 0))
}

// turning draws the arrow of the turning direction inside the contour, where it
// keeps clear of the holes.
func (g *drawing) turning() {
	g.c.doing("turning arrow")
	r, from := g.arrowPlace()
	sign := 1.0
	if g.d.Clockwise {
		sign = -1
	}
	mid := from + arrowSweep/2
	at := func(half float64) plane.Point { return plane.Polar(r, plane.Degrees(mid+sign*half)) }
	t := &track{}
	t.move(g.v.at(at(-arrowSweep / 2)))
	t.arcTo(g.v.at(at(arrowSweep/2)), g.v.k*r, g.d.Clockwise)
	g.c.path(t, pen{width: 0.5})
	for h := -arrowSweep / 2; h < arrowSweep/2; h += 2 {
		g.l.stroke(g.v.at(at(h)), g.v.at(at(h+2)))
	}
	tip := at(arrowSweep / 2)
	g.arrowhead(g.v.at(tip), outward(tip).Left().Scale(sign), 3.4)
}

// arrowSweep is the turn the direction arrow shows, degrees.
const arrowSweep = 50.0

// arrowPlace finds radius (length) and start (degrees) of the arrow: the one of
// 48 places whose stretch is farthest from every hole, keyway and the zero mark.
func (g *drawing) arrowPlace() (r, from float64) {
	inner := 0.0
	if g.d.Bore != nil {
		inner = g.d.Bore.Diameter / 2
		if g.d.Bore.Keyway != nil {
			inner += g.d.Bore.Keyway.Depth
		}
	}
	best := math.Inf(-1)
	for _, share := range []float64{0.55, 0.4, 0.7, 0.85} {
		for _, a := range []float64{95, 35, 155, 215, 275, 335, 65, 125, 185, 245, 305, 5} {
			q := inner + share*math.Max(0, g.d.BaseRadius-inner)
			const better = 1e-6 // of the base radius: a tie keeps the earlier place
			if clear := g.arrowClear(q, a); clear > best+better*g.d.BaseRadius {
				best, r, from = clear, q, a
			}
		}
	}
	return r, from
}

// arrowClear is the least distance of the stretch from the holes and the mark, length,
// at most an eighth of the base radius.
func (g *drawing) arrowClear(r, from float64) float64 {
	least := g.d.BaseRadius / 8
	for d := 0.0; d <= arrowSweep; d += 5 {
		p := plane.Polar(r, plane.Degrees(from+d))
		for _, h := range g.d.Holes {
			least = math.Min(least, p.Dist(plane.Polar(h.Radius, plane.Degrees(h.At)))-h.Diameter/2)
		}
		least = math.Min(least, p.Dist(g.d.Zero))
	}
	return least
}

// arrowhead draws a filled head with its tip at p, pointing along u of the cam frame.
func (g *drawing) arrowhead(p pt, u plane.Vector, size float64) {
	back := func(d, side float64) pt { return pt{p.x - d*u.X + side*u.Y, p.y + d*u.Y + side*u.X} }
	g.c.polygon(ink, p, back(size, size/4), back(size, -size/4))
}
