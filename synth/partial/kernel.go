package partial

import (
	"math"

	"lobewright/synth/qp"
)

// kernel is the functional of a dual solution and the kernel it makes.
type kernel struct {
	m     *mesh
	c     [][3]float64 // weights of f, f', f” at each point; the last a turn after the first
	value float64      // what the facts make the functional at least
	mass  []float64    // w: the weights on the acceleration at each point
}

// functional collects the weights of a solution.
func (r *relaxed) functional(s qp.Solution) *kernel {
	k := &kernel{m: r.m, c: make([][3]float64, r.n+1)}
	free := -1 // a fact that fixes a lift, whose weight may be adjusted
	for i, w := range r.facts {
		y := -s.Y[i]
		k.value += y * r.program.F[i]
		if w.around {
			continue // found again below
		}
		k.c[w.point][w.kind] += y
		if w.kind == 0 {
			free = i
		}
	}
	for i, w := range r.windows {
		row := r.firstWindow + i
		z := math.Max(s.Z[row], 0)
		k.c[w.point][0] -= w.sign * z
		k.value -= z * r.program.H[row]
	}
	k.mass = make([]float64, r.n)
	for _, p := range r.peaks {
		k.mass[p.point] += p.sign * s.Z[p.row]
	}
	sum := 0.0
	for _, c := range k.c {
		sum += c[0]
	}
	k.c[r.facts[free].point][0] -= sum
	k.value -= sum * r.program.F[free]
	k.close()
	return k
}

// close gives the identities f(turn) = f(0) and f'(turn) = f'(0) the weights that make
// the functional less the weights on accelerations vanish on x and x².
func (k *kernel) close() {
	first, last := k.m.stretches[0].from, len(k.c)-1
	var m1, m2 float64
	at := func(i int) float64 {
		if i == last {
			return turn
		}
		return k.m.stretches[i].from - first
	}
	for i, c := range k.c {
		x := at(i)
		m1 += c[0]*x + c[1]
		m2 += c[0]*x*x/2 + c[1]*x + c[2]
	}
	for _, w := range k.mass {
		m2 -= w
	}
	pf := -m1 / turn
	pv := -(m2 + pf*turn*turn/2) / turn
	k.c[last][0] += pf
	k.c[0][0] -= pf
	k.c[last][1] += pv
	k.c[0][1] -= pv
}
