package dxf

import (
	"fmt"
	"slices"
	"strings"

	"github.com/yofu/dxf/color"
)

// Layers of the outline. A program that cuts takes LayerContour, or the two walls of a groove, alone.
const (
	LayerContour      = "CONTOUR"       // the finished profile of a plate cam
	LayerContourInner = "CONTOUR_INNER" // inner wall of a groove
	LayerContourOuter = "CONTOUR_OUTER" // outer wall of a groove
	LayerContourLower = "CONTOUR_LOWER" // developed wall of a barrel on the side of the datum end
	LayerContourUpper = "CONTOUR_UPPER" // developed wall of a barrel away from the datum end
	LayerBarrel       = "BARREL"        // developed outside of a barrel
	LayerPitchCurve   = "PITCH_CURVE"   // path of the roller's center in the cam frame
	LayerBaseCircle   = "BASE_CIRCLE"   // the circle of lift 0
	LayerBore         = "BORE"          // bore with its keyway, and the holes
	LayerCenterlines  = "CENTERLINES"   // through the axis and the holes
	LayerZeroMark     = "ZERO_MARK"     // where the cam angle 0 is stamped
	LayerCheckLine    = "CHECK_LINE"    // a line of known length with its text
	LayerNotes        = "NOTES"         // texts
	LayerToolPath     = "TOOL_PATH_"    // and the number of an operation: path of its tool's center, last pass
)

// LongestLayer is the longest layer name, which is the limit of R12.
const LongestLayer = 31

// Line types of the files.
const (
	solid  = "CONTINUOUS"
	center = "CENTER"
	dashes = "DASHED"
)

// look is how a layer is drawn.
type look struct {
	color    color.ColorNumber
	lineType string
	weight   int // hundredths of a millimeter
}

// lookOf gives the look of a layer: cut edges white, wide and solid; what is
// only thought, thin and broken. A layer not named above is thin, solid and white.
func lookOf(layer string) look {
	switch layer {
	case LayerContour, LayerContourInner, LayerContourOuter, LayerContourLower, LayerContourUpper:
		return look{color.White, solid, 50}
	case LayerBore, LayerBarrel:
		return look{color.Green, solid, 50}
	case LayerPitchCurve:
		return look{color.Cyan, center, 18}
	case LayerBaseCircle:
		return look{color.Blue, dashes, 18}
	case LayerCenterlines:
		return look{color.Red, center, 18}
	case LayerZeroMark:
		return look{color.Magenta, solid, 25}
	case LayerCheckLine:
		return look{color.Yellow, solid, 18}
	}
	if strings.HasPrefix(layer, LayerToolPath) {
		return look{color.Yellow, dashes, 18}
	}
	return look{color.White, solid, 18}
}

// known lists the layers in the order of the layer table.
func known() []string {
	return []string{
		LayerContour, LayerContourInner, LayerContourOuter, LayerContourLower, LayerContourUpper, LayerPitchCurve, LayerBaseCircle,
		LayerBarrel, LayerBore, LayerCenterlines, LayerZeroMark, LayerCheckLine, LayerNotes,
	}
}

// layersOf lists the layers that the drawing uses: the known ones in their
// order, then the others by name.
func layersOf(d Drawing) []string {
	used := map[string]bool{}
	for _, p := range d.Polylines {
		used[p.Layer] = true
	}
	for _, c := range d.Circles {
		used[c.Layer] = true
	}
	for _, a := range d.Arcs {
		used[a.Layer] = true
	}
	for _, l := range d.Lines {
		used[l.Layer] = true
	}
	for _, t := range d.Texts {
		used[t.Layer] = true
	}
	var names []string
	for _, name := range known() {
		if used[name] {
			names = append(names, name)
			delete(used, name)
		}
	}
	var others []string
	for name := range used {
		others = append(others, name)
	}
	slices.Sort(others)
	return append(names, others...)
}

// checkLayer refuses a name that is not plain in every version: capitals,
// digits, underscore, dollar and hyphen, so that no two differ by case alone.
func checkLayer(name string) error {
	if name == "" {
		return fmt.Errorf("it has no layer; name one, such as %s", LayerContour)
	}
	if name == layerZero {
		return fmt.Errorf("layer 0 is the format's own; name another, such as %s", LayerContour)
	}
	if len(name) > LongestLayer {
		return fmt.Errorf("layer name %q has %d bytes, at most %d are allowed", name, len(name), LongestLayer)
	}
	for _, c := range name {
		if (c < 'A' || c > 'Z') && (c < '0' || c > '9') && c != '_' && c != '$' && c != '-' {
			return fmt.Errorf("layer name %q holds %q; allowed are A-Z, 0-9, '_', '$' and '-'", name, c)
		}
	}
	return nil
}

// layerZero is the layer every file has.
const layerZero = "0"

// pattern is a line type: its name, its description, and the lengths of
// dashes (positive) and gaps (negative) in the units of the drawing.
type pattern struct {
	name, description string
	lengths           []float64
}

// patterns lists the line types. The lengths are in quarters of an inch or 6 mm,
// so that a dash looks the same on both drawings.
func patterns(inch bool) []pattern {
	u := 6.0
	if inch {
		u = 0.25
	}
	return []pattern{
		{solid, "Solid line", nil},
		{center, "Center ____ _ ____ _ ____", []float64{2 * u, -u / 2, u / 2, -u / 2}},
		{dashes, "Dashed __ __ __ __ __", []float64{u, -u / 2}},
	}
}
