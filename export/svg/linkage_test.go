package svg

import (
	"math"
	"strings"
	"testing"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// armed is a drawing with a pivot, an arm and a face, and one tool path.
func armed() DrawingData {
	d := mmCam(0, true).drawing()
	d.Swings = true
	d.Linkage = &Linkage{Pivots: true, Pivot: plane.Point{X: 90}, PivotText: "PIVOT, 90 FROM THE AXIS",
		Arm: [2]plane.Point{{X: 90}, {X: 30, Y: 47}}, ArmText: "ARM 76, LEADING",
		Face: [2]plane.Point{{X: 40, Y: 30}, {X: 20, Y: 60}}, FaceText: "FACE AT LIFT 0"}
	a, b := plane.Point{X: 80}, plane.Point{X: -80}
	d.ToolPaths = []chain.Path{{{Kind: chain.Arc, From: a, To: b, CCW: true}, {Kind: chain.Arc, From: b, To: a, CCW: true}}}
	return d
}

// Pivot, arm, face and tool path are drawn and named on every sheet, no text on another, and nothing
// leaves the field.
func TestLinkageOnEverySheet(t *testing.T) {
	for sheet, size := range map[string]box{"A4": {0, 0, 297, 210}, "A3": {0, 0, 420, 297}, "Letter": {0, 0, 279.4, 215.9}} {
		for _, units := range []string{"mm", "inch"} {
			d := armed()
			d.Sheet, d.Units = sheet, units
			out, err := Drawing(d)
			if err != nil {
				t.Fatal(err)
			}
			texts := checkTexts(t, out)
			for _, want := range []string{"PIVOT, 90 FROM THE AXIS", "ARM 76, LEADING", "FACE AT LIFT 0", "TOOL PATH 1", "SCALE (" + sheet + ")"} {
				if !has(texts, want) {
					t.Errorf("%s, %s: the drawing lacks %q", sheet, units, want)
				}
			}
			if page, _ := textBoxes(t, out); page != size {
				t.Errorf("%s: the page is %v", sheet, page)
			}
		}
	}
}

func TestLinkageRefused(t *testing.T) {
	for name, spoil := range map[string]func(*DrawingData){
		"arm":       func(d *DrawingData) { d.Linkage.Arm[1].X = math.NaN() },
		"tool path": func(d *DrawingData) { d.ToolPaths[0][0].Center.Y = math.Inf(1) },
		"sheet":     func(d *DrawingData) { d.Sheet = "A7" },
	} {
		d := armed()
		spoil(&d)
		if _, err := Drawing(d); err == nil || !strings.Contains(err.Error(), name) {
			t.Errorf("%s: error %v", name, err)
		}
	}
}
