package svg

import "math"

// Sizes of the column beside the view, in mm.
const (
	columnPad   = 3.0
	largestNote = 2.6
	leastNote   = 1.6
	noteStep    = 0.1
	leading     = 1.32 // of the size
)

// paragraph is a piece of the column.
type paragraph struct {
	text    string
	heading bool
}

// column draws the title block and above it the motion, the notes and the cautions.
func (g *drawing) column() {
	g.c.group("title-block")
	top := g.titleBlock()
	g.c.end()
	g.c.group("notes")
	g.c.doing("notes")
	f := g.p.field()
	g.notes(box{f.x1 + columnPad, f.y0 + columnPad, g.p.w - margin - columnPad, top - columnPad})
	g.c.end()
}

// paragraphs is the text of the column in order.
func (g *drawing) paragraphs() []paragraph {
	var ps []paragraph
	section := func(head string, texts []string) {
		if len(texts) == 0 {
			return
		}
		ps = append(ps, paragraph{head, true})
		for _, t := range texts {
			ps = append(ps, paragraph{text: t})
		}
	}
	var motion []string
	for _, e := range g.d.Events {
		motion = append(motion, num(e.From, 3)+"° to "+num(e.ends(), 3)+"°  "+e.Text)
	}
	section("MOTION, CAM ANGLE", motion)
	section("SIZES", g.extra)
	section("CAUTIONS", g.d.Cautions) // before the notes: what is cut for want of room is a note
	section("NOTES", g.standing())
	return ps
}

// standing are the notes every drawing carries, then the spec's.
func (g *drawing) standing() []string {
	ns := []string{"Datums: " + g.datumWords()}
	if g.d.Thickness > 0 {
		ns = append(ns, "Thickness "+g.len(g.d.Thickness)+" "+g.unitWord()+".")
	}
	if g.d.Follower != "" {
		ns = append(ns, "Follower: "+g.d.Follower+".")
	}
	if g.d.Barrel != nil {
		ns = append(ns, "Angles at the lines are cam angles. Polar angles are counterclockwise seen on the marked face, 0° at X = 0; X and the lengths along it hold at the outer radius.")
	} else {
		ns = append(ns, "Angles at ticks are cam angles, counted against the turning direction from the zero mark. "+
			"Other angles are polar angles, counterclockwise from +X (right).")
	}
	return append(ns, g.d.Notes...)
}

func (g *drawing) datumWords() string {
	s := "B marked face."
	if g.d.Bore != nil {
		s = "A bore, " + s
	}
	switch {
	case g.d.NoDatum:
		return s + " There is no angular datum."
	case g.keyway() != nil:
		return s[:len(s)-1] + ", C center plane of the keyway."
	case len(g.d.Holes) > 0:
		return s[:len(s)-1] + ", C first hole."
	}
	return s
}

func (g *drawing) unitWord() string {
	if g.d.Units == "inch" {
		return "in"
	}
	return "mm"
}

// notes sets the paragraphs at the largest size that fits; what does not fit at the
// least size is cut, saying so.
func (g *drawing) notes(b box) {
	ps := g.paragraphs()
	size := largestNote
	for size > leastNote && noteHeight(ps, b.width(), size) > b.height() {
		size = math.Max(leastNote, size-noteStep)
	}
	const rest = "More on the release sheet."
	y := b.y0
	for _, p := range ps {
		step := size * leading
		if p.heading {
			y += step * 0.5
		}
		for _, line := range wrapped(p.text, b.width(), size, p.heading) {
			y += step
			if y+step > b.y1 && noteHeight(ps, b.width(), size) > b.height() {
				g.c.text(pt{b.x0, y}, rest, font{size: size, bold: true})
				return
			}
			g.c.text(pt{b.x0, y}, line, font{size: size, bold: p.heading})
		}
		y += step * 0.25
	}
}

// noteHeight is the height of the paragraphs in mm.
func noteHeight(ps []paragraph, width, size float64) float64 {
	rows := 0.3 // descenders of the last line
	for _, p := range ps {
		rows += 0.25 + float64(len(wrapped(p.text, width, size, p.heading)))
		if p.heading {
			rows += 0.5
		}
	}
	return rows * size * leading
}

// cell is a field of the title block; share is its part of the row's width.
type cell struct {
	label, value string
	share        float64
	size         float64
	bold         bool
}

// titleBlock draws the block at the bottom of the column and returns its top.
func (g *drawing) titleBlock() float64 {
	g.c.doing("title block")
	const row = 8.2
	rows := g.titleRows()
	x0, x1 := g.p.field().x1, g.p.w-margin
	top := g.p.h - margin - row*float64(len(rows))
	for i, cells := range rows {
		y, x := top+row*float64(i), x0
		width := 0.35
		if i == 0 {
			width = 0.7
		}
		g.c.line(pt{x0, y}, pt{x1, y}, pen{width: width})
		for j, c := range cells {
			w := c.share * (x1 - x0)
			if j > 0 {
				g.c.line(pt{x, y}, pt{x, y + row}, pen{width: 0.25})
			}
			g.c.text(pt{x + 1.2, y + 2.5}, c.label, font{size: 1.8, color: gray})
			text, size := fitted(c.value, w-2.4, c.size, 1.7, c.bold)
			g.c.text(pt{x + 1.2, y + 6.9}, text, font{size: size, bold: c.bold})
			x += w
		}
	}
	return top
}

// titleRows are the rows of the title block; a row with nothing in it is left out.
func (g *drawing) titleRows() [][]cell {
	d := g.d
	turns := "counterclockwise"
	if d.Clockwise {
		turns = "clockwise"
	}
	state, seen := "RELEASED", "TURNS, SEEN HERE"
	if d.Barrel != nil {
		seen = "TURNS, ON MARKED FACE"
	}
	if !d.Released {
		state = "NOT RELEASED"
	}
	sha := d.SHA256
	if len(sha) > 12 {
		sha = sha[:12]
	}
	half := func(la, a, lb, b string) []cell {
		return []cell{{la, a, 0.5, 2.8, false}, {lb, b, 0.5, 2.8, false}}
	}
	all := [][]cell{
		{{"TITLE", d.Title, 1, 4, true}},
		{{"PART", d.Part, 0.72, 4, true}, {"REVISION", d.Revision, 0.28, 4, true}},
		half("MATERIAL", d.Material, "HARDNESS", d.Hardness),
		half("FINISH", d.Finish, "DATE", d.Date),
		half("DRAWN", d.Drawn, "CHECKED", d.Checked),
		{{"SCALE (" + g.p.name + ")", g.s.String(), 0.28, 2.8, false}, {"UNITS", d.Units, 0.2, 2.8, false},
			{seen, turns + ", " + num(d.Speed, 3) + " rpm", 0.52, 2.8, false}},
		{{"SPEC SHA-256", sha, 0.5, 2.8, false}, {"STATE", state, 0.5, 2.8, true}},
	}
	var rows [][]cell
	for _, r := range all {
		for _, c := range r {
			if c.value != "" {
				rows = append(rows, r)
				break
			}
		}
	}
	return rows
}
