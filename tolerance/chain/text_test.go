package chain

import (
	"math"
	"reflect"
	"strings"
	"testing"

	"lobewright/synth/plane"
	"pgregory.net/rapid"
)

// bare drops what the notation does not write.
func bare(p Path) Path {
	q := append(Path(nil), p...)
	for i := range q {
		q[i].Source, q[i].Slack = Span{}, 0
	}
	return q
}

func TestPathNotation(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := bare(smooth(t))
		back, err := ParsePath(p.String())
		if err != nil || !reflect.DeepEqual(back, p) {
			t.Fatalf("%s: %v, %v", p, back, err)
		}
	})
}

func TestChainNotation(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c, err := Snap(smooth(t), Grid{rapid.IntRange(0, 6).Draw(t, "decimals")}, SnapOptions{})
		if err != nil {
			return // all of it below one count
		}
		for i := range c.Segments {
			c.Segments[i].Source = Span{}
		}
		back, err := ParseChain(c.String())
		if err != nil || !reflect.DeepEqual(back, c) {
			t.Fatalf("%s: %v, %v", c, back, err)
		}
	})
}

func TestNotationByHand(t *testing.T) {
	p, err := ParsePath("M 50,0 A 18 cw 58,20 L 60,40 Z")
	if err != nil {
		t.Fatal(err)
	}
	if len(p) != 3 || p[0].CCW || math.Abs(p[0].Radius()-18) > 1e-12 || p[2].To != p[0].From {
		t.Errorf("got %v", p)
	}
	if s := p[1:].String(); s != "M 58,20 L 60,40 L 50,0" {
		t.Errorf("got %s", s)
	}
	const text = "M 0.00,0.00 L -0.05,0.00 A 0.00,1.00 ccw 1.00,0.00 Z"
	c, err := ParseChain(text)
	if err != nil || c.String() != text || c.Grid.Decimals != 2 || c.Segments[0].To != (Point{X: -5}) {
		t.Errorf("%v, %v", c, err)
	}
}

func TestNotationRefuses(t *testing.T) {
	for text, want := range map[string]string{
		"":                         "no element",
		"M 1,2":                    "no element",
		"L 1,2":                    "before any M",
		"M 0,0 B":                  "want M, L, A or Z",
		"M 0,0 A 8 left 1,1":       "want cw or ccw",
		"M 0,0 A 8 cw":             "the text ends",
		"M 0,0 A 0.1 cw 1,1":       "at least half the chord",
		"M 0,0 L NaN,1":            "word 3",
		"M 0,0 L 1":                "want a point",
		"M 0,0 A 1,1 cw 1,1 L 2,x": "word 7",
	} {
		if p, err := ParsePath(text); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: %v, %v; want an error with %q", text, p, err, want)
		}
	}
	for _, text := range []string{"M 0.0,0.0 L 1,1", "M 0.0,0.0 L 1.00,1.0", "M 0,0 L +1,1", "M .0,.0 L .1,.1", "M 0.0,0.0 L 1.-5,0.0",
		"M 0,0 L 99999999999999999999,0", "M 0.0,0.0 A 8 cw 1.0,1.0", "M 0.0000000000000000,0.0000000000000000 Z L 1,1"} {
		if c, err := ParseChain(text); err == nil {
			t.Errorf("%q: %v, no error", text, c)
		}
	}
}

func FuzzNotation(f *testing.F) {
	f.Add("M 50,0 A 18 cw 58,20 L 60,40 Z")
	f.Add("M 0.00,0.00 L -0.05,0.00 A 0.00,1.00 ccw 1.00,0.00 Z M 1.00,1.00 L 2.00,2.00 Z Z")
	f.Add("M 1e308,1 L -0,-0 Z")
	f.Fuzz(func(t *testing.T, text string) {
		if p, err := ParsePath(text); err == nil {
			if q, err := ParsePath(p.String()); err != nil || !reflect.DeepEqual(p, q) {
				t.Errorf("%q printed as %q read as %v, %v", text, p, q, err)
			}
		}
		if c, err := ParseChain(text); err == nil {
			if q, err := ParseChain(c.String()); err != nil || !reflect.DeepEqual(c, q) {
				t.Errorf("%q printed as %q read as %v, %v", text, c, q, err)
			}
		}
	})
}

func TestOffsetRoundPolygon(t *testing.T) {
	square, err := ParsePath("M 0,0 L 10,0 L 10,10 L 0,10 Z") // counterclockwise: outside is right
	if err != nil {
		t.Fatal(err)
	}
	// Steiner: the outer parallel of a convex polygon is longer by 2πd.
	q, err := square.OffsetRound(-2)
	if err != nil || math.Abs(q.Length()-(40+4*math.Pi)) > 1e-12 || len(q) != 8 || !q.Closed(0) {
		t.Errorf("outside: %v, %v", q, err)
	}
	for i, e := range q {
		if next := q[(i+1)%len(q)]; e.To != next.From || math.Abs(turn(e, next)) > 1e-12 {
			t.Errorf("joint after %d is not smooth", i)
		}
	}
	if q, err = square.OffsetRound(2); err != nil || math.Abs(q.Length()-24) > 1e-12 || len(q) != 4 || !q.Closed(0) {
		t.Errorf("inside: %v, %v", q, err)
	}
	if q, err = square.OffsetRound(6); err == nil {
		t.Errorf("inside by more than half: %v, no error", q)
	}
	if min, max := square.Bounds(); min != (plane.Point{}) || max != (plane.Point{X: 10, Y: 10}) {
		t.Errorf("bounds %v %v", min, max)
	}
}

// TestOffsetRoundArcs: a half disk; its straight side and its arc meet at right angles.
func TestOffsetRoundArcs(t *testing.T) {
	half, err := ParsePath("M 10,0 A 0,0 ccw -10,0 Z")
	if err != nil {
		t.Fatal(err)
	}
	q, err := half.OffsetRound(-1)
	if want := 11*math.Pi + math.Pi + 20; err != nil || math.Abs(q.Length()-want) > 1e-12 {
		t.Errorf("outside: %v, want length %g, %v", q, want, err)
	}
	q, err = half.OffsetRound(1)
	side := 2 * math.Sqrt(80) // chord of radius 9 at height 1
	if want := side + 9*(math.Pi-2*math.Asin(1.0/9)); err != nil || math.Abs(q.Length()-want) > 1e-12 {
		t.Errorf("inside: length %g, want %g, %v", q.Length(), want, err)
	}
	if q, err = half.OffsetRound(7); err == nil {
		t.Errorf("inside by more than fits: %v, no error", q)
	}
}
