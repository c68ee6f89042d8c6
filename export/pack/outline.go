package pack

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"sync"

	"lobewright/export/dxf"
	"lobewright/export/dxf/read"
	"lobewright/synth"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/fit"
	"lobewright/tolerance/floor"
)

// dxfGrid is the grid of every coordinate of the DXF.
func dxfGrid() chain.Grid { return chain.Grid{Decimals: 6} }

// outline is the DXF after it has been read back.
type outline struct {
	name    string
	drawing dxf.Drawing
	data    []byte
	paths   []written
}

// written is one path as it was read back from a file.
type written struct {
	file, curve string
	layer       string // of the DXF, empty in a program
	exact       *synth.Curve
	path        chain.Path
	deviation   certify.Deviation
	theory      float64
	floor       *int    // proven least number of arcs and lines within the chord tolerance; nil when none could be computed
	spirals     int     // above 0: the path stands for so many moves of a rotary and a radial axis
	toPitch     float64 // distance from path to pitch curve, to the left of its travel, length
}

// pitchFit fits the pitch curve with arcs once for each tolerance; its parallels are
// parallel chains with the same deviation.
func (j *job) pitchFit(eps float64) (chain.Path, error) {
	return j.fits.get(eps, func() (chain.Path, error) { return fit.Arcs(j.cam.Pitch(), eps, j.rough.options()) })
}

// fits keeps what was fitted, for programs that are written at the same time. A path is
// not changed once it is there.
type fits struct {
	lock sync.Mutex
	made map[float64]func() (chain.Path, error)
}

func (f *fits) get(eps float64, fit func() (chain.Path, error)) (chain.Path, error) {
	f.lock.Lock()
	if f.made == nil {
		f.made = map[float64]func() (chain.Path, error){}
	}
	if f.made[eps] == nil {
		f.made[eps] = sync.OnceValues(fit)
	}
	get := f.made[eps]
	f.lock.Unlock()
	return get()
}

// writeOutline writes the DXF, reads it back and certifies its curves.
func (j *job) writeOutline() error {
	var failed error
	for _, share := range attempts() {
		o, err := j.tryOutline(j.fitTo(share, dxfGrid().Decimals))
		failed = err
		if err != nil {
			continue
		}
		j.outline = o
		if o.worst().Bound <= j.chord {
			break
		}
	}
	if j.outline == nil {
		return fmt.Errorf("the DXF cannot be proven: %w", failed)
	}
	for _, w := range j.outline.paths {
		j.gates = append(j.gates, j.deviationGate("dxf "+w.curve, w.file+" "+w.curve, w.deviation.Bound, w.deviation.At))
	}
	return nil
}

func (o *outline) worst() certify.Deviation {
	d := o.paths[0].deviation
	for _, w := range o.paths {
		if w.deviation.Bound > d.Bound {
			d = w.deviation
		}
	}
	return d
}

func (j *job) tryOutline(eps float64) (*outline, error) {
	if j.drum() {
		return j.tryDrumOutline(eps)
	}
	pitch, err := j.pitchFit(eps)
	if err != nil {
		return nil, err
	}
	contour, err := pitch.Offset(j.cam.LeftOfPitch(0))
	if err != nil {
		return nil, err
	}
	var outer chain.Path
	if j.cam.Grooved() {
		if outer, err = pitch.Offset(j.cam.OuterWall().Left()); err != nil {
			return nil, err
		}
	}
	drawing, err := j.drawing(contour, outer, pitch)
	if err != nil {
		return nil, err
	}
	data, err := dxf.Write(drawing)
	if err != nil {
		return nil, err
	}
	return j.proveOutline(drawing, j.tampered(j.spec.Part+".dxf", data))
}

// proveOutline reads a DXF back from its bytes, holds its curves against the exact
// ones and everything else against what was meant. A curve that is read back as one of
// the known, element by element, has its proof already.
func (j *job) proveOutline(drawing dxf.Drawing, data []byte, known ...written) (*outline, error) {
	o := &outline{name: j.spec.Part + ".dxf", drawing: drawing, data: data}
	file, err := read.Parse(o.data)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", o.name, err)
	}
	if err := sameDrawing(drawing, file); err != nil {
		return nil, fmt.Errorf("%s: %w", o.name, err)
	}
	type layer struct {
		layer, curve string
		exact        *synth.Curve
	}
	layers := []layer{{dxf.LayerContour, "contour", j.cam.Contour()}}
	if j.cam.Grooved() {
		layers = []layer{{dxf.LayerContourInner, "inner wall", j.cam.Contour()}, {dxf.LayerContourOuter, "outer wall", j.cam.OuterWall()}}
	}
	if j.drum() {
		layers = []layer{{dxf.LayerContourLower, "lower wall", j.cam.Contour()}, {dxf.LayerContourUpper, "upper wall", j.cam.OuterWall()}}
	}
	if j.cam.HasPitchCurve() {
		layers = append(layers, layer{dxf.LayerPitchCurve, "pitch curve", j.cam.Pitch()})
	}
	for _, c := range layers {
		w, err := j.proveLayer(o.name, file, c.layer, c.curve, c.exact, known)
		if err != nil {
			return nil, err
		}
		o.paths = append(o.paths, w)
	}
	return o, nil
}

func (j *job) tampered(name string, data []byte) []byte {
	if j.opt.tamper == nil {
		return data
	}
	return j.opt.tamper(name, data)
}

// onLayer is the one polyline of a layer, closed as the curve it stands for.
func onLayer(name string, file *read.File, layer string, closed bool) (chain.Path, error) {
	var path chain.Path
	for _, p := range file.Polylines {
		if p.Layer == layer {
			if path != nil || p.Closed != closed {
				return nil, fmt.Errorf("%s: layer %s must hold one polyline, closed: %v", name, layer, closed)
			}
			path = chain.FromBulges(p.Points, p.Bulges, p.Closed)
		}
	}
	if path == nil {
		return nil, fmt.Errorf("%s: layer %s holds no polyline", name, layer)
	}
	return path, nil
}

// proveLayer certifies the one polyline of a layer against its exact curve, closed as that is.
func (j *job) proveLayer(name string, file *read.File, layer, curve string, exact *synth.Curve, known []written) (written, error) {
	path, err := onLayer(name, file, layer, exact.Closed())
	if err != nil {
		return written{}, err
	}
	for _, w := range known {
		if w.layer == layer && slices.Equal(w.path, path) {
			return w, nil
		}
	}
	prove := certify.Closed
	if !exact.Closed() {
		prove = certify.Open
	}
	d, err := prove(exact, path)
	if err != nil {
		return written{}, fmt.Errorf("%s: layer %s: %w", name, layer, err)
	}
	return written{file: name, curve: curve, layer: layer, exact: exact, path: path, deviation: d,
		theory: fit.Theory(exact, j.chord, chain.Arc), floor: j.floor(exact), toPitch: -exact.Left()}, nil
}

// floor proves how few arcs and lines can stay within the chord tolerance of a curve.
func (j *job) floor(exact *synth.Curve) *int {
	n, err := floor.Arcs(exact, j.chord)
	if err != nil {
		return nil
	}
	return &n
}

func (j *job) contourLayer() string {
	if j.cam.Grooved() {
		return dxf.LayerContourInner
	}
	return dxf.LayerContour
}

// drawing composes the DXF.
func (j *job) drawing(contour, outer, pitch chain.Path) (dxf.Drawing, error) {
	s := j.spec
	if !j.cam.HasPitchCurve() {
		pitch = nil
	}
	d := dxf.Drawing{Inch: s.Units == spec.Inch, Version: dxf.Version(j.opt.DXF)}
	for _, c := range []struct {
		layer string
		path  chain.Path
	}{{j.contourLayer(), contour}, {dxf.LayerContourOuter, outer}, {dxf.LayerPitchCurve, pitch}, {dxf.LayerBore, j.keywayOutline()}} {
		if c.path == nil {
			continue
		}
		g, err := chain.Snap(c.path, dxfGrid(), chain.SnapOptions{})
		if err != nil {
			return d, err
		}
		if !g.Closed() {
			return d, errors.New("the outline on layer " + c.layer + " does not close on the grid")
		}
		d.Polylines = append(d.Polylines, dxf.Polyline{Layer: c.layer, Grid: g.Grid, Vertices: g.Bulges(), Closed: true})
	}
	d.Circles = append(d.Circles, dxf.Circle{Layer: dxf.LayerBaseCircle, Radius: s.Cam.BaseRadius})
	if b := s.Cam.Bore; b != nil && b.Keyway == nil {
		d.Circles = append(d.Circles, dxf.Circle{Layer: dxf.LayerBore, Radius: b.Diameter / 2})
	}
	if r := s.Cam.OutsideDiameter / 2; r > 0 && j.cam.Grooved() {
		d.Circles = append(d.Circles, dxf.Circle{Layer: dxf.LayerBore, Radius: r})
	}
	for i := range s.Cam.Holes {
		h := j.cam.HoleCircle(i)
		d.Circles = append(d.Circles, dxf.Circle{Layer: dxf.LayerBore, Center: h.Center, Radius: h.Radius})
	}
	j.marks(&d)
	return d, nil
}

// keywayOutline is the bore with its keyway as one closed path, nil without a keyway.
func (j *job) keywayOutline() chain.Path {
	b := j.spec.Cam.Bore
	if b == nil || b.Keyway == nil {
		return nil
	}
	on, bottom := j.cam.KeywayCorners()
	line := func(a, b plane.Point) chain.Element { return chain.Element{Kind: chain.Line, From: a, To: b} }
	return chain.Path{
		{Kind: chain.Arc, From: on[1], To: on[0], CCW: true},
		line(on[0], bottom[0]), line(bottom[0], bottom[1]), line(bottom[1], on[1]),
	}
}

// marks adds center lines, the zero mark, the check line and the notes.
func (j *job) marks(d *dxf.Drawing) {
	_, reach := j.extent()
	reach = math.Max(reach, j.toolReach())
	over := 1.08 * reach
	line := func(layer string, a, b plane.Point) {
		d.Lines = append(d.Lines, dxf.Line{Layer: layer, From: a, To: b})
	}
	line(dxf.LayerCenterlines, plane.Point{X: -over}, plane.Point{X: over})
	line(dxf.LayerCenterlines, plane.Point{Y: -over}, plane.Point{Y: over})
	zone, t := j.cam.Cycle().Zone(0)
	zero := j.cam.Contour().At(zone, t)
	inward := j.outward(zero).Neg()
	line(dxf.LayerZeroMark, zero.P.Add(inward.Scale(0.02*reach)), zero.P.Add(inward.Scale(0.10*reach)))
	height, length := 0.04*reach, 50.0
	if d.Inch {
		length = 2
	}
	check, text := dxf.CheckLine(plane.Point{X: -over, Y: -over - 3*height}, length, height, d.Inch)
	d.Lines, d.Texts = append(d.Lines, check), append(d.Texts, text)
	for i, note := range j.outlineNotes() {
		d.Texts = append(d.Texts, dxf.Text{Layer: dxf.LayerNotes, At: plane.Point{X: -over, Y: -over - float64(6+2*i)*height}, Height: height, Value: note})
	}
}

// extent returns the least and the largest radius of the pitch curve, near enough
// for a layout.
func (j *job) extent() (least, most float64) {
	least = math.Inf(1)
	for deg := range 360 {
		zone, t := j.cam.Cycle().Zone(float64(deg))
		r := j.cam.Pitch().At(zone, t).P.Radius()
		least, most = math.Min(least, r), math.Max(most, r)
	}
	return least, most
}

func (j *job) rotation() string {
	if j.spec.Camshaft.Clockwise {
		return "clockwise"
	}
	return "counterclockwise"
}

func (j *job) outlineNotes() []string {
	s := j.spec
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
		"Seen on the marked face (Z0). Camshaft turns " + j.rotation() + ".",
		fmt.Sprintf("Contour within %g %s of the exact cam for a %s.", j.chord, s.Units.Short(), j.followerText()),
		"Verify units, turning direction and datum before cutting.",
	}
}
