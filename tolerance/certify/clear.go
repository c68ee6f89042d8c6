package certify

import (
	"container/heap"
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Clearance is a minimum over two things, the points of the element and the points of the
// curve. The first is solved in closed form: the distance of a point from a
// line or an arc. For the second the turn is cut into stretches, each with a proven lower
// bound, and the one with the least bound is cut again (branch and bound) until
// its bound is near a distance certainly found. The bound of a stretch is:
//
//   - at first that of a disc around it: distance of the disc's center less its radius;
//   - then the range of the distance to the whole line or circle, from the same Taylor
//     cubics as the certificate. It is a lower bound wherever the feet are;
//   - where all feet are certainly off the element, the distance to the nearer end, by the same cubics.
//
// An element that runs parallel to the curve, as every finishing path does, has a
// distance that hardly varies; first-order bounds would need thousands of stretches there, cubics need tens.

// Body is a closed curve prepared for many questions of clearance. It is not changed
// after Prepare and may be shared.
type Body struct {
	survey  *survey
	patches []patch
	discs   []plane.Circle // each contains its patch of the curve
	err     error
}

const (
	// stretches of the turn prepared; each piece has one at least.
	stretches = 256
	// gapShare of the clearance: a proven bound this near the least distance found is good enough.
	gapShare = 1e-4
	// resolution, as a share of the curve's size: distances nearer to each other are not told apart.
	resolution = 1e-9
	// mostCuts ends the search.
	mostCuts = 20000
)

// Prepare cuts the curve into stretches and bounds each. A curve that is not closed
// and continuous is reported by every Clear.
func Prepare(curve Curve) *Body {
	b := &Body{}
	if b.survey, b.err = newSurvey(curve, true); b.err != nil {
		return b
	}
	s := b.survey
	for i, p := range s.pieces {
		n := max(1, int(stretches*(p.To-p.From)/(s.t1-s.t0)))
		for _, q := range (part{i, p.From, p.To}).cut(n) {
			a := s.patch(q)
			b.patches = append(b.patches, a)
			b.discs = append(b.discs, plane.Circle{Center: a.p[0].point(), Radius: a.w[0].sub(exactly(a.p[0].point())).norm().Hi})
		}
	}
	return b
}

// Clear is Prepare(curve).Clear(e, least).
func Clear(curve Curve, e chain.Element, least float64) (found, at float64, err error) {
	return Prepare(curve).Clear(e, least)
}

// Clear asks whether every point of the element, whatever a control makes of it, keeps at least the
// distance least from every point of the curve. found is the answer: at or above least
// it is a proven lower bound of the distance; below least it is a distance that is reached,
// up to rounding and the width of the band of an arc whose radii differ, and the least one within 1e-4 of itself
// or 1e-9 of the curve's size. It is negative
// where such a band touches the curve. at is the cam angle (degrees) of the
// least distance met. A line from a point to itself is that point. It is an error when neither can be
// proven: least within about 1e-9 of the curve's size of the true distance, or no arc.
func (b *Body) Clear(e chain.Element, least float64) (found, at float64, err error) {
	if b.err != nil {
		return 0, 0, b.err
	}
	f, err := newFigure(e)
	if err != nil {
		return 0, 0, err
	}
	if math.IsNaN(least) {
		return 0, 0, fmt.Errorf("the clearance asked for is not a number")
	}
	q := quest{body: b, f: &f, least: least, best: math.Inf(1)}
	return q.run()
}

// quest is one search for the least distance.
type quest struct {
	body  *Body
	f     *figure
	least float64
	best  float64 // least distance met
	at    float64 // where
	open  nodes
}

// node is a stretch with a lower bound of its distance; rough while only its disc was used.
type node struct {
	part
	lower float64
	rough int // index of the prepared patch, -1 when its cubics have been used
}

// nodes is a heap, least bound first.
type nodes []node

func (n nodes) Len() int           { return len(n) }
func (n nodes) Less(i, j int) bool { return n[i].lower < n[j].lower }
func (n nodes) Swap(i, j int)      { n[i], n[j] = n[j], n[i] }
func (n *nodes) Push(x any)        { *n = append(*n, x.(node)) }
func (n *nodes) Pop() any {
	last := len(*n) - 1
	x := (*n)[last]
	*n = (*n)[:last]
	return x
}

func (q *quest) run() (found, at float64, err error) {
	size := q.body.survey.size
	for i, d := range q.body.discs {
		far := q.meet(d.Center, q.body.patches[i].m)
		lower := far - d.Radius*outward - q.slop(d.Center)
		q.open = append(q.open, node{q.body.patches[i].part, lower, i})
	}
	heap.Init(&q.open)
	for cuts := 0; ; {
		n := heap.Pop(&q.open).(node)
		enough := math.Max(gapShare*math.Abs(q.best), resolution*size)
		switch {
		case n.lower >= q.least && n.lower >= q.best-enough:
			return n.lower, q.at, nil
		case q.best < q.least && (n.lower >= q.best-enough || cuts >= mostCuts):
			return q.best, q.at, nil
		case !(n.lower < q.best-resolution*size) || cuts >= mostCuts:
			return n.lower, q.at, fmt.Errorf("%s: a clearance of %.9g is not proven: it lies between %.9g and %.9g at cam angle %.6g",
				q.f.name(), q.least, n.lower, q.best, q.at)
		}
		if n.rough >= 0 {
			q.add(&q.body.patches[n.rough])
			continue
		}
		cuts++
		for _, h := range n.part.cut(2) {
			p := q.body.survey.patch(h)
			q.meet(p.p[0].point(), p.m)
			q.add(&p)
		}
	}
}

// meet takes the distance of a point of the curve into account and returns it.
func (q *quest) meet(p plane.Point, t float64) float64 {
	d := q.f.reach(p) - q.f.half - q.f.e.Slack
	if d < q.best {
		q.best, q.at = d, t
	}
	return d
}

// slop is above the rounding of a distance from p computed in floats.
func (q *quest) slop(p plane.Point) float64 {
	return roundingShare * (q.body.survey.size + p.Dist(q.f.e.From) + q.f.e.From.Radius())
}

func (q *quest) add(p *patch) {
	lower := q.bound(p) - q.f.half*outward - q.f.e.Slack - q.slop(p.p[0].point())
	if math.IsNaN(lower) {
		lower = math.Inf(-1)
	}
	heap.Push(&q.open, node{p.part, lower, -1})
}

// bound is a lower bound of the distance of the patch from the figure of mean radius.
func (q *quest) bound(p *patch) float64 {
	f := q.f
	if f.point() {
		return away(p, f.e.From)
	}
	if _, out := f.sector(p.w[0]); out {
		return math.Min(away(p, f.end(f.a)), away(p, f.end(f.b)))
	}
	return f.side(p).mig()
}

// away is a lower bound of the distance of the patch from a point.
func away(p *patch, e plane.Point) float64 {
	v := p.p[0].sub(exactly(e))
	c := cubic{
		v.sqr(),
		twice(v.dot(p.p[1])),
		twice(v.dot(p.p[2])).Add(p.p[1].sqr()),
		twice(p.w[0].sub(exactly(e)).dot(p.w[3]).Add(p.w[1].dot(p.w[2]))).Mag(),
	}
	return math.Sqrt(math.Max(c.over(p.h).lo, 0)) / outward
}

// AwayFromCircle returns a rigorous lower bound of the distance from the element, whatever a control
// makes of it, to the disc within c: below zero when the element enters the disc.
// It is exact to rounding when the element's radii agree. It is an error when the
// element is no line and no arc.
func AwayFromCircle(e chain.Element, c plane.Circle) (float64, error) {
	f, err := newFigure(e)
	if err != nil {
		return 0, err
	}
	if !finite(c.Center.X, c.Center.Y, c.Radius) || c.Radius < 0 {
		return 0, fmt.Errorf("circle about %s with radius %g is none", show(c.Center), c.Radius)
	}
	slop := roundingShare * (c.Center.Dist(e.From) + e.From.Radius() + c.Center.Radius() + c.Radius)
	return f.reach(c.Center) - f.half - e.Slack - c.Radius - slop, nil
}
