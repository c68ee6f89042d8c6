package sheet

import (
	"fmt"
	"html/template"
	"math"
	"slices"
	"strconv"
	"strings"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Turn is the moving figure: the cam turns under its follower. Lengths are in the
// units of the report, seen on the marked face with Y up.
type Turn struct {
	Clockwise bool
	Contour   chain.Path // closed, cam frame; of a groove the inner wall
	Outer     chain.Path // closed: the outer wall of a groove; else empty
	Outside   float64    // diameter of the body around a groove, 0 when there is none
	Hub       chain.Path // closed: the bore with its keyway; empty when there is none
	Holes     []plane.Circle
	Zero      plane.Point  // contour point at cam angle 0
	Tools     []chain.Path // closed: the tools' center paths, last pass; may be empty
	Center    bool         // the follower has a center: a roller's, or an edge
	Roller    float64      // radius
	Datum     float64      // X of the center at lift 0, or of the face
	Offset    float64      // Y of the center
	Bars      []Bar        // arm and face at lift 0
	Pivot     float64      // X of the pivot of a swinging follower, whose lifts are degrees; 0 for one that slides
	Below     bool         // a swinging follower below the center line

	// Developed is set for a barrel: Contour and Outer are then its open walls in the developed plane, which
	// moves along X under the follower, and the follower's center moves along Y from Offset on; Datum is 0.
	Developed *Developed

	// Lift, Velocity and Acceleration at cam angles 0, Step, 2 Step, ... 360 degrees,
	// velocity and acceleration per second and second squared; Polar is the polar angle of the contour point
	// that is touched, degrees, without jumps.
	Step                                float64
	Lift, Velocity, Acceleration, Polar []float64
}

// Developed is the development of a barrel.
type Developed struct {
	PerDegree float64 // length along X a degree of cam angle, signed
	Length    float64 // of the barrel, along Y from 0
}

// period is the length of the development along X.
func (d Developed) period() float64 { return 360 * math.Abs(d.PerDegree) }

// Bar is a line of the follower, cam frame at lift 0, Y up.
type Bar struct{ From, To plane.Point }

// barView is a Bar with Y down.
type barView struct{ X1, Y1, X2, Y2 float64 }

// round is a hole with Y down.
type round struct{ X, Y, R float64 }

// turnView is what the template shows of a Turn.
type turnView struct {
	Turn
	View           string // viewBox, Y down
	Path           template.HTMLAttr
	OuterPath      template.HTMLAttr
	HubPath        template.HTMLAttr
	ZeroPath       template.HTMLAttr
	Copies         []float64 // X of the copies of a development, one after the other
	ToolPaths      []template.HTMLAttr
	Rounds         []round
	CenterY        float64 // of the roller, Y down
	LineFrom, Line float64 // X of the ends of the follower's line
	Stroke, Dash   float64
	Dot            float64 // radius of the pivot's mark
	Bars           []barView
}

// look prepares the figure; nil stays nil. The error names what is not finite or does not fit.
func (t *Turn) look() (*turnView, error) {
	if t == nil {
		return nil, nil
	}
	if err := t.check(); err != nil {
		return nil, err
	}
	if t.Developed != nil {
		return t.develop()
	}
	far, lift := t.Outside/2, slices.Max(t.Lift)
	for _, p := range append([]chain.Path{t.Contour, t.Outer}, t.Tools...) {
		for _, e := range p {
			far = math.Max(far, e.From.Radius())
		}
	}
	room := 0.08 * far
	right := math.Max(far+room, t.Datum+lift+t.Roller+room)
	if t.Pivot > 0 {
		right = math.Max(far+room, t.Pivot+room)
	}
	v := &turnView{Turn: *t, CenterY: 0 - t.Offset, LineFrom: t.Datum - t.Roller, Line: right, Stroke: far / 160, Dash: far / 40}
	v.View = fmt.Sprintf("%.5g %.5g %.5g %.5g", -far-room, -far-room, far+room+right, 2*(far+room))
	v.Dot = 2 * v.Stroke
	for _, b := range t.Bars {
		v.Bars = append(v.Bars, barView{b.From.X, 0 - b.From.Y, b.To.X, 0 - b.To.Y})
	}
	for _, h := range t.Holes {
		v.Rounds = append(v.Rounds, round{h.Center.X, 0 - h.Center.Y, h.Radius})
	}
	for _, c := range []struct {
		to   *template.HTMLAttr
		path chain.Path
	}{{&v.Path, t.Contour}, {&v.OuterPath, t.Outer}, {&v.HubPath, t.Hub}, {&v.ZeroPath, t.mark(far)}} {
		var err error
		if *c.to, err = pathAttr(c.path); err != nil {
			return nil, err
		}
	}
	for _, p := range t.Tools {
		a, err := pathAttr(p)
		if err != nil {
			return nil, err
		}
		v.ToolPaths = append(v.ToolPaths, a)
	}
	return v, nil
}

// check refuses series that do not fit or are not finite.
func (t *Turn) check() error {
	n := len(t.Lift)
	if n < 2 || len(t.Velocity) != n || len(t.Acceleration) != n || len(t.Polar) != n || math.Abs(float64(n-1)*t.Step-360) > 1e-9 || len(t.Contour) == 0 {
		return fmt.Errorf("sheet: moving figure: %d, %d, %d, %d samples at steps of %v", n, len(t.Velocity), len(t.Acceleration), len(t.Polar), t.Step)
	}
	for i, s := range t.Lift {
		if !(math.Abs(s)+math.Abs(t.Velocity[i])+math.Abs(t.Acceleration[i])+math.Abs(t.Polar[i]) < math.Inf(1)) {
			return fmt.Errorf("sheet: moving figure: sample %d is not finite", i)
		}
	}
	return nil
}

// mark is the zero mark: a triangle inside the contour with its tip near it, sized by the cam.
func (t *Turn) mark(far float64) chain.Path {
	if t.Zero == (plane.Point{}) {
		return nil
	}
	u := t.Zero.Sub(plane.Point{}).Unit()
	at := func(in, side float64) plane.Point {
		return t.Zero.Add(u.Scale(-in * far)).Add(u.Left().Scale(side * far))
	}
	a, b, c := at(0.02, 0), at(0.08, 0.025), at(0.08, -0.025)
	return chain.Path{{Kind: chain.Line, From: a, To: b}, {Kind: chain.Line, From: b, To: c}, {Kind: chain.Line, From: c, To: a}}
}

// pathAttr is the attribute that draws a path, nothing for an empty one.
func pathAttr(p chain.Path) (template.HTMLAttr, error) {
	if len(p) == 0 {
		return "", nil
	}
	d, err := pathData(p)
	if p[0].From == p[len(p)-1].To {
		d += " Z"
	}
	return template.HTMLAttr(`d="` + d + `"`), err
}

// pathData writes a path as SVG path data, Y down: lines and arcs stay what they are.
func pathData(p chain.Path) (string, error) {
	var b strings.Builder
	put := func(vs ...float64) error {
		for _, v := range vs {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return fmt.Errorf("sheet: moving figure: a coordinate is %v", v)
			}
			b.WriteString(" " + strconv.FormatFloat(v, 'g', 9, 64))
		}
		return nil
	}
	b.WriteString("M")
	if err := put(p[0].From.X, 0-p[0].From.Y); err != nil {
		return "", err
	}
	for _, e := range p {
		if e.Kind == chain.Line {
			b.WriteString(" L")
		} else {
			large, sweep := 0, 1 // clockwise as seen is sweep 1 with Y down
			if math.Abs(e.Sweep()) > math.Pi {
				large = 1
			}
			if e.CCW {
				sweep = 0
			}
			b.WriteString(" A")
			if err := put(e.Radius(), e.Radius()); err != nil {
				return "", err
			}
			fmt.Fprintf(&b, " 0 %d %d", large, sweep)
		}
		if err := put(e.To.X, 0-e.To.Y); err != nil {
			return "", err
		}
	}
	return b.String(), nil
}

// Numbers rounds a series for the page: six figures are more than a screen shows.
func (t *turnView) Numbers(series []float64) []float64 {
	out := make([]float64, len(series))
	for i, v := range series {
		out[i], _ = strconv.ParseFloat(strconv.FormatFloat(v, 'g', 6, 64), 64)
	}
	return out
}
