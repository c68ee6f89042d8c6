package evidence

import (
	"fmt"
	"math"

	"lobewright/synth"
	"lobewright/synth/spec"
)

// cam builds a plate cam with a translating roller of radius 10 that turns clockwise.
func cam(base, offset float64, events ...spec.Event) (*synth.Cam, error) {
	s := &spec.Spec{Units: spec.MM, Camshaft: spec.Camshaft{Speed: 60, Clockwise: true}}
	s.Motion.Events = events
	s.Follower = spec.Follower{Kind: "translating-roller", RollerDiameter: 20, Offset: offset}
	s.Cam = spec.Cam{Kind: "plate", BaseRadius: base}
	s.Limits.PressureAngle = 30
	return synth.Build(s)
}

func event(kind spec.EventKind, lift, over float64, law string) spec.Event {
	return spec.Event{Kind: kind, Lift: lift, Over: over, Law: spec.Law{Name: law, ConstantShare: 0.5}}
}

// contours are figures of whole cams in closed form or worked out with 30 digits.
func contours(Laws) ([]Row, error) {
	var rows []Row
	vectors, err := vectors()
	if err != nil {
		return nil, err
	}
	integrals, err := integrals()
	if err != nil {
		return nil, err
	}
	harmonic, err := harmonic()
	if err != nil {
		return nil, err
	}
	return append(append(append(rows, vectors...), integrals...), harmonic...), nil
}

// vectors: cycloidal rise of 20 in 90°, base radius 40, roller radius 10, without offset and
// with 8: pitch point, pressure angle, radius of curvature, contour point.
func vectors() ([]Row, error) {
	const source = "Reference vectors, textbook formulas (Rothbart 2004, pp. 45, 170, 183)"
	var rows []Row
	for _, c := range []struct {
		offset, t                float64
		px, py, alpha, rho, x, y string
	}{
		{0, 22.5, "47.87257439971", "19.82946958207", "13.80515538569", "410.3570417999", "37.98749946949", "18.31775081725"},
		{0, 45, "42.42640687119", "42.42640687119", "22.99700767179", "56.54893077855", "33.15476398013", "38.67985671129"},
		{8, 67.5, "18.45500078308", "65.45932062213", "4.008114473203", "38.39131886545", "13.99175525243", "56.51060902028"},
	} {
		k, err := cam(40, c.offset, event(spec.Rise, 20, 90, "cycloidal"), spec.Event{Kind: spec.Dwell, Over: 60}, event(spec.Fall, 20, 120, "cycloidal"), spec.Event{Kind: spec.Dwell, Over: 90})
		if err != nil {
			return nil, err
		}
		zone, t := k.Cycle().Zone(c.t)
		p, q := k.Pitch().At(zone, t), k.Contour().At(zone, t)
		at := fmt.Sprintf("offset %g, cam angle %g°: ", c.offset, c.t)
		rows = append(rows,
			Row{source, Derived, at + "pitch x", c.px, p.P.X}, Row{source, Derived, at + "pitch y", c.py, p.P.Y},
			Row{source, Derived, at + "pressure angle", c.alpha, k.PressureAngleIn(zone, t).Deg()},
			Row{source, Derived, at + "radius of curvature", c.rho, 1 / p.K},
			Row{source, Derived, at + "contour x", c.x, q.P.X}, Row{source, Derived, at + "contour y", c.y, q.P.Y})
	}
	return rows, nil
}

// integrals: a 3-4-5 cam whose lengths and areas follow from polar area and Steiner's
// formula for parallel curves.
func integrals() ([]Row, error) {
	const source = "Integral checks: polar area, Steiner's formula for parallels"
	k, err := cam(40, 0, event(spec.Rise, 20, 90, "polynomial-3-4-5"), spec.Event{Kind: spec.Dwell, Over: 60}, event(spec.Fall, 20, 120, "polynomial-3-4-5"), spec.Event{Kind: spec.Dwell, Over: 90})
	if err != nil {
		return nil, err
	}
	return []Row{
		{source, Derived, "pitch curve length", "376.9739777215", k.Pitch().Length()},
		{source, Derived, "pitch curve area", "11230.40040511", k.Pitch().Area()},
		{source, Derived, "contour length", "314.1421246497", k.Contour().Length()},
		{source, Derived, "contour area", "7774.819893250", k.Contour().Area()},
		{source, Derived, "total turning over 2 pi", "1.0000000000", k.Contour().Turning() / (2 * math.Pi)},
	}, nil
}

// harmonic: closed forms of simple-harmonic cams.
func harmonic() ([]Row, error) {
	const source = "Closed forms of simple-harmonic cams (limaçon; tan a = pi h/(2 B sqrt(Rp(Rp+h))))"
	steep, err := cam(40, 0, event(spec.Rise, 20, 90, "simple-harmonic"), spec.Event{Kind: spec.Dwell, Over: 60}, event(spec.Fall, 20, 120, "cycloidal"), spec.Event{Kind: spec.Dwell, Over: 90})
	if err != nil {
		return nil, err
	}
	limacon, err := cam(20, 0, event(spec.Rise, 20, 180, "simple-harmonic"), event(spec.Fall, 20, 180, "simple-harmonic"))
	if err != nil {
		return nil, err
	}
	rows := []Row{{source, Derived, "largest pressure angle, h 20, 90°, Rp 50", "18.67842598645", steep.Gates()[0].Value}}
	for i, want := range []string{"45", "39.06013881753", "38.94044201972", "40.09753733086", "41.66666666667"} {
		deg := []float64{0, 60, 90, 120, 180}[i]
		zone, t := limacon.Cycle().Zone(deg)
		rows = append(rows, Row{source, Derived, fmt.Sprintf("limaçon Rp 30, h 20: radius of curvature at %g°", deg), want, 1 / limacon.Pitch().At(zone, t).K})
	}
	return rows, nil
}
