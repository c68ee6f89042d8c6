package pack

import (
	"math"

	"lobewright/export/svg"
	"lobewright/synth"
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// tracePoints is how many points of each element the deviation chart shows.
const tracePoints = 7

// trace samples the deviation of a closed path around its exact curve, positive
// outside, for a chart. It proves nothing: the certificate does.
func (j *job) trace(exact *synth.Curve, path chain.Path) [][]svg.DeviationSample {
	if j.drum() {
		return j.drumTrace(exact, path)
	}
	foot := j.nearest(exact, path[0].From)
	var run []svg.DeviationSample
	runs := [][]svg.DeviationSample{}
	start := foot
	for _, e := range path {
		for k := range tracePoints {
			p := e.PointAt((float64(k) + 0.5) / tracePoints)
			foot = j.footNear(exact, p, foot)
			zone, t := j.cam.Cycle().Zone(foot)
			f := exact.At(zone, t)
			s := svg.DeviationSample{CamAngle: plane.Wrap360(foot), Polar: p.PolarAngle(), Value: p.Sub(f.P).Dot(j.outward(f))}
			if n := len(run); n > 0 && s.CamAngle < run[n-1].CamAngle {
				runs, run = append(runs, run), nil
			}
			if foot < start+360 {
				run = append(run, s)
			}
		}
	}
	if len(run) > 0 {
		runs = append(runs, run)
	}
	if len(runs) > 1 && runs[0][0].CamAngle > runs[len(runs)-1][0].CamAngle {
		runs = append(runs[1:], runs[0])
	}
	return runs
}

// nearest returns the cam angle of the curve point nearest to p, roughly.
func (j *job) nearest(c *synth.Curve, p plane.Point) float64 {
	best, at := math.Inf(1), 0.0
	for deg := 0.0; deg < 360; deg += 0.5 {
		zone, t := j.cam.Cycle().Zone(deg)
		if d := c.At(zone, t).P.Dist(p); d < best {
			best, at = d, deg
		}
	}
	return at
}

// footNear improves the foot of p on the curve by Newton's steps along the tangent.
func (j *job) footNear(c *synth.Curve, p plane.Point, deg float64) float64 {
	const h = 1e-4 // degrees, for the speed of the curve: a chart needs no more
	for range 8 {
		zone, t := j.cam.Cycle().Zone(deg)
		f := c.At(zone, t)
		zone, t = j.cam.Cycle().Zone(deg + h)
		speed := c.At(zone, t).P.Dist(f.P) / h
		deg += p.Sub(f.P).Dot(f.T) / speed
	}
	return deg
}
