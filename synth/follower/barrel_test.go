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

// barrel is a random barrel cam with a lift of 1 to 30 on a cylinder of 50.
type barrel struct {
	follower.Barrel
	zones []motion.Zone
	lift  func(deg float64) taylor.F
	wall  follower.Wall
	h     float64
}

// drawBarrel draws a cam whose walls are nowhere undercut.
func drawBarrel(t *rapid.T) barrel {
	b := must(follower.NewBarrel(50, rapid.Float64Range(5, 20).Draw(t, "depth"), rapid.Float64Range(3, 10).Draw(t, "roller"),
		rapid.Float64Range(10, 100).Draw(t, "track"), rapid.Bool().Draw(t, "clockwise")))
	w := follower.Wall{Half: b.RollerRadius, Upper: rapid.Bool().Draw(t, "upper")}
	cycle := drawCycle(t)
	unit := of(nil, cycle)
	for h := 30.0; h > 1; h /= 2 {
		lift := func(deg float64) taylor.F { return unit.lift(deg).Scale(h) }
		sound := true
		for deg := 0.5; deg < 360; deg += 2 {
			s := lift(deg)
			sound = sound && w.Clear(s.Deriv(1)*toDeg, s.Deriv(2)*toDeg*toDeg, b.BottomRadius()) > .2
		}
		if sound {
			return barrel{b, cycle.Zones(), lift, w, h}
		}
	}
	t.Fatal("no lift makes a sound cam")
	return barrel{}
}

// space is a point in space, in the cam frame, axial from the datum end.
type space struct{ x, y, z float64 }

func (b barrel) flank(deg, along float64) space {
	x, y, z := b.FlankF(taylor.FVar(deg), b.lift(deg), b.wall, along)
	return space{x.C[0], y.C[0], z.C[0]}
}

// onWall is the wall at a distance from the camshaft axis, rolled up again.
func (b barrel) onWall(deg, radius float64) space {
	x, y := b.WallF(taylor.FVar(deg), b.lift(deg), b.wall, radius)
	p := plane.Polar(radius, plane.Angle(x.C[0]/b.OuterRadius))
	return space{p.X, p.Y, y.C[0]}
}

// room is how far a point of the wall would let the roller go towards it, its axis radial
// at cam angle deg: the lift at which roller and point touch, on the wall's side.
func (b barrel) room(deg float64, p space) float64 {
	// The machine's +X axis, seen from the cam.
	axis := plane.Unit(plane.Degrees(b.Sense() * deg))
	t := axis.Cross(plane.Vector{X: p.x, Y: p.y})
	if math.Abs(t) > b.RollerRadius || axis.Dot(plane.Vector{X: p.x, Y: p.y}) < 0 {
		return math.Inf(-1)
	}
	reach := math.Sqrt(b.RollerRadius*b.RollerRadius - t*t)
	if b.wall.Upper {
		return -(p.z - reach - b.Track) // the least lift is the largest of its negative
	}
	return p.z + reach - b.Track
}

// The roller is put back between points of the wall: at every depth, and at every
// distance from the camshaft axis, they let it go exactly to its lift.
func TestRollerPutBackInGroove(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := drawBarrel(t)
		deg := rapid.Float64Range(0, 360).Draw(t, "cam angle")
		depth := rapid.Float64Range(b.BottomRadius(), b.OuterRadius).Draw(t, "depth")
		want := b.lift(deg).C[0]
		if b.wall.Upper {
			want = -want
		}
		window := math.Min(60, 2*math.Asin(b.RollerRadius/b.BottomRadius())*toDeg)
		search := func(p func(deg float64) space) float64 {
			return highest(deg-window, deg+window, 400, func(at float64) float64 { return b.room(deg, p(at)) })
		}
		near(t, "lift by the flank", search(func(at float64) space { return b.flank(at, depth) }), want, 1e-9)
		near(t, "lift by the wall", search(func(at float64) space { return b.onWall(at, depth) }), want, 1e-9)
	})
}

func TestBarrelEnclosures(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := drawBarrel(t)
		i := rapid.IntRange(0, len(b.zones)-1).Draw(t, "zone")
		z := b.zones[i]
		lo := z.From + (z.To-z.From)*rapid.Float64Range(0, .9).Draw(t, "lo")
		hi := math.Min(z.To, lo+rapid.Float64Range(0, 2).Draw(t, "width"))
		at := math.Min(hi, lo+(hi-lo)*rapid.Float64Range(0, 1).Draw(t, "at"))
		depth := rapid.Float64Range(b.BottomRadius(), b.OuterRadius).Draw(t, "depth")
		order := rapid.IntRange(1, taylor.Order).Draw(t, "order")

		deg, point := taylor.IVar(taylor.Interval{Lo: lo, Hi: hi}, order), taylor.FVar(at)
		over, lift := motion.Eval(z, deg).Scale(b.h), motion.Eval(z, point).Scale(b.h)
		x, y := b.I(deg, over)
		fx, fy := b.F(point, lift)
		encloses(t, "x", x, fx)
		encloses(t, "y", y, fy)
		x, y = b.WallI(deg, over, b.wall, depth)
		fx, fy = b.WallF(point, lift, b.wall, depth)
		encloses(t, "wall x", x, fx)
		encloses(t, "wall y", y, fy)
		if x.N != order-1 {
			t.Fatalf("order %d, want %d", x.N, order-1)
		}
		x, y, a := b.FlankI(deg, over, b.wall, depth)
		fx, fy, fa := b.FlankF(point, lift, b.wall, depth)
		encloses(t, "flank x", x, fx)
		encloses(t, "flank y", y, fy)
		encloses(t, "flank axial", a, fa)
	})
}

// Wall.Clear against the two tangents of the flank by differences: their cross product
// along the roller's radius, over its length were the groove straight.
func TestClearIsTheDeterminant(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := drawBarrel(t)
		z := rapid.SampledFrom(b.zones).Draw(t, "zone")
		deg := z.From + (z.To-z.From)*rapid.Float64Range(.02, .98).Draw(t, "angle")
		along := rapid.Float64Range(b.BottomRadius(), b.OuterRadius).Draw(t, "along")
		const h = 1e-4
		minus := func(p, q space) space { return space{p.x - q.x, p.y - q.y, p.z - q.z} }
		u := minus(b.flank(deg+h, along), b.flank(deg-h, along))
		v := minus(b.flank(deg, along+h), b.flank(deg, along-h))
		n := space{u.y*v.z - u.z*v.y, u.z*v.x - u.x*v.z, u.x*v.y - u.y*v.x}
		// The normal is from the roller's axis to the point, square to the axis.
		axis := plane.Polar(along, plane.Degrees(b.Sense()*deg))
		s := b.lift(deg)
		r := minus(b.flank(deg, along), space{axis.X, axis.Y, s.C[0] + b.Track})
		straight := math.Hypot(along, s.C[1]*toDeg) * (2 * h / toDeg) * 2 * h * b.RollerRadius
		// Right-handed: turning, then outwards along the roller, leaves the axial away.
		sign := -b.Sense()
		if !b.wall.Upper {
			sign = -sign
		}
		got := b.wall.Clear(s.C[1]*toDeg, s.Deriv(2)*toDeg*toDeg, along)
		if want := sign * (n.x*r.x + n.y*r.y + n.z*r.z) / straight; math.Abs(got-want) > 1e-5 {
			t.Fatalf("clear: got %v, want %v", got, want)
		}
	})
}

func TestBarrelLinkage(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := drawBarrel(t)
		z := rapid.SampledFrom(b.zones).Draw(t, "zone")
		deg := z.From + (z.To-z.From)*rapid.Float64Range(.02, .98).Draw(t, "angle")
		want := b.lift(deg)
		x, y := b.F(taylor.FVar(deg), want)
		f := plane.Frame{P: plane.Point{X: x.C[0], Y: y.C[0]}, T: plane.Vector{X: x.C[1], Y: y.C[1]}.Unit(), K: curvature(x, y)}
		r, ok := b.OnArc(deg, f)
		if !ok {
			t.Fatal("the linkage does not close on the cam's own curve")
		}
		near(t, "lift", r.Lift, want.C[0], 1e-9)
		near(t, "velocity", r.Velocity, want.Deriv(1)*toDeg, 1e-9)
		near(t, "acceleration", r.Acceleration, want.Deriv(2)*toDeg*toDeg, 1e-9)
	})
}

// At constant velocity a line of the developed plane is the whole path, k = 0; on a
// circle of radius q about (0, Y0) the lift is Y0 - √(q² - X²).
func TestBarrelOnLineAndCircle(t *testing.T) {
	b := must(follower.NewBarrel(50, 10, 8, 20, false))
	line := plane.Frame{P: plane.Point{Y: 20}, T: plane.Vector{X: -4, Y: 3}.Unit()}
	r, ok := b.OnArc(60, line)
	near(t, "lift", r.Lift, 50*math.Pi/3*.75, 1e-12)
	near(t, "velocity", r.Velocity, 50*.75, 1e-12)
	near(t, "acceleration", r.Acceleration, 0, 1e-12)
	if !ok {
		t.Error("no contact on a line")
	}
	// Travel is towards -X; below its center the circle is met clockwise.
	circle := plane.Frame{P: plane.Point{Y: 20}, T: plane.Vector{X: -1}, K: -1.0 / 80}
	r, _ = b.OnArc(60, circle)
	x := 50 * math.Pi / 3
	root := math.Sqrt(80*80 - x*x)
	near(t, "lift", r.Lift, 80-root, 1e-12)
	near(t, "velocity", r.Velocity, 50*x/root, 1e-12)
	near(t, "acceleration", r.Acceleration, 50*50*80*80/(root*root*root), 1e-12)
	if _, ok = b.OnArc(120, circle); ok {
		t.Error("contact 105 along a circle of radius 80")
	}
}

// What is said in flank.go of the obvious ways, on the reference cam: the parallel of the
// developed pitch curve at the outer radius against the wall there; and the wall of the
// outer radius carried inwards along radial lines against the wall at the bottom.
func TestObviousWallsAreOff(t *testing.T) {
	b := must(follower.NewBarrel(50, 10, 8, 0, true))
	lift := of(nil, riseAndBack(t, 30, 120, "modified-sine")).lift
	wall := func(deg, radius float64) plane.Point { // developed at that radius
		x, y := b.WallF(taylor.FVar(deg), lift(deg), follower.Wall{Half: 8, Upper: true}, radius)
		return plane.Point{X: x.C[0] * radius / 50, Y: y.C[0]}
	}
	parallel := func(deg float64) plane.Point {
		x, y := b.F(taylor.FVar(deg), lift(deg))
		n := plane.Vector{X: x.C[1], Y: y.C[1]}.Unit().Left()
		return plane.Point{X: x.C[0], Y: y.C[0]}.Add(n.Scale(8))
	}
	radial := func(deg float64) plane.Point {
		p := wall(deg, 50)
		return plane.Point{X: p.X * 40 / 50, Y: p.Y}
	}
	off := func(radius float64, wrong func(deg float64) plane.Point) float64 {
		worst := 0.0
		for deg := 1.0; deg < 120; deg++ {
			p := wall(deg, radius)
			worst = math.Max(worst, -highest(deg-5, deg+5, 50, func(at float64) float64 { return -wrong(at).Dist(p) }))
		}
		return worst
	}
	near(t, "parallel at the outer radius", off(50, parallel), 0.0014, 5e-5)
	near(t, "radial lines at the bottom", off(40, radial), 0.423, 5e-4)
}
