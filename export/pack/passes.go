package pack

import (
	"math"

	"lobewright/gcode"
	"lobewright/synth"
	"lobewright/synth/spec"
)

// settings copies what an operation says of a program besides its path.
func settings(op *gcode.Operation, o spec.Operation) {
	op.Program, op.Overlap, op.Breakthrough, op.ContourFeed = o.Program, o.Overlap, o.Breakthrough, o.FeedAt == "contour"
	switch o.Coolant {
	case "flood":
		op.Coolant = 8
	case "mist":
		op.Coolant = 7
	}
}

// stocks are the stocks of all passes of an operation: those that take the blank down in steps no
// wider than the spec says, those of the spec, and the last again for each spring pass.
func (j *job) stocks(i int) []float64 {
	o := j.spec.Operations[i]
	if len(o.Stock) == 0 {
		return o.Stock
	}
	all := append(j.bulk(o), o.Stock...)
	for range o.Spring {
		all = append(all, o.Stock[len(o.Stock)-1])
	}
	return all
}

// bulk are the stocks, widest first, of the passes before the first of the spec. The outermost
// one cuts no wider than a step where the contour is farthest inside the blank; passes that a
// hollow of the contour would not let the tool run are left out, and then the next is wider.
func (j *job) bulk(o spec.Operation) []float64 {
	if o.StepOver == 0 || j.spec.Blank == nil || j.cam.Grooved() {
		return nil
	}
	step, first := o.StepOver*o.ToolDiameter, o.Stock[0]
	deepest := j.spec.Blank.Diameter/2 - j.leastRadius()
	reach := j.cam.Contour().LeastDisc(true).Radius - o.ToolDiameter/2
	var all []float64
	for n := math.Ceil((deepest-first)/step-1e-9) - 1; n >= 1; n-- {
		if s := first + n*step; s < reachShare*reach {
			all = append(all, s)
		}
	}
	return all
}

// reachShare is how near to the largest offset that still reaches a rough pass goes.
const reachShare = 0.95

// leastRadius is the least distance of the contour from the camshaft axis.
func (j *job) leastRadius() float64 {
	return leastRadius(j.cam.Contour())
}

func leastRadius(c *synth.Curve) float64 {
	least := math.Inf(1)
	for i, p := range c.Pieces() {
		const steps = 90
		for k := range steps + 1 {
			least = math.Min(least, c.At(i, p.From+(p.To-p.From)*float64(k)/steps).P.Radius())
		}
	}
	return least
}
