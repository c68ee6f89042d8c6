package pack

import (
	"encoding/csv"
	"math"
	"strconv"
	"strings"
	"testing"
)

// rowsOf makes a sample and returns the rows of one of its tables.
func rowsOf(t *testing.T, sample, tail string) [][]string {
	t.Helper()
	p, err := Make(readSample(t, samplesFolder+"/"+sample+".yaml"), options())
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range p.Files {
		if f.Name == sample+"."+tail {
			rows, err := csv.NewReader(strings.NewReader(string(f.Data))).ReadAll()
			if err != nil {
				t.Fatal(err)
			}
			return rows
		}
	}
	t.Fatal("no table", tail)
	return nil
}

// The motion table has a row every 0.25° and at every junction, both sides where
// something jumps: constant acceleration starts with 4 h w²/beta² (H. A. Rothbart, ed., Cam
// Design Handbook, 2004, p. 35), h 10, 100°, 160 rpm.
func TestMotionTable(t *testing.T) {
	rows := rowsOf(t, "sleeve-fold", "motion.csv")
	if got := strings.Join(rows[0], ","); got != "cam_angle,lift,velocity,acceleration,jerk" {
		t.Errorf("header %s", got)
	}
	var at20 []float64
	angles := map[string]bool{}
	for _, r := range rows[1:] {
		angles[r[0]] = true
		if r[0] == "20.000000" {
			a, err := strconv.ParseFloat(r[3], 64)
			if err != nil {
				t.Fatal(err)
			}
			at20 = append(at20, a)
		}
	}
	beta, w := 100*math.Pi/180, 160*math.Pi/30
	if want := 4 * 10 * w * w / (beta * beta); len(at20) != 2 || at20[0] != 0 || math.Abs(at20[1]-want) > 1e-5 {
		t.Errorf("acceleration at 20°: %v, want 0 and %v", at20, want)
	}
	if len(angles) < 1440 {
		t.Errorf("%d cam angles", len(angles))
	}
}

// The inspection table has the header of the contract, a row a degree, and on the
// low dwell the base circle.
func TestInspectionTable(t *testing.T) {
	rows := rowsOf(t, "stick-lift", "inspection.csv")
	if got := strings.Join(rows[0], ","); got != "cam_angle,lift,center_x,center_y,contour_x,contour_y,radius,polar_angle,normal_angle,pressure_angle,radius_of_curvature" {
		t.Errorf("header %s", got)
	}
	if n := len(rows) - 1; n < 360 || n > 370 {
		t.Errorf("%d rows", n)
	}
	if r := rows[1]; r[0] != "0.000000" || r[6] != "45.000000" || r[10] != "45.000000" {
		t.Errorf("first row %v: on the low dwell radius and radius of curvature are the base radius 45", r)
	}
}
