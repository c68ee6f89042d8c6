package floor

import (
	"math"
	"sort"
)

const (
	// margin is a share of eps by which a stretch is first taken beyond the float estimate of what fits. The
	// proof loses a little to second-order terms; where it fails by a share, it is tried again with that added.
	margin   = 3e-4
	maxTries = 4
)

// reach returns a node b, at most a turn after a, with a proof that the stretch from a to b does not
// fit, as near to a as it can. false when it finds none.
func (s *survey) reach(a node) (node, bool) {
	h := &hunt{window: s.window(a)}
	j := h.first()
	if j < 0 {
		return node{}, false
	}
	target := s.eps * (1 + margin)
	for range maxTries {
		b, share := h.between(j, target)
		if share > 1 {
			return b, true
		}
		if !(share > 0.5) {
			break
		}
		target *= (1 + margin) / share
	}
	for step := 1; ; step *= 2 {
		ns := h.to(j)
		if h.fit(ns, 0, math.Inf(1)); s.prove(ns, h.found.at) > 1 {
			return ns[h.found.at[3]], true
		}
		if j == h.last {
			return node{}, false
		}
		j = min(j+step, h.last)
	}
}

// hunt is a search for the end of a reach.
type hunt struct {
	*window
	buf   []local
	found fitted
}

// seen reports whether the stretch 0..j is within eps by floats.
func (h *hunt) seen(j int, eps float64) bool { return h.fit(h.to(j), eps, eps) }

// fit is exchange on a stretch from a good start; the result is left in found.
func (h *hunt) fit(ns []node, low, high float64) bool {
	n := len(ns) - 1
	if n < 3 {
		h.found = fitted{}
		return true
	}
	h.buf = axes(ns, h.buf)
	// The best start where k' is constant, by the parameter for want of a better measure.
	from, span := ns[0].since(mark{}), ns[n].since(ns[0].mark)
	share := func(x float64) int {
		return sort.Search(n, func(i int) bool { return ns[i].since(mark{}) >= from+x*span })
	}
	at := [4]int{0, max(1, min(share(0.25), n-2)), 0, n}
	at[2] = max(at[1]+1, min(share(0.75), n-1))
	var fits bool
	h.found, fits = exchange(h.buf, at, low, high)
	return fits
}

// first returns the first window index to which the stretch does not fit by floats, -1 when all do.
func (h *hunt) first() int {
	eps := h.s.eps
	hi := h.s.hint[h.base]
	if hi == 0 {
		hi = perArc
	}
	hi = min(hi, h.last)
	lo, step := 2, 1
	if h.seen(hi, eps) {
		for lo = hi; ; step *= 2 {
			if lo == h.last {
				return -1
			}
			if hi = min(lo+step, h.last); !h.seen(hi, eps) {
				break
			}
			lo = hi
		}
	} else {
		for k := hi - step; k > lo; k = hi - step {
			if h.seen(k, eps) {
				lo = k
				break
			}
			hi = k
			step *= 2
		}
	}
	for hi-lo > 1 {
		if k := (lo + hi) / 2; h.seen(k, eps) {
			lo = k
		} else {
			hi = k
		}
	}
	h.s.hint[h.base] = hi
	return hi
}

const (
	maxSteps  = 6    // of the search between two table entries
	closeness = 2e-4 // of the target: how far above it the level may end
)

// between returns a node, near window index j, up to which the stretch is off by target, just so, and
// the share that prove finds for it; 0 when it finds no such node.
func (h *hunt) between(j int, target float64) (node, float64) {
	h.fit(h.to(j), 0, math.Inf(1))
	for last := min(j+perArc, h.last); h.found.e < target; {
		if j++; j > last {
			return node{}, 0
		}
		h.fit(h.to(j), 0, math.Inf(1))
	}
	ns := append([]node(nil), h.to(j)...)
	high, nodes := h.found.e, h.found.at
	from, to := ns[j-1].t, ns[j].t
	if ns[j].turn > ns[j-1].turn {
		to += turnDegrees
	}
	h.fit(ns[:j], 0, math.Inf(1))
	low, lo, hi := h.found.e, 0.0, 1.0
	best := append([]node(nil), ns...)
	for range maxSteps {
		if high <= target*(1+closeness) || !(high > low) {
			break
		}
		x := lo + (hi-lo)*(target*(1+closeness/2)-low)/(high-low)
		if !(x > lo && x < hi) {
			x = (lo + hi) / 2
		}
		t := from + (to-from)*x
		piece := ns[j-1].piece
		if !(t > from && t < to && t < h.s.pieces[piece].To) {
			break
		}
		ns[j] = node{mark{ns[j-1].turn, t}, piece, h.s.curve.At(piece, t).P}
		h.fit(ns, 0, math.Inf(1))
		if h.found.e < target {
			low, lo = h.found.e, x
			continue
		}
		high, hi, nodes = h.found.e, x, h.found.at
		best[j] = ns[j]
	}
	return best[nodes[3]], h.s.prove(best, nodes)
}

// prove tries the proof on four of the nodes, with the node between the two furthest apart that
// sees them under equal distances for origin.
func (s *survey) prove(ns []node, at [4]int) float64 {
	if len(ns) < 4 {
		return 0
	}
	q := [4]node{ns[at[0]], ns[at[1]], ns[at[2]], ns[at[3]]}
	a, b := widest(q)
	chord := q[b].p.Sub(q[a].p)
	mid := q[a].p.Add(chord.Scale(0.5))
	m, least := at[a], math.Inf(1)
	for i := at[a] + 1; i < at[b]; i++ {
		if d := math.Abs(ns[i].p.Sub(mid).Dot(chord)); d < least {
			m, least = i, d
		}
	}
	return s.refusal(q, ns[m])
}
