package pack

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"lobewright/export/dxf/read"
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// checkToolPaths: every program has its tool path in the DXF. Where the program holds the center's path, its joints
// are those of the program to the last digit; where the control compensates, it runs a tool radius outside
// the contour.
func checkToolPaths(t *testing.T, j *job) {
	file, err := read.Parse(j.outline.data)
	if err != nil {
		t.Fatal(err)
	}
	n := 0
	for _, p := range j.programs {
		if j.drum() {
			break // the pitch curve is the tool's path
		}
		layer := fmt.Sprintf("TOOL_PATH_%d", p.index+1)
		i := slices.IndexFunc(file.Polylines, func(q read.Polyline) bool { return q.Layer == layer })
		if i < 0 {
			t.Errorf("no layer %s", layer)
			continue
		}
		n++
		op := j.spec.Operations[p.index]
		if op.Compensation != "control" {
			for _, e := range p.finish.path {
				on := func(q plane.Point) bool { return q == e.From }
				if p.finish.spirals > 0 { // its joints are on a grid of angles and radii
					on = func(q plane.Point) bool { return q.Dist(e.From) < 1e-6 }
				}
				if !slices.ContainsFunc(file.Polylines[i].Points, on) {
					t.Errorf("joint %v of the program is not on %s", e.From, layer)
				}
			}
			continue
		}
		for _, e := range chain.FromBulges(file.Polylines[i].Points, file.Polylines[i].Bulges, true) {
			if d := farthest(j.cam.Contour(), chain.Path{e}); math.Abs(d-op.ToolDiameter/2) > 2*j.chord {
				t.Errorf("%s is %.4f from the contour, the tool's radius is %g", layer, d, op.ToolDiameter/2)
			}
		}
	}
	for _, q := range file.Polylines {
		if strings.HasPrefix(q.Layer, "TOOL_PATH_") {
			n--
		}
	}
	if n != 0 {
		t.Error("there are layers of tool paths without a program")
	}
}
