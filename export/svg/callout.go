package svg

import (
	"math"
	"strconv"
	"strings"

	"lobewright/synth/plane"
)

// Text sizes beside the view in mm.
const (
	calloutSize = 2.5
	cellHeight  = 4.4
	rowHeight   = 1.3 // of the size
)

// callout is a label with a leader to a point of the cam.
type callout struct {
	lines []string
	cells []string    // framed cells under the lines
	at    plane.Point // what the leader points to
	round float64     // length: radius of the circle about at whose edge is meant, 0 for the point itself
	away  float64     // wanted direction, degrees, counterclockwise from +X
}

// callouts places ticks' angles first, which must stand close, then the rest.
func (g *drawing) callouts() {
	g.c.group("callouts")
	g.c.doing("event angles")
	for _, e := range g.d.Events {
		g.angle(e)
	}
	g.c.doing("callouts")
	for _, c := range g.list() {
		g.call(c)
	}
	g.c.end()
}

// decimals of printed lengths: a tenth of a micrometer.
func (g *drawing) decimals() int {
	if g.d.Units == "inch" {
		return 5
	}
	return 4
}

func (g *drawing) len(v float64) string { return num(v, g.decimals()) }

// angle writes an event's cam angle at the end of its tick.
func (g *drawing) angle(e Event) {
	text := num(plane.Wrap360(e.From), 3) + "°"
	u := outward(e.Start)
	w := wish{
		at: g.tickEnd(e), away: math.Atan2(-u.Y, u.X),
		w: widthOf(text, calloutSize, true), h: calloutSize * 1.15, near: 1, far: 14,
		direct: true, rowsAtEdge: calloutSize * 0.55,
	}
	s, ok := g.l.place(w)
	if !ok {
		g.extra = append(g.extra, "Event boundary at cam angle "+text)
		return
	}
	g.c.rect(s.box, pen{color: "none", fill: "#ffffff"})
	g.c.text(pt{s.box.x0, s.box.y0 + calloutSize*0.92}, text, font{size: calloutSize, bold: true})
}

// call places one callout, or lists it in the column.
func (g *drawing) call(c callout) {
	w := wish{at: g.v.at(c.at), away: -c.away * math.Pi / 180, near: 6 + g.v.k*c.round, far: 150 + g.v.k*c.round, rowsAtEdge: calloutSize * 0.6}
	for _, t := range c.lines {
		w.w = math.Max(w.w, widthOf(t, calloutSize, false)+1)
	}
	w.h = float64(len(c.lines)) * calloutSize * rowHeight
	if len(c.cells) > 0 {
		row := 0.0
		for _, t := range c.cells {
			row += cellWidth(t, cellHeight, calloutSize)
		}
		w.w, w.h = math.Max(w.w, row+1), w.h+cellHeight+0.4
	}
	if len(c.lines) == 0 {
		w.rowsAtEdge = cellHeight / 2
	}
	s, ok := g.l.place(w)
	if !ok {
		g.extra = append(g.extra, strings.TrimSpace(strings.Join(c.lines, " ")+" "+cellWords(c.cells)))
		return
	}
	g.write(c, s, w)
}

// cellWords says a row of cells in words.
func cellWords(cells []string) string {
	switch {
	case len(cells) == 0:
		return ""
	case cells[0] == profileSymbol:
		return "profile of the contour " + strings.Join(cells[1:], " | ")
	}
	return "(datum " + strings.Join(cells, ", ") + ")"
}

// write draws a placed callout with its leader.
func (g *drawing) write(c callout, s spot, w wish) {
	d := math.Hypot(w.at.x-s.end.x, w.at.y-s.end.y)
	u := plane.Vector{X: (w.at.x - s.end.x) / d, Y: -(w.at.y - s.end.y) / d}
	r := g.v.k * c.round
	tip := pt{w.at.x - r*u.X, w.at.y + r*u.Y}
	g.c.line(s.end, tip, pen{width: 0.18})
	g.arrowhead(tip, u, 2)
	g.c.rect(s.box, pen{color: "none", fill: "#ffffff"})
	left := s.end.x <= s.box.x0+1e-9 // the leader meets the left side
	y := s.box.y0
	for _, t := range c.lines {
		x, anchor := s.box.x0+0.8, ""
		if !left {
			x, anchor = s.box.x1-0.8, "end"
		}
		g.c.text(pt{x, y + calloutSize*0.95}, t, font{size: calloutSize, anchor: anchor})
		y += calloutSize * rowHeight
	}
	if len(c.cells) == 0 {
		return
	}
	row := 0.0
	for _, t := range c.cells {
		row += cellWidth(t, cellHeight, calloutSize)
	}
	x := s.box.x0 + 0.8
	if !left {
		x = s.box.x1 - 0.8 - row
	}
	g.cells(pt{x, y}, cellHeight, calloutSize, c.cells...)
}

// list is every callout, the important ones first.
func (g *drawing) list() []callout {
	cs := []callout{g.frame()}
	cs = append(cs, g.boreCallouts()...)
	cs = append(cs, g.followerCallouts()...)
	cs = append(cs, g.linkageCallouts()...)
	cs = append(cs, g.holeCallouts()...)
	cs = append(cs, g.circleCallouts()...)
	return append(cs, g.toolCallouts()...)
}

// frame is the profile tolerance on the contour.
func (g *drawing) frame() callout {
	p := nearestPolar(g.contour, 130)
	value := strconv.FormatFloat(g.d.Profile, 'f', max(3, placesOf(g.d.Profile)), 64)
	return callout{cells: append([]string{profileSymbol, value}, g.datums()...), at: p, away: 130,
		lines: []string{"ALL AROUND, EQUALLY DISPOSED"}}
}

// placesOf is the number of decimals v needs, at most 6.
func placesOf(v float64) int {
	s := num(v, 6)
	if i := strings.IndexByte(s, '.'); i >= 0 {
		return len(s) - i - 1
	}
	return 0
}

// datums are the letters the drawing has.
func (g *drawing) datums() []string {
	var ds []string
	if g.d.Bore != nil {
		ds = append(ds, "A")
	}
	ds = append(ds, "B")
	if !g.d.NoDatum && (g.keyway() != nil || len(g.d.Holes) > 0) {
		ds = append(ds, "C")
	}
	return ds
}

func (g *drawing) keyway() *Keyway {
	if g.d.Bore == nil {
		return nil
	}
	return g.d.Bore.Keyway
}

func fit(text, fit string) string { return strings.TrimSpace(text + " " + fit) }

func (g *drawing) boreCallouts() []callout {
	b := g.d.Bore
	if b == nil {
		return nil
	}
	r := b.Diameter / 2
	side := 215.0
	if b.Keyway != nil {
		side = b.Keyway.At + 215
	}
	cs := []callout{{lines: []string{fit("BORE Ø"+g.len(b.Diameter), b.Fit)}, cells: []string{"A"},
		round: r, away: side}}
	if k := b.Keyway; k != nil {
		c := callout{lines: []string{
			fit("KEYWAY "+g.len(k.Width), k.Fit) + " AT " + num(k.At, 4) + "°",
			g.len(b.Diameter+k.Depth) + " OVER BORE (DEPTH " + g.len(k.Depth) + ")",
		}, at: plane.Polar(r+k.Depth, plane.Degrees(k.At)), away: k.At + 25}
		if !g.d.NoDatum {
			c.cells = []string{"C"}
		}
		cs = append(cs, c)
	}
	return cs
}

// mostHoles is the number of holes that get a callout each; more are listed in the column.
const mostHoles = 6

func (g *drawing) holeCallouts() []callout {
	var cs []callout
	if len(g.d.Holes) > mostHoles {
		g.extra = append(g.extra, g.holeRows()...)
	}
	for i, h := range g.d.Holes {
		if i > 0 && len(g.d.Holes) > mostHoles {
			break
		}
		m := plane.Polar(h.Radius, plane.Degrees(h.At))
		c := callout{lines: []string{"Ø" + g.len(h.Diameter) + " THRU, R" + g.len(h.Radius) + " AT " + num(h.At, 4) + "°"},
			at: m, round: h.Diameter / 2, away: h.At}
		if i == 0 && !g.d.NoDatum && g.keyway() == nil {
			c.cells = []string{"C"}
		}
		cs = append(cs, c)
	}
	return cs
}

// holeRows lists the holes, those of one size and radius in one row.
func (g *drawing) holeRows() []string {
	type size struct{ d, r float64 }
	var order []size
	at := map[size][]string{}
	for _, h := range g.d.Holes {
		s := size{h.Diameter, h.Radius}
		if at[s] == nil {
			order = append(order, s)
		}
		at[s] = append(at[s], num(h.At, 4)+"°")
	}
	var rows []string
	for _, s := range order {
		rows = append(rows, strconv.Itoa(len(at[s]))+" holes Ø"+g.len(s.d)+" THRU, R"+g.len(s.r)+" at "+
			strings.Join(at[s], ", "))
	}
	return rows
}

func (g *drawing) followerCallouts() []callout {
	zero := callout{lines: []string{"ZERO MARK"}, at: g.d.Zero.Add(outward(g.d.Zero).Scale(-2.5 / g.v.k)),
		away: g.d.Zero.PolarAngle() + 150}
	r, from := g.arrowPlace()
	word := "COUNTERCLOCKWISE"
	if g.d.Clockwise {
		word = "CLOCKWISE"
	}
	mid := from + arrowSweep/2
	cs := []callout{zero, {lines: []string{"CAM TURNS", word}, at: plane.Polar(r, plane.Degrees(mid)), away: mid}}
	reach := g.reach()
	if g.d.RollerDiameter > 0 {
		text := g.d.RollerText
		if text == "" {
			text = "ROLLER Ø" + g.len(g.d.RollerDiameter)
		}
		cs = append(cs, callout{lines: []string{text, "AT LIFT 0"},
			at: g.d.Roller, round: g.d.RollerDiameter / 2, away: 35})
	}
	if g.d.Swings {
		return cs
	}
	return append(cs, callout{lines: g.followerLine(), at: plane.Point{X: reach + 3/g.v.k, Y: g.d.Offset}, away: -35})
}

// followerLine says where the follower moves, left and right as seen from the
// camshaft looking along the rise.
func (g *drawing) followerLine() []string {
	switch {
	case g.d.Offset > 0:
		return []string{"FOLLOWER LINE, RISE TO +X,", "OFFSET " + g.len(g.d.Offset) + " TO THE LEFT (+Y)"}
	case g.d.Offset < 0:
		return []string{"FOLLOWER LINE, RISE TO +X,", "OFFSET " + g.len(-g.d.Offset) + " TO THE RIGHT (−Y)"}
	}
	return []string{"FOLLOWER LINE, RISE TO +X,", "NO OFFSET"}
}

func (g *drawing) circleCallouts() []callout {
	rb, rp := g.d.BaseRadius, g.d.BaseRadius+g.d.RollerDiameter/2
	a := farthestPolar(g.contour, rb)
	cs := []callout{{lines: []string{"BASE CIRCLE R" + g.len(rb)}, at: plane.Polar(rb, plane.Degrees(a-12)), away: a - 12}}
	if g.d.RollerDiameter > 0 {
		cs = append(cs, callout{lines: []string{"PRIME CIRCLE R" + g.len(rp)},
			at: plane.Polar(rp, plane.Degrees(a-28)), away: a - 28})
	}
	if len(g.pitch) > 0 {
		p := nearestPolar(g.pitch, a+25)
		cs = append(cs, callout{lines: []string{"PITCH CURVE"}, at: p, away: a + 25})
	}
	if d := g.d.OutsideDiameter; d > 0 {
		cs = append(cs, callout{lines: []string{"OUTSIDE Ø" + g.len(d)}, at: plane.Polar(d/2, plane.Degrees(240)), away: 240})
	}
	return cs
}

// nearestPolar is the sample whose polar angle is nearest to a degrees.
func nearestPolar(ps []plane.Point, a float64) plane.Point {
	best, least := plane.Point{}, math.Inf(1)
	for _, p := range ps {
		d := math.Abs(plane.Wrap360(p.PolarAngle()-a+180) - 180)
		if d < least {
			best, least = p, d
		}
	}
	return best
}

// farthestPolar is the polar angle in degrees of the sample farthest from radius r.
func farthestPolar(ps []plane.Point, r float64) float64 {
	best, most := 0.0, -1.0
	for _, p := range ps {
		if d := math.Abs(p.Radius() - r); d > most {
			best, most = p.PolarAngle(), d
		}
	}
	return best
}
