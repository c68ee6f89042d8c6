package pack

import (
	"math"
	"testing"

	"lobewright/synth/plane"
)

// What a follower does on a contour that is too large all around is read off the parallel curve itself:
// at each cam angle the place is searched where the follower touches it, and the motion taken from that place's own
// circle of curvature. The answers predict the change of lift and acceleration to first order.
func TestAnswersAgainstParallels(t *testing.T) {
	t.Parallel()
	for _, name := range []string{"stick-lift", "tray-tilt", "lid-swing", "brush-wipe", "flap-press", "tray-sweep"} {
		_, j, err := work(readSample(t, "../../samples/"+name+".yaml"), options())
		if err != nil {
			t.Fatal(err)
		}
		const share = 1e-5 // of the size: second order stays below
		d := share * j.size()
		answers, k := j.answers(), 0
		worst, scale, lifts := 0.0, 0.0, 0.0
		j.overTurn(func(zone int, from, to, at float64) {
			a := answers[k]
			k++
			if at-from < 1 || to-at < 1 {
				return
			}
			curve := j.cam.FromPitch(d)
			touch := func(u float64) (plane.Frame, float64) {
				f := curve.At(zone, u)
				r, _ := j.cam.Follower().OnArc(at, f)
				return f, r.At.Sub(f.P).Dot(f.T)
			}
			u0, u1 := at-1e-3, at+1e-3
			_, y0 := touch(u0)
			_, y1 := touch(u1)
			for range 30 {
				if y1 == y0 || math.Abs(y1) < 1e-13*j.size() {
					break
				}
				u0, u1, y0 = u1, u1-y1*(u1-u0)/(y1-y0), y1
				_, y1 = touch(u1)
			}
			f, _ := touch(u1)
			r, _ := j.cam.Follower().OnArc(at, f)
			l := j.cam.LiftIn(zone, at)
			lifts = math.Max(lifts, math.Abs(math.Abs(r.Lift-l.S)/d-math.Abs(a.G))/math.Abs(a.G))
			worst = math.Max(worst, math.Abs(math.Abs(r.Acceleration-l.A)/d-math.Abs(a.DDG)))
			scale = math.Max(scale, math.Abs(a.DDG))
		})
		t.Logf("%s: lift within %.2g, acceleration within %.3g of %.3g", name, lifts, worst, scale)
		if k != len(answers) || lifts > 2e-3 || worst > 0.01*scale+2e-3*math.Abs(answers[0].G) {
			t.Errorf("%s: lift off by %.3g of itself, acceleration by %.3g of %.3g", name, lifts, worst, scale)
		}
	}
}
