package synth

import (
	"fmt"
	"math"

	"lobewright/synth/gate"
	"lobewright/synth/plane"
)

// feature is a part of the body: a round hole, or a corner point of the keyway
// (radius 0).
type feature struct {
	name   string
	circle plane.Circle
}

// KeywayCorners returns the corners of the keyway: two on the bore circle, then
// the two at its bottom, counterclockwise seen from the axis. Depth is measured
// from the bore circle on the center line.
func (c *Cam) KeywayCorners() (onBore, bottom [2]plane.Point) {
	b := c.spec.Cam.Bore
	k := b.Keyway
	r, w := b.Diameter/2, k.Width/2
	u := plane.Unit(plane.Degrees(k.At))
	v := u.Left()
	at := func(along, across float64) plane.Point {
		return plane.Point{}.Add(u.Scale(along)).Add(v.Scale(across))
	}
	chord := math.Sqrt((r - w) * (r + w))
	return [2]plane.Point{at(chord, -w), at(chord, w)}, [2]plane.Point{at(r+k.Depth, -w), at(r+k.Depth, w)}
}

// HoleCircle returns a hole of the body as a circle.
func (c *Cam) HoleCircle(i int) plane.Circle {
	h := c.spec.Cam.Holes[i]
	return plane.Circle{Center: plane.Polar(h.Radius, plane.Degrees(h.At)), Radius: h.Diameter / 2}
}

func (c *Cam) features() []feature {
	var f []feature
	if b := c.spec.Cam.Bore; b != nil {
		f = append(f, feature{"bore", plane.Circle{Radius: b.Diameter / 2}})
	}
	for i := range c.spec.Cam.Holes {
		f = append(f, feature{fmt.Sprintf("hole %d", i+1), c.HoleCircle(i)})
	}
	return f
}

// wall is the material between two features.
type wall struct {
	thick   float64
	between string
	t       float64 // cam angle when one of them is the contour, else NaN
	polar   float64
}

// wallGate: the least material between any two of contour, bore, keyway and
// holes. Without limits.wall they must at least not touch.
func (c *Cam) wallGate() gate.Gate {
	least := wall{thick: math.Inf(1), between: "no two features", t: math.NaN(), polar: math.NaN()}
	take := func(w wall) {
		if w.thick < least.thick {
			least = w
		}
	}
	con, fs := c.Contour(), c.features()
	if c.Grooved() {
		take(c.rim())
	}
	for _, f := range fs {
		take(c.wallToContour(con, f))
	}
	if b := c.spec.Cam.Bore; b != nil && b.Keyway != nil {
		_, bottom := c.KeywayCorners()
		for _, p := range bottom {
			take(con.wallTo(feature{"keyway", plane.Circle{Center: p}}))
		}
	}
	least = c.bodyWalls(least)
	limit := 0.0
	if c.spec.Limits.Wall != nil {
		limit = *c.spec.Limits.Wall
	}
	return gate.Gate{
		ID: "wall", Value: least.thick, Limit: limit, Unit: c.unit(), AtLeast: true,
		CamAngle: least.t, Polar: least.polar, Pass: least.thick > 0 && least.thick >= limit,
		Text: "least material, between " + least.between,
	}
}

// bodyWalls returns the least material between any two of bore, keyway and holes, or what is
// given where that is less.
func (c *Cam) bodyWalls(least wall) wall {
	take := func(w wall) {
		if w.thick < least.thick {
			least = w
		}
	}
	for i, fs := 0, c.features(); i < len(fs); i++ {
		f := fs[i]
		for _, g := range fs[:i] {
			d := f.circle.Center.Dist(g.circle.Center) - f.circle.Radius - g.circle.Radius
			take(wall{d, g.name + " and " + f.name, math.NaN(), f.circle.Center.PolarAngle()})
		}
	}
	if b := c.spec.Cam.Bore; b != nil && b.Keyway != nil {
		for i := range c.spec.Cam.Holes {
			h := c.HoleCircle(i)
			take(wall{c.keywayDistance(h.Center) - h.Radius, fmt.Sprintf("keyway and hole %d", i+1), math.NaN(), h.Center.PolarAngle()})
		}
	}
	return least
}

// wallToContour returns the material between a feature and the contour; in a grooved body
// a feature may lie outside the groove as well.
func (c *Cam) wallToContour(con *Curve, f feature) wall {
	w := con.wallTo(f)
	if !c.Grooved() || w.thick > 0 {
		return w
	}
	outer := c.OuterWall().wallTo(f)
	outer.thick = -outer.thick - 2*f.circle.Radius // outside it is what lies inside a contour
	if outer.thick > w.thick {
		return outer
	}
	return w
}

// rim is the material between the groove's outer wall and the outside of the body.
func (c *Cam) rim() wall {
	out := c.OuterWall()
	far := out.largest(every, func(i int, t float64) float64 { return out.At(i, t).P.Radius() })
	return wall{c.spec.Cam.OutsideDiameter/2 - far.value, "the groove and the outside", camAngle(far.t), c.polarAt(far.piece, far.t)}
}

// wallTo returns the material between the contour and a feature inside it,
// negative when the feature's center lies outside.
func (c *Curve) wallTo(f feature) wall {
	near := c.largest(every, func(i int, t float64) float64 { return -c.At(i, t).P.Dist(f.circle.Center) })
	fr := c.At(near.piece, near.t)
	d := -near.value
	out := fr.T.Left().Scale(c.cam.outward())
	if f.circle.Center.Sub(fr.P).Dot(out) > 0 {
		d = -d
	}
	return wall{d - f.circle.Radius, "contour and " + f.name, camAngle(near.t), fr.P.PolarAngle()}
}

// keywayDistance returns the distance of a point from the keyway's rectangle.
func (c *Cam) keywayDistance(p plane.Point) float64 {
	b := c.spec.Cam.Bore
	u := plane.Unit(plane.Degrees(b.Keyway.At))
	v := p.Sub(plane.Point{})
	along, across := v.Dot(u), math.Abs(v.Dot(u.Left()))
	dx := math.Max(0, math.Max(along-(b.Diameter/2+b.Keyway.Depth), -along))
	return math.Hypot(dx, math.Max(0, across-b.Keyway.Width/2))
}
