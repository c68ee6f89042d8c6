package svg

import (
	"fmt"
	"math"
	"slices"

	"lobewright/synth/plane"
)

// drawing is a toolroom drawing being made.
type drawing struct {
	d       DrawingData
	c       *canvas
	p       paper
	s       scale
	v       view
	l       *layout
	contour []plane.Point // sampled, for anchors
	pitch   []plane.Point
	extra   []string // labels that found no place beside the view
}

// Drawing draws the toolroom drawing of a plate cam at true size in mm: A4 or A3
// landscape for mm, Letter for inch, at a standard scale. Y points up. The error
// names what could not be drawn: a value that is not finite, a contour that is
// missing, a size that fits no standard scale.
func Drawing(data DrawingData) ([]byte, error) {
	if err := data.check(); err != nil {
		return nil, err
	}
	if data.Barrel != nil {
		return development(data)
	}
	g := &drawing{d: data, contour: outline(data), pitch: points(data.PitchCurve)}
	ext := g.extent()
	var err error
	if g.p, g.s, err = choose(data.Units, data.Sheet, ext.width(), ext.height(), data.Released); err != nil {
		return nil, err
	}
	room := g.p.room(data.Released)
	k := g.s.sheet / g.s.part * unitMM(data.Units)
	mid, half := room.center(), ext.center()
	g.v = view{origin: pt{mid.x - k*half.x, mid.y + k*half.y}, k: k}
	g.l = newLayout(g.p.field().grown(-1.5))
	g.c = newCanvas(g.p.w, g.p.h, "Drawing of "+data.name(" revision "),
		data.Title+": plate cam seen on the marked face, scale "+g.s.String())
	g.border()
	g.caption()
	g.cam()
	g.callouts()
	g.column()
	return g.c.bytes()
}

// check refuses data that cannot be drawn.
func (d DrawingData) check() error {
	if d.Units != "mm" && d.Units != "inch" {
		return fmt.Errorf("svg: drawing: units are %q; allowed are mm and inch", d.Units)
	}
	if len(d.Contours) == 0 || len(d.Contours[0]) == 0 {
		return fmt.Errorf("svg: drawing: there is no contour; hand in at least one closed path")
	}
	for _, n := range d.numbers() {
		if !finite(n.v) {
			return fmt.Errorf("svg: drawing: %s is %v; a finite number is needed", n.name, n.v)
		}
		if n.size && n.v < 0 {
			return fmt.Errorf("svg: drawing: %s is %v; a size must not be negative", n.name, n.v)
		}
	}
	return d.checkLists()
}

// number is a number of the drawing with its name; a size must not be negative.
type number struct {
	name string
	v    float64
	size bool
}

func (d DrawingData) numbers() []number {
	ns := []number{
		{"speed", d.Speed, false}, {"thickness", d.Thickness, true}, {"outside diameter", d.OutsideDiameter, true},
		{"base radius", d.BaseRadius, true}, {"roller diameter", d.RollerDiameter, true}, {"roller x", d.Roller.X, false},
		{"roller y", d.Roller.Y, false}, {"offset", d.Offset, false}, {"profile", d.Profile, true},
		{"zero mark x", d.Zero.X, false}, {"zero mark y", d.Zero.Y, false},
	}
	if b := d.Bore; b != nil {
		ns = append(ns, number{"bore diameter", b.Diameter, true})
		if k := b.Keyway; k != nil {
			ns = append(ns, number{"keyway width", k.Width, true}, number{"keyway depth", k.Depth, true},
				number{"keyway place", k.At, false})
		}
	}
	if b := d.Barrel; b != nil {
		ns = append(ns, number{"barrel's radius", b.Radius, true}, number{"barrel's length", b.Length, true}, number{"groove's depth", b.Depth, true},
			number{"groove's width", b.Width, true}, number{"track", b.Track, false}, number{"left end", b.Left, false}, number{"right end", b.Right, false})
	}
	for i, h := range d.Holes {
		hole := fmt.Sprintf("hole %d ", i+1)
		ns = append(ns, number{hole + "diameter", h.Diameter, true}, number{hole + "radius", h.Radius, true},
			number{hole + "place", h.At, false})
	}
	return ns
}

func (d DrawingData) checkLists() error {
	for i, c := range d.Contours {
		for j, e := range c {
			if !finitePoint(e.From) || !finitePoint(e.To) || !finitePoint(e.Center) {
				return fmt.Errorf("svg: drawing: contour %d, element %d has a coordinate that is not finite", i+1, j+1)
			}
		}
	}
	for j, e := range d.PitchCurve {
		if !finitePoint(e.From) || !finitePoint(e.To) || !finitePoint(e.Center) {
			return fmt.Errorf("svg: drawing: pitch curve, element %d has a coordinate that is not finite", j+1)
		}
	}
	for i, path := range d.ToolPaths {
		for j, e := range path {
			if !finitePoint(e.From) || !finitePoint(e.To) || !finitePoint(e.Center) {
				return fmt.Errorf("svg: drawing: tool path %d, element %d has a coordinate that is not finite", i+1, j+1)
			}
		}
	}
	if l := d.Linkage; l != nil {
		all := []plane.Point{l.Pivot, l.Arm[0], l.Arm[1], l.Face[0], l.Face[1]}
		for _, e := range l.Outline {
			all = append(all, e.From, e.To, e.Center)
		}
		for _, p := range all {
			if !finitePoint(p) {
				return fmt.Errorf("svg: drawing: the follower's arm or face has a coordinate that is not finite")
			}
		}
	}
	for i, e := range d.Events {
		if !finitePoint(e.Start) || !finite(e.From, e.To) {
			return fmt.Errorf("svg: drawing: event %d has an angle or a point that is not finite", i+1)
		}
	}
	return nil
}

func finitePoint(p plane.Point) bool { return finite(p.X, p.Y) }

func finite(vs ...float64) bool {
	for _, v := range vs {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return false
		}
	}
	return true
}

// outline is every contour, sampled.
func outline(d DrawingData) []plane.Point {
	var ps []plane.Point
	for _, c := range d.Contours {
		ps = append(ps, points(c)...)
	}
	return ps
}

// extent is the box around everything of the view, in the cam frame (y up).
func (g *drawing) extent() box {
	b := box{math.Inf(1), math.Inf(1), math.Inf(-1), math.Inf(-1)}
	add := func(p plane.Point, r float64) {
		b = box{math.Min(b.x0, p.X-r), math.Min(b.y0, p.Y-r), math.Max(b.x1, p.X+r), math.Max(b.y1, p.Y+r)}
	}
	for _, p := range g.contour {
		add(p, 0)
	}
	for _, p := range g.pitch {
		add(p, 0)
	}
	if r := g.d.RollerDiameter / 2; r > 0 {
		add(g.d.Roller, r)
		add(plane.Point{}, g.d.BaseRadius+r)
	}
	add(plane.Point{}, math.Max(g.d.BaseRadius, g.d.OutsideDiameter/2))
	for _, path := range g.d.ToolPaths {
		for _, p := range points(path) {
			add(p, 0)
		}
	}
	if l := g.d.Linkage; l != nil {
		for _, p := range slices.Concat(l.Arm[:], l.Face[:], points(l.Outline)) {
			if p != (plane.Point{}) {
				add(p, 0)
			}
		}
		if l.Pivots {
			add(l.Pivot, 0)
		}
	}
	return b
}

// border draws the frame and the line between field and column.
func (g *drawing) border() {
	g.c.doing("border")
	f := g.p.field()
	g.c.rect(box{margin, margin, g.p.w - margin, g.p.h - margin}, pen{width: 0.7})
	g.c.line(pt{f.x1, f.y0}, pt{f.x1, f.y1}, pen{width: 0.35})
	for _, m := range [][2]pt{ // centering marks
		{{g.p.w / 2, margin - 5}, {g.p.w / 2, margin}}, {{g.p.w / 2, g.p.h - margin}, {g.p.w / 2, g.p.h - margin + 5}},
		{{margin - 5, g.p.h / 2}, {margin, g.p.h / 2}}, {{g.p.w - margin, g.p.h / 2}, {g.p.w - margin + 5, g.p.h / 2}},
	} {
		g.c.line(m[0], m[1], pen{width: 0.35})
	}
}

// caption says which side is seen, and stamps a drawing that is not released.
func (g *drawing) caption() { g.head("B", "SEEN ON THE MARKED FACE (Z0)") }

// head writes over the view, after a datum's letter where it has one.
func (g *drawing) head(datum, text string) {
	g.c.doing("caption")
	f := g.p.field()
	x, y := f.x0+4, f.y0+6.5
	if datum != "" {
		g.cells(pt{x, y - 3.8}, 5, 3, datum)
		x += 7
	}
	g.c.text(pt{x, y}, text, font{size: 3.5, bold: true})
	g.l.block(box{f.x0 + 4, y - 4.5, x + widthOf(text, 3.5, true), y + 2})
	if g.d.Released {
		return
	}
	const size = 11.0
	stamp := "NOT RELEASED"
	x = f.x0 + 4
	b := box{x, y + 4, x + widthOf(stamp, size, true) + 4, y + 4 + size*1.25}
	g.c.rect(b, pen{width: 1, color: red})
	g.c.text(pt{b.center().x, b.y0 + size}, stamp, font{size: size, bold: true, color: red, anchor: "middle"})
	g.l.block(b)
}

// cells draws a row of framed letters, each as wide as it needs, and returns the width.
func (g *drawing) cells(at pt, height, size float64, texts ...string) float64 {
	x := at.x
	for _, t := range texts {
		w := cellWidth(t, height, size)
		g.c.rect(box{x, at.y, x + w, at.y + height}, pen{width: 0.25, fill: "#ffffff"})
		if t == profileSymbol {
			g.profileMark(pt{x + w/2, at.y + height*0.72}, height*0.36)
		} else {
			g.c.text(pt{x + w/2, at.y + height/2 + size*0.36}, t, font{size: size, anchor: "middle"})
		}
		x += w
	}
	return x - at.x
}

// profileSymbol stands for the symbol "profile of any line" in a row of cells.
const profileSymbol = "\x00profile"

func cellWidth(t string, height, size float64) float64 {
	if t == profileSymbol {
		return height * 1.3
	}
	return math.Max(height, widthOf(t, size, false)+2)
}

// profileMark draws the ISO 1101 symbol for the profile of any line: an open half circle.
func (g *drawing) profileMark(m pt, r float64) {
	t := &track{}
	t.move(pt{m.x - r, m.y})
	t.arcTo(pt{m.x, m.y - r}, r, true)
	t.arcTo(pt{m.x + r, m.y}, r, true)
	g.c.path(t, pen{width: 0.35})
}
