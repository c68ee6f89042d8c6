//go:build peers

package smooth_test

import (
	"encoding/json"
	"fmt"
	"math"
	"os/exec"
	"strings"
	"testing"

	"lobewright/synth/motion"
	"lobewright/synth/smooth"
)

// scipyProgram smooths a table with SciPy's own periodic quintic spline, FITPACK's
// splrep (P. Dierckx, Curve and Surface Fitting with Splines, Oxford 1993), to the same
// sum of squared residuals, and evaluates our pieces with SciPy's PPoly.
const scipyProgram = `
import json, sys
import numpy as np
from scipy.interpolate import splrep, splev, PPoly
d = json.load(sys.stdin)
x, y = np.array(d["angle"]), np.array(d["lift"])
x, y = np.append(x, x[0] + 360), np.append(y, y[0])
tck = splrep(x, y, k=5, per=True, s=d["squares"])
at = np.array(d["at"])
c = np.array(d["poly"]).T[::-1]  # powers of degrees past the break, highest first
ours = PPoly(c, np.array(d["breaks"]))
inside = (at - d["breaks"][0]) % 360 + d["breaks"][0]
json.dump({"lift": splev(at, tck).tolist(), "acceleration": splev(at, tck, der=2).tolist(), "knots": len(tck[0]) - 11,
           "ours": ours(inside).tolist(), "ours_acceleration": ours.derivative(2)(inside).tolist()}, sys.stdout)
`

// known is a dwell, a rise, a dwell, a fall and a dwell.
func known(t *testing.T, rise, fall string, h float64) *motion.Cycle {
	t.Helper()
	law := func(name string) motion.Law {
		l, err := motion.Named(name, 0.5)
		if err != nil {
			t.Fatal(err)
		}
		return l
	}
	c, err := motion.Join(0, 0, []motion.Event{{Kind: motion.Dwell, Over: 60}, {Kind: motion.Rise, Lift: h, Over: 90, Law: law(rise)},
		{Kind: motion.Dwell, Over: 40}, {Kind: motion.Fall, Lift: h, Over: 120, Law: law(fall)}, {Kind: motion.Dwell, Over: 50}})
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// about returns a piece's six coefficients in powers of degrees past its start, by Taylor's
// shift of its own.
func about(p smooth.Piece) []float64 {
	c := make([]float64, 6)
	copy(c, p.Poly)
	a := (p.From - p.Origin) / p.Span
	for i := range c {
		for k := len(c) - 2; k >= i; k-- {
			c[k] += a * c[k+1]
		}
	}
	scale := 1.0
	for k := range c {
		c[k] *= scale
		scale /= p.Span
	}
	return c
}

func TestPeerSciPy(t *testing.T) {
	for _, laws := range [][2]string{{"modified-sine", "polynomial-3-4-5"}, {"cycloidal", "polynomial-4-5-6-7"}} {
		c := known(t, laws[0], laws[1], 14)
		var csv strings.Builder
		csv.WriteString("cam_angle,lift\n")
		for deg := range 360 {
			s, _, _, _ := c.At(float64(deg))
			fmt.Fprintf(&csv, "%d,%.3f\n", deg, s)
		}
		table, faults := smooth.Read([]byte(csv.String()), 0.001)
		if faults != nil {
			t.Fatal(faults)
		}
		got, report, err := smooth.Fit(table, 0.001)
		if err != nil {
			t.Fatal(err)
		}
		var in struct {
			Angle   []float64   `json:"angle"`
			Lift    []float64   `json:"lift"`
			Squares float64     `json:"squares"`
			At      []float64   `json:"at"`
			Breaks  []float64   `json:"breaks"`
			Poly    [][]float64 `json:"poly"`
		}
		for i := range table.Angle {
			in.Angle, in.Lift = append(in.Angle, table.Angle[i]), append(in.Lift, table.Lift[i])
			in.Squares += report.Residual[i] * report.Residual[i]
		}
		for i := range 720 {
			in.At = append(in.At, float64(i)/2)
		}
		for _, z := range got.Pieces {
			in.Breaks = append(in.Breaks, z.From)
			in.Poly = append(in.Poly, about(z))
		}
		in.Breaks = append(in.Breaks, got.Pieces[0].From+360)
		data, err := json.Marshal(in)
		if err != nil {
			t.Fatal(err)
		}
		cmd := exec.Command("/usr/bin/python3", "-c", scipyProgram)
		cmd.Stdin = strings.NewReader(string(data))
		var errs strings.Builder
		cmd.Stderr = &errs
		text, err := cmd.Output()
		if err != nil {
			t.Fatalf("python3 with SciPy: %v\n%s", err, errs.String())
		}
		var out struct {
			Lift             []float64 `json:"lift"`
			Acceleration     []float64 `json:"acceleration"`
			Ours             []float64 `json:"ours"`
			OursAcceleration []float64 `json:"ours_acceleration"`
			Knots            int       `json:"knots"`
		}
		if err := json.Unmarshal(text, &out); err != nil {
			t.Fatal(err)
		}
		peak, w := c.Peaks().Acceleration.Value, (180/math.Pi)*(180/math.Pi)
		lift, rms, ours, theirs := 0.0, 0.0, 0.0, 0.0
		for i, at := range in.At {
			s, _, a, _ := got.At(at)
			if math.Abs(s-out.Ours[i]) > 1e-12*14 || math.Abs(a-out.OursAcceleration[i]*w) > 1e-9*peak {
				t.Fatalf("at %g: lift %.15g, by PPoly %.15g; acceleration %.12g, %.12g", at, s, out.Ours[i], a, out.OursAcceleration[i]*w)
			}
			_, _, exact, _ := c.At(at)
			lift = math.Max(lift, math.Abs(s-out.Lift[i]))
			rms += math.Pow(a-out.Acceleration[i]*w, 2) / 720
			ours += math.Pow(a-exact, 2) / 720
			theirs += math.Pow(out.Acceleration[i]*w-exact, 2) / 720
		}
		t.Logf("%v: %d pieces, FITPACK %d; lifts within %.5f; acceleration root mean square apart %.4f of the peak, off the law by %.4f, FITPACK by %.4f",
			laws, report.Pieces, out.Knots, lift, math.Sqrt(rms)/peak, math.Sqrt(ours)/peak, math.Sqrt(theirs)/peak)
		if lift > 0.002 || math.Sqrt(rms) > 0.03*peak || report.Pieces > 2*out.Knots {
			t.Errorf("%v: lifts %g apart, accelerations %g of %g, %d pieces against %d", laws, lift, math.Sqrt(rms), peak, report.Pieces, out.Knots)
		}
	}
}
