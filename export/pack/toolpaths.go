package pack

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"lobewright/export/dxf"
	"lobewright/synth/gate"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
)

// drawToolPaths adds to the DXF the path of the tool's center in the last pass of every
// program, as it was read back from the program, and proves the file anew. A path that cannot be drawn
// within the chord tolerance is left out, with a finding; the outline is whole without it. In a
// barrel's development the pitch curve is the path of the tool, and stands there.
func (j *job) drawToolPaths() {
	if j.drum() {
		return
	}
	drawing := j.outline.drawing
	drawing.Polylines = slices.Clone(drawing.Polylines)
	drawing.Texts = slices.Clone(drawing.Texts)
	for _, p := range j.programs {
		if p.finish == nil {
			continue
		}
		if err := j.addToolPath(&drawing, p); err != nil {
			j.findings = append(j.findings, gate.Finding{ID: "tool-path-not-drawn", CamAngle: math.NaN(),
				Text: fmt.Sprintf("%s: the tool path of %s is left out: %v", j.outline.name, p.name, err)})
		}
	}
	if len(drawing.Polylines) == len(j.outline.drawing.Polylines) {
		return
	}
	data, err := dxf.Write(drawing)
	if err == nil {
		var o *outline
		if o, err = j.proveOutline(drawing, j.tampered(j.outline.name, data), j.outline.paths...); err == nil {
			j.outline = o
			return
		}
	}
	j.gates = append(j.gates, gate.Gate{ID: "outline", Limit: 1, AtLeast: true, CamAngle: math.NaN(), Polar: math.NaN(), Text: err.Error()})
}

// addToolPath adds one tool path on its layer, with a note that says what it is. With control
// compensation the program holds the contour; then the path is the one a tool of exactly the
// radius in its register takes.
func (j *job) addToolPath(d *dxf.Drawing, p program) error {
	op := j.spec.Operations[p.index]
	exact, path, what := p.finish.exact, p.finish.path, "last pass"
	planned := op.Process == "mill" && op.Compensation == "control" && !j.cam.Grooved()
	if planned {
		exact, what = j.toolPath(p.result.FinishOffset+op.ToolDiameter/2), "last pass, register at its nominal value"
		var err error
		if path, err = j.operation(p.index, j.fitTo(plannedShare, dxfGrid().Decimals)).Path(p.result.FinishOffset + op.ToolDiameter/2); err != nil {
			return err
		}
	}
	// Joints read from a program are on this finer grid already and stay where they are.
	g, err := chain.Snap(path, dxfGrid(), chain.SnapOptions{Naive: !planned})
	if err != nil {
		return err
	}
	if !g.Closed() {
		return fmt.Errorf("it does not close on the grid")
	}
	layer := fmt.Sprintf("%s%d", dxf.LayerToolPath, p.index+1)
	line := dxf.Polyline{Layer: layer, Grid: g.Grid, Vertices: g.Bulges(), Closed: true}
	found, err := certify.Closed(exact, line.Path())
	if err != nil {
		return err
	}
	if !(found.Bound <= j.chord) {
		return fmt.Errorf("it deviates by %.3g, more than %g", found.Bound, j.chord)
	}
	note := d.Texts[len(d.Texts)-1]
	note.At.Y -= 2 * note.Height
	note.Value = fmt.Sprintf("%s: center of the tool of %s, %s.", layer, p.name, what)
	d.Polylines, d.Texts = append(d.Polylines, line), append(d.Texts, note)
	return nil
}

// toolPaths are the tool paths of the DXF in the order of the operations.
func (j *job) toolPaths() []chain.Path {
	var all []chain.Path
	if j.outline != nil {
		for _, p := range j.outline.drawing.Polylines {
			if strings.HasPrefix(p.Layer, dxf.LayerToolPath) {
				all = append(all, p.Path())
			}
		}
	}
	return all
}

// plannedShare is the share of the chord tolerance that a planned tool path is fitted to: room
// for its grid.
const plannedShare = 0.9

// toolReach is how far the tools' centers get from the camshaft axis, near enough for a layout.
func (j *job) toolReach() float64 {
	_, pitch := j.extent()
	most := 0.0
	for _, op := range j.spec.Operations {
		most = math.Max(most, pitch-j.cam.Follower().Radius()+op.ToolDiameter/2)
	}
	return most
}
