// The offset that allows the smallest base radius.
//
// The problem: an offset towards the rise lowers the pressure angle of the rise and raises
// that of the fall, so the smallest base radius, as a function of the offset, falls, and then
// rises again, with a kink where two limits meet. Its derivative is of no use there.
//
// The method: for each offset the smallest base radius is found by bisection on coarse
// samples; over a grid of offsets the least is taken, and the stretch between its two
// neighbors, on which the function is taken to be unimodal, is searched by golden section,
// first on the same samples, then more closely with every extreme refined. The offset is rounded
// to the sixth decimal, and the base radius for it is then proven like any other. Where offset
// 0 does as well it is taken, and of a stretch that does as well its middle. That the offset
// is the best is found by search, not proven.

package synth

import (
	"fmt"
	"math"

	"lobewright/synth/spec"
)

const (
	offsetGrid    = 24   // offsets of the coarse scan on either side of 0
	offsetCoarse  = 12   // golden sections on coarse samples
	offsetFine    = 24   // golden sections with refined extremes: 0.618^24 of a hundredth of the range
	offsetWindow  = 5e-3 // of the range: what the coarse search may miss by
	offsetDigits  = 1e6  // what an offset is rounded to, one over length
	coarseSamples = 8    // every how many samples the coarse search looks at
)

// refuseFreeOffset says what to do about an offset that is not decided yet.
func refuseFreeOffset(s *spec.Spec) error {
	if !s.Follower.OffsetFree {
		return nil
	}
	p := s.Follower.Place
	return spec.Faults{{File: s.File, Line: p.Line, Column: p.Column, Path: "follower.offset", Found: "free", Allowed: "a length",
		Advice: "run lobewright size, then write its offset"}}
}

// startOfSizing builds the cam of the spec, a free offset taken as 0.
func startOfSizing(s *spec.Spec) (*Cam, error) {
	if !s.Follower.OffsetFree {
		return Build(s)
	}
	in := *s
	in.Follower.OffsetFree, in.Follower.Offset = false, 0
	return Build(&in)
}

// bestOffset returns the sizer with the offset that allows the smallest base radius.
func (z *sizer) bestOffset() (*sizer, error) {
	coarse := *z
	coarse.rows, coarse.rough = thinned(z.rows), true
	widest, ok := coarse.quick(0, z.top())
	if !ok {
		return nil, fmt.Errorf("%s: no base radius up to %.6g meets the limits", z.cam.spec.File, z.top())
	}
	// A larger offset asks for a larger base radius than offset 0 does, just to stand.
	far := widest + z.kind.Radius()
	least := func(s *sizer, e float64) float64 {
		at, err := s.withOffset(e)
		if err != nil {
			return math.Inf(1)
		}
		r, ok := at.quick(0, 2*widest+z.kind.Radius())
		if !ok {
			return math.Inf(1)
		}
		return r
	}
	best, low := 0.0, widest
	for k := -offsetGrid; k <= offsetGrid; k++ {
		e := far * float64(k) / (offsetGrid + 1)
		if r := least(&coarse, e); r < low*(1-sizeSlack) {
			best, low = e, r
		}
	}
	step := far / (offsetGrid + 1)
	best = section(best-step, best+step, offsetCoarse, func(e float64) float64 { return least(&coarse, e) })
	best = section(best-offsetWindow*far, best+offsetWindow*far, offsetFine, func(e float64) float64 { return least(z, e) })
	low = least(z, best) * (1 + sizeSlack)
	if least(z, 0) <= low {
		best = 0
	} else if f := z.floor(); low <= f*(1+2*sizeSlack) { // the bore decides, and a stretch of offsets does as well
		level := func(e float64) bool { return least(z, e) <= low }
		best = (edge(best, -far, level) + edge(best, far, level)) / 2
	}
	return z.withOffset(math.Round(best*offsetDigits) / offsetDigits)
}

// edge is where, from in towards out, a property ends.
func edge(in, out float64, has func(float64) bool) float64 {
	for range offsetFine {
		if mid := (in + out) / 2; has(mid) {
			in = mid
		} else {
			out = mid
		}
	}
	return in
}

// withOffset is the sizer with another offset.
func (z *sizer) withOffset(offset float64) (*sizer, error) {
	s := *z.cam.spec
	s.Follower.Offset = offset
	s.Cam.BaseRadius = math.Max(s.Cam.BaseRadius, 2*math.Abs(offset)) // so that it stands; the base radius is what is looked for
	c, err := z.cam.with(&s)
	if err != nil {
		return nil, err
	}
	out, _ := newSizer(c, z.rows, z.scaled)
	out.rough = z.rough
	return out, nil
}

// thinned takes every few samples of a zone, and always its ends.
func thinned(rows []sizeSample) []sizeSample {
	var out []sizeSample
	for i, p := range rows {
		first := i == 0 || rows[i-1].zone != p.zone
		last := i+1 == len(rows) || rows[i+1].zone != p.zone
		if first || last || i%coarseSamples == 0 {
			out = append(out, p)
		}
	}
	return out
}

// quick is the smallest base radius that meets the limits, by bisection: for a follower on a
// line larger cams are taken to be better, and the answer is proven afterwards.
func (z *sizer) quick(floor, top float64) (float64, bool) {
	limits := z.limits()
	lo := math.Max(floor, z.floor())
	if z.met(limits, lo) {
		return lo, true
	}
	hi := 2 * lo
	for !z.met(limits, hi) {
		if lo, hi = hi, 2*hi; hi > top {
			return 0, false
		}
	}
	close := 1e-10
	if z.rough {
		close = 1e-5
	}
	for hi-lo > close*hi {
		if mid := lo + (hi-lo)/2; z.met(limits, mid) {
			hi = mid
		} else {
			lo = mid
		}
	}
	return hi, true
}

// section is where f is least on [a, b], by n golden sections.
func section(a, b float64, n int, f func(float64) float64) float64 {
	const inv = 0.6180339887498949
	x, y := b-inv*(b-a), a+inv*(b-a)
	fx, fy := f(x), f(y)
	for range n {
		if fx <= fy {
			b, y, fy = y, x, fx
			x = b - inv*(b-a)
			fx = f(x)
		} else {
			a, x, fx = x, y, fy
			y = a + inv*(b-a)
			fy = f(y)
		}
	}
	return (a + b) / 2
}
