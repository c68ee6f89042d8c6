package follower_test

import (
	"math"
	"testing"

	"lobewright/synth/follower"
	"lobewright/synth/plane"
	"pgregory.net/rapid"
)

// The follower is put back on the contour, as a machine would: at a cam angle, each
// point of the contour alone would hold the follower at some lift, and the follower
// rests on the one that holds it highest. Nothing is used but points of the contour and
// the contract's description of the machine.

// heldBy is the lift at which one point of the contour, in the machine frame, holds the
// follower; -Inf where it does not reach it.
func heldBy(k follower.Kind, p plane.Point) float64 {
	// A circle of radius r on the follower's line, ahead of the point.
	ahead := func(l follower.Line, r float64) float64 {
		if d := r*r - (p.Y-l.Offset)*(p.Y-l.Offset); d >= 0 {
			return p.X + math.Sqrt(d) - l.Datum
		}
		return math.Inf(-1)
	}
	switch f := k.(type) {
	case follower.TranslatingRoller:
		return ahead(f.Line, f.RollerRadius)
	case follower.TranslatingMushroom:
		return ahead(f.Line, f.FaceRadius)
	case follower.TranslatingFlat:
		return p.X - f.BaseRadius
	case follower.SwingingRoller:
		// The triangle pivot, point, roller center, the center beyond the point.
		v := plane.Vector{X: f.PivotDistance - p.X, Y: p.Y}
		if !f.Above {
			v.Y = -v.Y
		}
		d := v.Norm()
		cos := (d*d + f.ArmLength*f.ArmLength - f.RollerRadius*f.RollerRadius) / (2 * d * f.ArmLength)
		if math.Abs(cos) > 1 {
			return math.Inf(-1)
		}
		return (math.Atan2(v.Y, v.X) + math.Acos(cos) - f.Rest) * toDeg
	case follower.SwingingFlat:
		// The face's line through the point, at its offset from the pivot.
		v := plane.Vector{X: f.PivotDistance - p.X, Y: p.Y}
		if !f.Above {
			v.Y = -v.Y
		}
		if v.Norm() < math.Abs(f.FaceOffset) {
			return math.Inf(-1)
		}
		rest := math.Asin((f.BaseRadius + f.FaceOffset) / f.PivotDistance)
		return (math.Atan2(v.Y, v.X) + math.Asin(f.FaceOffset/v.Norm()) - rest) * toDeg
	}
	panic("no such kind")
}

// machine turns a point of the cam frame into the machine frame at a cam angle: what
// stands still in the machine is seen from the cam turned by +θ when it turns clockwise.
func machine(p plane.Point, deg float64, clockwise bool) plane.Point {
	if clockwise {
		deg = -deg
	}
	return plane.Point(plane.Vector(p).Turn(plane.Degrees(deg)))
}

// held is the lift at which the whole contour holds the follower.
func held(s cam, deg float64) float64 {
	cw := s.kind.Sense() > 0
	if f, ok := s.kind.(follower.TranslatingKnife); ok {
		// From a place far from the edge, so that the crossing is between samples.
		return crossing(f, func(at float64) plane.Point { return machine(s.contour(deg+100+at), deg, cw) }) - f.Datum
	}
	return highest(0, 360, 1440, func(at float64) float64 { return heldBy(s.kind, machine(s.contour(at), deg, cw)) })
}

// crossing is the largest X at which the contour crosses the line of an edge.
func crossing(f follower.TranslatingKnife, at func(float64) plane.Point) float64 {
	best := math.Inf(-1)
	const n = 720
	for i := range n {
		lo, hi := 360*float64(i)/n, 360*float64(i+1)/n
		below := at(lo).Y < f.Offset
		if below == (at(hi).Y < f.Offset) {
			continue
		}
		for range 60 {
			mid := (lo + hi) / 2
			if (at(mid).Y < f.Offset) == below {
				lo = mid
			} else {
				hi = mid
			}
		}
		best = math.Max(best, at(lo).X)
	}
	return best
}

// highest samples f and climbs from the best sample.
func highest(from, to float64, n int, f func(float64) float64) float64 {
	step := (to - from) / float64(n)
	best, at := math.Inf(-1), from
	for i := range n {
		if v := f(from + step*float64(i)); v > best {
			best, at = v, from+step*float64(i)
		}
	}
	lo, hi := at-step, at+step
	for range 100 {
		a, b := lo+(hi-lo)/3, hi-(hi-lo)/3
		if f(a) < f(b) {
			lo = a
		} else {
			hi = b
		}
	}
	return math.Max(best, f((lo+hi)/2))
}

func TestFollowerPutBack(t *testing.T) {
	each(t, func(t *rapid.T, s drawn) {
		deg := rapid.Float64Range(0, 360).Draw(t, "cam angle")
		near(t, "lift", held(s.cam, deg), s.lift(deg).C[0], 1e-9)
	})
}
