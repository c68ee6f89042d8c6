package synth

import (
	"fmt"
	"math"

	"lobewright/synth/gate"
)

// grooveGates are the gates that only a groove has: the outer wall must not be undercut,
// and material must be left under the groove.
func (c *Cam) grooveGates() []gate.Gate {
	d, half := c.Pitch().LeastDisc(true), c.inset()
	g := gate.Gate{ID: "undercut-outer", Value: d.Radius, Limit: half, Unit: c.unit(), AtLeast: true,
		CamAngle: camAngle(d.At), Polar: d.Point.PolarAngle(), Pass: d.Radius > half,
		Text: "largest disc that fits outside the pitch curve everywhere, against half the groove's width; where it is smaller the outer wall would be cut away: use a smaller roller, lengthen the event or enlarge base_radius"}
	if math.IsInf(d.Radius, 1) {
		g.CamAngle, g.Polar = math.NaN(), math.NaN()
	}
	floor := c.spec.Cam.Thickness - c.spec.Cam.GrooveDepth
	limit := 0.0
	if l := c.spec.Limits.Wall; l != nil {
		limit = *l
	}
	return []gate.Gate{g, {ID: "groove-floor", Value: floor, Limit: limit, Unit: c.unit(), AtLeast: true, CamAngle: math.NaN(), Polar: math.NaN(),
		Pass: floor > 0 && floor >= limit, Text: "material under the groove: take a thicker body or a shallower groove"}}
}

// LargestTool is the largest cutter, wheel or wire that touches the contour everywhere; in a groove, that fits it everywhere.
type LargestTool struct {
	Diameter float64 // length; +Inf when any does
	CamAngle float64 // degrees, where it would not reach; NaN when any does, and in a groove of its own width
	Larger   float64 // diameter of a tool a quarter larger, length
	Leaves   float64 // what that would leave there at most, length
	LeavesAt float64 // degrees
}

// LargestTool returns the largest tool for the cam, and of a plate what a larger one would leave.
func (c *Cam) LargestTool() LargestTool {
	none := LargestTool{Diameter: math.Inf(1), CamAngle: math.NaN(), LeavesAt: math.NaN()}
	if c.Grooved() {
		half := c.inset()
		hollow := c.Pitch().LeastDisc(true).Radius + half   // of the inner wall, seen from the groove
		rounded := c.Pitch().LeastDisc(false).Radius + half // of the outer wall
		none.Diameter = math.Min(c.GrooveWidth(), 2*math.Min(hollow, rounded))
		return none
	}
	d := c.Contour().LeastDisc(true)
	if math.IsInf(d.Radius, 1) {
		return none
	}
	const quarterMore = 1.25
	u := c.Contour().Leaves(quarterMore * d.Radius)
	return LargestTool{Diameter: 2 * d.Radius, CamAngle: camAngle(d.At), Larger: 2 * quarterMore * d.Radius, Leaves: u.Depth, LeavesAt: camAngle(u.At)}
}

// slotGates: a groove is milled on its pitch curve, by a tool of its width or a narrower
// one that then goes along both walls. A narrower tool must fit the inner wall's hollows and
// the outer wall's.
func (c *Cam) slotGates() []gate.Gate {
	width, most := c.GrooveWidth(), c.LargestTool().Diameter
	var g []gate.Gate
	for i, op := range c.spec.Operations {
		x := gate.Gate{ID: "reach", Of: fmt.Sprintf("%d-%s", i+1, op.Process), Value: op.ToolDiameter, Limit: most, Unit: c.unit(), CamAngle: math.NaN(), Polar: math.NaN(),
			Pass: op.Process == "mill" && op.ToolDiameter <= most*(1+widthSlack),
			Text: fmt.Sprintf("operation %d: diameter of the tool against the width of the groove, %.6g %s (roller and clearance)", i+1, width, c.unit())}
		if op.Process != "mill" {
			x.Text = fmt.Sprintf("operation %d: a groove cannot be cut by %s: mill it", i+1, op.Process)
		}
		g = append(g, x)
	}
	return g
}

// widthSlack is the share of the groove's width by which a tool that fills it may differ:
// what is lost in writing it down.
const widthSlack = 1e-6
