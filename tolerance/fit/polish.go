package fit

import (
	"math"
	"sort"
)

// Moving a knot of a quadratic spline by dx changes the spline like a step of its slope by dx times
// the step of its curvature. So splines that may be kinked at their knots are the linear model
// of splines with free knots: fit one, and turn its kinks into moves (Gauss-Newton).

const (
	moveMost     = 0.2  // of the shorter neighbor: how far a knot moves at once
	movePart     = 0.6  // of the computed move is taken
	powers       = 3    // the error to the powers 2, 4, 6 weighs the steps of a polish, a third of them each
	reweighings  = 3    // before each step
	basicWeight  = 0.02 // of the worst sample's: weight of a good one
	afterMove    = 8    // rounds of Lawson's method after each step
	sharpRounds  = 8    // and for each step on the maximum
	sharpPart    = 0.7  // of the computed move is taken at first there
	sharpLeast   = 0.02 // and at last
	sharpGrowth  = 1.5  // after a step that was good
	sharpWeight  = 1e-3 // weight that a sample keeps there
	lawsonWeight = 1e-7 // and in Lawson's method with still knots
	worthMoving  = 1.5  // of the worst arc: the two beside a knot measure less when it is better elsewhere
)

// uniform sets the weights to the samples' lengths.
func (f *fitter) uniform() { copy(f.w, f.ds) }

// lawson looks for the spline of the present knots with the least maximum, from the present weights:
// they are multiplied by the errors again and again (C. L. Lawson 1961; J. R. Rice and K. H. Usow,
// Mathematics of Computation 22 (1968) 118). The best is kept.
func (f *fitter) lawson(rounds int) bool {
	f.window()
	for r := 0; ; r++ {
		if !f.refit() {
			return false
		}
		f.keep()
		if r == rounds || f.max == 0 {
			return true
		}
		inv := 1 / f.max
		for i := f.lo; i < f.hi; i++ {
			f.w[i] *= math.Abs(f.e[i])*inv + lawsonWeight
		}
	}
}

// refit fits the spline with the present knots and weights and measures it.
func (f *fitter) refit() bool {
	f.gather()
	if !f.solve(&f.q, smooth) {
		return false
	}
	f.measure(&f.q)
	return true
}

// slide returns how far knot j has to move to take up the kink of the spline p.
func (f *fitter) slide(p *spline, j int, most, part float64) float64 {
	n := p.arcs()
	room := math.Inf(1)
	var bendA, bendB, slopeA, slopeB float64
	if left := j - 1; left >= 0 || f.closed {
		left = (left + n) % n
		_, slopeA = p.slopes(left)
		bendA = f.q.bend(left)
		room = p.x[left+1] - p.x[left]
	} else {
		_, slopeA = f.before(p.x[0])
		bendA = f.left.frame.K - f.k0
	}
	if j < n {
		slopeB, _ = p.slopes(j)
		bendB = f.q.bend(j)
		room = math.Min(room, p.x[j+1]-p.x[j])
	} else {
		_, slopeB = f.beyond(p.x[n])
		bendB = f.right.frame.K - f.k0
	}
	d := part * (slopeB - slopeA) / (bendA - bendB)
	if math.IsNaN(d) {
		return 0
	}
	return math.Max(math.Min(d, most*room), -most*room)
}

// move slides all knots by the kinks of spare. It returns where they were.
func (f *fitter) move(most, part float64) {
	f.old = append(f.old[:0], f.q.x...)
	for j := range f.q.x {
		if f.movable(j) {
			f.q.x[j] = f.old[j] + f.slide(&f.spare, j, most, part)
		}
	}
	f.order(f.old)
}

// polish moves the knots of q by steps on growing powers of the error, until the best is within
// enough.
func (f *fitter) polish(steps int, enough float64) {
	for it := range steps {
		power := 1 + powers*it/steps // of the squared error
		f.window()
		f.uniform()
		if !f.refit() {
			return
		}
		for range reweighings {
			inv := 1 / f.max
			for i := f.lo; i < f.hi; i++ {
				x := f.e[i] * inv
				x *= x
				y := x
				for range power - 1 {
					y *= x
				}
				f.w[i] = f.ds[i] * (y + basicWeight)
			}
			if f.max == 0 || !f.refit() {
				return
			}
			f.keep()
		}
		if !f.solve(&f.spare, f.movable) {
			return
		}
		f.move(moveMost, movePart)
		f.uniform()
		if !f.lawson(afterMove) || f.bestMax <= enough {
			return
		}
	}
}

// sharpen moves the knots of q by steps on the maximum itself: the kinked spline of least maximum
// says where to. Steps that do not help are taken back and halved.
func (f *fitter) sharpen(steps int, enough float64) {
	f.window()
	f.uniform()
	if !f.refit() || f.max == 0 {
		return
	}
	for i := f.lo; i < f.hi; i++ {
		x := f.e[i] / f.max
		f.mark[i] = f.ds[i] * (x*x + basicWeight)
	}
	part := sharpPart
	for it := 0; it < steps && part > sharpLeast; it++ {
		if !f.aim() {
			return
		}
		before := f.bestMax
		f.move(moveMost*part/sharpPart, part)
		copy(f.w, f.mark)
		if !f.lawson(afterMove) || f.bestMax <= enough {
			return
		}
		if part /= 2; f.bestMax < before {
			part = math.Min(2*part*sharpGrowth, sharpPart)
		}
		f.q.copyFrom(&f.best)
		f.window()
	}
}

// aim fits the kinked spline of least maximum to spare, and leaves weights between those it ended
// with and plain ones in mark.
func (f *fitter) aim() bool {
	copy(f.w, f.mark)
	for range sharpRounds {
		f.gather()
		if !f.solve(&f.spare, f.movable) {
			return false
		}
		if f.measure(&f.spare); f.max == 0 {
			return false
		}
		inv, top := 1/f.max, 0.0
		for i := f.lo; i < f.hi; i++ {
			f.w[i] *= math.Abs(f.e[i])*inv + sharpWeight
			top = math.Max(top, f.w[i]/f.ds[i])
		}
		for i := f.lo; i < f.hi; i++ {
			f.w[i] = f.w[i]/top + sharpWeight*f.ds[i]
		}
	}
	for i := range f.mark {
		f.mark[i] = math.Sqrt(f.w[i] * f.ds[i])
	}
	return true
}

// transfer takes the knot of the best spline away that is needed least, or with a rank the one
// next to it in need, and puts one into the worst arc. It reports whether that may help.
func (f *fitter) transfer(rank int) bool {
	f.q.copyFrom(&f.best)
	f.window()
	f.measure(&f.q)
	n, worst := f.q.arcs(), 0
	for j := range f.peak {
		if f.peak[j] > f.peak[worst] {
			worst = j
		}
	}
	type candidate struct {
		j    int
		need float64
	}
	var cs []candidate
	limit := worthMoving * math.Cbrt(f.peak[worst])
	for j := 1; j < n; j++ {
		need := math.Cbrt(f.peak[j-1]) + math.Cbrt(f.peak[j])
		if j != worst && j != worst+1 && !f.held(j) && !f.sliding(j) && need < limit {
			cs = append(cs, candidate{j, need})
		}
	}
	if rank >= len(cs) {
		return false
	}
	sort.SliceStable(cs, func(a, b int) bool { return cs[a].need < cs[b].need })
	j, mid := cs[rank].j, (f.q.x[worst]+f.q.x[worst+1])/2
	f.q.x = append(append(f.q.x[:j], f.q.x[j+1:]...), mid)
	sort.Float64s(f.q.x)
	f.pins = f.choosePins()
	return true
}
