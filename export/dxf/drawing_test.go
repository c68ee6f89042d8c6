package dxf

import (
	"bytes"
	"math"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"lobewright/export/dxf/read"
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// sample is a small drawing with an item of every kind: a stadium of two half circles and
// two lines, a bore with a keyway, texts with every code.
func sample(v Version, inch bool) Drawing {
	line, text := CheckLine(plane.Point{X: -50, Y: -80}, 100, 3, inch)
	return Drawing{
		Inch:    inch,
		Version: v,
		Polylines: []Polyline{
			{LayerContour, chain.Grid{Decimals: 6}, []chain.Vertex{
				{P: chain.Point{X: 30_000_000, Y: -20_000_000}, Bulge: 1},
				{P: chain.Point{X: 30_000_000, Y: 20_000_000}},
				{P: chain.Point{X: -30_000_001, Y: 20_000_000}, Bulge: 1},
				{P: chain.Point{X: -30_000_001, Y: -20_000_000}},
			}, true},
			{LayerBore, chain.Grid{Decimals: 3}, []chain.Vertex{
				{P: chain.Point{X: 9539, Y: 3000}, Bulge: 6.512345678901234},
				{P: chain.Point{X: 9539, Y: -3000}},
				{P: chain.Point{X: 12800, Y: -3000}},
				{P: chain.Point{X: 12800, Y: 3000}},
			}, true},
			{LayerZeroMark, chain.Grid{}, []chain.Vertex{{P: chain.Point{X: 40}}, {P: chain.Point{X: 45}}}, false},
		},
		Circles: []Circle{{LayerBaseCircle, plane.Point{}, 20}, {LayerBore, plane.Point{X: 0.1, Y: -26}, 3}},
		Arcs:    []Arc{{LayerPitchCurve, plane.Point{X: 1}, 31.25, 350, 10}},
		Lines:   []Line{line, {LayerCenterlines, plane.Point{X: -60}, plane.Point{X: 60, Y: -1e-6}}},
		Texts: []Text{text,
			{LayerNotes, plane.Point{X: -50, Y: -90}, 3, 0, `Hub 20 ⌀ ±0.01, 45° "marked face" ^J \P %%u 50% 鉛筆`},
			{LayerNotes, plane.Point{X: -50, Y: -95}, 2.5, 30, "units: see header"}},
	}
}

// readBack parses bytes with the independent reader and turns what it found into
// a drawing; points are put on the grids of the drawing that was written.
func readBack(t testing.TB, data []byte, written Drawing) Drawing {
	t.Helper()
	f, err := read.Parse(data)
	if err != nil {
		t.Fatal(err)
	}
	d := Drawing{Inch: f.Unit == read.Inch, Version: Version(f.Version)}
	for i, p := range f.Polylines {
		q := Polyline{Layer: p.Layer, Grid: written.Polylines[i].Grid, Closed: p.Closed}
		for j, at := range p.Points {
			v := chain.Vertex{P: q.Grid.Point(at), Bulge: p.Bulges[j]}
			if q.Grid.Value(v.P) != at {
				t.Fatalf("polyline %d, vertex %d: %v is not on the grid", i, j, at)
			}
			q.Vertices = append(q.Vertices, v)
		}
		d.Polylines = append(d.Polylines, q)
	}
	for _, c := range f.Circles {
		d.Circles = append(d.Circles, Circle{c.Layer, c.Center, c.Radius})
	}
	for _, a := range f.Arcs {
		d.Arcs = append(d.Arcs, Arc{a.Layer, a.Center, a.Radius, a.From, a.To})
	}
	for _, l := range f.Lines {
		d.Lines = append(d.Lines, Line{l.Layer, l.From, l.To})
	}
	for _, x := range f.Texts {
		d.Texts = append(d.Texts, Text{x.Layer, x.At, x.Height, x.Angle, x.Value})
	}
	return d
}

func mustWrite(t testing.TB, d Drawing) []byte {
	t.Helper()
	data, err := Write(d)
	if err != nil {
		t.Fatal(err)
	}
	return data
}

func TestReadBackIsEqual(t *testing.T) {
	for _, v := range []Version{R2000, R12} {
		for _, inch := range []bool{false, true} {
			d := sample(v, inch)
			if diff := cmp.Diff(d, readBack(t, mustWrite(t, d), d)); diff != "" {
				t.Errorf("version %s, inch %v: written and read differ:\n%s", v, inch, diff)
			}
		}
	}
}

func TestDeclaredLayers(t *testing.T) {
	f, err := read.Parse(mustWrite(t, sample(R2000, false)))
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, l := range f.Layers {
		names = append(names, l.Name)
	}
	want := "0 CONTOUR PITCH_CURVE BASE_CIRCLE BORE CENTERLINES ZERO_MARK CHECK_LINE NOTES"
	if got := strings.Join(names, " "); got != want {
		t.Errorf("layers %s, want %s", got, want)
	}
	if n := len(f.PolylinesOn(LayerContour)); n != 1 {
		t.Errorf("%d contours, want one", n)
	}
}

// drawn gives a random drawing that Write accepts.
func drawn(t *rapid.T) Drawing {
	figure := rapid.Float64Range(-1e4, 1e4)
	point := func(label string) plane.Point {
		return plane.Point{X: figure.Draw(t, label+"x") + 0, Y: figure.Draw(t, label+"y") + 0}
	}
	d := Drawing{
		Inch:    rapid.Bool().Draw(t, "inch"),
		Version: rapid.SampledFrom([]Version{R2000, R12}).Draw(t, "version"),
		Circles: []Circle{{LayerBore, point("c"), rapid.Float64Range(1e-3, 1e3).Draw(t, "r")}},
		Lines:   []Line{{LayerCenterlines, plane.Point{X: -2e4}, point("l")}},
	}
	p := Polyline{Layer: LayerContour, Grid: chain.Grid{Decimals: rapid.IntRange(0, LargestDecimals).Draw(t, "decimals")}, Closed: rapid.Bool().Draw(t, "closed")}
	count := rapid.Int64Range(-1e10, 1e10)
	bulge := rapid.OneOf(rapid.Just(0.0), rapid.Float64Range(LeastBulge, LargestBulge), rapid.Float64Range(-LargestBulge, -LeastBulge))
	n := rapid.IntRange(3, 20).Draw(t, "vertices")
	for i := range n {
		// The last digit numbers the vertices, so that no two are equal.
		at := chain.Point{X: count.Draw(t, "x")/100*100 + int64(i), Y: count.Draw(t, "y")}
		limit := int64(math.Pow10(p.Grid.Decimals + 3)) // 1000, so that no bulge reaches LargestCoordinate
		if at.X > limit || at.X < -limit || at.Y > limit || at.Y < -limit {
			at = chain.Point{X: int64(i), Y: at.Y % limit}
		}
		b := bulge.Draw(t, "bulge")
		if i == n-1 && !p.Closed {
			b = 0
		}
		p.Vertices = append(p.Vertices, chain.Vertex{P: at, Bulge: b})
	}
	d.Polylines = []Polyline{p}
	return d
}

func TestReadBackIsEqualForAnyDrawing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := drawn(t)
		data, err := Write(d)
		if err != nil {
			t.Fatal(err)
		}
		f, err := read.Parse(data)
		if err != nil {
			t.Fatal(err)
		}
		got, want := f.Polylines[0], d.Polylines[0]
		for i, v := range want.Vertices {
			if got.Points[i] != want.Grid.Value(v.P) || got.Bulges[i] != v.Bulge {
				t.Fatalf("vertex %d: read %v bulge %v, written %v bulge %v", i, got.Points[i], got.Bulges[i], want.Grid.Value(v.P), v.Bulge)
			}
		}
		if got.Closed != want.Closed || f.Circles[0].Center != d.Circles[0].Center || f.Circles[0].Radius != d.Circles[0].Radius || f.Lines[0].To != d.Lines[0].To {
			t.Fatalf("read %+v, written %+v", f, d)
		}
	})
}

// gear is a closed outline of n vertices on a circle, arcs and lines in turn.
func gear(n int) Polyline {
	p := Polyline{Layer: LayerContour, Grid: chain.Grid{Decimals: 6}, Closed: true}
	for i := range n {
		at := plane.Polar(100, plane.Angle(2*math.Pi*float64(i)/float64(n)))
		p.Vertices = append(p.Vertices, chain.Vertex{P: p.Grid.Point(at), Bulge: float64(i%2) * 0.123456789012345})
	}
	return p
}

func TestTwentyThousandVertices(t *testing.T) {
	for _, v := range []Version{R2000, R12} {
		d := Drawing{Version: v, Polylines: []Polyline{gear(20_000)}}
		if !cmp.Equal(d, readBack(t, mustWrite(t, d), d)) {
			t.Errorf("version %s: written and read differ", v)
		}
	}
}

// Sixteen goroutines that write different drawings at once give the bytes of one alone.
func TestSameBytes(t *testing.T) {
	kinds := []Drawing{sample(R2000, false), sample(R2000, true), sample(R12, false), {Version: R2000, Polylines: []Polyline{gear(50)}}}
	var want [][]byte
	for _, d := range kinds {
		want = append(want, mustWrite(t, d))
	}
	var group sync.WaitGroup
	for g := range 16 {
		group.Go(func() {
			for i := range 8 {
				k := (g + i) % len(kinds)
				got, err := Write(kinds[k])
				if err != nil || !bytes.Equal(got, want[k]) {
					t.Errorf("goroutine %d: kind %d changed, error %v", g, k, err)
				}
			}
		})
	}
	group.Wait()
}

// The golden files hold the exact bytes, but for the line ends, which a checkout may change.
// To renew them: UPDATE_GOLDEN=1 go test ./export/dxf
func TestGolden(t *testing.T) {
	for _, v := range []Version{R2000, R12} {
		name := filepath.Join("testdata", "sample-"+string(v)+".dxf")
		data := mustWrite(t, sample(v, false))
		got := bytes.ReplaceAll(data, []byte("\r\n"), []byte("\n"))
		if bytes.ContainsRune(got, '\r') || bytes.Count(data, []byte("\r\n")) != bytes.Count(data, []byte("\n")) {
			t.Errorf("version %s: line ends are not all CR LF", v)
		}
		if os.Getenv("UPDATE_GOLDEN") != "" {
			if err := os.WriteFile(name, got, 0o644); err != nil {
				t.Fatal(err)
			}
		}
		want, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(strings.ReplaceAll(string(want), "\r\n", "\n"), string(got)); diff != "" {
			t.Errorf("%s differs (-file +written):\n%s", name, diff)
		}
	}
}
