//go:build peers

package pack

import (
	"bytes"
	"compress/zlib"
	"context"
	"encoding/json"
	"io"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"

	"lobewright/export/dxf"
	"lobewright/export/dxf/read"
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Some of these programs wait for ever on a file they do not like.
const peerTimeout = 60 * time.Second

// outlines writes every releasing sample's DXF in both versions to a folder.
func outlines(t *testing.T) (files []string, ours []*read.File) {
	t.Helper()
	dir := t.TempDir()
	for _, name := range releasingSamples(t) {
		for _, version := range []string{"2000", "r12"} {
			o := options()
			o.DXF = version
			p, j, err := work(readSample(t, name), o)
			if err != nil || !p.Passed {
				t.Fatal(name, err)
			}
			file := filepath.Join(dir, version+"-"+j.outline.name)
			if err := os.WriteFile(file, j.outline.data, 0o644); err != nil {
				t.Fatal(err)
			}
			parsed, err := read.Parse(j.outline.data)
			if err != nil {
				t.Fatal(err)
			}
			files, ours = append(files, file), append(ours, parsed)
		}
	}
	return files, ours
}

// The npm package dxf-parser (found by NODE_PATH) reads the vertices and bulges our reader
// reads, to the last bit.
func TestPeerDxfParser(t *testing.T) {
	files, ours := outlines(t)
	ctx, stop := context.WithTimeout(context.Background(), peerTimeout)
	defer stop()
	cmd := exec.CommandContext(ctx, "node", append([]string{"../dxf/testdata/dxf_parser_read.js"}, files...)...)
	var fault bytes.Buffer
	cmd.Stderr = &fault
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("node with dxf-parser (npm install dxf-parser, NODE_PATH) is needed: %v\n%s", err, &fault)
	}
	var found []struct {
		Insunits, Count int
		Polylines       []struct {
			Layer    string
			Closed   bool
			Vertices [][3]float64
		}
	}
	if err := json.Unmarshal(out, &found); err != nil {
		t.Fatal(err)
	}
	if len(found) != len(files) || len(files) < 8 {
		t.Fatalf("%d answers for %d files", len(found), len(files))
	}
	vertices := 0
	for i, f := range found {
		name, our := filepath.Base(files[i]), ours[i]
		if n := len(our.Polylines) + len(our.Circles) + len(our.Arcs) + len(our.Lines) + len(our.Texts); f.Count != n || len(f.Polylines) != len(our.Polylines) {
			t.Fatalf("%s: dxf-parser finds %d items and %d polylines, we %d and %d", name, f.Count, len(f.Polylines), n, len(our.Polylines))
		}
		if our.Version != "r12" && f.Insunits != map[read.Unit]int{read.Millimeter: 4, read.Inch: 1}[our.Unit] {
			t.Errorf("%s: $INSUNITS %d", name, f.Insunits)
		}
		for k, p := range f.Polylines {
			q := our.Polylines[k]
			if p.Layer != q.Layer || p.Closed != q.Closed || len(p.Vertices) != len(q.Points) {
				t.Errorf("%s: polyline %d on %s with %d vertices, closed %v; ours on %s with %d, %v", name, k, p.Layer, len(p.Vertices), p.Closed, q.Layer, len(q.Points), q.Closed)
				continue
			}
			for n, v := range p.Vertices {
				if v != [3]float64{q.Points[n].X, q.Points[n].Y, q.Bulges[n]} {
					t.Errorf("%s: polyline %d, vertex %d: dxf-parser %v, ours %v %v", name, k, n, v, q.Points[n], q.Bulges[n])
				}
				vertices++
			}
		}
	}
	t.Logf("dxf-parser: %d files, %d vertices alike", len(files), vertices)
}

// LibreCAD plots on a grid of 1200 dots an inch, 0.021 mm: coordinates are cut to it, and arcs are
// chords between its dots. Two dots are what a point may be off.
const librecadError = 2 * 25.4 / 1200 // mm on the page at 1:1

// LibreCAD plots every sample that fits its page at 1:1. Each point of what it draws of the edges lies on contour, bore or a hole, and
// each point of the contour on such a stroke, within its plotting grid. The drawing is moved
// to the middle of the page first: what is off the page LibreCAD does not plot.
func TestPeerLibreCAD(t *testing.T) {
	out, home := t.TempDir(), t.TempDir()
	worst, points, files := 0.0, 0, 0
	for _, sample := range releasingSamples(t) {
		for _, version := range []string{"2000", "r12"} {
			o := options()
			o.DXF = version
			_, j, err := work(readSample(t, sample), o)
			if err != nil {
				t.Fatal(err)
			}
			if j.drum() { // its developed plane is wider than the page
				continue
			}
			unit := 1.0
			if j.outline.drawing.Inch && version != "r12" { // R12 tells no units: an inch is plotted as a millimeter
				unit = 25.4
			}
			data, err := dxf.Write(moved(j.outline.drawing, 100/unit, 145/unit))
			if err != nil {
				t.Fatal(err)
			}
			ours, err := read.Parse(data)
			if err != nil {
				t.Fatal(err)
			}
			plotted := cutStrokes(t, plot(t, out, home, version+"-"+j.spec.Part, data))
			edges := edges(ours, unit)
			centered(plotted, edges)
			for _, s := range plotted {
				for _, p := range s {
					off := math.Inf(1)
					for _, e := range edges {
						off = math.Min(off, awayFrom(e, p))
					}
					worst, points = math.Max(worst, off), points+1
				}
			}
			for _, e := range edges {
				for _, u := range []float64{0.2, 0.5, 0.8} {
					off := math.Inf(1)
					for _, s := range plotted {
						for k := 1; k < len(s); k++ {
							off = math.Min(off, toSegment(e.PointAt(u), s[k-1], s[k]))
						}
					}
					worst = math.Max(worst, off)
				}
			}
			if files++; worst > librecadError {
				t.Fatalf("%s, %s: plotted edges and ours are %.4f mm apart", sample, version, worst)
			}
		}
	}
	if points < 1000*files {
		t.Errorf("%d points of %d files: the plots are nearly empty", points, files)
	}
	t.Logf("LibreCAD: %d files, %d plotted points, at most %.4f mm apart", files, points, worst)
}

// centered moves the strokes so that their box is about that of the edges: the page is a whole number of
// points high, and the plot begins at its upper edge.
func centered(strokes [][]plane.Point, edges chain.Path) {
	var box chain.Path
	for _, s := range strokes {
		for _, p := range s {
			box = append(box, chain.Element{Kind: chain.Line, From: p, To: p})
		}
	}
	a, b := edges.Bounds()
	c, d := box.Bounds()
	by := a.Sub(c).Add(b.Sub(d)).Scale(0.5)
	for _, s := range strokes {
		for i := range s {
			s[i] = s[i].Add(by)
		}
	}
}

// plot returns the PDF that LibreCAD makes of a DXF.
func plot(t *testing.T, out, home, name string, data []byte) []byte {
	t.Helper()
	file := filepath.Join(out, name+".dxf")
	if err := os.WriteFile(file, data, 0o644); err != nil {
		t.Fatal(err)
	}
	ctx, stop := context.WithTimeout(context.Background(), peerTimeout)
	defer stop()
	cmd := exec.CommandContext(ctx, "librecad", "dxf2pdf", "-s", "1", "-t", out, file)
	cmd.Env = append(os.Environ(), "QT_QPA_PLATFORM=offscreen", "HOME="+home)
	messages, err := cmd.CombinedOutput()
	if err != nil {
		t.Fatalf("librecad is needed: %v\n%s", err, messages)
	}
	pdf, err := os.ReadFile(filepath.Join(out, name+".pdf"))
	if err != nil {
		t.Fatalf("%v\n%s", err, messages)
	}
	return pdf
}

// moved is the drawing without its texts, moved by x and y.
func moved(d dxf.Drawing, x, y float64) dxf.Drawing {
	by := plane.Vector{X: x, Y: y}
	m := dxf.Drawing{Inch: d.Inch, Version: d.Version}
	for _, p := range d.Polylines {
		q := p
		q.Vertices = nil
		for _, v := range p.Vertices {
			v.P = p.Grid.Point(p.Grid.Value(v.P).Add(by))
			q.Vertices = append(q.Vertices, v)
		}
		m.Polylines = append(m.Polylines, q)
	}
	for _, c := range d.Circles {
		c.Center = c.Center.Add(by)
		m.Circles = append(m.Circles, c)
	}
	return m
}

// edges are contour, bore and holes in mm.
func edges(f *read.File, unit float64) chain.Path {
	var all chain.Path
	add := func(p chain.Path) {
		for _, e := range p {
			for _, at := range []*plane.Point{&e.From, &e.To, &e.Center} {
				at.X, at.Y = at.X*unit, at.Y*unit
			}
			all = append(all, e)
		}
	}
	for _, p := range f.Polylines {
		if strings.HasPrefix(p.Layer, dxf.LayerContour) || p.Layer == dxf.LayerBore {
			add(chain.FromBulges(p.Points, p.Bulges, p.Closed))
		}
	}
	for _, c := range f.Circles {
		if c.Layer == dxf.LayerBore {
			a, b := c.Center.Add(plane.Vector{X: c.Radius}), c.Center.Add(plane.Vector{X: -c.Radius})
			add(chain.Path{{Kind: chain.Arc, From: a, To: b, Center: c.Center, CCW: true}, {Kind: chain.Arc, From: b, To: a, Center: c.Center, CCW: true}})
		}
	}
	return all
}

// awayFrom is the distance of a point from an element.
func awayFrom(e chain.Element, p plane.Point) float64 {
	if e.Kind == chain.Line {
		return toSegment(p, e.From, e.To)
	}
	ends := math.Min(p.Dist(e.From), p.Dist(e.To))
	a, sweep := e.From.Sub(e.Center), e.Sweep()
	turn := math.Atan2(a.Cross(p.Sub(e.Center)), a.Dot(p.Sub(e.Center)))
	if sweep < 0 {
		turn, sweep = -turn, -sweep
	}
	if turn < 0 {
		turn += 2 * math.Pi
	}
	if turn <= sweep {
		return math.Min(ends, math.Abs(p.Dist(e.Center)-e.Radius()))
	}
	return ends
}

// cutStrokes reads what has the color of contour (plotted black) or bore (green) from the one page of a PDF that
// Qt wrote, in mm from
// the lower left corner, which is the drawing's origin.
func cutStrokes(t *testing.T, pdf []byte) [][]plane.Point {
	t.Helper()
	_, rest, ok := bytes.Cut(pdf, []byte("stream\n"))
	if !ok {
		t.Fatal("the PDF holds no stream")
	}
	z, err := zlib.NewReader(bytes.NewReader(rest))
	if err != nil {
		t.Fatal(err)
	}
	page, err := io.ReadAll(z)
	if err != nil && len(page) == 0 {
		t.Fatal(err)
	}
	const pointMM = 25.4 / 72
	var scale, top float64
	cut := false
	var strokes [][]plane.Point
	var now []plane.Point
	var numbers []float64
	at := func(x, y float64) plane.Point {
		return plane.Point{X: x * scale * pointMM, Y: (top - y*scale) * pointMM}
	}
	for _, word := range strings.Fields(string(page)) {
		if v, err := strconv.ParseFloat(word, 64); err == nil {
			numbers = append(numbers, v)
			continue
		}
		n := len(numbers)
		switch {
		case word == "cm" && n >= 6 && scale == 0:
			scale, top = numbers[n-6], numbers[n-1]
		case word == "SCN" && n >= 3:
			red, green, blue := numbers[n-3], numbers[n-2], numbers[n-1]
			cut = red == 0 && blue == 0 && (green == 0 || green == 1)
		case (word == "m" || word == "l") && n >= 2:
			if word == "m" {
				now = nil
			}
			now = append(now, at(numbers[n-2], numbers[n-1]))
		case word == "c" && n >= 6 && len(now) > 0: // a cubic of Bezier: circles are drawn so
			var q [3]plane.Point
			for i := range q {
				q[i] = at(numbers[n-6+2*i], numbers[n-5+2*i])
			}
			p := now[len(now)-1]
			for k := 1; k <= 32; k++ {
				u := float64(k) / 32
				v := 1 - u
				b := [4]float64{v * v * v, 3 * u * v * v, 3 * u * u * v, u * u * u}
				now = append(now, plane.Point{X: b[0]*p.X + b[1]*q[0].X + b[2]*q[1].X + b[3]*q[2].X, Y: b[0]*p.Y + b[1]*q[0].Y + b[2]*q[1].Y + b[3]*q[2].Y})
			}
		case word == "S" && cut:
			strokes = append(strokes, now)
			now = nil
		}
		numbers = numbers[:0]
	}
	if len(strokes) == 0 {
		t.Fatalf("no stroke of contour or bore on a page of %d bytes", len(page))
	}
	return strokes
}
