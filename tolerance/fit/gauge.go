package fit

import (
	"math"
	"sort"
)

// gauge measures a stretch in arcs of equal error: each arc by the cube root of its share of the
// largest error, the dwells' circles as far as they do the curve's work at either border.
type gauge struct {
	arc []float64  // measure of each arc
	out [2]float64 // and of the circles beyond the outer knots
	sum []float64  // measure up to each knot
	x   []float64  // the knots that it was laid out for
}

// lay sums up for the knots x.
func (g *gauge) lay(x []float64) {
	g.x = append(g.x[:0], x...)
	g.sum = append(g.sum[:0], g.out[0])
	for j, a := range g.arc {
		g.sum = append(g.sum, g.sum[j]+a)
	}
}

// measureAt returns the measure up to arc length s. Within an arc it goes with N*.
func (f *fitter) measureAt(s float64) float64 {
	g := &f.gauge
	n := len(g.arc)
	switch first, last := g.x[0], g.x[n]; {
	case s <= first && (first <= 0 || f.closed):
		return 0
	case s <= first:
		return math.Max(s, 0) / first * g.sum[0]
	case s >= last && last >= f.length:
		return g.sum[n] + g.out[1]
	case s >= last:
		return g.sum[n] + math.Min(1, (s-last)/(f.length-last))*g.out[1]
	}
	j := sort.Search(n-1, func(j int) bool { return g.x[j+1] > s })
	a, b := f.uAt(g.x[j]), f.uAt(g.x[j+1])
	return g.sum[j] + g.arc[j]*(f.uAt(s)-a)/(b-a)
}

// whereMeasure returns the arc length up to which the measure is y.
func (f *fitter) whereMeasure(y float64) float64 {
	g := &f.gauge
	n := len(g.arc)
	switch first, last := g.x[0], g.x[n]; {
	case y <= g.sum[0] && g.sum[0] <= 0:
		return first
	case y <= g.sum[0]:
		return first * y / g.sum[0]
	case y >= g.sum[n] && g.out[1] <= 0:
		return last
	case y >= g.sum[n]:
		return last + (f.length-last)*math.Min((y-g.sum[n])/g.out[1], 1)
	}
	j := sort.Search(n-1, func(j int) bool { return g.sum[j+1] > y })
	a, b := f.uAt(g.x[j]), f.uAt(g.x[j+1])
	return f.sAt(a + (b-a)*(y-g.sum[j])/g.arc[j])
}
