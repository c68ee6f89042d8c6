package pack

import (
	"fmt"
	"math"

	"lobewright/export/dxf"
	"lobewright/export/svg"
	"lobewright/synth"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/fit"
	"lobewright/tolerance/follow"
)

// A barrel cam is written in its developed plane: X is the outer radius times the polar
// angle, Y the axial position from the datum end. Its walls are no parallels of the pitch
// curve there, so each curve is fitted by itself, and all are open.

// drum reports whether the cam is a barrel.
func (j *job) drum() bool {
	_, ok := j.cam.Barrel()
	return ok
}

// begins is the cam angle at which the development is cut open, degrees.
func (j *job) begins() float64 { return j.cam.Cycle().Zones()[0].From }

// tryDrumOutline writes the development as DXF and proves it.
func (j *job) tryDrumOutline(eps float64) (*outline, error) {
	var paths [3]chain.Path
	for i, c := range []*synth.Curve{j.cam.Contour(), j.cam.OuterWall(), j.cam.Pitch()} {
		var err error
		if paths[i], err = fit.Arcs(c, eps, j.rough.options()); err != nil {
			return nil, err
		}
	}
	drawing, err := j.drumDrawing(paths)
	if err != nil {
		return nil, err
	}
	data, err := dxf.Write(drawing)
	if err != nil {
		return nil, err
	}
	return j.proveOutline(drawing, j.tampered(j.spec.Part+".dxf", data))
}

// drumDrawing composes the DXF of the development.
func (j *job) drumDrawing(paths [3]chain.Path) (dxf.Drawing, error) {
	s := j.spec
	d := dxf.Drawing{Inch: s.Units == spec.Inch, Version: dxf.Version(j.opt.DXF)}
	for i, layer := range []string{dxf.LayerContourLower, dxf.LayerContourUpper, dxf.LayerPitchCurve} {
		g, err := chain.Snap(paths[i], dxfGrid(), chain.SnapOptions{})
		if err != nil {
			return d, err
		}
		d.Polylines = append(d.Polylines, dxf.Polyline{Layer: layer, Grid: g.Grid, Vertices: g.Bulges()})
	}
	left, right := j.developed()
	at := func(x, y float64) plane.Point { return plane.Point{X: x, Y: y} }
	line := func(layer string, a, b plane.Point) {
		d.Lines = append(d.Lines, dxf.Line{Layer: layer, From: a, To: b})
	}
	length := s.Cam.Length
	corners := []plane.Point{at(left, 0), at(right, 0), at(right, length), at(left, length)}
	for i, c := range corners {
		line(dxf.LayerBarrel, c, corners[(i+1)%4])
	}
	over := 0.02 * (right - left)
	line(dxf.LayerCenterlines, at(left-over, s.Cam.TrackPosition), at(right+over, s.Cam.TrackPosition))
	zero := j.xOf(0)
	line(dxf.LayerZeroMark, at(zero, length), at(zero, 0.9*length))
	height, check := 0.04*length, 50.0
	if d.Inch {
		check = 2
	}
	l, text := dxf.CheckLine(at(left, -4*height), check, height, d.Inch)
	d.Lines, d.Texts = append(d.Lines, l), append(d.Texts, text)
	for i, note := range j.drumNotes() {
		d.Texts = append(d.Texts, dxf.Text{Layer: dxf.LayerNotes, At: at(left, -float64(7+2*i)*height), Height: height, Value: note})
	}
	return d, nil
}

// developed is the range of X of the development, length.
func (j *job) developed() (left, right float64) {
	b, _ := j.cam.Barrel()
	x := b.Sense() * b.OuterRadius * j.begins() * math.Pi / 180
	return math.Min(x, x+b.Sense()*2*math.Pi*b.OuterRadius), math.Max(x, x+b.Sense()*2*math.Pi*b.OuterRadius)
}

// xOf is where a cam angle lies in the development, length.
func (j *job) xOf(deg float64) float64 {
	b, _ := j.cam.Barrel()
	_, t := j.cam.Cycle().Zone(deg)
	return b.Sense() * b.OuterRadius * t * math.Pi / 180
}

func (j *job) drumNotes() []string {
	s, u := j.spec, j.spec.Units.Short()
	title := s.Part
	if s.Title != "" {
		title += " - " + s.Title
	}
	if s.Revision != "" {
		title += " - revision " + s.Revision
	}
	return []string{
		title,
		"All lengths in " + string(s.Units) + ", true scale.",
		fmt.Sprintf("Developed at the outer radius %g %s, seen from outside. X = radius x polar angle, Y from the datum end.", s.Cam.Radius, u),
		"Polar angles counterclockwise seen on the marked face (top edge). Camshaft turns " + j.rotation() + " seen so.",
		fmt.Sprintf("Groove %.6g %s wide, %g deep, for a %s.", j.cam.GrooveWidth(), u, s.Cam.GrooveDepth, j.followerText()),
		fmt.Sprintf("Walls at the outer radius, within %g %s of exact. Below it they twist: cut on the pitch curve with a tool of the groove's width.", j.chord, u),
		"Verify units, turning direction and datum before cutting.",
	}
}

// drumLinkage is the roller in the developed plane.
func (j *job) drumLinkage() follow.Follower {
	b, _ := j.cam.Barrel()
	return follow.Developed{PerDegree: b.Sense() * b.OuterRadius * math.Pi / 180,
		On: func(theta float64, arc plane.Frame) (lift, v, a float64, at plane.Point, ok bool) {
			r, ok := b.OnArc(theta, arc)
			return r.Lift, r.Velocity, r.Acceleration, r.At, ok
		}}
}

// barrelData is what the drawing shows of a barrel.
func (j *job) barrelData() *svg.Barrel {
	if !j.drum() {
		return nil
	}
	c := j.spec.Cam
	left, right := j.developed()
	return &svg.Barrel{Radius: c.Radius, Length: c.Length, Depth: c.GrooveDepth, Width: j.cam.GrooveWidth(), Track: c.TrackPosition, Left: left, Right: right}
}

// drumTrace samples the deviation of an open path along its exact curve, positive to +Y, for
// the chart.
func (j *job) drumTrace(exact *synth.Curve, path chain.Path) [][]svg.DeviationSample {
	pieces := exact.Pieces()
	first, last := pieces[0].From, pieces[len(pieces)-1].To
	frame := func(t float64) plane.Frame { // beyond the ends the last pieces go on
		i := 0
		for i < len(pieces)-1 && t >= pieces[i].To {
			i++
		}
		return exact.At(i, t)
	}
	b, _ := j.cam.Barrel()
	perDegree := b.Sense() * b.OuterRadius * math.Pi / 180
	var all []svg.DeviationSample
	for _, e := range path {
		for k := range tracePoints {
			p := e.PointAt((float64(k) + 0.5) / tracePoints)
			t := p.X / perDegree
			if t > last { // a program runs on past its first turn
				t, p.X = t-360, p.X-360*perDegree
			}
			for range 8 {
				f := frame(t)
				t += p.Sub(f.P).Dot(f.T) * math.Abs(f.T.X/perDegree)
			}
			if t < first || t > last {
				continue
			}
			f := frame(t)
			all = append(all, svg.DeviationSample{CamAngle: plane.Wrap360(t), Polar: plane.Wrap360(p.X / b.OuterRadius * 180 / math.Pi), Value: p.Sub(f.P).Dot(j.outward(f))})
		}
	}
	return wrapped(all)
}

// wrapped cuts samples where their cam angle falls, and puts the runs in order.
func wrapped(all []svg.DeviationSample) [][]svg.DeviationSample {
	cut := 0
	for i := 1; i < len(all); i++ {
		if all[i].CamAngle < all[i-1].CamAngle {
			cut = i
		}
	}
	if cut == 0 {
		return [][]svg.DeviationSample{all}
	}
	return [][]svg.DeviationSample{all[cut:], all[:cut]}
}

// drumDraft is a curve of a barrel that was not written, at every half degree.
func (j *job) drumDraft(c *synth.Curve) chain.Path {
	const step = 0.5
	var p chain.Path
	for i, piece := range c.Pieces() {
		n := int(math.Ceil((piece.To - piece.From) / step))
		at := func(k int) plane.Point {
			return c.At(i, piece.From+(piece.To-piece.From)*float64(k)/float64(n)).P
		}
		for k := range n {
			p = append(p, chain.Element{Kind: chain.Line, From: at(k), To: at(k + 1)})
		}
	}
	return p
}
