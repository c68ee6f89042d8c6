package svg

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// sampleCam is a plate cam worked out here from its definition: rise and fall by the
// polynomial 10u³ - 15u⁴ + 6u⁵ between dwells, the roller center at
// (x0 + lift, offset) turned into the cam frame.
type sampleCam struct {
	rb, r, offset, rise, k float64 // k scales lengths: 1 for mm, 1/25.4 for inch
	clockwise              bool
}

var sampleEvents = []struct {
	from, to, a, b float64 // lift shares at the ends
	text           string
}{
	{0, 60, 0, 0, "dwell"}, {60, 150, 0, 1, "rise 14, polynomial-3-4-5"}, {150, 190, 1, 1, "dwell"},
	{190, 310, 1, 0, "fall 14, polynomial-3-4-5"}, {310, 360, 0, 0, "dwell"},
}

func mmCam(offset float64, clockwise bool) sampleCam {
	return sampleCam{rb: 45, r: 11, offset: offset, rise: 14, k: 1, clockwise: clockwise}
}

// lift returns lift, velocity, acceleration and jerk per radian in event i.
func (s sampleCam) lift(i int, t float64) (y, v, a, j float64) {
	e := sampleEvents[i]
	b := (e.to - e.from) * math.Pi / 180
	u := (t - e.from) / (e.to - e.from)
	h := s.rise * (e.b - e.a)
	y = s.rise*e.a + h*u*u*u*(10+u*(-15+6*u))
	v = h / b * 30 * u * u * (1 - u) * (1 - u)
	a = h / (b * b) * 60 * u * (1 - 3*u + 2*u*u)
	j = h / (b * b * b) * 60 * (1 - 6*u + 6*u*u)
	return y, v, a, j
}

// at returns the pitch and contour points, pressure angle (deg) and the curvature of the contour.
func (s sampleCam) at(i int, t float64) (pitch, contour plane.Point, pressure, curvature float64) {
	y, v, a, _ := s.lift(i, t)
	x0 := math.Sqrt((s.rb+s.r)*(s.rb+s.r) - s.offset*s.offset)
	sign := 1.0
	if !s.clockwise {
		sign = -1
	}
	// In the follower's frame the velocity of the pitch point over the cam is
	// (v, 0) + sign * cross(k, (x, offset)).
	x := x0 + y
	d1 := plane.Vector{X: v - sign*s.offset, Y: sign * x}
	d2 := plane.Vector{X: a - x, Y: 2*sign*v - s.offset}
	kappa := sign * d1.Cross(d2) / math.Pow(d1.Norm(), 3)
	turn := plane.Angle(sign * t * math.Pi / 180)
	n := d1.Unit().Left().Scale(-sign) // outward
	at := plane.Vector{X: x, Y: s.offset}
	in := at.Add(n.Scale(-s.r))
	pitch = plane.Point{}.Add(at.Turn(turn))
	contour = plane.Point{}.Add(in.Turn(turn))
	return pitch, contour, math.Atan2(n.Y, n.X) * 180 / math.Pi, kappa / (1 - s.r*kappa)
}

// path puts arcs through every third of three points of the curve pick.
func (s sampleCam) path(pick func(pitch, contour plane.Point) plane.Point) chain.Path {
	var p chain.Path
	for i, e := range sampleEvents {
		n := int((e.to - e.from) / 10)
		for k := 0; k < n; k++ {
			t0 := e.from + (e.to-e.from)*float64(k)/float64(n)
			t1 := e.from + (e.to-e.from)*float64(k+1)/float64(n)
			get := func(t float64) plane.Point {
				a, b, _, _ := s.at(i, t)
				q := pick(a, b)
				return plane.Point{X: q.X * s.k, Y: q.Y * s.k}
			}
			p = append(p, through(get(t0), get((t0+t1)/2), get(t1)))
		}
	}
	for i := range p {
		p[i].To = p[(i+1)%len(p)].From
	}
	return p
}

// through is the arc through three points, a line when they are in line.
func through(a, b, c plane.Point) chain.Element {
	d := 2 * b.Sub(a).Cross(c.Sub(a))
	if math.Abs(d) < 1e-9*a.Dist(c)*a.Dist(c) {
		return chain.Element{Kind: chain.Line, From: a, To: c}
	}
	bb, cc := b.Sub(a).Dot(b.Sub(a)), c.Sub(a).Dot(c.Sub(a))
	m := plane.Point{
		X: a.X + (c.Y-a.Y)/d*bb - (b.Y-a.Y)/d*cc,
		Y: a.Y + (b.X-a.X)/d*cc - (c.X-a.X)/d*bb,
	}
	return chain.Element{Kind: chain.Arc, From: a, To: c, Center: m, CCW: d > 0}
}

func (s sampleCam) events() []Event {
	var es []Event
	for i, e := range sampleEvents {
		_, c, _, _ := s.at(i, e.from)
		es = append(es, Event{e.from, e.to, e.text, plane.Point{X: c.X * s.k, Y: c.Y * s.k}})
	}
	return es
}

func (s sampleCam) head() Head {
	units := "mm"
	if s.k != 1 {
		units = "inch"
	}
	return Head{Part: "stick-lift", Title: "Chalk stick lift", Revision: "A", Units: units, Speed: 180,
		Clockwise: s.clockwise, Released: true,
		SHA256: "5f2d8e0c1b7a49e6d3c2b1a0f9e8d7c6b5a493827160514233241506978869fa"}
}

var sampleCautions = []string{
	"A control does what the program says and rarely detects a mistake. Not verified on this machine: check units, datum, " +
		"turning direction, tool diameter, offset register and clamp clearance.",
	"Run dry, single block, low rapid, hand on feed hold; first part in soft material; measure, then release.",
	"Rotating cams and followers are nip and shear points: guard them.",
}

func (s sampleCam) drawing() DrawingData {
	k := s.k
	x0 := math.Sqrt((s.rb+s.r)*(s.rb+s.r) - s.offset*s.offset)
	d := DrawingData{
		Head: s.head(), Material: "16MnCr5", Hardness: "58+4 HRC, case 0.8", Finish: "Ra 0.4 on contour",
		Date: "2026-03-02", Drawn: "K. Sample", Checked: "R. Example", Thickness: 12 * k,
		Contours:   []chain.Path{s.path(func(_, c plane.Point) plane.Point { return c })},
		PitchCurve: s.path(func(p, _ plane.Point) plane.Point { return p }),
		BaseRadius: s.rb * k, RollerDiameter: 2 * s.r * k, Roller: plane.Point{X: x0 * k, Y: s.offset * k},
		Offset: s.offset * k, Profile: 0.020 * k,
		Bore:   &Bore{20 * k, "H7", &Keyway{6 * k, 2.8 * k, 0, "P9"}},
		Holes:  []Hole{{6 * k, 26 * k, 200}},
		Events: s.events(), Notes: []string{"Break edges 0.2 mm.", "Stamp part and revision on the marked face."},
		Cautions: sampleCautions,
	}
	d.Zero = d.Events[0].Start
	return d
}
