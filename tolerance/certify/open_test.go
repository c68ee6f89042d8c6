package certify_test

import (
	"math"
	"strings"
	"testing"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
)

// parabola is the open curve y = (x/10)², x one length a degree from -180 to 180, in three
// pieces.
func parabola() curve {
	return curve{pieces: []plane.Piece{{From: -180, To: -90}, {From: -90, To: 30}, {From: 30, To: 180}},
		f: parabolaOf[taylor.F], i: parabolaOf[taylor.I]}
}

func parabolaOf[T taylor.Scalar[T]](_ int, t T) (T, T) { return t, t.Mul(t).Scale(0.01) }

// chords joins points of the parabola by lines.
func chords(at ...float64) chain.Path {
	var p chain.Path
	for i := 1; i < len(at); i++ {
		p = append(p, chain.Element{Kind: chain.Line, From: plane.Point{X: at[i-1], Y: at[i-1] * at[i-1] / 100}, To: plane.Point{X: at[i], Y: at[i] * at[i] / 100}})
	}
	return p
}

// A chord of y = a x² between x1 and x2 is off by a (x2-x1)²/4 along y in its middle, where
// the parabola runs along it: that times the cosine of its slope across it (Archimedes,
// Quadrature of the Parabola, proposition 18).
func TestOpenAgainstParabola(t *testing.T) {
	at := []float64{-180, -150, -100, -20, 40, 110, 180}
	want := 0.0
	for i := 1; i < len(at); i++ {
		w := at[i] - at[i-1]
		slope := (at[i] + at[i-1]) / 100
		want = math.Max(want, w*w/400/math.Hypot(1, slope))
	}
	d, err := certify.Open(parabola(), chords(at...))
	if err != nil {
		t.Fatal(err)
	}
	if !(d.Bound >= want && d.Bound <= 1.006*want) || !(d.Right < 1e-9 && math.Abs(d.Left-want) < 1e-3*want) {
		t.Errorf("deviation %+v, want %g to the left", d, want)
	}
	if d.From != -180 || d.To != 180 {
		t.Errorf("from %v to %v", d.From, d.To)
	}
}

// An open path that leaves out an end, a middle or runs back is refused, or its bound shows
// the whole gap.
func TestOpenFaults(t *testing.T) {
	whole := []float64{-180, -150, -100, -20, 40, 110, 180}
	for name, path := range map[string]chain.Path{
		"reversed":          chords(whole...).Reverse(),
		"begins too late":   chords(whole[1:]...),
		"ends too early":    chords(whole[:6]...),
		"runs on":           chords(-180, -100, 40, 180, 220),
		"begins too early":  chords(-220, -180, -100, 40, 180),
		"twice":             append(chords(whole...), chords(whole...)...),
		"leaves out a part": append(chords(whole[:3]...), chords(whole[4:]...)...),
	} {
		d, err := certify.Open(parabola(), path)
		if err == nil && d.Bound < 20 {
			t.Errorf("%s: passed with a bound of %g", name, d.Bound)
		}
	}
	if _, err := certify.Closed(parabola(), chords(whole...)); err == nil || !strings.Contains(err.Error(), "closed") {
		t.Errorf("an open curve passed as closed: %v", err)
	}
}
