package fit

import (
	"math"
	"slices"

	"lobewright/tolerance/chain"
)

const (
	triesAbove   = 8     // counts above N* that are tried at least
	triesShare   = 0.25  // and as a share of N*
	boldness     = 1.2   // times the missing arcs, by the error of a count that failed, are added at once
	targetShare  = 0.995 // of eps: what the linear model is held to
	corrections  = 4     // chains tried for a count, the model's goal corrected by what the last one was off
	levels       = 6     // rounds of spreading knots
	beyondHope   = 2.5   // times the target: not worth polishing
	hardly       = 1.8   // times the target: not worth more
	nearly       = 1.3   // times the target: worth steps on the maximum
	polishSteps  = 24
	sharpenSteps = 16
	transfers    = 3  // knots moved elsewhere
	manyArcs     = 50 // where one such move is enough: it is worth less than the others cost
)

// fit fits one stretch with the fewest arcs it finds; most is the curve's largest curvature.
func (st stretch) fit(eps, most float64, o Options) (chain.Path, error) {
	m, err := newModel(st, eps, most, o)
	if err != nil {
		return nil, err
	}
	f := newFitter(m)
	least := st.least()
	th, ok := f.fewest(max(int(m.count)-1, least), least, eps)
	if !ok {
		return st.tilted(eps / slices.Max(m.inv))
	}
	return f.preferStart(th, eps).path(), nil
}

// fewest looks for the least count that succeeds: from first on upwards, by more than one when the error
// says so, then down again between the last that failed and the first that did not.
func (f *fitter) fewest(first, least int, eps float64) (th thread, ok bool) {
	failed, n := least-1, first
	for last := first + triesAbove + int(triesShare*f.count); ; {
		if th, ok = f.within(n, eps); ok {
			break
		}
		failed = n
		short := float64(n) * (math.Cbrt(math.Min(f.bestMax/eps, hardly)) - 1)
		if n += max(1, int(boldness*short)); n > last {
			return th, false
		}
	}
	down := n == first // most likely one less is the last that succeeds
	for failed < n-1 {
		mid := (failed + n) / 2
		if down {
			mid = n - 1
		}
		if fewer, good := f.within(mid, eps); good {
			th, n = fewer, mid
		} else {
			failed = mid
		}
	}
	return th, true
}

// least returns the fewest arcs that can meet the stretch's borders.
func (st stretch) least() int {
	switch {
	case st.closed:
		return 3
	case st.left.dwell && st.right.dwell:
		return 2
	}
	return 1
}

// preferStart returns a chain of as many arcs with a joint at the curve's start, if that lies in
// the stretch and there is one, else the chain given.
func (f *fitter) preferStart(th thread, eps float64) thread {
	if !f.closed && math.IsNaN(f.anchor) {
		return th
	}
	f.anchored = true
	defer func() { f.anchored = false }()
	if better, ok := f.within(len(th.strokes), eps); ok {
		return better
	}
	return th
}

// within looks for a chain of n arcs within eps, and leaves the model's least error in bestMax.
func (f *fitter) within(n int, eps float64) (thread, bool) {
	target := targetShare * eps
	copy(f.goal, f.f)
	f.equidistribute(n, levels)
	for range corrections {
		if f.bestMax > target {
			f.improve(target)
		}
		if !(f.bestMax <= target) {
			return thread{}, false
		}
		f.q.copyFrom(&f.best)
		th, ok := f.realise(&f.q)
		if !ok {
			return thread{}, false
		}
		d := f.distance(th, f.swing(eps))
		if d <= eps {
			return th, true
		}
		if math.IsInf(d, 0) {
			return thread{}, false
		}
		f.correct()
	}
	return thread{}, false
}

// correct takes what the last chain, made of q, is off the model into the goal. It does not change much
// when the knots are moved a little.
func (f *fitter) correct() {
	f.window()
	f.measure(&f.q)
	for i := f.lo; i < f.hi; i++ {
		// the curve lies real to the left of the chain, so the chain runs -real beside the curve
		f.goal[i] += f.e[i]/f.inv[i] + f.real[i]
	}
	if f.closed {
		for i := range f.goal {
			if i < f.lo {
				f.goal[i] = f.goal[i+f.period]
			} else if i >= f.hi {
				f.goal[i] = f.goal[i-f.period]
			}
		}
	}
	f.measure(&f.q)
	f.bestMax = f.max
}

// improve brings the best spline to the target, or as near as it can. Sliding cannot make errors equal
// when the count on either side of a place where k' changes sign or the curvature jumps is wrong
// by one: then a knot is moved elsewhere.
func (f *fitter) improve(target float64) {
	if f.bestMax > beyondHope*target {
		return
	}
	f.q.copyFrom(&f.best)
	for i, rank := 0, 0; ; i++ {
		before := f.bestMax
		f.polish(polishSteps, target)
		if f.bestMax > target && f.bestMax < nearly*target {
			f.q.copyFrom(&f.best)
			f.sharpen(sharpenSteps, target)
		}
		if rank++; f.bestMax < before {
			rank = 0
		}
		if i == transfers || i > 0 && f.q.arcs() > manyArcs || f.bestMax <= target || f.bestMax > hardly*target || !f.transfer(rank) {
			return
		}
	}
}

// swing returns how far the curvature of an arc may lie outside the curve's: k'·h at the
// steepest place, twice what the best chain does.
func (f *fitter) swing(eps float64) float64 {
	steepest := 0.0
	for i := range f.ss {
		steepest = math.Max(steepest, math.Abs(f.ss[i].DK))
	}
	return swingShare * math.Cbrt(steepest*steepest*arcConstant*eps)
}

// elements writes biarcs that follow each other from parameter t.
func elements(t float64, biarcs []biarc) chain.Path {
	var p chain.Path
	for _, b := range biarcs {
		if one, ok := b.single(); ok {
			p = append(p, one.element(chain.Span{From: t, To: b.end}))
		} else {
			p = append(p, b.legs[0].element(chain.Span{From: t, To: b.t}), b.legs[1].element(chain.Span{From: b.t, To: b.end}))
		}
		t = b.end
	}
	return p
}

// tilted fits the stretch with tilted biarcs, section by section between jumps of the curvature.
func (st stretch) tilted(eps float64) (chain.Path, error) {
	r, err := newRun(st.curve, st.parts, arcsPer(eps), samplesPerArc)
	if err != nil {
		return nil, err
	}
	eps *= searchShare
	var p chain.Path
	t, from := r.samples[0].t, 0
	for _, pin := range append(append([]int(nil), r.pins...), len(r.samples)) {
		found, err := section{run: r, from: from, to: pin - 1, eps: eps}.fit()
		if err != nil {
			return nil, err
		}
		p = append(p, elements(t, found)...)
		t, from = r.samples[pin-1].t, pin
	}
	return p, nil
}
