// The largest disc that touches a curve at one point and crosses it nowhere.
//
// The problem: can a roller, cutter or wire of a given radius follow a curve? The
// obvious test compares its radius with the least radius of curvature; that
// misses a neck narrower than the tool whose walls are all gently curved, and a
// roller that rests on one flank while it already overlaps another. The test that sees
// everything: at each point take the largest tangent disc on the side in
// question that holds no other point of the curve. Its radius over all points is the
// curve's reach. For points P, Q and the unit normal n at P, the circle tangent at
// P through Q has radius |Q-P|² / (2 n·(Q-P)); the least over Q is the disc, and the
// limit Q -> P is the radius of curvature (the medial-axis disc of H. Blum, 1967;
// any text on offset curves).
//
// Price: a double loop over some thousand points, then a local refinement of the
// worst pairs. This finds the reach to rounding but does not prove it; the
// written tool path is proved clear of the whole contour separately.

package synth

import (
	"math"

	"lobewright/synth/plane"
)

// Disc is the least of the largest tangent discs along a curve.
type Disc struct {
	Radius float64 // length; +Inf when every disc is unbounded
	At     float64 // cam angle of the touching point, degrees
	Other  float64 // cam angle of the point that bounds the disc; equal to At when curvature does
	Neck   bool    // bounded by another part of the curve, not by curvature at At
	Piece  int
	Point  plane.Point // the touching point
}

// discSamples is the number of points of the coarse double loop.
const discSamples = 1200

type discPoint struct {
	piece int
	t     float64
	p     plane.Point
	n     plane.Vector // unit normal towards the disc's side
}

// shape is any closed curve of analytic pieces.
type shape interface {
	Pieces() []plane.Piece
	At(piece int, t float64) plane.Frame
}

// LeastDisc returns the least disc on the outside of the cam, or on the inside.
func (c *Curve) LeastDisc(outside bool) Disc { return leastDisc(c, c.side(outside)) }

// side returns +1 when the outside (or the inside) is on the left of travel, else -1.
func (c *Curve) side(outside bool) float64 {
	if outside != c.cam.OutsideIsLeft() {
		return -1
	}
	return 1
}

// leastDisc returns the least disc on the left of the curve (side +1) or its right (-1).
func leastDisc(c shape, side float64) Disc {
	local := largest(c.Pieces(), every, func(i int, t float64) float64 { return side * c.At(i, t).K })
	d := Disc{Radius: math.Inf(1), At: local.t, Other: local.t, Piece: local.piece}
	if local.value > 0 {
		d.Radius = 1 / local.value
	}
	pts := discPoints(c, side)
	worst, from, to := d.Radius*(1-neckMargin), -1, -1
	for i, a := range pts {
		if r, j := leastThrough(a, pts, i); r < worst {
			worst, from, to = r, i, j
		}
	}
	if from >= 0 {
		d = refineNeck(c, pts[from], pts[to], side)
	}
	d.Point = c.At(d.Piece, d.At).P
	return d
}

// neckMargin is the share by which another part of the curve must undercut the
// radius of curvature to count as a neck: the coarse loop's own error near Q = P.
const neckMargin = 1e-4

func discPoints(c shape, side float64) []discPoint {
	var pts []discPoint
	for i, p := range c.Pieces() {
		n := max(8, int(discSamples*(p.To-p.From)/360))
		for k := range n {
			t := p.From + (p.To-p.From)*float64(k)/float64(n)
			f := c.At(i, t)
			pts = append(pts, discPoint{i, t, f.P, f.T.Left().Scale(side)})
		}
	}
	return pts
}

// leastThrough returns the least disc tangent at a that reaches another sample.
func leastThrough(a discPoint, pts []discPoint, self int) (r float64, at int) {
	inv := 0.0 // largest 1/(2r)
	at = self
	for j := range pts {
		dx, dy := pts[j].p.X-a.p.X, pts[j].p.Y-a.p.Y
		if up := a.n.X*dx + a.n.Y*dy; up > inv*(dx*dx+dy*dy) && j != self {
			inv, at = up/(dx*dx+dy*dy), j
		}
	}
	return 1 / (2 * inv), at
}

// refineNeck improves a pair by turns: the touching point for the least disc, then
// the other point.
func refineNeck(c shape, a, b discPoint, side float64) Disc {
	radius := func(ta, tb float64) float64 {
		f, g := c.At(a.piece, ta), c.At(b.piece, tb)
		v := g.P.Sub(f.P)
		if up := 2 * side * f.T.Left().Dot(v); up > 0 {
			return v.Dot(v) / up
		}
		return math.Inf(1)
	}
	// Disc and touching point move together along a neck, so one is improved inside
	// the other, and the window follows them.
	h := 360.0 / discSamples
	pa, pb := c.Pieces()[a.piece], c.Pieces()[b.piece]
	ta, tb, inverse := a.t, b.t, 0.0
	for range 20 {
		ta0, tb0 := ta, tb
		other := func(ta float64) (tb, inverse float64) {
			return golden(max(pb.From, tb0-h), min(pb.To, tb0+h), func(t float64) float64 { return 1 / radius(ta, t) })
		}
		ta, inverse = golden(max(pa.From, ta0-h), min(pa.To, ta0+h), func(t float64) float64 { _, v := other(t); return v })
		tb, _ = other(ta)
		if math.Abs(ta-ta0) < h/2 && math.Abs(tb-tb0) < h/2 {
			break
		}
	}
	return Disc{Radius: 1 / inverse, At: ta, Other: tb, Neck: math.Abs(ta-tb) > h, Piece: a.piece}
}

// Uncut is material a round tool leaves on a contour because it cannot reach.
type Uncut struct {
	Depth float64 // along the normal, length
	At    float64 // cam angle, degrees
	Point plane.Point
}

// Leaves returns the deepest material that a tool of the given radius leaves when
// it follows the curve from outside and goes wherever it fits: over the points it
// cannot touch, the depth along the normal to what the tool sweeps. A pocket
// behind a neck is left whole, even where the tool would fit inside. Accurate
// to the sample spacing (about 0.3° of cam angle).
func (c *Curve) Leaves(toolRadius float64) Uncut { return leaves(c, c.side(true), toolRadius) }

func leaves(c shape, side, toolRadius float64) Uncut {
	pts := discPoints(c, side)
	touched := follow(c, pts, side, toolRadius)
	var centers []plane.Point
	for i, a := range pts {
		if touched[i] {
			centers = append(centers, a.p.Add(a.n.Scale(toolRadius)))
		}
	}
	var u Uncut
	for i, m := range pts {
		if touched[i] {
			continue
		}
		if d := math.Min(depthTo(m, centers, toolRadius), opposite(m, pts)); d > u.Depth && !math.IsInf(d, 1) {
			u = Uncut{d, m.t, m.p}
		}
	}
	return u
}

// depthTo returns how far along its normal a point lies under what the tool
// sweeps from the centers; +Inf when the normal never meets it.
func depthTo(m discPoint, centers []plane.Point, toolRadius float64) float64 {
	depth := math.Inf(1)
	for _, q := range centers {
		v := q.Sub(m.p)
		along, across := v.Dot(m.n), v.Cross(m.n)
		if half := toolRadius*toolRadius - across*across; half >= 0 {
			if d := along - math.Sqrt(half); d >= 0 {
				depth = math.Min(depth, d)
			}
		}
	}
	return depth
}

// opposite returns the distance along the normal of a point to the next place where
// the curve, taken as the polygon of its samples, crosses it.
func opposite(m discPoint, pts []discPoint) float64 {
	const off = 1e-6 // of the distance across: the point's own neighbors
	near := math.Inf(1)
	for i := range pts {
		a, b := pts[i].p.Sub(m.p), pts[(i+1)%len(pts)].p.Sub(m.p)
		p, q := a.Cross(m.n), b.Cross(m.n)
		if (p < 0) == (q < 0) {
			continue
		}
		if s := (a.Dot(m.n)*q - b.Dot(m.n)*p) / (q - p); s > off*(a.Norm()+b.Norm()) && s < near {
			near = s
		}
	}
	return near
}

// follow walks a tool along the samples from the one farthest out, which it can
// always touch. Where it no longer fits it rests on a second point, and goes on from there.
func follow(c shape, pts []discPoint, side, toolRadius float64) []bool {
	start := 0
	for i, a := range pts {
		if a.p.Radius() > pts[start].p.Radius() {
			start = i
		}
	}
	touched := make([]bool, len(pts))
	for k := 0; k < len(pts); k++ {
		i := (start + k) % len(pts)
		r, j := leastThrough(pts[i], pts, i)
		if bend := side * c.At(pts[i].piece, pts[i].t).K; bend > 0 {
			r = math.Min(r, 1/bend)
		}
		if r >= toolRadius {
			touched[i] = true
		} else if ahead := (j - start + len(pts)) % len(pts); ahead > k {
			k = ahead
		}
	}
	return touched
}
