// Package svg draws the three figures of a release pack: the toolroom drawing, the
// motion chart and the deviation chart. Everything drawn is handed in as plain
// data; the package computes no cam theory.
//
// The writer underneath (svgo) checks nothing: it writes NaN, leaves attributes
// unescaped, swallows write errors and takes a string with '=' in it for raw
// attributes. So all drawing goes through canvas, which escapes every
// attribute, refuses what is not finite, writes to memory first and reports the
// first fault with the name of the thing that was being drawn.
package svg

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"math"
	"strconv"
	"strings"

	svgo "github.com/ajstarks/svgo/float"
)

// paperDecimals is the number of decimals of paper coordinates: 1 micrometer on the sheet.
const paperDecimals = 3

// paperLimit is the largest paper coordinate in mm that is still a drawing; beyond
// it readers lose the decimals to single precision.
const paperLimit = 1e5

// fonts are the families tried in turn; none is embedded.
const fonts = "Helvetica, Arial, 'DejaVu Sans', sans-serif"

// pt is a point on the sheet in mm, y down.
type pt struct{ x, y float64 }

// pen is how a stroke looks. The zero fill is none, the zero color ink.
type pen struct {
	width float64 // mm
	color string
	dash  string // SVG dash array in mm
	fill  string
	class string // names the shape for the sheet's script
}

// Classes of shapes that the release sheet draws a cursor on: the frame of a panel over cam
// angles 0 to 360, and the zero circle of a trace by polar angle.
const (
	overAngle = "over-angle"
	byPolar   = "by-polar"
)

// canvas writes one figure in paper mm and keeps the first fault.
type canvas struct {
	buf  bytes.Buffer
	s    *svgo.SVG
	what string // what is being drawn, for faults
	err  error
}

// newCanvas opens a figure of w by h mm with an accessible title and description.
func newCanvas(w, h float64, title, desc string) *canvas {
	c := &canvas{what: "sheet"}
	c.s = svgo.New(&c.buf)
	c.s.Decimals = paperDecimals
	if !c.finite(w, h) {
		return c
	}
	c.s.Startunit(w, h, "mm", attr("viewBox", "0 0 "+short(w)+" "+short(h)),
		attr("role", "img"), attr("aria-labelledby", "title desc"),
		attr("font-family", fonts), attr("fill", ink))
	fmt.Fprintf(&c.buf, "<title id=\"title\">%s</title>\n<desc id=\"desc\">%s</desc>\n", escape(title), escape(desc))
	c.s.Rect(0, 0, w, h, attr("fill", "#ffffff"))
	return c
}

// doing names what is drawn next, for faults.
func (c *canvas) doing(what string) { c.what = what }

// finite reports whether all numbers can be written, and records a fault if not.
func (c *canvas) finite(vs ...float64) bool {
	for _, v := range vs {
		if math.IsNaN(v) || math.Abs(v) > paperLimit {
			if c.err == nil {
				c.err = fmt.Errorf("svg: %s: a coordinate is %v mm on the sheet; it must be a number of at most %g mm",
					c.what, v, paperLimit)
			}
			return false
		}
	}
	return c.err == nil
}

// line draws a straight stroke.
func (c *canvas) line(a, b pt, p pen) {
	if c.finite(a.x, a.y, b.x, b.y, p.width) {
		c.s.Line(clean(a.x), clean(a.y), clean(b.x), clean(b.y), p.attrs()...)
	}
}

// circle draws a full circle.
func (c *canvas) circle(m pt, r float64, p pen) {
	if r < 0 && c.err == nil {
		c.err = fmt.Errorf("svg: %s: the radius is %v mm on the sheet; it must not be negative", c.what, r)
	}
	if c.finite(m.x, m.y, r, p.width) {
		c.s.Circle(clean(m.x), clean(m.y), clean(r), p.attrs()...)
	}
}

// rect draws a rectangle.
func (c *canvas) rect(b box, p pen) {
	if c.finite(b.x0, b.y0, b.x1, b.y1, p.width) {
		c.s.Rect(clean(b.x0), clean(b.y0), clean(b.x1-b.x0), clean(b.y1-b.y0), p.attrs()...)
	}
}

// path draws a track; an empty one draws nothing.
func (c *canvas) path(t *track, p pen) {
	if t.d.Len() > 0 && c.finite(append(t.numbers, p.width)...) {
		c.s.Path(t.d.String(), p.attrs()...)
	}
}

// polygon fills a closed shape.
func (c *canvas) polygon(fill string, points ...pt) {
	t := &track{}
	t.move(points[0])
	for _, p := range points[1:] {
		t.lineTo(p)
	}
	t.close()
	c.path(t, pen{fill: fill, color: "none"})
}

// text writes one line of text with its baseline at p.
func (c *canvas) text(p pt, s string, f font) {
	if s == "" || !c.finite(p.x, p.y, f.size) {
		return
	}
	a := []string{attr("font-size", short(f.size))}
	if f.anchor != "" {
		a = append(a, attr("text-anchor", f.anchor))
	}
	if f.bold {
		a = append(a, attr("font-weight", "bold"))
	}
	if f.color != "" {
		a = append(a, attr("fill", f.color))
	}
	if f.turned {
		a = append(a, attr("transform", "rotate(-90 "+short(p.x)+" "+short(p.y)+")"))
	}
	c.s.Text(clean(p.x), clean(p.y), legible(s), a...)
}

// group opens a group with an id, for readers that pick parts of the figure; end closes it.
func (c *canvas) group(id string) { c.s.Gid(id) }
func (c *canvas) end()            { c.s.Gend() }

// bytes closes the figure and returns it, or the first fault.
func (c *canvas) bytes() ([]byte, error) {
	if c.err != nil {
		return nil, c.err
	}
	c.s.End()
	return c.buf.Bytes(), nil
}

// attrs are the attributes of a stroke, escaped.
func (p pen) attrs() []string {
	color, fill := p.color, p.fill
	if color == "" {
		color = ink
	}
	if fill == "" {
		fill = "none"
	}
	a := []string{attr("fill", fill), attr("stroke", color)}
	if color != "none" {
		a = append(a, attr("stroke-width", short(p.width)), attr("stroke-linejoin", "round"))
	}
	if p.dash != "" {
		a = append(a, attr("stroke-dasharray", p.dash))
	}
	if p.class != "" {
		a = append(a, attr("class", p.class))
	}
	return a
}

// track is the data of an SVG path being built, in paper mm.
type track struct {
	d       strings.Builder
	numbers []float64
}

func (t *track) put(command string, vs ...float64) {
	t.d.WriteString(command)
	for i, v := range vs {
		if i > 0 {
			t.d.WriteByte(' ')
		}
		t.d.WriteString(short(v))
	}
	t.numbers = append(t.numbers, vs...)
}

func (t *track) move(p pt)   { t.put("M", p.x, p.y) }
func (t *track) lineTo(p pt) { t.put("L", p.x, p.y) }
func (t *track) close()      { t.d.WriteByte('Z') }

// arcTo draws an arc of less than half a turn; clockwise is as seen on the sheet.
func (t *track) arcTo(p pt, r float64, clockwise bool) {
	sweep := "0"
	if clockwise {
		sweep = "1"
	}
	t.put("A", r, r)
	t.d.WriteString(" 0 0 " + sweep + " ")
	t.put("", p.x, p.y)
}

// attr is one attribute, its value escaped and free of control characters.
func attr(name, value string) string { return name + `="` + escape(value) + `"` }

// escape makes s safe in text and in double-quoted attributes.
func escape(s string) string {
	var b bytes.Buffer
	if err := xml.EscapeText(&b, []byte(legible(s))); err != nil {
		return "" // a bytes.Buffer does not fail
	}
	return b.String()
}

// clean rounds to the paper's decimals and turns -0 into 0.
func clean(v float64) float64 {
	const counts = 1000 // 10^paperDecimals
	v = math.Round(v*counts) / counts
	if v == 0 {
		return 0
	}
	return v
}

// short prints a paper number without trailing zeros.
func short(v float64) string { return strconv.FormatFloat(clean(v), 'f', -1, 64) }
