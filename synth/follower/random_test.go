package follower_test

import (
	"math"
	"testing"

	"lobewright/synth/follower"
	"lobewright/synth/motion"
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"pgregory.net/rapid"
)

// kinds of plate cams, each drawn for a base radius.
var kinds = []struct {
	name string
	draw func(t *rapid.T, base float64, clockwise bool) follower.Kind
}{
	{"translating-roller", func(t *rapid.T, base float64, clockwise bool) follower.Kind {
		r := base * rapid.Float64Range(.1, .5).Draw(t, "roller")
		return roller(base, r, base*rapid.Float64Range(-.3, .3).Draw(t, "offset"), clockwise)
	}},
	{"translating-knife", func(t *rapid.T, base float64, clockwise bool) follower.Kind {
		return must(follower.NewTranslatingKnife(base, base*rapid.Float64Range(-.3, .3).Draw(t, "offset"), clockwise))
	}},
	{"translating-mushroom", func(t *rapid.T, base float64, clockwise bool) follower.Kind {
		r := base * rapid.Float64Range(.5, 3).Draw(t, "face")
		return must(follower.NewTranslatingMushroom(base, r, r, base*rapid.Float64Range(-.3, .3).Draw(t, "offset"), clockwise))
	}},
	{"translating-flat", func(t *rapid.T, base float64, clockwise bool) follower.Kind {
		return must(follower.NewTranslatingFlat(base, base, clockwise))
	}},
	{"swinging-roller", func(t *rapid.T, base float64, clockwise bool) follower.Kind {
		r := base * rapid.Float64Range(.1, .5).Draw(t, "roller")
		c := (base + r) * rapid.Float64Range(1.3, 2.5).Draw(t, "pivot")
		l := c * rapid.Float64Range(.7, .95).Draw(t, "arm")
		return must(follower.NewSwingingRoller(base, r, l, c, rapid.Bool().Draw(t, "above"), clockwise))
	}},
	{"swinging-flat", func(t *rapid.T, base float64, clockwise bool) follower.Kind {
		f := base * rapid.Float64Range(-.3, .3).Draw(t, "offset")
		c := base * rapid.Float64Range(1.5, 3).Draw(t, "pivot")
		return must(follower.NewSwingingFlat(base, f, -c, 3*c, c, rapid.Bool().Draw(t, "above"), clockwise))
	}},
}

// drawCycle draws rise, dwell, fall and dwell of laws without a step of velocity, lift 1.
func drawCycle(t *rapid.T) *motion.Cycle {
	laws := rapid.SampledFrom([]string{"cycloidal", "modified-sine", "modified-trapezoidal", "polynomial-3-4-5",
		"polynomial-4-5-6-7", "simple-harmonic", "parabolic"})
	up := rapid.Float64Range(60, 140).Draw(t, "rise over")
	top := rapid.Float64Range(5, 40).Draw(t, "dwell")
	down := rapid.Float64Range(60, 140).Draw(t, "fall over")
	return join(t, event(t, 1, up, laws.Draw(t, "rise")), event(t, 0, top, ""),
		event(t, -1, down, laws.Draw(t, "fall")), event(t, 0, 360-up-top-down, ""))
}

// drawn is a random cam: a cycle of lift 1, and its height.
type drawn struct {
	cam
	zones  []motion.Zone
	height float64
}

// over is the lift enclosed over an interval of cam angle.
func (d drawn) over(zone int, deg taylor.I) taylor.I {
	return motion.Eval(d.zones[zone], deg).Scale(d.height)
}

// in is the lift in a zone as a series about a cam angle.
func (d drawn) in(zone int, deg float64) taylor.F {
	return motion.Eval(d.zones[zone], taylor.FVar(deg)).Scale(d.height)
}

// drawCam draws a cam of a kind that is sound: its lift is halved until the contour is
// nowhere near a cusp and the follower can be driven.
func drawCam(t *rapid.T, draw func(*rapid.T, float64, bool) follower.Kind) drawn {
	k := draw(t, rapid.Float64Range(20, 80).Draw(t, "base"), rapid.Bool().Draw(t, "clockwise"))
	cycle := drawCycle(t)
	unit := of(k, cycle)
	for h := 20.0; h > 1e-2; h /= 2 {
		s := cam{k, func(deg float64) taylor.F { return unit.lift(deg).Scale(h) }}
		if sound(s, cycle.Zones()) {
			return drawn{s, cycle.Zones(), h}
		}
	}
	t.Fatal("no lift makes a sound cam")
	return drawn{}
}

// sound looks at a cam between and just inside the junctions.
func sound(s cam, zones []motion.Zone) bool {
	const samples, hair = 40, 1e-7
	for _, z := range zones {
		for i := range samples + 1 {
			if !soundAt(s, z.From+hair+(z.To-z.From-2*hair)*float64(i)/samples) {
				return false
			}
		}
	}
	return true
}

func soundAt(s cam, deg float64) bool {
	rho := s.radius(deg)
	if rho > 0 && rho < 1.05*s.kind.Radius()+2 || math.Abs(s.pressure(deg)) > 55 {
		return false
	}
	if f, ok := s.kind.(follower.Face); ok {
		_, phi := f.SupportF(taylor.FVar(deg), s.lift(deg))
		if rho < 2 || phi.C[1]*s.kind.Sense()*toDeg < .3 {
			return false
		}
	}
	w, ok := s.kind.(follower.Swinging)
	return !ok || s.lift(deg).C[0] < w.MaxSwing()-5
}

// inZone draws a cam angle inside a zone.
func inZone(t *rapid.T, s drawn) float64 {
	z := rapid.SampledFrom(s.zones).Draw(t, "zone")
	return z.From + (z.To-z.From)*rapid.Float64Range(.02, .98).Draw(t, "angle")
}

// each runs a property over random cams of every kind.
func each(t *testing.T, property func(t *rapid.T, s drawn)) {
	for _, k := range kinds {
		t.Run(k.name, func(t *testing.T) {
			rapid.Check(t, func(t *rapid.T) {
				property(t, drawCam(t, k.draw))
			})
		})
	}
}

// The interval form encloses the floats, derivatives included, to the order it says.
func TestEnclosures(t *testing.T) {
	each(t, func(t *rapid.T, s drawn) {
		i := rapid.IntRange(0, len(s.zones)-1).Draw(t, "zone")
		z := s.zones[i]
		lo := z.From + (z.To-z.From)*rapid.Float64Range(0, .9).Draw(t, "lo")
		hi := math.Min(z.To, lo+rapid.Float64Range(0, 2).Draw(t, "width"))
		at := math.Min(hi, lo+(hi-lo)*rapid.Float64Range(0, 1).Draw(t, "at"))
		order := rapid.IntRange(1, taylor.Order).Draw(t, "order")

		deg := taylor.IVar(taylor.Interval{Lo: lo, Hi: hi}, order)
		x, y := s.kind.I(deg, s.over(i, deg))
		fx, fy := s.kind.F(taylor.FVar(at), s.in(i, at))
		want := order
		if f, ok := s.kind.(follower.Face); ok {
			want = order - 1
			p, phi := f.SupportI(deg, s.over(i, deg))
			fp, fphi := f.SupportF(taylor.FVar(at), s.in(i, at))
			encloses(t, "p", p, fp)
			encloses(t, "phi", phi, fphi)
			if order >= 2 {
				encloses(t, "rho", follower.RadiusOfCurvature(p, phi), follower.RadiusOfCurvature(fp, fphi))
			}
		}
		if x.N != want || y.N != want {
			t.Fatalf("orders %d and %d, want %d", x.N, y.N, want)
		}
		encloses(t, "x", x, fx)
		encloses(t, "y", y, fy)
	})
}

// encloses holds every coefficient of the interval series to that of the float series,
// but for the floats' own rounding, to which a higher derivative is more sensitive.
func encloses(t *rapid.T, what string, i taylor.I, f taylor.F) {
	t.Helper()
	for k := 0; k <= i.N; k++ {
		if slack := 1e-12 * math.Max(1, math.Abs(f.C[k])); f.C[k] < i.C[k].Lo-slack || f.C[k] > i.C[k].Hi+slack || i.C[k].Hi-i.C[k].Lo > 1e3 {
			t.Fatalf("%s, coefficient %d: %v outside %v, or that is no use", what, k, f.C[k], i.C[k])
		}
	}
}

// On the osculating circle of the base curve the linkage has the motion's own lift,
// velocity and acceleration.
func TestLinkageIsTheMotion(t *testing.T) {
	each(t, func(t *rapid.T, s drawn) {
		deg := inZone(t, s)
		f, want := s.frame(deg), s.lift(deg)
		r, ok := s.kind.OnArc(deg, f)
		if !ok {
			t.Fatal("the linkage does not close on the cam's own curve")
		}
		near(t, "lift", r.Lift, want.C[0], 1e-9)
		near(t, "velocity", r.Velocity, want.Deriv(1)*toDeg, 1e-9)
		near(t, "acceleration", r.Acceleration, want.Deriv(2)*toDeg*toDeg, 1e-9)
		near(t, "contact", r.At.Dist(f.P), 0, 1e-9)
	})
}

// A cam that turns the other way, with offset and side mirrored, is the mirror image.
func TestMirrored(t *testing.T) {
	each(t, func(t *rapid.T, s drawn) {
		m := cam{mirrored(s.kind), s.lift}
		deg := inZone(t, s)
		p, q := s.contour(deg), m.contour(deg)
		near(t, "mirrored contour", plane.Point{X: p.X, Y: -p.Y}.Dist(q), 0, 1e-12)
		near(t, "mirrored pressure angle", m.pressure(deg), s.pressure(deg), 1e-12)
	})
}

func mirrored(k follower.Kind) follower.Kind {
	switch k := k.(type) {
	case follower.TranslatingRoller:
		k.Clockwise, k.Offset = !k.Clockwise, -k.Offset
		return k
	case follower.TranslatingKnife:
		k.Clockwise, k.Offset = !k.Clockwise, -k.Offset
		return k
	case follower.TranslatingMushroom:
		k.Clockwise, k.Offset = !k.Clockwise, -k.Offset
		return k
	case follower.TranslatingFlat:
		k.Clockwise = !k.Clockwise
		return k
	case follower.SwingingRoller:
		k.Clockwise, k.Above = !k.Clockwise, !k.Above
		return k
	case follower.SwingingFlat:
		k.Clockwise, k.Above = !k.Clockwise, !k.Above
		return k
	}
	panic("no such kind")
}
