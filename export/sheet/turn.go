package sheet

import (
	"fmt"
	"html/template"
	"math"
	"strconv"
	"strings"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Turn is the moving figure: the cam turns under its follower. Lengths are in the
// units of the report, seen on the marked face with Y up.
type Turn struct {
	Clockwise bool
	Contour   chain.Path // closed, cam frame
	Bore      float64    // diameter, 0 when there is none
	Center    bool       // the follower has a center: a roller's, or an edge
	Roller    float64    // radius
	Datum     float64    // X of the center at lift 0, or of the face
	Offset    float64    // Y of the center
	Bars      []Bar      // arm and face at lift 0
	Pivot     float64    // X of the pivot of a swinging follower, whose lifts are degrees; 0 for one that slides
	Below     bool       // a swinging follower below the center line

	// Lift, Velocity and Acceleration at cam angles 0, Step, 2 Step, ... 360 degrees;
	// velocity and acceleration per second and second squared.
	Step                         float64
	Lift, Velocity, Acceleration []float64
}

// Bar is a line of the follower, cam frame at lift 0, Y up.
type Bar struct{ From, To plane.Point }

// barView is a Bar with Y down.
type barView struct{ X1, Y1, X2, Y2 float64 }

// turnView is what the template shows of a Turn.
type turnView struct {
	Turn
	View           string // viewBox, Y down
	Path           template.HTMLAttr
	CenterY        float64 // of the roller, Y down
	LineFrom, Line float64 // X of the ends of the follower's line
	Mark           float64 // radius up to which the zero mark runs
	Stroke, Dash   float64
	Dot            float64 // radius of the pivot's mark
	Bars           []barView
}

// look prepares the figure; nil stays nil. The error names what is not finite or does not fit.
func (t *Turn) look() (*turnView, error) {
	if t == nil {
		return nil, nil
	}
	n := len(t.Lift)
	if n < 2 || len(t.Velocity) != n || len(t.Acceleration) != n || math.Abs(float64(n-1)*t.Step-360) > 1e-9 || len(t.Contour) == 0 {
		return nil, fmt.Errorf("sheet: moving figure: %d, %d, %d samples at steps of %v", n, len(t.Velocity), len(t.Acceleration), t.Step)
	}
	far, lift := 0.0, 0.0
	for _, e := range t.Contour {
		far = math.Max(far, e.From.Radius())
	}
	for i, s := range t.Lift {
		lift = math.Max(lift, s)
		if !(math.Abs(s)+math.Abs(t.Velocity[i])+math.Abs(t.Acceleration[i]) < math.Inf(1)) {
			return nil, fmt.Errorf("sheet: moving figure: sample %d is not finite", i)
		}
	}
	room := 0.08 * far
	right := t.Datum + lift + t.Roller + room
	if t.Pivot > 0 {
		right = t.Pivot + room
	}
	v := &turnView{Turn: *t, CenterY: 0 - t.Offset, LineFrom: t.Datum - t.Roller, Line: right, Mark: 0.25 * far, Stroke: far / 160, Dash: far / 40}
	v.View = fmt.Sprintf("%.5g %.5g %.5g %.5g", -far-room, -far-room, far+room+right, 2*(far+room))
	v.Dot = 2 * v.Stroke
	for _, b := range t.Bars {
		v.Bars = append(v.Bars, barView{b.From.X, 0 - b.From.Y, b.To.X, 0 - b.To.Y})
	}
	d, err := pathData(t.Contour)
	if err != nil {
		return nil, err
	}
	v.Path = template.HTMLAttr(`d="` + d + `"`)
	return v, nil
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
	return b.String() + " Z", nil
}

// Numbers rounds a series for the page: six figures are more than a screen shows.
func (t *turnView) Numbers(series []float64) []float64 {
	out := make([]float64, len(series))
	for i, v := range series {
		out[i], _ = strconv.ParseFloat(strconv.FormatFloat(v, 'g', 6, 64), 64)
	}
	return out
}
