package fit

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
)

// The last resort, and the classical method without its tilt: the longest biarc from node to node, nodes
// on the curve, their tangents tilted by a good part of what the best chain's are, and the share
// of the first leg searched; then the deviation is lowered as far as the count allows,
// which spreads the arcs evenly. Nodes are fixed where the curvature jumps and at the ends of the stretch; there
// is no tilt there. It takes 1.2 to 1.4 times N*, and ends with an error only where the curve is not smooth.

// section is a stretch of a run between two fixed nodes: ends of the run, and places
// where the curvature or the tangent jumps. from and to are sample indices.
type section struct {
	*run
	from, to int
	eps      float64
	tilt     float64 // share of the ideal tilt at free nodes
	swing    float64 // 1/length: how far the curvature of an arc may lie outside the curve's along its pair
}

const (
	searchShare   = 0.99 // of eps: what the greedy allows itself, since its samples see a little less than all
	samplesPerArc = 24   // where the curve needs arcs most densely

	swingShare   = 1.0                 // of k'·h, h the length of an arc: what tilted ends may add to a curvature
	reachFirst   = 2.2                 // longest pair tried, in ideal pair lengths
	reachShrink  = 0.87                // next shorter pair tried
	reachSplits  = 6                   // bisections between the longest good and the shortest bad pair
	turnMost     = 2.0                 // rad: a pair turns less
	hopeless     = 5.0                 // times eps: an even biarc that bad is not improved to good
	legSpread    = 0.4                 // first leg: even leg ± this share
	legTries     = 9                   // golden section steps over the first leg
	golden       = 0.61803398874989485 // (√5-1)/2
	pairsMost    = 100000
	spreadSplits = 5
	spreadStep   = 0.4 // of the interval: the answer is nearer to its upper end
)

// tilts are the shares of the ideal tilt that are tried: less than all, since a full
// tilt makes short last pairs impossible.
func tilts() []float64 { return []float64{0.85, 0.7, 0.6, 0.4} }

// fit returns biarcs along the section: the fewest that greedy finds, spread so that the last
// is no left-over. A left-over would be short and start with a tilt meant for a long pair:
// within eps, but of a curvature far from the curve's, and no parallel could be taken.
// That is why the curvatures are held near the curve's too. Without any tilt there is
// always a solution where the curve is smooth; the last resort lets the curvatures go.
func (s section) fit() ([]biarc, error) {
	s.swing = s.ownSwing()
	var best []biarc
	fewest := pairsMost
	chosen := s
	for _, s.tilt = range tilts() {
		if found, err := s.greedy(fewest); err == nil && (best == nil || len(found) < len(best)) {
			best, fewest, chosen = found, len(found), s
		}
	}
	if best != nil {
		return chosen.spread(best), nil
	}
	s.tilt = 0
	if found, err := s.greedy(pairsMost); err == nil {
		return s.spread(found), nil
	}
	s.swing = math.Inf(1)
	return s.greedy(pairsMost)
}

// ownSwing returns k'·h at the steepest place.
func (s section) ownSwing() float64 {
	steepest := 0.0
	for _, f := range s.samples[s.from : s.to+1] {
		steepest = math.Max(steepest, math.Abs(f.DK))
	}
	return swingShare * math.Cbrt(steepest*steepest*arcConstant*s.eps)
}

// spread looks for the smallest deviation that takes no more biarcs, and returns its.
func (s section) spread(found []biarc) []biarc {
	if len(found) < 2 {
		return found
	}
	good, bad := s.eps, 0.0
	for i := 0; i < spreadSplits; i++ {
		s.eps = good - (good-bad)*spreadStep
		if better, err := s.greedy(len(found)); err == nil {
			found, good = better, s.eps
		} else {
			bad = s.eps
		}
	}
	return found
}

// greedy returns biarcs along the section, each as long as it stays within eps; an error
// when there are more than most.
func (s section) greedy(most int) ([]biarc, error) {
	a := nodeAt(s.samples[s.from], 0)
	sa, last := s.samples[s.from].s, s.samples[s.to]
	var found []biarc
	for sa < last.s {
		if len(found) == most {
			return nil, fmt.Errorf("more than %d pairs of arcs within %g of the curve before cam angle %.6g", most, s.eps, a.t)
		}
		b, arcs, sb, ok := s.furthest(a, sa)
		if !ok {
			return nil, fmt.Errorf("no arc within %g of the curve leaves cam angle %.6g; the curve is not smooth there", s.eps, a.t)
		}
		found = append(found, arcs)
		a, sa = b, sb
	}
	return found, nil
}

func nodeAt(f sample, tilt float64) node {
	d := f.T
	if tilt != 0 {
		d = d.Turn(plane.Angle(math.Atan(tilt)))
	}
	return node{f.P, d, f.t}
}

// furthest returns the end of the longest biarc from a that stays within eps. The
// lengths that do are not always an interval (the end's tilt depends on the
// length), so it looks from the longest down.
func (s section) furthest(a node, sa float64) (node, biarc, float64, bool) {
	rest := s.samples[s.to].s - sa
	if b, arcs, ok := s.pair(a, sa, rest); ok {
		return b, arcs, s.samples[s.to].s, true
	}
	h := math.Min(rest, reachFirst*s.idealPair(a.t))
	bad := h / reachShrink
	b, arcs, ok := s.pair(a, sa, h)
	for least := rest * floatShare; !ok && h > least; {
		bad = h
		h *= reachShrink
		b, arcs, ok = s.pair(a, sa, h)
	}
	for i := 0; ok && i < reachSplits; i++ {
		mid := (h + bad) / 2
		if b2, arcs2, ok2 := s.pair(a, sa, mid); ok2 {
			b, arcs, h = b2, arcs2, mid
		} else {
			bad = mid
		}
	}
	return b, arcs, sa + h, ok
}

// idealPair returns the length of two arcs of the asymptotic optimum near t.
func (s section) idealPair(t float64) float64 {
	return 2 / arcsPer(s.eps)(s.samples[min(s.after(t), s.to)].Frame) // +Inf where k' is 0
}

// pair returns the biarc from a to the node h further on, and whether it is good. The
// end's tangent is tilted against the curve by what the best chain of
// arcs does there, -k'·(h/2)²/12; at fixed nodes it is not.
func (s section) pair(a node, sa, h float64) (node, biarc, bool) {
	end := s.samples[s.to]
	tilt := 0.0
	if sa+h < end.s {
		t := s.tAt(sa + h)
		if t <= a.t || t >= end.t {
			return node{}, biarc{}, false
		}
		end = sample{Frame: s.frame(t), t: t}
		most := s.tilt / 12 * math.Cbrt(math.Abs(end.DK)) * math.Pow(arcConstant*s.eps, 2.0/3)
		tilt = -s.tilt / 12 * end.DK * (h / 2) * (h / 2)
		tilt = math.Max(math.Min(tilt, most), -most)
	}
	b := nodeAt(end, tilt)
	turned, low, high := s.survey(a.t, b.t)
	if math.Abs(turned) > turnMost {
		return b, biarc{}, false
	}
	arcs, ok := s.best(a, b, low-s.swing, high+s.swing)
	return b, arcs, ok
}

// survey returns the angle in radians that the curve turns between two parameters, and its
// least and greatest curvature there, from the samples.
func (s section) survey(t0, t1 float64) (turned, low, high float64) {
	i, j := max(s.after(t0)-1, s.from), min(s.after(t1), s.to)
	low, high = s.samples[i].K, s.samples[i].K
	for ; i < j; i++ {
		a, b := &s.samples[i], &s.samples[i+1]
		turned += (a.K + b.K) / 2 * (b.s - a.s)
		low, high = math.Min(low, b.K), math.Max(high, b.K)
	}
	return turned, low, high
}

// best returns a biarc from a to b within eps, with curvatures from low to high, looking
// over the share of the first leg, and whether there is one.
func (s section) best(a, b node, low, high float64) (biarc, bool) {
	even := evenLeg(a, b)
	measure := func(alpha float64) (biarc, float64) {
		arcs, ok := join(a, b, alpha)
		if k0, k1 := arcs.legs[0].k, arcs.legs[1].k; !ok || math.Min(k0, k1) < low || math.Max(k0, k1) > high {
			return arcs, math.Inf(1)
		}
		d := s.deviation(a, b, &arcs, hopeless*s.eps) // also places the joint
		return arcs, d
	}
	arcs, d := measure(even)
	if d <= s.eps || !(d <= hopeless*s.eps) {
		return arcs, d <= s.eps
	}
	lo, hi := even*(1-legSpread), even*(1+legSpread)
	x, y := hi-golden*(hi-lo), lo+golden*(hi-lo)
	ax, dx := measure(x)
	ay, dy := measure(y)
	for i := 0; i < legTries; i++ {
		switch {
		case dx <= s.eps:
			return ax, true
		case dy <= s.eps:
			return ay, true
		case dx < dy:
			hi, y, dy = y, x, dx
			x = hi - golden*(hi-lo)
			ax, dx = measure(x)
		default:
			lo, x, dx = x, y, dy
			y = lo + golden*(hi-lo)
			ay, dy = measure(y)
		}
	}
	return biarc{}, false
}
