package chain

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
)

// Putting a path on the output grid. The obvious way rounds every joint and
// every center to the nearest grid point. It breaks twice. The two ends of an arc
// then lie at radii that differ by up to 2.3 counts (an alarm on many
// controls), and the joint is off the path by up to 0.71 count, which short arcs
// turn into kinks of 1e-3 rad.
//
// Used here: (1) a joint between smooth neighbors may slide along the path almost
// for free, so among the grid points close to the path within 2 % of the shorter
// neighbor the one with the smallest kink is taken: normal miss over the
// lengths, plus curvature step times slide. (2) The center is solved again for
// the rounded ends: the planned center is projected on their bisector, and of the
// grid points along the bisector that move the middle of the arc by no more
// than 0.03 count the one with the least mismatch of the radii is taken. The
// mismatch is then at most 1.42·sin(sweep/2) counts, since the nearest grid point
// is at most 0.71 count off the bisector.
//
// Vertices of lines slide too, and less: see snapVertex.
//
// Price: some hundred candidates a joint, about 10 µs. Measured on cams fitted to
// 1 µm on a 1 µm grid: extra deviation 0.01 to 0.07 µm instead of 0.3 to 0.45.

// SnapOptions says how Snap puts a path on the grid. Zero values are defaults.
type SnapOptions struct {
	MaxSweep  float64 // radians: arcs above it are split first; default π/2, at most π
	MaxRadius float64 // length: flatter arcs become lines; default 1e4, or 1e7 on grids of 6 decimals and more (geometry files)
	MinChord  float64 // counts: arcs with a shorter chord become lines; default 10
	Naive     bool    // nearest grid point for joints and centers: the baseline of the tests
}

const (
	slideShare  = 0.02 // of the shorter neighbor: how far a joint may slide
	slideCounts = 50   // and at most so many counts
	cornerMost  = 1    // rad: a vertex that turns further is a corner of the curve and stays
	midShift    = 0.03 // counts: how far choosing a center may move the middle of an arc
	centerRange = 60   // counts along the bisector that are tried at most, either way
	lineSagitta = 0.25 // counts: how far a line may be from the flat arc it replaces
	maxCounts   = 1e15 // largest coordinate in counts; below 2^53, so counts are exact as doubles
	maxElements = 1e6  // refuses absurd splits
)

func (o SnapOptions) filled(g Grid) SnapOptions {
	if o.MaxSweep <= 0 {
		o.MaxSweep = math.Pi / 2
	}
	o.MaxSweep = math.Min(o.MaxSweep, math.Pi)
	if o.MaxRadius <= 0 {
		o.MaxRadius = 1e4
		if g.Decimals >= 6 {
			o.MaxRadius = 1e7
		}
	}
	o.MaxRadius = math.Min(o.MaxRadius, maxCounts/g.scale())
	if o.MinChord <= 0 {
		o.MinChord = 10
	}
	return o
}

// Snap puts the path on the grid. A path that closes within half a count closes
// exactly; the ends of an open path go to the nearest grid point, so that paths
// meeting there still meet. Elements that shrink to a point are dropped and their
// Source is given to a neighbor. Errors: a grid without sense, a path with
// gaps above half a count, coordinates beyond 1e15 counts, nothing left.
func Snap(p Path, g Grid, opt SnapOptions) (Chain, error) {
	if g.Decimals < 0 || g.Decimals > maxDecimals {
		return Chain{}, fmt.Errorf("output grid of %d decimals: 0 to %d are possible", g.Decimals, maxDecimals)
	}
	if err := snappable(p, g); err != nil {
		return Chain{}, err
	}
	opt = opt.filled(g)
	cut, err := forGrid(p, g, opt)
	if err != nil {
		return Chain{}, err
	}
	joints := snapJoints(cut, g, opt)
	c := Chain{Grid: g}
	var lost []Span
	for i, e := range cut {
		s := Segment{From: joints[i], To: joints[i+1], Source: e.Source}
		if s.From == s.To {
			lost = append(lost, e.Source)
			c.giveSource(e.Source)
			continue
		}
		if len(c.Segments) == 0 && len(lost) > 0 {
			s.Source.From = lost[0].From
		}
		if e.Kind == Arc && vec(s.From, s.To).Norm() >= opt.MinChord {
			s.Kind, s.CCW = Arc, e.CCW
			s.Center = snapCenter(s, e, g, opt)
		}
		c.Segments = append(c.Segments, s)
	}
	if len(c.Segments) == 0 {
		return Chain{}, fmt.Errorf("the path of %d elements, %.3g long, shrinks to a point on a grid of %g", len(p), p.Length(), g.Step())
	}
	return c, nil
}

// giveSource lets the last segment stand for s too.
func (c Chain) giveSource(s Span) {
	if n := len(c.Segments); n > 0 {
		c.Segments[n-1].Source.To = s.To
	}
}

// snappable checks that coordinates are finite, small enough and joined.
func snappable(p Path, g Grid) error {
	limit := maxCounts / g.scale()
	for i, e := range p {
		if !(e.From.Radius() <= limit && e.To.Radius() <= limit) {
			return fmt.Errorf("element %d goes from (%g, %g) to (%g, %g): coordinates must be numbers up to %g on a grid of %g",
				i, e.From.X, e.From.Y, e.To.X, e.To.Y, limit, g.Step())
		}
		if i > 0 && !(e.From.Dist(p[i-1].To) <= g.Step()/2) {
			return fmt.Errorf("element %d starts at (%g, %g), %.3g from the end of the one before it", i, e.From.X, e.From.Y, e.From.Dist(p[i-1].To))
		}
	}
	return nil
}

// forGrid splits long arcs and makes lines of the flat ones, with at most a
// quarter count between line and arc.
func forGrid(p Path, g Grid, opt SnapOptions) (Path, error) {
	var q Path
	for _, e := range p.SplitArcs(opt.MaxSweep) {
		if e.Kind != Arc || e.Radius() <= opt.MaxRadius {
			q = append(q, e)
			continue
		}
		r, n := e.Radius(), 1.0
		if !math.IsInf(r, 0) && !math.IsNaN(r) { // beyond all bounds a line is exact
			n = math.Ceil(e.Length() / math.Sqrt(8*r*lineSagitta*g.Step()))
		}
		if n > maxElements {
			return nil, fmt.Errorf("an arc of radius %.6g and length %.6g would take %.0f lines on a grid of %g; allow a larger radius",
				r, e.Length(), n, g.Step())
		}
		for _, part := range e.equal(int(n)) {
			part.Kind, part.Center, part.CCW = Line, plane.Point{}, false
			q = append(q, part)
		}
	}
	return q, nil
}

// snapJoints returns the grid points of the joints: len(p)+1 of them, the last
// equal to the first when the path is closed.
func snapJoints(p Path, g Grid, opt SnapOptions) []Point {
	n := len(p)
	js := make([]Point, n+1)
	if n == 0 {
		return js
	}
	shifts := make([]shift, n+1)
	snap := func(i int) {
		a, b := p[(i+n-1)%n], p[i]
		if reach := slide(a, b, g); a.Kind == Line && b.Kind == Line && !opt.Naive && reach > 0 {
			js[i], shifts[i] = snapVertex(a, b, reach, g, shifts[(i+n-1)%n], shifts[(i+1)%n])
			return
		}
		js[i] = snapJoint(a, b, g, opt)
	}
	for i := 1; i < n; i++ {
		snap(i)
	}
	if p.Closed(g.Step() / 2) {
		snap(0)
		js[n] = js[0]
		return js
	}
	js[0], js[n] = g.Point(p[0].From), g.Point(p[n-1].To)
	return js
}

// slide is how far the joint of a and b may move along the path.
func slide(a, b Element, g Grid) float64 {
	return math.Min(slideShare*math.Min(a.Length(), b.Length()), slideCounts*g.Step())
}

// snapJoint returns the grid point for the joint between a and b: of those near the
// path within the slide, the one with the least kink.
func snapJoint(a, b Element, g Grid, opt SnapOptions) Point {
	best := g.Point(b.From)
	la, lb, reach := a.Length(), b.Length(), slide(a, b, g)
	if opt.Naive || !(reach > 0) {
		return best
	}
	ka, kb := a.Curvature(), b.Curvature()
	cost := func(q Point) float64 {
		v := g.Value(q)
		miss := math.Max(math.Abs(a.away(v)), math.Abs(b.away(v)))
		x := v.Sub(b.From).Dot(b.StartTangent())
		return miss*(1/la+1/lb) + math.Abs(ka-kb)*math.Abs(x)
	}
	least := cost(best)
	try := func(q Point) {
		if c := cost(q); c < least {
			best, least = q, c
		}
	}
	walkColumns(b.From, a.EndTangent(), ka, -reach, 0, g, try)
	walkColumns(b.From, b.StartTangent(), kb, 0, reach, g, try)
	return best
}

// shift is how far a vertex of two lines was moved by going to the grid: out, to the side its corner
// points to, and along the bisector's normal, with the path. turn is the corner's angle, radians, left positive.
type shift struct{ out, along, turn float64 }

// snapVertex returns the grid point for a vertex of two lines. Chords that straddle a curve by ±eps are eps off at their vertices
// and in their middles. A vertex moved out is further off, and draws the middles of both lines out by half of that,
// which is nearer there; one that slides along by x makes the line behind it longer and its middle θ·x/4 further off, the one
// ahead as much shorter (θ the corner's angle). So of the grid points within the slide the one is taken for which the largest
// of the three changes is least, given where the neighbors went, as far as that is known.
func snapVertex(a, b Element, reach float64, g Grid, before, after shift) (Point, shift) {
	u, v := a.EndTangent(), b.StartTangent()
	t, turn := u.Add(v).Unit(), math.Atan2(u.Cross(v), u.Dot(v))
	if !(math.Abs(turn) < cornerMost) {
		return g.Point(b.From), shift{}
	}
	if before.turn*turn < 0 {
		before = shift{}
	}
	if after.turn*turn < 0 {
		after = shift{}
	}
	moved := func(q Point) shift {
		w := g.Value(q).Sub(b.From)
		return shift{-math.Copysign(1, turn) * t.Cross(w), t.Dot(w), turn}
	}
	cost := func(m shift) float64 {
		by := math.Abs(turn) / 4
		behind := -(m.out+before.out)/2 + by*(m.along-before.along)
		ahead := -(m.out+after.out)/2 + by*(after.along-m.along)
		return math.Max(m.out, math.Max(behind, ahead))
	}
	best := g.Point(b.From)
	least := cost(moved(best))
	walkColumns(b.From, t, 0, -reach, reach, g, func(q Point) {
		if c := cost(moved(q)); c < least {
			best, least = q, c
		}
	})
	return best, moved(best)
}

// walkColumns calls try for the two grid points beside the curve
// p + t·x + left(t)·k·x²/2 in every grid column (row, when it is steep)
// between slides lo and hi.
func walkColumns(p plane.Point, t plane.Vector, k, lo, hi float64, g Grid, try func(Point)) {
	at := func(x float64) plane.Point { return p.Add(t.Scale(x)).Add(t.Left().Scale(k * x * x / 2)) }
	steep := math.Abs(t.Y) > math.Abs(t.X)
	q, s := g.Step(), g.scale()
	stride := q / math.Max(math.Abs(t.X), math.Abs(t.Y))
	for x := lo; x <= hi; x += stride {
		v := at(x)
		if steep {
			// Move along to the row of this column first, then take both sides.
			row := math.Round(v.Y * s)
			v = at(x + (row*q-v.Y)/t.Y)
			col := math.Floor(v.X * s)
			try(Point{int64(col), int64(row)})
			try(Point{int64(col) + 1, int64(row)})
			continue
		}
		col := math.Round(v.X * s)
		v = at(x + (col*q-v.X)/t.X)
		row := math.Floor(v.Y * s)
		try(Point{int64(col), int64(row)})
		try(Point{int64(col), int64(row) + 1})
	}
}

// away returns the signed distance of p, to the left, from the element prolonged
// both ways. Without cancellation for flat arcs:
// d = 2F/(1+sqrt(1-2kF)), F = t×v - k|v|²/2, v = p - From.
func (e Element) away(p plane.Point) float64 {
	t, k, v := e.StartTangent(), e.Curvature(), p.Sub(e.From)
	f := t.Cross(v) - k/2*v.Dot(v)
	root := 1 - 2*k*f
	if root < 0 {
		root = 0
	}
	return 2 * f / (1 + math.Sqrt(root))
}

// snapCenter solves the center of arc e again for the rounded ends of s.
func snapCenter(s Segment, e Element, g Grid, opt SnapOptions) Point {
	if opt.Naive {
		return g.Point(e.Center)
	}
	// In counts, relative to From: middle of the chord, unit chord, unit bisector.
	chord := vec(s.From, s.To)
	mid, along := chord.Scale(0.5), chord.Unit()
	bisector := along.Left()
	planned := e.Center.Sub(g.Value(s.From)).Scale(g.scale())
	h := planned.Sub(mid).Dot(bisector)
	foot := mid.Add(bisector.Scale(h))
	best := Point{s.From.X + int64(math.Round(foot.X)), s.From.Y + int64(math.Round(foot.Y))}
	half := math.Atan2(chord.Norm()/2, math.Abs(h))
	stiff := 1 - math.Cos(half) // shift of the arc's middle per shift of the center along the bisector
	shift := func(c Point) float64 {
		return math.Abs(vec(s.From, c).Sub(foot).Dot(bisector)) * stiff
	}
	allowed := math.Max(midShift, shift(best))
	least := s.mismatch(best)
	reach := math.Min(math.Max(allowed/stiff, 1), centerRange)
	try := func(c Point) {
		if m := s.mismatch(c); m < least && shift(c) <= allowed {
			best, least = c, m
		}
	}
	origin := plane.Point(foot)
	walkColumns(origin, bisector, 0, -reach, reach, Grid{}, func(c Point) { try(Point{s.From.X + c.X, s.From.Y + c.Y}) })
	return best
}

// mismatch returns | |From-c| - |To-c| | in counts, free of cancellation.
func (s Segment) mismatch(c Point) float64 {
	a, b := vec(c, s.From), vec(c, s.To)
	return math.Abs(b.Sub(a).Dot(a.Add(b))) / (a.Norm() + b.Norm())
}
