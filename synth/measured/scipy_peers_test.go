//go:build peers

package measured_test

import (
	"encoding/json"
	"math"
	"os/exec"
	"strings"
	"testing"

	"lobewright/synth/measured"
	"lobewright/synth/motion"
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
json.dump({"lift": splev(at, tck).tolist(), "acceleration": splev(at, tck, der=2).tolist(), "knots": len(tck[0]) - 11,
           "ours": ours(at).tolist(), "ours_acceleration": ours.derivative(2)(at).tolist()}, sys.stdout)
`

func TestPeerSciPy(t *testing.T) {
	for _, laws := range [][2]string{{"modified-sine", "polynomial-3-4-5"}, {"cycloidal", "polynomial-4-5-6-7"}} {
		c := cycle(t, laws[0], laws[1], 14)
		csv := tabulated(c, 360, 0.001)
		m := smooth(t, csv, 0.001)
		got, err := motion.Of(m.Zones)
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
		rows, faults := measured.Parse([]byte(csv), 0.001)
		if faults != nil {
			t.Fatal(faults)
		}
		for i, r := range rows {
			in.Angle, in.Lift = append(in.Angle, r.Angle), append(in.Lift, r.Lift)
			in.Squares += m.Report.Residuals[i] * m.Report.Residuals[i]
		}
		for i := range 720 {
			in.At = append(in.At, m.Zones[0].From+float64(i)/2)
		}
		for _, z := range m.Zones {
			in.Breaks = append(in.Breaks, z.From)
			p := make([]float64, len(z.Poly))
			for k, v := range z.Poly {
				p[k] = v / math.Pow(z.Span, float64(k))
			}
			in.Poly = append(in.Poly, p)
		}
		in.Breaks = append(in.Breaks, m.Zones[0].From+360)
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
			laws, m.Report.Knots, out.Knots, lift, math.Sqrt(rms)/peak, math.Sqrt(ours)/peak, math.Sqrt(theirs)/peak)
		if lift > 0.002 || math.Sqrt(rms) > 0.03*peak || m.Report.Knots > 2*out.Knots {
			t.Errorf("%v: lifts %g apart, accelerations %g of %g, %d pieces against %d", laws, lift, math.Sqrt(rms), peak, m.Report.Knots, out.Knots)
		}
	}
}
