package pack

import (
	"fmt"
	"math"

	"lobewright/synth/gate"
	"lobewright/tolerance/fit"
	"lobewright/tolerance/follow"
)

// Blocks where the follower feels them.
//
// The problem: arcs within a tolerance eps leave an acceleration error that falls only as the cube root of
// eps (the curvature of an arc of length h is off by k'·h/2 at its ends, and h goes with the cube root
// of eps), lines a step of velocity that falls as the square root. To meet a limit on either by a smaller eps
// everywhere costs blocks all around the cam, most of them where the error was small already: the error is felt
// where k' is large and the follower's leverage is.
//
// Used here: the fitter takes a tolerance that is a share of eps at each cam angle. The follower is run over
// what was written; where an element's error is r times the limit, the share is multiplied by about 1/r³
// (steps between elements: 1/r²), and everything is written again until the limits hold or that no longer helps: as on lines,
// whose acceleration is wrong by the centripetal term at any length, and on grids that are too coarse for short arcs.
// Shares that step from element to element cost the fit blocks, so they are smoothed at first; the last few percent come quicker
// without that.
//
// Price: 3 or 4 more fits. Measured on the DXF of stick-lift, flap-press and tray-tilt: 28 to 32 blocks meet 15 % of
// the design's peak and 74 to 88 meet 5 %, where one tolerance all around takes 34 to 50 and 100 to 156 (21 or 22 are
// what the chord tolerance alone takes, with errors of 22 to 30 %).
type rough struct {
	shares []float64 // of eps, by cam angle in equal bins from 0; nil: 1 everywhere
	best   float64   // the least excess over the limits of the rounds so far
	rounds int
	idle   int // rounds in turn without progress
}

const (
	roughBins    = 3600
	leastShare   = 1e-4
	aimAt        = 0.95  // of the limit
	aimLower     = 0.01  // less each round
	smoothRounds = 2     // in which shares are smoothed
	patience     = 2     // rounds in turn without progress
	mostRounds   = 12    // after the first
	helped       = 0.995 // of the excess before: less is no progress
)

// options says the same to the fitter.
func (r *rough) options() fit.Options {
	if r.shares == nil {
		return fit.Options{}
	}
	return fit.Options{Share: func(t float64) float64 { return r.shares[binOf(t)] }}
}

func binOf(t float64) int {
	i := int(math.Floor(t*roughBins/360)) % roughBins
	if i < 0 {
		i += roughBins
	}
	return i
}

// limits returns what the follower's acceleration may be off by, per rad², and its velocity may step by, per rad;
// infinite where the spec sets none.
func (j *job) limits() (acceleration, step float64) {
	acceleration, step = math.Inf(1), math.Inf(1)
	t := j.spec.Tolerance
	if t.Acceleration != nil {
		acceleration = *t.Acceleration * j.cam.Peaks().A
	}
	if t.VelocityStep != nil {
		step = math.Abs(*t.VelocityStep) / j.cam.Omega()
	}
	return acceleration, step
}

// refine asks for shorter blocks where the follower's errors are over their limits. It reports
// whether to write again.
func (j *job) refine(worst follow.Error) bool {
	acceleration, step := j.limits()
	excess := math.Max(worst.Acceleration/acceleration, worst.VelocityStep/step)
	r := &j.rough
	if !(excess > 1) || math.IsInf(excess, 1) || r.rounds == mostRounds || r.idle == patience {
		return false
	}
	if r.rounds > 0 && excess > helped*r.best {
		r.idle++
	} else {
		r.best, r.idle = excess, 0
	}
	aim := aimAt - aimLower*float64(r.rounds)
	r.rounds++
	next := make([]float64, roughBins)
	for i := range next {
		next[i] = 1
	}
	mark := func(from, to, share float64) {
		for i := math.Floor(from * roughBins / 360); i <= to*roughBins/360; i++ {
			b := binOf((i + 0.5) * 360 / roughBins)
			next[b] = math.Min(next[b], share)
		}
	}
	for _, run := range j.follows {
		a := acceleration
		if run.lines {
			a = math.Inf(1)
		}
		run.felt(a, step, aim, mark)
	}
	changed := false
	for i := range next {
		was := 1.0
		if r.shares != nil {
			was = r.shares[i]
		}
		next[i] = math.Max(leastShare, was*next[i])
		changed = changed || next[i] != was
	}
	if r.shares = next; r.rounds <= smoothRounds {
		r.shares = smoothed(next, roughBins/len(j.outline.paths[0].path))
	}
	return changed
}

// felt calls mark with the stretch (cam angles, degrees, growing) of each element on which an error is over its limit,
// and the share of its tolerance that would bring it below.
func (r run) felt(acceleration, step, aim float64, mark func(from, to, share float64)) {
	type felt struct{ a, v float64 }
	peaks := map[int]felt{}
	n := len(r.samples)
	for i, s := range r.samples {
		p := peaks[s.Element]
		p.a = math.Max(p.a, math.Abs(s.Acceleration))
		peaks[s.Element] = p
		if next := r.samples[(i+1)%n]; next.Element != s.Element {
			v := math.Abs(next.Velocity - s.Velocity)
			p.v = math.Max(p.v, v)
			peaks[s.Element] = p
			q := peaks[next.Element]
			q.v = math.Max(q.v, v)
			peaks[next.Element] = q
		}
	}
	for i, s := range r.samples {
		next := r.samples[(i+1)%n]
		p, from, to := peaks[s.Element], s.At, next.At
		if to < from {
			to += 360
		}
		share := math.Min(math.Pow(aim*acceleration/p.a, 3), math.Pow(aim*step/p.v, 2))
		if p.a > acceleration || p.v > step {
			mark(from, to, math.Min(share, 1))
		}
	}
}

// tellRefined says what the follower's limits cost and brought.
func (j *job) tellRefined(blocks int, before, after follow.Error) {
	now := len(j.outline.paths[0].path)
	if j.rough.shares == nil || now <= blocks {
		return
	}
	share := 0
	for _, x := range j.rough.shares {
		if x < 1 {
			share++
		}
	}
	t, w := j.spec.Tolerance, j.cam.Omega()
	text := fmt.Sprintf("the contour takes %d blocks instead of %d: over %.0f%% of the turn they are shorter than the chord tolerance asks for", now, blocks, 100*float64(share)/roughBins)
	if t.Acceleration != nil {
		peak := j.cam.Peaks().A
		text += fmt.Sprintf(", so that the follower's acceleration error falls from %.3g%% to %.3g%% of the design's peak", 100*before.Acceleration/peak, 100*after.Acceleration/peak)
	}
	if t.VelocityStep != nil {
		text += fmt.Sprintf(", so that its largest step of velocity falls from %.3g to %.3g %s/s", before.VelocityStep*w, after.VelocityStep*w, j.cam.LiftUnit())
	}
	j.findings = append(j.findings, gate.Finding{ID: "blocks-added", CamAngle: math.NaN(), Text: text})
}

// smoothed averages the logarithms of shares around the turn over a width of bins.
func smoothed(shares []float64, width int) []float64 {
	n := len(shares)
	out := make([]float64, n)
	half := max(width/2, 1)
	sum := 0.0
	for i := -half; i <= half; i++ {
		sum += math.Log(shares[(i+n)%n])
	}
	for i := range out {
		out[i] = math.Exp(sum / float64(2*half+1))
		sum += math.Log(shares[(i+half+1)%n]) - math.Log(shares[(i-half+n)%n])
	}
	return out
}
