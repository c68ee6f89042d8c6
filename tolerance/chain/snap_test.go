package chain

import (
	"math"
	"testing"

	"lobewright/synth/plane"
	"pgregory.net/rapid"
)

func TestGridPrints(t *testing.T) {
	for _, c := range []struct {
		d     int
		count int64
		want  string
	}{
		{3, 12345, "12.345"}, {3, 12000, "12.000"}, {3, -5, "-0.005"}, {3, 0, "0.000"}, {0, -7, "-7"}, {0, 0, "0"},
		{1, 10, "1.0"}, {4, math.MinInt64, "-922337203685477.5808"}, {6, 1000000, "1.000000"},
	} {
		if got := (Grid{c.d}).Format(c.count); got != c.want {
			t.Errorf("%d decimals, %d: %q, want %q", c.d, c.count, got, c.want)
		}
	}
}

func TestGridValueIsPrinted(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		g := Grid{rapid.IntRange(0, 9).Draw(t, "decimals")}
		p := Point{rapid.Int64Range(-1<<53, 1<<53).Draw(t, "x"), rapid.Int64Range(-1e9, 1e9).Draw(t, "y")}
		v := g.Value(p)
		if x := parseFloat(g.Format(p.X)); x != v.X {
			t.Fatalf("%s reads as %v, Value says %v", g.Format(p.X), x, v.X)
		}
		if y := parseFloat(g.Format(p.Y)); y != v.Y {
			t.Fatalf("%s reads as %v, Value says %v", g.Format(p.Y), y, v.Y)
		}
		if math.Abs(float64(p.Y)) < 1e9 && g.Point(plane.Point{Y: v.Y}).Y != p.Y {
			t.Fatalf("%v does not come back", p)
		}
	})
}

// TestSnapMismatch holds the bound of the bisector argument: the grid point nearest
// to the planned center's foot is at most 1/sqrt2 count off the bisector, so the
// radii differ by at most 2·sin(sweep/2)/sqrt2 counts; the lattice search only
// improves on that. 1 % pays for what the rounding of the ends does to the sweep.
func TestSnapMismatch(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := smooth(t)
		g := Grid{rapid.IntRange(2, 6).Draw(t, "decimals")}
		opt := SnapOptions{MaxSweep: rapid.Float64Range(0.3, math.Pi).Draw(t, "sweep")}
		c, err := Snap(p, g, opt)
		if err != nil {
			t.Fatal(err)
		}
		written := c.Path()
		for i, m := range c.Mismatches() {
			bound := 1.01 * math.Sqrt2 * g.Step() * math.Sin(math.Min(math.Abs(written[i].Sweep())/2, math.Pi/2))
			if m > bound {
				t.Fatalf("segment %d %v: mismatch %g, bound %g", i, written[i], m, bound)
			}
			if c.Segments[i].Kind == Arc && math.Abs(written[i].Sweep()) > opt.MaxSweep+0.1 {
				t.Fatalf("segment %d turns %g", i, written[i].Sweep())
			}
		}
	})
}

// TestSnapStaysNear holds the deviation of the gridded path from the planned one to
// about a count: half a diagonal for the ends, and what the center's choice adds.
func TestSnapStaysNear(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := smooth(t)
		g := Grid{3}
		c, err := Snap(p, g, SnapOptions{MaxSweep: math.Pi / 2})
		if err != nil {
			t.Fatal(err)
		}
		for _, e := range c.Path() {
			for f := 0.0; f <= 1; f += 0.125 {
				if d := distance(p, e.PointAt(f)); d > 1.5*g.Step() {
					t.Fatalf("%v is %g from the planned path", e.PointAt(f), d)
				}
			}
		}
		for i, s := range c.Segments {
			if i > 0 && s.From != c.Segments[i-1].To {
				t.Fatalf("joint %d came apart", i)
			}
		}
	})
}

// distance returns the distance of q from the path by brute force: per element the
// foot on its line or circle when it is inside, else the ends.
func distance(p Path, q plane.Point) float64 {
	best := math.Inf(1)
	for _, e := range p {
		best = math.Min(best, math.Min(q.Dist(e.From), q.Dist(e.To)))
		if e.Kind == Line {
			u := e.StartTangent()
			if s := q.Sub(e.From).Dot(u); s > 0 && s < e.Length() {
				best = math.Min(best, math.Abs(u.Cross(q.Sub(e.From))))
			}
			continue
		}
		f := e
		f.To = e.Center.Add(q.Sub(e.Center).Unit().Scale(e.Radius()))
		if math.Abs(f.Sweep()) < math.Abs(e.Sweep()) {
			best = math.Min(best, q.Dist(f.To))
		}
	}
	return best
}

func TestSnapCloses(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := ring(rapid.Float64Range(0.05, 200).Draw(t, "r"), rapid.IntRange(1, 40).Draw(t, "n"), 10, rapid.Bool().Draw(t, "ccw"))
		c, err := Snap(p, Grid{rapid.IntRange(2, 6).Draw(t, "d")}, SnapOptions{})
		if err != nil {
			t.Fatal(err)
		}
		if !c.Closed() {
			t.Fatalf("open: %v", c.Segments)
		}
		n := len(c.Segments)
		if c.Segments[0].Source.From != 10 || math.Abs(c.Segments[n-1].Source.To-370) > 1e-9 {
			t.Fatalf("source %v to %v", c.Segments[0].Source, c.Segments[n-1].Source)
		}
		for i := 1; i < n; i++ {
			if c.Segments[i].Source.From != c.Segments[i-1].Source.To {
				t.Fatalf("source of %d does not follow: %v", i, c.Segments)
			}
		}
	})
}

func TestSnapFlatArcs(t *testing.T) {
	// Radius 2e4, length 30: sagitta 30²/8/2e4 = 5.6 µm must become several lines
	// that stay within a quarter count and half a diagonal.
	r := 2e4
	e := Element{Kind: Arc, Center: plane.Point{Y: -r}, From: plane.Point{}, CCW: false}
	e.To = plane.Point{X: r * math.Sin(30/r), Y: -r * (1 - math.Cos(30/r))}
	c, err := Snap(Path{e}, Grid{3}, SnapOptions{})
	if err != nil {
		t.Fatal(err)
	}
	lines, arcs := c.Counts()
	if arcs != 0 || lines < 2 || lines > 6 {
		t.Errorf("%d lines, %d arcs", lines, arcs)
	}
	if c, _ = Snap(Path{e}, Grid{6}, SnapOptions{}); len(c.Segments) != 1 || c.Segments[0].Kind != Arc {
		t.Errorf("fine grid: %v", c.Segments)
	}
}

func TestSnapRefuses(t *testing.T) {
	nan := Path{{From: plane.Point{X: math.NaN()}, To: plane.Point{X: 1}}}
	gap := Path{{To: plane.Point{X: 1}}, {From: plane.Point{X: 2}, To: plane.Point{X: 3}}}
	dot := Path{{To: plane.Point{X: 1e-6}}}
	for name, p := range map[string]Path{"nan": nan, "gap": gap, "dot": dot, "empty": nil} {
		if c, err := Snap(p, Grid{3}, SnapOptions{}); err == nil {
			t.Errorf("%s: no error, %v", name, c)
		}
	}
	if _, err := Snap(Path{{To: plane.Point{X: 1}}}, Grid{-1}, SnapOptions{}); err == nil {
		t.Error("negative decimals: no error")
	}
}

// blend returns the angle to the left by which an arc whose radius goes over linearly
// leaves the circle: the radius grows to the right of a left turn.
func blend(e Element) float64 {
	slope := (e.To.Dist(e.Center) - e.From.Dist(e.Center)) / e.Length()
	if e.CCW {
		return -slope
	}
	return slope
}

// TestSnapBeatsNaive holds the reason for all of it: over many smooth joints the
// sliding joint and the solved center halve kinks and mismatches at least.
func TestSnapBeatsNaive(t *testing.T) {
	var p Path
	at, dir := plane.Point{X: 40}, plane.Vector{Y: 1}
	for i := 0; i < 40; i++ {
		r := 45 + 9*math.Sin(float64(i)*0.7)
		e := Element{Kind: Arc, From: at, Center: at.Add(dir.Left().Scale(r)), CCW: true}
		e.To = e.Center.Add(at.Sub(e.Center).Turn(plane.Angle(0.15)))
		at, dir = e.To, dir.Turn(0.15)
		p = append(p, e)
	}
	worst := func(opt SnapOptions) (kink, mismatch float64) {
		c, err := Snap(p, Grid{3}, opt)
		if err != nil {
			t.Fatal(err)
		}
		q := c.Path()
		for i := 1; i < len(q); i++ {
			kink = math.Max(kink, math.Abs(turn(q[i-1], q[i])+blend(q[i])-blend(q[i-1])))
		}
		return kink, c.Mismatch()
	}
	k1, m1 := worst(SnapOptions{Naive: true})
	k2, m2 := worst(SnapOptions{})
	t.Logf("kink %.2g naive, %.2g solved; mismatch %.2g naive, %.2g solved", k1, k2, m1, m2)
	if k2 > k1/2 || m2 > m1/2 {
		t.Errorf("kink %g naive, %g solved; mismatch %g naive, %g solved", k1, k2, m1, m2)
	}
}
