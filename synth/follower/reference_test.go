package follower_test

import (
	"math"
	"testing"

	"lobewright/synth/follower"
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// The vectors of this file were derived with 30 to 40 digits from formulas that share
// nothing with the code (published forms: H. A. Rothbart, ed., Cam Design Handbook,
// McGraw-Hill 2004, chapters 6 and 7) and checked by numeric differentiation of the
// curves. They are for a cam that turns clockwise, seen from which the follower goes
// round counterclockwise; an offset towards +Y lowers the rise's pressure angle. u is the
// share of the rise.
const printed = 1e-10 // relative: what the last printed digits allow

// Cycloidal rise of 20 in 90°, base radius 40, roller radius 10; pitch point, pressure
// angle, radius of curvature of the pitch curve, contour point.
func TestTranslatingRollerVectors(t *testing.T) {
	type row struct{ u, px, py, alpha, rho, cx, cy float64 }
	for _, c := range []struct {
		offset, worst, worstAt, tightest, tightestAt float64
		rows                                         []row
	}{
		{0, 23.23301662979, .4659690129285, 39.42456206951, .7325790459806, []row{
			{.25, 47.87257439971, 19.82946958207, 13.80515538569, 410.3570417999, 37.98749946949, 18.31775081725},
			{.5, 42.42640687119, 42.42640687119, 22.99700767179, 56.54893077855, 33.15476398013, 38.67985671129},
			{.75, 26.09254230174, 62.99296950165, 10.57748903418, 39.51154649448, 20.63481443001, 54.61363739949}}},
		{8, 16.51999683239, .4764409780993, 38.14230501825, .7205502625986, []row{
			{.25, 44.21599060235, 26.97400058360, 5.283617571644, 1427.285835392, 34.66405288170, 24.01418880230},
			{.5, 36.31407029560, 47.62777879459, 16.39592599084, 55.43206059541, 27.53458093676, 42.84023593860},
			{.75, 18.45500078308, 65.45932062213, 4.008114473203, 38.39131886545, 13.99175525243, 56.51060902028}}},
		{-8, 29.79240272578, .4547469247237, 40.54756411769, .7446120266862, []row{
			{.5, 47.62777879459, 36.31407029560, 29.41427617594, 57.57277343395, 37.99548336810, 33.62727204919}}},
	} {
		k := of(roller(40, 10, c.offset, true), riseAndBack(t, 20, 90, "cycloidal"))
		for _, r := range c.rows {
			deg := 90 * r.u
			x, y := k.base(deg)
			p := k.contour(deg)
			near(t, "pitch x", x.C[0], r.px, printed)
			near(t, "pitch y", y.C[0], r.py, printed)
			near(t, "pressure angle", k.pressure(deg), r.alpha, printed)
			near(t, "radius of curvature", k.radius(deg), r.rho, printed)
			near(t, "contour x", p.X, r.cx, printed)
			near(t, "contour y", p.Y, r.cy, printed)
		}
		near(t, "largest pressure angle", k.pressure(90*c.worstAt), c.worst, printed)
		near(t, "least radius of curvature", k.radius(90*c.tightestAt), c.tightest, printed)
	}
}

// 3-4-5 rise of 20 in 90°, base radius 60: contact point and radius of curvature. The
// last row is where lift + d²s/dθ² is least.
func TestTranslatingFlatVectors(t *testing.T) {
	f := must(follower.NewTranslatingFlat(60, 60, true))
	k := of(f, riseAndBack(t, 20, 90, "polynomial-3-4-5"))
	for _, r := range []struct{ u, s, v, x, y, rho float64 }{
		{.25, 2.0703125, 13.42869832338, 52.20655092874, 36.15977976471, 107.6648451391},
		{.5, 10, 23.87324146378, 32.61654375511, 66.378405611, 70},
		{.75, 17.9296875, 13.42869832338, 17.4159007664, 77.13658362284, 32.33515486095},
	} {
		deg := 90 * r.u
		p := k.contour(deg)
		near(t, "lift", k.lift(deg).C[0], r.s, printed)
		near(t, "contact on the face", k.touch(deg), r.v, printed)
		near(t, "contour x", p.X, r.x, printed)
		near(t, "contour y", p.Y, r.y, printed)
		near(t, "radius of curvature", k.radius(deg), r.rho, printed)
		near(t, "pressure angle", k.pressure(deg), 0, 0)
	}
	near(t, "least radius of curvature", k.radius(90*.7778365779505), 60-28.22770051578, printed)
}

// 3-4-5 swing of 20° in 90°, pivot distance 80, arm 60, base radius 40, roller radius
// 10. The pressure angle is given without its sign.
func TestSwingingRollerVectors(t *testing.T) {
	type row struct{ u, psi, px, py, alpha, rho, cx, cy float64 }
	const rest = 38.62483287305
	for _, c := range []struct {
		above          bool
		worst, worstAt float64
		rows           []row
	}{
		{true, 19.20904755462, .3826813818548, []row{
			{0, rest, 33.125, 37.45309566645, 2.865983982599, 50, 26.5, 29.96247653316},
			{.25, 40.69514537305, 16.9104518803, 49.34994020898, 15.75636364611, 262.9749469312, 11.3255412185, 41.05483485102},
			{.5, 48.62483287305, -3.311422723798, 60.36192692109, 16.58481363218, 58.7344472187, -6.76598474245, 50.97757818187},
			{.75, 56.55452037305, -28.29382372377, 62.51787268388, 1.584102819972, 39.04554036953, -26.12438714846, 52.75603141567}}},
		{false, 28.56989154776, .5554258214435, []row{
			{.25, 40.69514537305, 46.85317257041, -22.93818217543, 14.41465198419, 243.0223131946, 39.33126645598, -16.34872632494},
			{.5, 48.62483287305, 60.36192692109, -3.311422723798, 28.14978362482, 54.66879521756, 51.26412095122, 0.8394719429783},
			{.75, 56.55452037305, 64.2135663409, 24.20005709935, 24.17937320615, 43.23489889887, 54.36172823999, 22.48503930548}}},
	} {
		f := must(follower.NewSwingingRoller(40, 10, 60, 80, c.above, true))
		k := of(f, riseAndBack(t, 20, 90, "polynomial-3-4-5"))
		near(t, "rest", plane.Angle(f.Rest).Deg(), rest, printed)
		near(t, "largest swing", f.MaxSwing(), 180-rest, printed)
		near(t, "stroke of 20°", f.Stroke(20), 20*math.Pi/180*60, 1e-15)
		for _, r := range c.rows {
			deg := 90 * r.u
			x, y := k.base(deg)
			p := k.contour(deg)
			near(t, "arm", plane.Angle(f.Rest).Deg()+k.lift(deg).C[0], r.psi, printed)
			near(t, "pitch x", x.C[0], r.px, printed)
			near(t, "pitch y", y.C[0], r.py, printed)
			near(t, "pressure angle", math.Abs(k.pressure(deg)), r.alpha, printed)
			near(t, "radius of curvature", k.radius(deg), r.rho, printed)
			near(t, "contour x", p.X, r.cx, printed)
			near(t, "contour y", p.Y, r.cy, printed)
		}
		near(t, "largest pressure angle", math.Abs(k.pressure(90*c.worstAt)), c.worst, printed)
	}
}

// Cycloidal swing of 10° in 120°, pivot distance 80, base radius 30: contact point,
// radius of curvature, contact along the face from the pivot's foot.
func TestSwingingFlatVectors(t *testing.T) {
	type row struct{ u, x, y, rho, along float64 }
	for _, c := range []struct {
		offset float64
		above  bool
		rest   float64 // of the face, from the center line, degrees
		rows   []row
	}{
		{0, true, 22.024312837042, []row{
			{.25, -10.48224576825, 30.11114986066, 54.82763391143, 80.37493025358},
			{.5, -31.74129191467, 22.73596187666, 34.89550446511, 85.51812461517},
			{.75, -38.6111597136, 16.03359511981, 18.77032564429, 74.71628074072}}},
		{0, false, 22.024312837042, []row{
			{.25, 28.28914928935, -14.26677896906, 45.47484455076, 68.00955636841},
			{.5, 36.82897608714, 8.280020508853, 35.60765761746, 61.08437472512},
			{.75, 32.67098129612, 25.87458048599, 27.6297091952, 63.22146831907}}},
		{5, true, 25.94447977237, []row{
			{.25, -8.18806316409, 30.73298494928, 54.00306619015, 77.86201422769},
			{.5, -29.54563159235, 24.92426975496, 34.49111517838, 82.33593366098},
			{.75, -36.92955037991, 18.62024557581, 19.28747630981, 71.45814120473}}},
	} {
		f := must(follower.NewSwingingFlat(30, c.offset, 40, 100, 80, c.above, true))
		k := of(f, join(t, event(t, 10, 120, "cycloidal"), event(t, -10, 120, "cycloidal"), event(t, 0, 120, "")))
		near(t, "rest", 90-plane.Angle(f.Rest).Deg(), c.rest, printed)
		near(t, "largest swing", f.MaxSwing(), 90-c.rest, printed)
		for _, r := range c.rows {
			deg := 120 * r.u
			p := k.contour(deg)
			near(t, "contour x", p.X, r.x, printed)
			near(t, "contour y", p.Y, r.y, printed)
			near(t, "radius of curvature", k.radius(deg), r.rho, printed)
			near(t, "along the face", k.touch(deg), r.along, printed)
			near(t, "pressure angle", k.pressure(deg), math.Atan(c.offset/r.along)*toDeg, printed)
		}
	}
}

// Modified-sine rise of 30 in 120° on a cylinder of 50, roller radius 8: pressure angle
// and radius of curvature of the developed pitch curve; points of the walls, with their
// distance across and along from the roller's axis, azimuth and distance from the camshaft
// axis.
func TestBarrelVectors(t *testing.T) {
	b := must(follower.NewBarrel(50, 10, 8, 0, true))
	c := riseAndBack(t, 30, 120, "modified-sine")
	lift := of(nil, c).lift
	for _, r := range []struct{ deg, s, v, alpha, rho float64 }{
		{30, 3.515354538438, 15.75278869251, 17.48733442154, 88.00177030846},
		{60, 15, 25.20446190802, 26.75218129318, math.Inf(1)},
		{90, 26.48464546156, 15.75278869251, 17.48733442154, -88.00177030846},
	} {
		s := lift(r.deg)
		x, y := b.F(taylor.FVar(r.deg), s)
		near(t, "lift", y.C[0], r.s, printed)
		near(t, "slope", s.C[1]*toDeg, r.v, printed)
		near(t, "pressure angle", b.Slant(s.C[1]*toDeg, 50).Deg(), r.alpha, printed)
		near(t, "curvature", curvature(x, y), 1/r.rho, printed)
	}
	up, low := follower.Wall{Half: 8, Upper: true}, follower.Wall{Half: 8}
	for _, r := range []struct {
		deg, z float64
		wall   follower.Wall
		t, y   float64 // across and along
		polar  float64
		radius float64
	}{
		{60, 50, up, -3.6010594967, 22.14369445744, 55.88060246546, 50.12950857029},
		{60, 50, low, 3.6010594967, 7.856305542562, 64.11939753454, 50.12950857029},
		{60, 45, up, -3.909353787935, 21.97975307305, 55.03492190852, 45.16949243726},
		{30, 50, up, -2.403959738087, 11.14562174068, 27.24738474194, 50.05775686567},
	} {
		d, s := taylor.FVar(r.deg), lift(r.deg)
		x, y, axial := b.FlankF(d, s, r.wall, r.z)
		p := plane.Point{X: x.C[0], Y: y.C[0]}
		seen := plane.Vector(p).Turn(plane.Degrees(-r.deg))
		near(t, "across", seen.Y, r.t, printed)
		near(t, "along", axial.C[0], r.y, printed)
		near(t, "azimuth", p.PolarAngle(), r.polar, printed)
		near(t, "radius", p.Radius(), r.radius, printed)
		// The wall at that distance from the axis is the same point.
		wx, wy := b.WallF(d, s, r.wall, r.radius)
		near(t, "wall's azimuth", wx.C[0]/50*toDeg, r.polar, printed)
		near(t, "wall's height", wy.C[0], r.y, printed)
	}
}
