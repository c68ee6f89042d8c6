package partial

import (
	"math"
	"slices"
)

// The kernel of the whole functional is G, piecewise quadratic; a function D of
// bounded variation is taken off it, g = G - D, and by parts
//
//	L(f) = ∫ (G-D) f”' + ∫ D f”' <= J ∫|G-D| + A (variation of D).
//
// The program's own D is a step function: it puts weights on accelerations at points.
// Where the acceleration of the optimum stays at its peak, G-D is then a sawtooth
// about 0, and J times its norm costs the bound as much as the width of a stretch, of
// first order. D may follow G there instead, at no more variation: about each step,
// D is G held between the levels on both sides.

// piece is G on half a stretch, as a parabola in the distance from its start.
type piece struct {
	h, p, q, r float64
	low, high  float64 // levels that D moves between
	free       bool    // what comes before lies on a rigid stretch, where steps cost nothing
}

func (g piece) at(x float64) float64 { return g.p + x*(g.q+x*g.r/2) }

// pieces returns G in halves of stretches, in order, with the levels of D.
func (k *kernel) pieces() []piece {
	n := len(k.m.stretches)
	level := make([]float64, n+1) // D on each stretch; 0 behind the last
	for i := n - 1; i > 0; i-- {
		level[i-1] = level[i] + k.mass[i]
	}
	var out []piece
	var p, q, r float64 // value, slope and curvature of G at the end of the stretch, backwards
	for i := n - 1; i >= 0; i-- {
		c := k.c[i+1]
		r, q, p = r+c[0], q+c[1], p+c[2]
		h := k.m.stretches[i].width()
		p, q = p+q*h+r*h*h/2, q+r*h
		if k.m.stretches[i].rigid {
			if len(out) > 0 {
				out[len(out)-1].free = true
			}
			continue
		}
		before, after := level[i], level[i]
		if i > 0 && !k.m.stretches[i-1].rigid {
			before = (level[i-1] + level[i]) / 2
		}
		if i < n-1 && !k.m.stretches[i+1].rigid {
			after = (level[i+1] + level[i]) / 2
		}
		half := func(x, other float64) piece {
			return piece{h: h / 2, p: p - q*x + r*x*x/2, q: -q + r*x, r: r, low: math.Min(level[i], other), high: math.Max(level[i], other)}
		}
		out = append(out, half(h/2, after), half(0, before))
	}
	slices.Reverse(out)
	out[0].free = out[0].free || k.m.stretches[n-1].rigid
	return out
}

// norm returns the integral of |G + c - D|, the width where it is above 0 less that
// below, and the variation of D.
func (k *kernel) norm(all []piece, c float64) (area, slope, variation float64) {
	var before float64
	for i, g := range all {
		g.p += c
		cuts := []float64{0, g.h}
		if g.r != 0 {
			cuts = append(cuts, -g.q/g.r)
		}
		cuts = append(cuts, roots(g.p-g.low, g.q, g.r/2)...)
		cuts = append(cuts, roots(g.p-g.high, g.q, g.r/2)...)
		cuts = slices.DeleteFunc(cuts, func(x float64) bool { return !(x >= 0 && x <= g.h) })
		slices.Sort(cuts)
		held := func(x float64) float64 { return math.Min(math.Max(g.at(x), g.low), g.high) }
		if i > 0 && !g.free {
			variation += math.Abs(held(0) - before)
		}
		whole := func(x, level float64) float64 { return x * (g.p - level + x*(g.q/2+x*g.r/6)) }
		for j := 1; j < len(cuts); j++ {
			a, b := cuts[j-1], cuts[j]
			variation += math.Abs(held(b) - held(a))
			mid := g.at((a + b) / 2)
			switch {
			case mid > g.high:
				area, slope = area+math.Abs(whole(b, g.high)-whole(a, g.high)), slope+b-a
			case mid < g.low:
				area, slope = area+math.Abs(whole(b, g.low)-whole(a, g.low)), slope-(b-a)
			}
		}
		before = held(g.h)
	}
	if len(all) > 0 && !all[0].free { // the turn closes: D begins with what it ends with, and the weight there
		first := all[0]
		first.p += c
		begin := math.Min(math.Max(first.p, first.low), first.high)
		total := 0.0
		for _, w := range k.mass[1:] {
			total += w
		}
		variation += math.Abs(begin-total) + math.Abs(before) + math.Abs(k.mass[0])
	}
	return area, slope, variation
}

// best returns norm and variation for the constant that makes the norm least: it is
// convex in the constant. f” closes, so any constant may be added to the kernel.
func (k *kernel) best() (area, variation float64) {
	all := k.pieces()
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, g := range all {
		for _, x := range []float64{0, g.h / 2, g.h} {
			y := g.at(x)
			lo, hi = math.Min(lo, g.low-y), math.Max(hi, g.high-y)
		}
	}
	for range 60 {
		mid := lo + (hi-lo)/2
		if mid <= lo || mid >= hi {
			break
		}
		if _, slope, _ := k.norm(all, mid); slope < 0 {
			lo = mid
		} else {
			hi = mid
		}
	}
	area, _, variation = k.norm(all, lo)
	return area, variation
}

// roots returns the real roots of a + bx + cx², without cancellation.
func roots(a, b, c float64) []float64 {
	d := b*b - 4*a*c
	if d < 0 || b == 0 && c == 0 {
		return nil
	}
	q := -(b + math.Copysign(math.Sqrt(d), b)) / 2
	var out []float64
	if c != 0 {
		out = append(out, q/c)
	}
	if q != 0 {
		out = append(out, a/q)
	}
	return out
}

// rounding is taken off every bound: the sums above lose less.
const rounding = 1e-9

// peak returns the lower bound: of the peak jerk when no weights are on
// accelerations, else of the peak acceleration of motions whose jerk is at most jerk.
func (k *kernel) peak(jerk float64) float64 {
	area, variation := k.best()
	b := k.value / area
	if variation > 0 {
		b = (k.value - jerk*area) / variation
	}
	return math.Max(0, b-rounding*math.Abs(b))
}
