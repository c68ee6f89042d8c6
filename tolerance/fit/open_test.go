package fit

import (
	"math"
	"testing"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// unrolled is an open curve: a lift over the developed outside of a cylinder.
type unrolled struct{ testCurve }

func (unrolled) Closed() bool { return false }

// barrelTrack rises by h over 120 degrees, dwells 40, falls over 110, and dwells at either
// end, on a cylinder of radius r; way is +1 or -1 along X.
func barrelTrack(r, h, way float64) unrolled {
	ends := []float64{-15, 50, 170, 210, 320, 345}
	var c unrolled
	for i := 1; i < len(ends); i++ {
		c.pieces = append(c.pieces, plane.Piece{From: ends[i-1], To: ends[i], Straight: i%2 == 1})
	}
	c.dir = 1
	c.z = func(i int, rad float64) [4]complex128 {
		p := c.pieces[i]
		y := [4]float64{}
		if i == 2 {
			y[0] = h
		}
		if i == 1 || i == 3 {
			span := (p.To - p.From) * math.Pi / 180
			f := cycloidal((rad - p.From*math.Pi/180) / span)
			sign := h
			if i == 3 {
				y[0], sign = h, -h
			}
			y[0] += sign * f[0]
			for k := 1; k < 4; k++ {
				y[k] = sign * f[k] / math.Pow(span, float64(k))
			}
		}
		return [4]complex128{complex(way*r*rad, y[0]), complex(way*r, y[1]), complex(0, y[2]), complex(0, y[3])}
	}
	return c
}

// An open curve's path begins and ends exactly where the curve does, every dwell is one straight
// line along it, the tangent nowhere breaks, and the count keeps the bound.
func TestOpenArcs(t *testing.T) {
	for _, way := range []float64{1, -1} {
		for _, eps := range []float64{0.01, 0.001, 0.0001} {
			c := barrelTrack(50, 30, way)
			p, err := Arcs(c, eps, Options{})
			if err != nil {
				t.Fatal(err)
			}
			first, last := c.At(0, -15).P, c.At(4, 345).P
			if p[0].From != first || p[len(p)-1].To != last {
				t.Errorf("path from %v to %v, curve from %v to %v", p[0].From, p[len(p)-1].To, first, last)
			}
			if p[0].Source.From != -15 || p[len(p)-1].Source.To != 345 {
				t.Errorf("path stands for %v to %v", p[0].Source.From, p[len(p)-1].Source.To)
			}
			lines := 0
			for i, e := range p {
				if e.Kind == chain.Line && e.From.Y == e.To.Y { // others may pass an inflection
					lines++
				}
				if i == 0 {
					continue
				}
				if p[i-1].To != e.From {
					t.Errorf("element %d starts %g from the one before", i, p[i-1].To.Dist(e.From))
				}
				if kink := p[i-1].EndTangent().Cross(e.StartTangent()); math.Abs(kink) > 1e-9 {
					t.Errorf("kink of %g before element %d", kink, i)
				}
			}
			if lines != 3 {
				t.Errorf("%d level lines, want one a dwell", lines)
			}
			if d := curveToPath(c.testCurve, p, 24); d > eps {
				t.Errorf("deviation %g of %g", d, eps)
			}
			// Two stretches between dwells, each with one change of sign of k' inside a quarter of
			// its angle twice: a cycloidal lift has k' of three signs.
			n := Theory(c, eps, chain.Arc)
			if free, limit := len(p)-lines, 1.03*n+2+6.0/2; float64(free) > limit {
				t.Errorf("%d arcs, limit %.2f", free, limit)
			}
			q, err := Lines(c, eps, Options{})
			if err != nil {
				t.Fatal(err)
			}
			if q[0].From != first || q[len(q)-1].To != last {
				t.Errorf("lines from %v to %v, curve from %v to %v", q[0].From, q[len(q)-1].To, first, last)
			}
			if d := curveToPath(c.testCurve, q, 24); d > eps {
				t.Errorf("deviation of the lines %g of %g", d, eps)
			}
			if n := Theory(c, eps, chain.Line); float64(len(q)) > 1.01*n+float64(len(c.pieces))+2 {
				t.Errorf("%d lines, theory %.1f", len(q), n)
			}
		}
	}
}
