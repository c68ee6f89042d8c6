package table

import (
	"bytes"
	"encoding/csv"
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// An eccentric circle of radius R whose center is e off the axis, touched at
// its far point and its near point: the figures are those of the circle.
func eccentric() []InspectionRow {
	const R, e, r = 30, 4, 10
	return []InspectionRow{
		{CamAngle: 0, Lift: 0, CenterX: -(R - e + r), ContourX: -(R - e), Radius: R - e, PolarAngle: 180, NormalAngle: 180, RadiusOfCurvature: R},
		{CamAngle: 180, Lift: 2 * e, CenterX: R + e + r, ContourX: R + e, Radius: R + e, PolarAngle: 360, NormalAngle: -1e-9, RadiusOfCurvature: R},
	}
}

func TestInspectionBytes(t *testing.T) {
	got, err := Inspection(eccentric(), 3)
	if err != nil {
		t.Fatal(err)
	}
	const want = `cam_angle,lift,center_x,center_y,contour_x,contour_y,radius,polar_angle,normal_angle,pressure_angle,radius_of_curvature
0.000000,0.000,-36.000,0.000,-26.000,0.000,26.000,180.000000,180.000000,0.000000,30.000
180.000000,8.000,44.000,0.000,34.000,0.000,34.000,0.000000,0.000000,0.000000,30.000
`
	if string(got) != want {
		t.Errorf("got\n%swant\n%s", got, want)
	}
}

func TestMotionBytesAtAJunction(t *testing.T) {
	rows := []MotionRow{
		{CamAngle: -0.25, Velocity: math.Copysign(0, -1), Jerk: -4e-7},
		{CamAngle: 0, Acceleration: 0},
		{CamAngle: 0, Acceleration: 1234.5678915},
	}
	got, err := Motion(rows, 6)
	if err != nil {
		t.Fatal(err)
	}
	const want = `cam_angle,lift,velocity,acceleration,jerk
-0.250000,0.000000,0.000000,0.000000,0.000000
0.000000,0.000000,0.000000,0.000000,0.000000
0.000000,0.000000,0.000000,1234.567892,0.000000
`
	if string(got) != want {
		t.Errorf("got\n%swant\n%s", got, want)
	}
}

func TestStraightAndFlat(t *testing.T) {
	for _, c := range []struct {
		radius float64
		want   string
	}{
		{math.Inf(1), "inf"}, {math.Inf(-1), "inf"}, {StraightRadius, "inf"}, {-2 * StraightRadius, "inf"},
		{StraightRadius / 2, "500000000.00"}, {-7.126, "-7.13"}, {-0.001, "0.00"},
	} {
		got, err := Inspection([]InspectionRow{{NoCenter: true, CenterX: math.NaN(), RadiusOfCurvature: c.radius}}, 2)
		if err != nil {
			t.Fatal(err)
		}
		line := strings.Split(string(got), "\n")[1]
		if !strings.HasSuffix(line, ","+c.want) {
			t.Errorf("radius of curvature %g: got %q, want the end %q", c.radius, line, c.want)
		}
		if !strings.HasPrefix(line, "0.000000,0.00,,,0.00,") {
			t.Errorf("a flat face leaves the center empty; got %q", line)
		}
	}
}

func TestRefused(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	good := []InspectionRow{{CamAngle: 1}, {CamAngle: 2}}
	with := func(change func(*InspectionRow)) func() ([]byte, error) {
		rows := append([]InspectionRow(nil), good...)
		change(&rows[1])
		return func() ([]byte, error) { return Inspection(rows, 6) }
	}
	cases := map[string]struct {
		call func() ([]byte, error)
		say  []string
	}{
		"no rows":        {func() ([]byte, error) { return Motion(nil, 6) }, []string{"no rows"}},
		"decimals below": {func() ([]byte, error) { return Inspection(good, -1) }, []string{"-1 decimals", "0 to 11"}},
		"decimals above": {func() ([]byte, error) { return Inspection(good, 12) }, []string{"12 decimals", "0 to 11"}},
		"order":          {with(func(r *InspectionRow) { r.CamAngle = 0.5 }), []string{"row 2", "0.5 comes after 1"}},
		"nan angle":      {with(func(r *InspectionRow) { r.CamAngle = nan }), []string{"row 2", "cam_angle", "NaN"}},
		"nan center":     {with(func(r *InspectionRow) { r.CenterY = nan }), []string{"center_y", "cam angle 2"}},
		"nan curvature":  {with(func(r *InspectionRow) { r.RadiusOfCurvature = nan }), []string{"radius_of_curvature"}},
		"inf radius":     {with(func(r *InspectionRow) { r.Radius = inf }), []string{"radius is +Inf"}},
		"inf polar":      {with(func(r *InspectionRow) { r.PolarAngle = -inf }), []string{"polar_angle is -Inf"}},
		"huge":           {with(func(r *InspectionRow) { r.Lift = 1e16 }), []string{"lift is 1e+16"}},
		"nan jerk":       {func() ([]byte, error) { return Motion([]MotionRow{{Jerk: nan}}, 6) }, []string{"motion table", "jerk"}},
		"inf velocity":   {func() ([]byte, error) { return Motion([]MotionRow{{Velocity: inf}}, 6) }, []string{"velocity is +Inf"}},
	}
	for name, c := range cases {
		out, err := c.call()
		if err == nil || out != nil {
			t.Errorf("%s: accepted", name)
			continue
		}
		for _, s := range c.say {
			if !strings.Contains(err.Error(), s) {
				t.Errorf("%s: %q does not say %q", name, err, s)
			}
		}
	}
}

// Any finite table comes back through encoding/csv within half a last digit,
// with the same count of rows and columns, and never as -0.
func TestMotionRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		decimals := rapid.IntRange(0, 8).Draw(t, "decimals")
		number := rapid.Float64Range(-1e6, 1e6)
		var rows []MotionRow
		at := rapid.Float64Range(-10, 10).Draw(t, "start")
		for range rapid.IntRange(1, 6).Draw(t, "rows") {
			at += rapid.Float64Range(0, 60).Draw(t, "step")
			rows = append(rows, MotionRow{at, number.Draw(t, "s"), number.Draw(t, "v"), number.Draw(t, "a"), number.Draw(t, "j")})
		}
		out, err := Motion(rows, decimals)
		if err != nil {
			t.Fatal(err)
		}
		if bytes.ContainsAny(out, "\r\" ") {
			t.Fatalf("bytes that a plain field does not hold: %q", out)
		}
		records, err := csv.NewReader(bytes.NewReader(out)).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		if len(records) != len(rows)+1 {
			t.Fatalf("%d records for %d rows", len(records), len(rows))
		}
		for i, r := range rows {
			compare(t, records[i+1][0], r.CamAngle, AngleDecimals)
			for j, v := range []float64{r.Lift, r.Velocity, r.Acceleration, r.Jerk} {
				compare(t, records[i+1][j+1], v, decimals)
			}
		}
	})
}

func compare(t *rapid.T, text string, want float64, decimals int) {
	got, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	if got == 0 && math.Signbit(got) {
		t.Fatalf("%g is printed as %q", want, text)
	}
	half := 0.5 * math.Pow(10, -float64(decimals))
	if rounding := 1e-15 * math.Abs(want); math.Abs(got-want) > half+rounding {
		t.Fatalf("%g is printed as %q", want, text)
	}
	if point := strings.IndexByte(text, '.'); decimals > 0 && len(text)-point-1 != decimals {
		t.Fatalf("%q has not %d decimals", text, decimals)
	}
}
