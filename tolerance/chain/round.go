package chain

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
)

// OffsetRound returns the path moved by d (a length, negative to the right) to the
// left of travel, corners included: around an outer corner goes an arc of radius
// |d| about the corner (a mitre would be |d|·δ²/8 away from the parallel curve at a
// turn of δ), at an inner corner both neighbors are trimmed to their crossing.
// It is meant for chains of lines, and works for arcs that cross cleanly. The round
// of a corner stands for the single cam angle of its joint. It looks at neighbors
// only: errors are an arc that would turn inside out, neighbors that do not
// cross, and an element that is trimmed away.
func (p Path) OffsetRound(d float64) (Path, error) {
	n := len(p)
	moved := make(Path, n)
	for i, e := range p {
		m, ok := e.offset(d)
		if !ok {
			return nil, flipError(i, e, d)
		}
		moved[i] = m
	}
	rounds := make([]*Element, n)
	untrimmed := append(Path(nil), moved...)
	for i := range p {
		next := (i + 1) % n
		if next == 0 && p[0].From != p[i].To {
			break // open
		}
		a := turn(p[i], p[next])
		switch {
		case math.Abs(a) <= kinkMax:
			moved[i].To = moved[next].From
		case a*d < 0: // outer: travel turns away from the side of the offset
			rounds[i] = &Element{Kind: Arc, From: moved[i].To, To: moved[next].From, Center: p[i].To, CCW: a > 0,
				Source: Span{p[i].Source.To, p[i].Source.To}}
		default:
			at, ok := crossing(untrimmed[i], untrimmed[next])
			if !ok {
				return nil, fmt.Errorf("offset by %g: the inner corner after element %d (cam angle %.6g) turns by %.4g degrees and its neighbors do not cross; "+
					"the offset must be smaller", d, i, p[i].Source.To, a*180/math.Pi)
			}
			moved[i].To, moved[next].From = at, at
		}
	}
	return assemble(untrimmed, moved, rounds, d)
}

// assemble checks that every trimmed element still runs forward, and puts the rounds
// between them.
func assemble(whole, trimmed Path, rounds []*Element, d float64) (Path, error) {
	var q Path
	for i, e := range trimmed {
		if whole[i].fractionAt(e.From) >= whole[i].fractionAt(e.To) && whole[i].From != whole[i].To {
			return nil, fmt.Errorf("offset by %g: element %d (cam angle %.6g to %.6g) is trimmed away by its corners; the offset must be smaller",
				d, i, e.Source.From, e.Source.To)
		}
		q = append(q, e)
		if rounds[i] != nil {
			q = append(q, *rounds[i])
		}
	}
	return q, nil
}

// fractionAt returns where on the element the point p of its line or circle lies: 0
// at From, 1 at To. On an arc, a point behind From counts as behind it (below 0)
// when that is the shorter way.
func (e Element) fractionAt(p plane.Point) float64 {
	switch p {
	case e.From:
		return 0
	case e.To:
		return 1
	}
	if e.Kind == Line {
		v := e.To.Sub(e.From)
		return p.Sub(e.From).Dot(v) / v.Dot(v)
	}
	f, sweep := e, e.Sweep()
	f.To = p
	turned := f.Sweep()
	rest := 2*math.Pi - math.Abs(sweep) // the part of the circle that is not the arc
	if beyond := math.Abs(turned) - math.Abs(sweep); beyond > rest/2 {
		turned -= math.Copysign(2*math.Pi, sweep)
	}
	return turned / sweep
}

// crossing returns where two neighbors cross, both within their ends, nearest to the
// joint they came from.
func crossing(a, b Element) (plane.Point, bool) {
	const slop = 1e-12 // a share of an element: rounding of the crossing
	on := func(e Element, q plane.Point) bool {
		f := e.fractionAt(q)
		return f >= -slop && f <= 1+slop
	}
	best, found := math.Inf(1), false
	var at plane.Point
	for _, q := range meet(a, b) {
		if d := q.Dist(a.To) + q.Dist(b.From); d < best && on(a, q) && on(b, q) {
			best, at, found = d, q, true
		}
	}
	return at, found
}

// meet returns the points that the lines or circles of two elements share.
func meet(a, b Element) []plane.Point {
	switch {
	case a.Kind == Line && b.Kind == Line:
		u, v := a.To.Sub(a.From), b.To.Sub(b.From)
		f := b.From.Sub(a.From).Cross(v) / u.Cross(v)
		if math.IsNaN(f) || math.IsInf(f, 0) {
			return nil
		}
		return []plane.Point{a.From.Add(u.Scale(f))}
	case a.Kind == Arc && b.Kind == Line:
		a, b = b, a
		fallthrough
	case a.Kind == Line:
		u := a.StartTangent()
		foot := a.From.Add(u.Scale(b.Center.Sub(a.From).Dot(u)))
		return eitherSide(foot, u, b.Radius(), foot.Dist(b.Center))
	}
	v := b.Center.Sub(a.Center)
	d, ra, rb := v.Norm(), a.Radius(), b.Radius()
	if d == 0 {
		return nil
	}
	x := (d*d + (ra-rb)*(ra+rb)) / (2 * d)
	u := v.Scale(1 / d)
	return eitherSide(a.Center.Add(u.Scale(x)), u.Left(), ra, math.Abs(x))
}

// eitherSide returns the ends of the half chord of a circle of radius r at distance x
// from its center, along u either way from the foot.
func eitherSide(foot plane.Point, u plane.Vector, r, x float64) []plane.Point {
	h2 := (r - x) * (r + x)
	if !(h2 >= 0) {
		return nil
	}
	h := math.Sqrt(h2)
	return []plane.Point{foot.Add(u.Scale(h)), foot.Add(u.Scale(-h))}
}
