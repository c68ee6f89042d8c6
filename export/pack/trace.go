package pack

import (
	"math"

	"lobewright/export/svg"
	"lobewright/synth"
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// tracePoints is how many points of each element the deviation chart shows.
const tracePoints = 25

// trace samples the deviation of a closed path around its exact curve, positive
// outside, for a chart. It proves nothing: the certificate does.
func (j *job) trace(exact *synth.Curve, path chain.Path) [][]svg.DeviationSample {
	if j.drum() {
		return j.drumTrace(exact, path)
	}
	foot := j.nearest(exact, path[0].From)
	var all []svg.DeviationSample
	for _, e := range path {
		for k := range tracePoints {
			p := e.PointAt(float64(k) / (tracePoints - 1))
			foot = j.footNear(exact, p, foot)
			zone, t := j.cam.Cycle().Zone(foot)
			f := exact.At(zone, t)
			all = append(all, svg.DeviationSample{CamAngle: foot, Polar: p.PolarAngle(), Value: p.Sub(f.P).Dot(j.outward(f))})
		}
	}
	return parted(all)
}

// parted brings samples of one turn into 0 to 360, in two runs where the turn passes 360.
func parted(all []svg.DeviationSample) [][]svg.DeviationSample {
	start := all[0].CamAngle
	turn := 360 * math.Floor(start/360)
	var late, early []svg.DeviationSample // before and after 360
	for i, s := range all {
		if s.CamAngle > start+360 || i > 0 && s.CamAngle < all[i-1].CamAngle {
			continue // rounding at the end of the turn, or at a joint
		}
		s.CamAngle -= turn
		if s.CamAngle <= 360 {
			late = append(late, s)
			continue
		}
		s.CamAngle -= 360
		if len(early) == 0 && len(late) > 0 {
			last := late[len(late)-1]
			between := last
			between.Value += (s.Value - last.Value) * (360 - last.CamAngle) / (s.CamAngle + 360 - last.CamAngle)
			between.CamAngle, between.Polar = 360, s.Polar
			late = append(late, between)
			between.CamAngle = 0
			early = append(early, between)
		}
		early = append(early, s)
	}
	if len(early) == 0 {
		return [][]svg.DeviationSample{late}
	}
	return [][]svg.DeviationSample{early, late}
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
		step := p.Sub(f.P).Dot(f.T) / speed
		if deg += step; math.Abs(step) < h {
			break // the next step is the square of this one
		}
	}
	return deg
}
