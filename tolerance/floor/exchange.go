package floor

import "math"

// fitted is what an exchange found: four nodes of a stretch, growing, and how far from them every
// circle and line is at least (in floats: a guide, no proof).
type fitted struct {
	at [4]int
	e  float64
}

// local is a node in the axes of a stretch: x along it, y to the left, q = |P|²/2.
type local struct{ x, y, q float64 }

// axes puts the origin at the middle node and the x axis along the curve there. ns must have three entries or more.
func axes(ns []node, buf []local) []local {
	n := len(ns) - 1
	o := ns[n/2].p
	u := ns[n/2+1].p.Sub(ns[n/2-1].p)
	if l := u.Norm(); l > 0 {
		u = u.Scale(1 / l)
	}
	buf = buf[:0]
	for _, a := range ns {
		d := a.p.Sub(o)
		buf = append(buf, local{u.Dot(d), u.Cross(d), d.Dot(d) / 2})
	}
	return buf
}

// cofactor is the determinant of the rows (1, x, q) of three points.
func cofactor(a, b, c local) float64 {
	return (b.x-a.x)*(c.q-a.q) - (c.x-a.x)*(b.q-a.q)
}

// weights returns u with Σu = Σux = Σuq = 0, and Σuy/Σ|u|; all 0 when the points leave u open.
func weights(p [4]local) (u [4]float64, level float64) {
	u = [4]float64{cofactor(p[1], p[2], p[3]), -cofactor(p[0], p[2], p[3]), cofactor(p[0], p[1], p[3]), -cofactor(p[0], p[1], p[2])}
	size, sum := 0.0, 0.0
	for i, w := range u {
		size += math.Abs(w)
		sum += w * (p[i].y - p[0].y)
	}
	if !(size > 0) {
		return [4]float64{}, 0
	}
	for i := range u {
		u[i] /= size
	}
	return u, sum / size
}

// circle is y = c + b x + k q: a circle or line through or near the middle of a stretch.
type circle struct{ c, b, k float64 }

// norm is the length of the gradient of y - c - bx - kq on the circle: the factor from it
// to distance.
func (f circle) norm() float64 { return math.Sqrt(math.Max(1+f.b*f.b-2*f.k*f.c, 1e-6)) }

// through returns the circle at signed distances (times norm) +-level from four points, by the signs of u.
func through(p [4]local, u [4]float64, level float64) circle {
	var y [4]float64
	for i := range p {
		y[i] = p[i].y - math.Copysign(level, level*u[i])
	}
	// Three of the four determine it; the three of larger determinant do so better.
	i, j, k := 0, 1, 3
	if math.Abs(u[1]) > math.Abs(u[2]) {
		j = 2
	}
	d := cofactor(p[i], p[j], p[k])
	b := ((y[j]-y[i])*(p[k].q-p[i].q) - (y[k]-y[i])*(p[j].q-p[i].q)) / d
	q := ((p[j].x-p[i].x)*(y[k]-y[i]) - (p[k].x-p[i].x)*(y[j]-y[i])) / d
	return circle{y[i] - b*p[i].x - q*p[i].q, b, q}
}

const (
	maxExchanges = 24
	settled      = 1 + 1e-3 // the worst node is no further off than this times the four
)

// exchange moves four nodes to where the best circle through a stretch is furthest off
// (E. Ya. Remez 1934; one point at a time, always to the set of larger level). It stops early when the
// four are off by more than high or a circle is within low of all; fits says that the four are not off by more
// than high. ps must have four entries or more.
func exchange(ps []local, at [4]int, low, high float64) (best fitted, fits bool) {
	pick := func(at [4]int) [4]local { return [4]local{ps[at[0]], ps[at[1]], ps[at[2]], ps[at[3]]} }
	best.at = at
	u, level := weights(pick(at))
	for range maxExchanges {
		f := through(pick(best.at), u, level)
		norm := f.norm()
		best.e = math.Abs(level) / norm
		if best.e > high {
			return best, false
		}
		worst, far := 0, -1.0
		for i, p := range ps {
			if r := math.Abs(p.y - f.c - f.b*p.x - f.k*p.q); r > far {
				worst, far = i, r
			}
		}
		if far/norm <= low || !(far > math.Abs(level)*settled) {
			return best, true
		}
		next, was := best.at, math.Abs(level)
		for i := range 4 {
			try := swapped(best.at, i, worst)
			if v, l := weights(pick(try)); math.Abs(l) > math.Abs(level) {
				next, u, level = try, v, l
			}
		}
		if math.Abs(level) <= was {
			return best, true
		}
		best.at = next
	}
	return best, true
}

// swapped puts to in place of entry i and keeps the order.
func swapped(at [4]int, i, to int) [4]int {
	at[i] = to
	for ; i > 0 && at[i] < at[i-1]; i-- {
		at[i], at[i-1] = at[i-1], at[i]
	}
	for ; i < 3 && at[i] > at[i+1]; i++ {
		at[i], at[i+1] = at[i+1], at[i]
	}
	return at
}
