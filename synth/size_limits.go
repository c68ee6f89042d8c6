package synth

import (
	"math"

	"lobewright/synth/follower"
	"lobewright/synth/taylor"
)

// sizeLimit is a limit as a margin at one cam angle, at least 0 where it is met: once for
// floats and once, from the same function, for enclosures. Margins have no common unit, only
// a sign.
type sizeLimit struct {
	id    string
	use   func(sizeSample) bool
	float func(seen[real]) real
	over  func(seen[taylor.I]) taylor.I
}

func always(sizeSample) bool { return true }

// limits lists what spec and follower limit. Falls count only when their limit is given.
func (z *sizer) limits() []sizeLimit {
	l := z.cam.spec.Limits
	grooved := z.cam.Grooved() // then the roller pulls as well as it pushes
	out := []sizeLimit{{"pressure-angle", func(p sizeSample) bool { return p.rises || grooved && p.falls }, pressed[real](l.PressureAngle), pressed[taylor.I](l.PressureAngle)}}
	if r := l.PressureAngleReturn; r != nil {
		out = append(out, sizeLimit{"pressure-angle-return", func(p sizeSample) bool { return p.falls }, pressed[real](*r), pressed[taylor.I](*r)})
	}
	if half, middle, ok := contactWithin(z.kind); ok {
		out = append(out, sizeLimit{"contact", always, touched[real](half, middle), touched[taylor.I](half, middle)})
	}
	if f, ok := z.kind.(follower.TranslatingMushroom); ok {
		part := f.HeadDiameter / 2 / f.FaceRadius
		out = append(out, sizeLimit{"contact", always, headed[real](part), headed[taylor.I](part)})
	}
	if _, ok := z.kind.(follower.Swinging); ok {
		out = append(out, sizeLimit{"swing", always, swung[real], swung[taylor.I]})
	}
	if _, ok := z.cam.face(); ok {
		least := *l.RadiusOfCurvature
		return append(out, sizeLimit{"radius-of-curvature", always, roundFace[real](least), roundFace[taylor.I](least)})
	}
	r := z.cam.inset() // of a groove half its width
	around := *l.RadiusOfCurvature + r
	out = append(out, sizeLimit{"radius-of-curvature", always, roundPitch[real](around), roundPitch[taylor.I](around)})
	if grooved {
		return append(out, sizeLimit{"undercut-outer", always, hollowPitch[real](r), hollowPitch[taylor.I](r)})
	}
	if hollow := z.largestTool() - r; hollow > 0 {
		out = append(out, sizeLimit{"reach", always, hollowPitch[real](hollow), hollowPitch[taylor.I](hollow)})
	}
	return out
}

// contactWithin returns the face that contact must stay within, as Kind.Contact counts.
func contactWithin(k follower.Kind) (half, middle float64, ok bool) {
	switch f := k.(type) {
	case follower.TranslatingFlat:
		return f.FaceWidth / 2, 0, true
	case follower.SwingingFlat:
		return (f.To - f.From) / 2, (f.To + f.From) / 2, true
	}
	return 0, 0, false
}

// largestTool is the largest distance of a tool's center from the contour, length.
func (z *sizer) largestTool() float64 {
	need := 0.0
	for _, op := range z.cam.spec.Operations {
		for _, o := range Offsets(op) {
			need = math.Max(need, o)
		}
	}
	return need
}

// absolute is |x|, as the root of the square.
func absolute[T taylor.Scalar[T]](x T) T { return x.Mul(x).Sqrt() }

// pressed is the sine of what is left of the limit, degrees, times the hypotenuse: it
// keeps its sign up to 180°.
func pressed[T taylor.Scalar[T]](limit float64) func(seen[T]) T {
	return func(x seen[T]) T {
		sin, cos := x.d.Of(limit).Radians().SinCos()
		return x.d.Mul(sin).Sub(absolute(x.n).Mul(cos))
	}
}

// headed holds the sine of the pressure angle to a part of the face radius: contact
// within a mushroom's head.
func headed[T taylor.Scalar[T]](part float64) func(seen[T]) T {
	return func(x seen[T]) T { return x.q.Sqrt().Scale(part).Sub(absolute(x.n)) }
}

// touched holds the contact within half the face's length of its middle.
func touched[T taylor.Scalar[T]](half, middle float64) func(seen[T]) T {
	return func(x seen[T]) T { return x.unit.Scale(half).Sub(absolute(x.touch.Sub(x.unit.Scale(middle)))) }
}

// swung: the swing must stay below that at which arm or face would lie on or square to
// the center line.
func swung[T taylor.Scalar[T]](x seen[T]) T { return x.d }

// roundFace holds the radius of curvature under a face above the least.
func roundFace[T taylor.Scalar[T]](least float64) func(seen[T]) T {
	return func(x seen[T]) T { return x.rho.Sub(x.rho.Of(least)) }
}

// roundPitch holds the pitch curve's convex curvature below 1/around, multiplied out.
func roundPitch[T taylor.Scalar[T]](around float64) func(seen[T]) T {
	return func(x seen[T]) T { return x.q.Mul(x.q.Sqrt()).Sub(x.turn.Scale(around)) }
}

// hollowPitch holds its concave curvature below 1/hollow.
func hollowPitch[T taylor.Scalar[T]](hollow float64) func(seen[T]) T {
	return func(x seen[T]) T { return x.q.Mul(x.q.Sqrt()).Add(x.turn.Scale(hollow)) }
}
