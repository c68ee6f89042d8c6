package partial

import (
	"fmt"
	"math"

	"lobewright/synth/motion"
	"lobewright/synth/taylor"
)

// proofSlack is the share of the largest lift by which a window may be missed: what
// the rounding of the coefficients themselves comes to.
const proofSlack = 1e-12

// prove holds the zones to every window, by the Bernstein coefficients of each stretch
// where both apply, computed on intervals, halved until they decide.
func (t *timeline) prove(zones []motion.Zone) error {
	size := t.size
	for _, z := range zones {
		size = max(size, math.Abs(z.Poly[0]))
	}
	for _, c := range t.cells {
		for _, z := range zones {
			for _, shift := range []float64{-turn, 0, turn} {
				from, to := max(c.from, z.From+shift), min(c.to, z.To+shift)
				if to-from <= sameAngle {
					continue
				}
				b := coefficients(z, from-shift, to-shift)
				slack := proofSlack * size
				if !holds(b, c.lo-slack, c.hi+slack, 40) {
					return fmt.Errorf("the lift leaves its window between cam angles %.6g and %.6g", past(0, from), past(0, to))
				}
			}
		}
	}
	return nil
}

// coefficients encloses the Bernstein coefficients of a zone's polynomial between two
// cam angles, degrees. A stretch that begins at the zone's origin keeps its exact
// zeros.
func coefficients(z motion.Zone, from, to float64) []taylor.Interval {
	if z.Span < 0 {
		from, to = to, from
	}
	a := taylor.Exactly(from).Sub(taylor.Exactly(z.Origin)).Div(taylor.Exactly(z.Span))
	w := taylor.Exactly(to).Sub(taylor.Exactly(from)).Div(taylor.Exactly(z.Span))
	n := len(z.Poly) - 1
	q := make([]taylor.Interval, n+1)
	for k, c := range z.Poly {
		q[k] = taylor.Exactly(c)
	}
	for i := range n { // about a, by repeated division
		for k := n - 1; k >= i; k-- {
			q[k] = q[k].Add(q[k+1].Mul(a))
		}
	}
	scale := taylor.Exactly(1)
	for k := range q {
		q[k] = q[k].Mul(scale)
		scale = scale.Mul(w)
	}
	b := make([]taylor.Interval, n+1)
	for i := range b { // b_i = sum of C(i,k)/C(n,k) q_k
		share := taylor.Exactly(1)
		for k := 0; k <= i; k++ {
			b[i] = b[i].Add(q[k].Mul(share))
			if k < n {
				share = share.Mul(taylor.Exactly(float64(i - k))).Div(taylor.Exactly(float64(n - k)))
			}
		}
	}
	return b
}

// holds reports whether the polynomial lies in [lo, hi].
func holds(b []taylor.Interval, lo, hi float64, depth int) bool {
	all := true
	for _, x := range b {
		all = all && x.Lo >= lo && x.Hi <= hi
	}
	if all || depth == 0 {
		return all
	}
	if first := b[0]; first.Hi < lo || first.Lo > hi {
		return false
	}
	left, right := make([]taylor.Interval, len(b)), append([]taylor.Interval(nil), b...)
	half := taylor.Exactly(0.5)
	for i := range left { // de Casteljau
		left[i] = right[0]
		for k := 0; k < len(b)-1-i; k++ {
			right[k] = right[k].Add(right[k+1]).Mul(half)
		}
	}
	return holds(left, lo, hi, depth-1) && holds(right, lo, hi, depth-1)
}
