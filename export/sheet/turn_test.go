package sheet

import (
	"math"
	"strings"
	"testing"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// eccentricTurn is a circle of radius 40 about (-12, 0) under a roller of radius 10: the
// in-line slider-crank s = -e cos t + sqrt(M² - e² sin² t) - (M - e), e 12, M 50
// (H. A. Rothbart, ed., Cam Design Handbook, 2004, p. 461).
func eccentricTurn() *Turn {
	a, b := plane.Point{X: 28}, plane.Point{X: -52}
	t := &Turn{Clockwise: true, Center: true, Roller: 10, Datum: 38, Step: 5, Zero: a, Outside: 120,
		Hub: chain.Path{
			{Kind: chain.Arc, From: plane.Point{X: 8}, To: plane.Point{X: -8}, CCW: true},
			{Kind: chain.Arc, From: plane.Point{X: -8}, To: plane.Point{X: 8}, CCW: true},
		},
		Holes: []plane.Circle{{Center: plane.Point{X: -30, Y: 10}, Radius: 3}},
		Contour: chain.Path{
			{Kind: chain.Arc, From: a, To: b, Center: plane.Point{X: -12}, CCW: true},
			{Kind: chain.Arc, From: b, To: a, Center: plane.Point{X: -12}, CCW: true},
		}}
	t.Tools = []chain.Path{t.Contour}
	for k := range 73 {
		sin, cos := math.Sincos(float64(k) * 5 * math.Pi / 180)
		t.Lift = append(t.Lift, -12*cos+math.Sqrt(2500-144*sin*sin)-38)
		t.Velocity, t.Acceleration, t.Polar = append(t.Velocity, 0), append(t.Acceleration, 0), append(t.Polar, 0)
	}
	return t
}

// The sheet with a moving figure has one script of its own, which loads nothing; the contour
// stands in it as true arcs, and without scripts the figure stands at cam angle 0.
func TestMovingFigure(t *testing.T) {
	f := figures()
	f.Turn = eccentricTurn()
	out, err := HTML(sampleReport(), f)
	if err != nil {
		t.Fatal(err)
	}
	_, names := elements(t, out) // refuses event attributes and links that leave the page
	if names["script"] != 1 || names["svg"] != 4 {
		t.Errorf("%d scripts, %d figures; want 1 and 4", names["script"], names["svg"])
	}
	page := string(out)
	for _, want := range []string{
		`d="M 28 0 A 40 40 0 0 0 -52 0 A 40 40 0 0 0 28 0 Z"`, // counterclockwise with Y down is sweep 0
		`cx="38" cy="0" r="10"`, `cx="-30" cy="-10" r="3"`, `<circle r="60"`, `id="turn-tool"`, `over-angle`, `id="turn-controls" hidden="hidden"`, `aria-label="The cam and its follower`,
		`prefers-reduced-motion`, `,16.9081,`, // lift 16.90807704 at 120°
	} {
		if !strings.Contains(page, want) {
			t.Errorf("the page lacks %s", want)
		}
	}
	for _, bad := range []string{"https://", "fetch(", "XMLHttpRequest", "import("} {
		if i := strings.Index(page[strings.Index(page, "<script>"):], bad); i >= 0 {
			t.Errorf("the script holds %s", bad)
		}
	}
}

// Series that do not fit or are not finite are refused.
func TestMovingFigureRefused(t *testing.T) {
	for name, spoil := range map[string]func(*Turn){
		"no polar":     func(x *Turn) { x.Polar = nil },
		"NaN tool":     func(x *Turn) { x.Tools = []chain.Path{{{Kind: chain.Line, To: plane.Point{X: math.NaN()}}}} },
		"short series": func(x *Turn) { x.Velocity = x.Velocity[1:] },
		"wrong step":   func(x *Turn) { x.Step = 4 },
		"no contour":   func(x *Turn) { x.Contour = nil },
		"NaN lift":     func(x *Turn) { x.Lift[3] = math.NaN() },
		"infinite":     func(x *Turn) { x.Acceleration[0] = math.Inf(1) },
		"NaN point":    func(x *Turn) { x.Contour[1].To.X = math.NaN() },
	} {
		f := figures()
		f.Turn = eccentricTurn()
		spoil(f.Turn)
		if _, err := HTML(sampleReport(), f); err == nil {
			t.Errorf("%s: accepted", name)
		}
	}
}

// A barrel's development moves along X: its walls are open, have copies a turn apart on either side, and the
// window is one turn wide.
func TestMovingDevelopment(t *testing.T) {
	turn := eccentricTurn()
	wall := func(y float64) chain.Path {
		return chain.Path{{Kind: chain.Line, From: plane.Point{Y: y}, To: plane.Point{X: -90, Y: y}}}
	}
	turn.Contour, turn.Outer, turn.Offset, turn.Developed = wall(20), wall(40), 30, &Developed{PerDegree: -0.25, Length: 70}
	f := figures()
	f.Turn = turn
	out, err := HTML(sampleReport(), f)
	if err != nil {
		t.Fatal(err)
	}
	elements(t, out)
	page := string(out)
	for _, want := range []string{`viewBox="-45 -74.2 90 78.4"`, `data-developed="-0.25"`, `id="turn-contour" d="M 0 -20 L -90 -20"`, `d="M 0 -40 L -90 -40"`,
		`translate(-180 0)`, `translate(0 0)`, `translate(180 0)`, `cx="0" cy="-30" r="10"`} {
		if !strings.Contains(page, want) {
			t.Errorf("the page lacks %s", want)
		}
	}
	if strings.Count(page, `id="turn-contour"`) != 1 {
		t.Error("the measured wall stands in the page more than once")
	}
	turn.Outer[0].To.Y = math.NaN()
	if _, err := HTML(sampleReport(), f); err == nil {
		t.Error("a wall that is not a number was accepted")
	}
}
