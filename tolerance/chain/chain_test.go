package chain

import (
	"math"
	"testing"

	"lobewright/synth/plane"
	"pgregory.net/rapid"
)

// smooth draws a tangent-continuous open path of arcs and lines: each element starts
// in the direction the last one ended.
func smooth(t *rapid.T) Path {
	p := plane.Point{X: rapid.Float64Range(-80, 80).Draw(t, "x"), Y: rapid.Float64Range(-80, 80).Draw(t, "y")}
	dir := plane.Unit(plane.Angle(rapid.Float64Range(-3, 3).Draw(t, "dir")))
	n := rapid.IntRange(1, 8).Draw(t, "n")
	var path Path
	for i := 0; i < n; i++ {
		length := rapid.Float64Range(0.5, 40).Draw(t, "length")
		e := Element{Kind: Line, From: p, To: p.Add(dir.Scale(length)), Source: Span{float64(i), float64(i + 1)}}
		if rapid.Bool().Draw(t, "arc") {
			r := rapid.Float64Range(5, 300).Draw(t, "r")
			sweep := math.Min(length/r, 6)
			if rapid.Bool().Draw(t, "cw") {
				r, sweep = -r, -sweep
			}
			e.Kind, e.CCW = Arc, r > 0
			e.Center = p.Add(dir.Left().Scale(r))
			e.To = e.Center.Add(p.Sub(e.Center).Turn(plane.Angle(sweep)))
			dir = dir.Turn(plane.Angle(sweep))
		}
		path, p = append(path, e), e.To
	}
	return path
}

// ring returns a closed smooth path: a circle of radius r cut into n arcs, Source one
// turn from start.
func ring(r float64, n int, start float64, ccw bool) Path {
	var p Path
	sign := 1.0
	if !ccw {
		sign = -1
	}
	for i := 0; i < n; i++ {
		at := func(i int) plane.Point {
			return plane.Point{X: 3, Y: -2}.Add(plane.Unit(plane.Angle(sign * 2 * math.Pi * float64(i%n) / float64(n))).Scale(r))
		}
		p = append(p, Element{Kind: Arc, From: at(i), To: at(i + 1), Center: plane.Point{X: 3, Y: -2}, CCW: ccw,
			Source: Span{start + 360*float64(i)/float64(n), start + 360*float64(i+1)/float64(n)}})
	}
	return p
}

func near(a, b plane.Point, tol float64) bool { return a.Dist(b) <= tol }

func TestOffsetThereAndBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := smooth(t)
		d := rapid.Float64Range(-4.5, 4.5).Draw(t, "d")
		q, err := p.Offset(d)
		if err != nil {
			t.Fatal(err)
		}
		back, err := q.Offset(-d)
		if err != nil {
			t.Fatal(err)
		}
		for i := range p {
			if i > 0 && q[i].From != q[i-1].To {
				t.Fatalf("joint %d came apart", i)
			}
			if !near(p[i].From, back[i].From, 1e-10) || !near(p[i].To, back[i].To, 1e-10) {
				t.Fatalf("element %d: %v, after there and back %v", i, p[i], back[i])
			}
			// Parallel elements differ in length by d times the turn (to the left of a left turn it gets shorter).
			if want := p[i].Length() - d*p[i].Sweep(); math.Abs(q[i].Length()-want) > 1e-9 {
				t.Fatalf("element %d: length %g, want %g", i, q[i].Length(), want)
			}
			mid := p[i].PointAt(0.5)
			if got := math.Abs(q[i].away(mid)); math.Abs(got-math.Abs(d)) > 1e-9 {
				t.Fatalf("element %d: middle is %g away, want %g", i, got, d)
			}
		}
	})
}

func TestOffsetRefuses(t *testing.T) {
	if _, err := ring(5, 4, 0, true).Offset(5); err == nil {
		t.Error("offset of a circle by its radius: no error")
	}
	if _, err := ring(5, 4, 0, false).Offset(-5); err == nil {
		t.Error("offset of a clockwise circle by its radius: no error")
	}
	if q, err := ring(5, 4, 0, true).Offset(-5); err != nil || math.Abs(q.Length()-20*math.Pi) > 1e-12 {
		t.Errorf("outward: %v, %v", q, err)
	}
	corner := Path{{From: plane.Point{}, To: plane.Point{X: 1}}, {From: plane.Point{X: 1}, To: plane.Point{X: 1, Y: 1}}}
	if _, err := corner.Offset(0.1); err == nil {
		t.Error("offset of a corner: no error")
	}
}

func TestReverseTwice(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := smooth(t)
		r := p.Reverse()
		for i, e := range r.Reverse() {
			if e != p[i] {
				t.Fatalf("%v became %v", p[i], e)
			}
		}
		if math.Abs(r.Length()-p.Length()) > 1e-9 {
			t.Fatalf("length %g became %g", p.Length(), r.Length())
		}
		if r[0].StartTangent().Add(p[len(p)-1].EndTangent()).Norm() > 1e-12 {
			t.Fatal("reversed path does not start against the end")
		}
	})
}

func TestSplitKeepsEverything(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := smooth(t)
		limit := rapid.Float64Range(0.05, 2).Draw(t, "limit")
		q := p.SplitArcs(limit)
		if math.Abs(q.Length()-p.Length()) > 1e-9 {
			t.Fatalf("length %g became %g", p.Length(), q.Length())
		}
		for i, e := range q {
			if math.Abs(e.Sweep()) > limit*(1+1e-9) {
				t.Fatalf("arc %d still turns %g", i, e.Sweep())
			}
			if i > 0 && (q[i-1].To != e.From || q[i-1].Source.To != e.Source.From) {
				t.Fatalf("joint %d came apart", i)
			}
		}
	})
}

func TestBoundsOfArc(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := smooth(t)
		min, max := p.Bounds()
		low, high := plane.Point{X: math.Inf(1), Y: math.Inf(1)}, plane.Point{X: math.Inf(-1), Y: math.Inf(-1)}
		const n = 2000
		for _, e := range p {
			for i := 0; i <= n; i++ {
				q := e.PointAt(float64(i) / n)
				low = plane.Point{X: math.Min(low.X, q.X), Y: math.Min(low.Y, q.Y)}
				high = plane.Point{X: math.Max(high.X, q.X), Y: math.Max(high.Y, q.Y)}
			}
		}
		// 2000 points on at most 40: the highest point is missed by at most (0.02)²/(8·5).
		if !near(min, low, 2e-5) || !near(max, high, 2e-5) || min.X > low.X+1e-12 || max.Y < high.Y-1e-12 {
			t.Fatalf("bounds %v %v, sampled %v %v", min, max, low, high)
		}
	})
}

func TestStretch(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		start := rapid.Float64Range(-400, 400).Draw(t, "start")
		ccw := rapid.Bool().Draw(t, "ccw")
		p := ring(20, rapid.IntRange(1, 7).Draw(t, "n"), start, ccw)
		from := rapid.Float64Range(-800, 800).Draw(t, "from")
		span := rapid.Float64Range(0.1, 800).Draw(t, "span")
		if rapid.Bool().Draw(t, "down") {
			p, span = p.Reverse(), -span
		}
		q, err := p.Stretch(from, from+span)
		if err != nil {
			t.Fatal(err)
		}
		if want := 20 * math.Abs(span) * math.Pi / 180; math.Abs(q.Length()-want) > 1e-6 {
			t.Fatalf("length %g, want %g", q.Length(), want)
		}
		// On the ring the cam angle is the polar angle about its center, from start.
		sign := 1.0
		if !ccw {
			sign = -1
		}
		for i, e := range q {
			want := plane.Point{X: 3, Y: -2}.Add(plane.Unit(plane.Angle(sign * (e.Source.From - start) * math.Pi / 180)).Scale(20))
			if !near(e.From, want, 1e-6) {
				t.Fatalf("element %d at cam angle %g starts at %v, want %v", i, e.Source.From, e.From, want)
			}
			if i > 0 && q[i-1].To != e.From {
				t.Fatalf("joint %d came apart", i)
			}
		}
	})
}

func TestStartAt(t *testing.T) {
	p := ring(20, 3, 30, true)
	q, err := p.StartAt(-10) // 350 in the path's turn
	if err != nil {
		t.Fatal(err)
	}
	if q[0].Source.From != 350 || q[len(q)-1].Source.To != 710 || !q.Closed(1e-12) || math.Abs(q.Length()-p.Length()) > 1e-9 {
		t.Errorf("got %v", q)
	}
	if _, err := q[:1].StartAt(0); err == nil {
		t.Error("part of a turn: no error")
	}
	if _, err := p.Stretch(20, 10); err == nil {
		t.Error("stretch against the path: no error")
	}
}
