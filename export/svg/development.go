package svg

import (
	"math"

	"lobewright/synth/plane"
)

// development draws a barrel cam unrolled: its outside as a rectangle, both walls where they
// meet the outer radius, the track, the roller at lift 0 and a line at each event. What belongs
// to the face of the barrel stands in the column.
func development(data DrawingData) ([]byte, error) {
	g := &drawing{d: data, contour: outline(data), pitch: points(data.PitchCurve)}
	b := data.Barrel
	mid := plane.Point{X: (b.Left + b.Right) / 2, Y: b.Length / 2}
	var err error
	if g.p, g.s, err = choose(data.Units, data.Sheet, b.Right-b.Left, b.Length, data.Released); err != nil {
		return nil, err
	}
	room := g.p.room(data.Released)
	k := g.s.sheet / g.s.part * unitMM(data.Units)
	c := room.center()
	g.v = view{origin: pt{c.x - k*mid.X, c.y + k*mid.Y}, k: k}
	g.l = newLayout(g.p.field().grown(-1.5))
	g.c = newCanvas(g.p.w, g.p.h, "Drawing of "+data.name(" revision "),
		data.Title+": barrel cam developed at its outer radius, seen from outside, scale "+g.s.String())
	g.border()
	g.head("", "DEVELOPED AT THE OUTER RADIUS, SEEN FROM OUTSIDE")
	g.barrel()
	g.barrelCallouts()
	g.column()
	return g.c.bytes()
}

// barrel draws the view itself.
func (g *drawing) barrel() {
	b := g.d.Barrel
	at := func(x, y float64) pt { return g.v.at(plane.Point{X: x, Y: y}) }
	g.c.group("cam")
	g.c.doing("barrel")
	corners := []pt{at(b.Left, 0), at(b.Right, 0), at(b.Right, b.Length), at(b.Left, b.Length)}
	for i, p := range corners {
		q := corners[(i+1)%4]
		w := 0.5
		if i%2 == 1 {
			w = 0.25 // where it is cut open
		}
		g.c.line(p, q, pen{width: w})
		g.l.edge(p, q)
	}
	g.c.doing("track at lift 0")
	over := 3 / g.v.k
	g.stroke(at(b.Left-over, b.Track), at(b.Right+over, b.Track), pen{width: 0.18, dash: chain1, color: gray})
	g.c.doing("pitch curve")
	g.c.path(g.v.track(g.d.PitchCurve, false), pen{width: 0.25, dash: chain1, color: blue})
	g.mark(g.pitch, g.l.stroke)
	g.c.doing("walls")
	for _, c := range g.d.Contours {
		g.c.path(g.v.track(c, false), pen{width: 0.7})
		g.mark(points(c), g.l.edge)
	}
	g.roller()
	g.c.doing("event lines")
	for _, e := range g.d.Events {
		x := g.barrelX(e)
		g.stroke(at(x, 0), at(x, b.Length), pen{width: 0.18, dash: dashed, color: gray})
	}
	g.c.doing("zero mark")
	m := at(g.d.Roller.X, b.Length)
	g.c.polygon(ink, m, pt{m.x - 1.3, m.y + 3}, pt{m.x + 1.3, m.y + 3})
	g.l.stroke(m, pt{m.x, m.y + 3})
	g.c.end()
}

// barrelX is where an event begins: half the groove's width beside the wall's point, which is
// shifted where the track is steep, so it is taken from the cam angle.
func (g *drawing) barrelX(e Event) float64 {
	b := g.d.Barrel
	turn := b.Right - b.Left
	sign := -1.0 // X falls as the cam turns counterclockwise
	if g.d.Clockwise {
		sign = 1
	}
	x := g.d.Roller.X + sign*turn*e.From/360
	for x > b.Right+1e-9*turn {
		x -= turn
	}
	for x < b.Left-1e-9*turn {
		x += turn
	}
	return x
}

// barrelCallouts labels the development.
func (g *drawing) barrelCallouts() {
	b := g.d.Barrel
	g.c.group("callouts")
	g.c.doing("event angles")
	for _, e := range g.d.Events {
		text := num(plane.Wrap360(e.From), 3) + "°"
		p := g.v.at(plane.Point{X: g.barrelX(e), Y: b.Length})
		s, ok := g.l.place(wish{at: p, away: -math.Pi / 2, w: widthOf(text, calloutSize, true), h: calloutSize * 1.15, near: 2.5, far: 16,
			direct: true, rowsAtEdge: calloutSize * 0.55})
		if !ok {
			g.extra = append(g.extra, "Event boundary at cam angle "+text)
			continue
		}
		g.c.text(pt{s.box.x0, s.box.y0 + calloutSize*0.92}, text, font{size: calloutSize, bold: true})
	}
	g.c.doing("callouts")
	for _, c := range g.barrelList() {
		g.call(c)
	}
	g.c.end()
}

func (g *drawing) barrelList() []callout {
	b := g.d.Barrel
	along := func(share, y float64) plane.Point { return plane.Point{X: b.Left + share*(b.Right-b.Left), Y: y} }
	value := num(g.d.Profile, 6)
	runs := "FOLLOWER RUNS TO −X"
	if g.d.Clockwise {
		runs = "FOLLOWER RUNS TO +X"
	}
	upper := points(g.d.Contours[len(g.d.Contours)-1])
	cs := []callout{
		{cells: append([]string{profileSymbol, value}, g.datums()...), at: upper[len(upper)/3], away: 100, lines: []string{"BOTH WALLS, EQUALLY DISPOSED"}},
		{lines: []string{"GROOVE " + g.len(b.Width) + " WIDE, " + g.len(b.Depth) + " DEEP"}, at: upper[2*len(upper)/3], away: 80},
		{lines: []string{"TRACK AT LIFT 0, " + g.len(b.Track), "FROM DATUM END"}, at: along(1, b.Track), away: -20},
		{lines: []string{"DATUM END"}, at: along(0.85, 0), away: -80},
		{lines: []string{"MARKED FACE", g.len(b.Length) + " FROM DATUM END"}, at: along(0.92, b.Length), cells: []string{"B"}, away: 80},
		{lines: []string{"OUTSIDE R" + g.len(b.Radius), "X = R × POLAR ANGLE"}, at: along(0.12, 0), away: -100},
		{lines: []string{"ROLLER Ø" + g.len(g.d.RollerDiameter), "AT LIFT 0", runs}, at: g.d.Roller, round: g.d.RollerDiameter / 2, away: -60},
		{lines: []string{"ZERO MARK"}, at: plane.Point{X: g.d.Roller.X, Y: b.Length}, away: 120},
	}
	if bore := g.d.Bore; bore != nil {
		g.extra = append(g.extra, fit("Bore Ø"+g.len(bore.Diameter), bore.Fit)+" through, datum A.")
		if k := bore.Keyway; k != nil {
			g.extra = append(g.extra, fit("Keyway "+g.len(k.Width), k.Fit)+" at polar angle "+num(k.At, 4)+"°, "+g.len(bore.Diameter+k.Depth)+" over bore, datum C.")
		}
	}
	g.extra = append(g.extra, g.holeRows()...)
	return cs
}
