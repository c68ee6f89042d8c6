package evidence

import (
	"fmt"
	"math"

	"lobewright/synth"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
)

// kindOf builds a plate cam that turns clockwise for a follower: rise, dwell of 60°, fall, rest.
func kindOf(f spec.Follower, base, lift, rise float64, law string) (*synth.Cam, error) {
	s := &spec.Spec{Units: spec.MM, Camshaft: spec.Camshaft{Speed: 60, Clockwise: true}}
	s.Motion.Events = []spec.Event{event(spec.Rise, lift, rise, law), {Kind: spec.Dwell, Over: 60}, event(spec.Fall, lift, 120, law), {Kind: spec.Dwell, Over: 180 - rise}}
	s.Follower = f
	s.Cam = spec.Cam{Kind: "plate", BaseRadius: base}
	s.Limits.PressureAngle = 30
	return synth.Build(s)
}

// kinds: figures of flat and swinging followers at shares of the rise, from textbook
// formulas other than the program's, with 30 digits.
func kinds(Laws) ([]Row, error) {
	const source = "Reference vectors of other followers, textbook formulas (flat faces: contact at ds/dθ, Mabie and Reinholtz; swinging: Rothbart 2004, chapter 7)"
	roller := func(below bool) spec.Follower {
		return spec.Follower{Kind: "swinging-roller", RollerDiameter: 20, ArmLength: 60, PivotDistance: 80, Below: below}
	}
	face := func(offset float64) spec.Follower {
		return spec.Follower{Kind: "swinging-flat", PivotDistance: 80, FaceOffset: offset, Face: spec.Face{From: 0, To: 200}}
	}
	var rows []Row
	for _, c := range []struct {
		what                string
		follower            spec.Follower
		base, lift, rise, u float64
		law, x, y, radius   string
	}{
		{"translating flat face", spec.Follower{Kind: "translating-flat", FaceWidth: 100}, 60, 20, 90, 0.25, "polynomial-3-4-5", "52.20655092874", "36.15977976471", "107.6648451391"},
		{"translating flat face", spec.Follower{Kind: "translating-flat", FaceWidth: 100}, 60, 20, 90, 0.75, "polynomial-3-4-5", "17.4159007664", "77.13658362284", "32.33515486095"},
		{"swinging roller above", roller(false), 40, 20, 90, 0.25, "polynomial-3-4-5", "11.3255412185", "41.05483485102", "252.9749469312"},
		{"swinging roller above", roller(false), 40, 20, 90, 0.5, "polynomial-3-4-5", "-6.76598474245", "50.97757818187", "48.7344472187"},
		{"swinging roller below", roller(true), 40, 20, 90, 0.25, "polynomial-3-4-5", "39.33126645598", "-16.34872632494", "233.0223131946"},
		{"swinging flat face through its pivot", face(0), 30, 10, 120, 0.25, "cycloidal", "-10.48224576825", "30.11114986066", "54.82763391143"},
		{"swinging flat face, offset 5", face(5), 30, 10, 120, 0.5, "cycloidal", "-29.54563159235", "24.92426975496", "34.49111517838"},
	} {
		k, err := kindOf(c.follower, c.base, c.lift, c.rise, c.law)
		if err != nil {
			return nil, err
		}
		zone, t := k.Cycle().Zone(c.rise * c.u)
		f := k.Contour().At(zone, t)
		at := fmt.Sprintf("%s, %g %% of the rise: ", c.what, 100*c.u)
		rows = append(rows, Row{source, Derived, at + "contour x", c.x, f.P.X}, Row{source, Derived, at + "contour y", c.y, f.P.Y},
			Row{source, Derived, at + "radius of curvature of the contour", c.radius, 1 / math.Abs(f.K)})
	}
	k, err := kindOf(spec.Follower{Kind: "translating-flat", FaceWidth: 100}, 60, 20, 90, "polynomial-3-4-5")
	if err != nil {
		return nil, err
	}
	const cauchy = "Integral checks of a whole cam under a flat face (A. L. Cauchy: the length is the integral of the height)"
	return append(rows, Row{cauchy, Derived, "3-4-5, 20 over 90° and 120°, base 60: length", "434.586983746588", k.Contour().Length()},
		Row{cauchy, Derived, "the same: area", "14943.8010910284", k.Contour().Area()}), nil
}

// barrel: a modified-sine rise of 30 in 120° on a cylinder of 50, roller of 16, from textbook
// formulas other than the program's, with 30 digits.
func barrel(Laws) ([]Row, error) {
	s := &spec.Spec{Units: spec.MM, Camshaft: spec.Camshaft{Speed: 60, Clockwise: true}}
	s.Motion.Events = []spec.Event{event(spec.Rise, 30, 120, "modified-sine"), {Kind: spec.Dwell, Over: 60}, event(spec.Fall, 30, 120, "modified-sine"), {Kind: spec.Dwell, Over: 60}}
	s.Follower = spec.Follower{Kind: "translating-roller", RollerDiameter: 16}
	s.Cam = spec.Cam{Kind: "barrel", Radius: 50, Length: 60, GrooveDepth: 10}
	s.Limits.PressureAngle = 30
	k, err := synth.Build(s)
	if err != nil {
		return nil, err
	}
	const source = "Barrel cam by the conjugate condition: the roller touches where its normal is square to its velocity seen from the cam (F. L. Litvin, Gear Geometry and Applied Theory, 1994, cited from memory)"
	b, _ := k.Barrel()
	zone, t := k.Cycle().Zone(30)
	rows := []Row{
		{source, Derived, "slope of the track at 25 % of the rise at the outer radius, degrees", "17.48733442154", k.SlantAt(zone, t, 50).Deg()},
		{source, Derived, "radius of curvature of the developed pitch curve there", "88.00177030846", 1 / k.Pitch().At(zone, t).K},
	}
	for _, c := range []struct {
		deg, along    float64
		upper         bool
		radius, y, at string
	}{
		{60, 50, true, "50.12950857029", "22.14369445744", "55.88060246546"},
		{60, 50, false, "50.12950857029", "7.856305542562", "64.11939753454"},
		{60, 45, true, "45.16949243726", "21.97975307305", "55.03492190852"},
		{30, 50, true, "50.05775686567", "11.14562174068", "27.24738474194"},
	} {
		zone, t := k.Cycle().Zone(c.deg)
		x, y, z := k.Flank(zone, t, c.along, c.upper)
		p := plane.Point{X: x, Y: y}
		what := fmt.Sprintf("wall (upper %v) touched at cam angle %g, %g along the roller's axis: ", c.upper, c.deg, c.along)
		rows = append(rows, Row{source, Derived, what + "distance from the camshaft axis", c.radius, p.Radius()},
			Row{source, Derived, what + "polar angle", c.at, p.PolarAngle()}, Row{source, Derived, what + "height", c.y, z - b.Track})
	}
	return rows, nil
}
