package smooth

import (
	"math"
)

// Least squares under the inequality that no residual is larger than allowed, on given
// knots, is a convex quadratic program with two inequalities for every row:
//
//	minimize  sum of r²/2 + lambda * roughness/2,  -allowed <= r <= allowed.
//
// A primal-dual interior-point method needs ten to twenty steps, and each step is a
// weighted fit: a row near its limit weighs more. With room u = allowed - r above and
// v = allowed + r below, their multipliers p and q, and what u and v are off by, eu and ev,
// the coefficients change by dc with
//
//	(B'WB + lambda P) dc = B'g - lambda P c,  W = 1 + p/u + q/v,
//	g = r + (m - p eu)/u - (n - q ev)/v,
//
// m and n being the aims of p*u and q*v. The matrix of a step serves twice, first with the
// aim 0 and then with one chosen by how far that leads, less the product of the changes it
// found. S. Mehrotra, SIAM J. Optim. 2 (1992) 575-601; S. J. Wright, Primal-Dual
// Interior-Point Methods, SIAM 1997, ch. 10 (both cited from memory).

// side is the room of every row to one side and the force with which the limit pushes.
type side struct {
	sign            float64 // 1 above, -1 below
	room, force     []float64
	off, aim        []float64
	toRoom, toForce []float64 // the changes
}

func newSide(sign, allowed float64, residual []float64) *side {
	n := len(residual)
	d := &side{sign: sign, room: make([]float64, n), force: make([]float64, n), off: make([]float64, n),
		aim: make([]float64, n), toRoom: make([]float64, n), toForce: make([]float64, n)}
	for i, r := range residual {
		d.room[i] = math.Max(allowed-sign*r, allowed/10)
		d.force[i] = allowed * allowed / d.room[i]
	}
	return d
}

// change sets the changes that follow from those of the residuals.
func (d *side) change(residual, moved []float64) {
	for i := range residual {
		d.toRoom[i] = d.off[i] - d.sign*(moved[i]-residual[i])
		d.toForce[i] = (d.aim[i] - d.force[i]*(d.room[i]+d.toRoom[i])) / d.room[i]
	}
}

// farthest returns the part of the changes after which some room or force is 0, at most most.
func (d *side) farthest(most float64) float64 {
	for i := range d.room {
		if c := d.toRoom[i]; c*most < -d.room[i] {
			most = -d.room[i] / c
		}
		if c := d.toForce[i]; c*most < -d.force[i] {
			most = -d.force[i] / c
		}
	}
	return most
}

// product returns the sum of room times force after a part of the changes.
func (d *side) product(part float64) (sum float64) {
	for i := range d.room {
		sum += (d.room[i] + part*d.toRoom[i]) * (d.force[i] + part*d.toForce[i])
	}
	return sum
}

// box is the program on its way.
type box struct {
	*fitter
	*spline
	lambda       float64
	residual     []float64
	sides        [2]*side
	weight, goal []float64
}

// boxed returns the spline on the knots of s with the least sum, or nil when no spline on
// these knots keeps to the inequalities.
func (f *fitter) boxed(s *spline, lambda float64) *spline {
	const (
		most  = 30   // steps
		doubt = 12   // steps after which the worst residual must be nearly what is allowed,
		still = 1.01 // by this factor
		near  = 0.5  // mean of p*u, as a share of the square of what is allowed, that will do
	)
	n := len(f.at)
	b := &box{fitter: f, spline: s.clone(), lambda: lambda, residual: s.residuals(&f.rows),
		weight: make([]float64, n), goal: make([]float64, n)}
	b.sides = [2]*side{newSide(1, f.allowed, b.residual), newSide(-1, f.allowed, b.residual)}
	for k := range most {
		worst := largest(b.residual)
		mean := (b.sides[0].product(0) + b.sides[1].product(0)) / float64(2*n)
		if worst <= f.allowed && mean <= near*f.allowed*f.allowed {
			return b.spline
		}
		if k == doubt && worst > still*f.allowed || !b.step(mean) {
			break
		}
	}
	return nil
}

// step makes one step from where the mean of room times force is mean.
func (b *box) step(mean float64) bool {
	const back = 0.98 // part of the way to the nearest wall
	for i := range b.weight {
		b.weight[i] = 1
		for _, d := range b.sides {
			b.weight[i] += d.force[i] / d.room[i]
			d.off[i] = b.allowed - d.sign*b.residual[i] - d.room[i]
			d.aim[i] = 0
		}
	}
	matrix, right := b.pull()
	if !matrix.factor() {
		return false
	}
	part := b.head(matrix, right, 1)
	n := float64(2 * len(b.residual))
	aim := mean * math.Pow((b.sides[0].product(part)+b.sides[1].product(part))/n/mean, 3)
	for _, d := range b.sides {
		for i := range d.aim {
			d.aim[i] = aim - d.toRoom[i]*d.toForce[i]
		}
	}
	_, right = b.pull()
	part = back * b.head(matrix, right, 1/back)
	for _, d := range b.sides {
		for i := range d.room {
			d.room[i] += part * d.toRoom[i]
			d.force[i] += part * d.toForce[i]
		}
	}
	b.move(part, right)
	b.residual = b.residuals(&b.rows)
	return true
}

// pull returns the equations for the aims as they are.
func (b *box) pull() (*band, []float64) {
	for i, r := range b.residual {
		b.goal[i] = r
		for _, d := range b.sides {
			b.goal[i] += d.sign * (d.aim[i] - d.force[i]*d.off[i]) / d.room[i]
		}
	}
	n := b.equations(b.weighed(&b.rows, b.weight, b.goal))
	b.stiffen(n, b.lambda)
	return n.matrix, n.right
}

// head solves for the changes, sets them, and returns how far they may be followed.
func (b *box) head(matrix *band, right []float64, most float64) float64 {
	matrix.solve(right)
	to := b.clone()
	to.move(1, right)
	moved := to.residuals(&b.rows)
	for _, d := range b.sides {
		d.change(b.residual, moved)
		most = d.farthest(most)
	}
	return most
}
