package taylor_test

import (
	"math"
	"testing"

	"lobewright/synth/taylor"
	"pgregory.net/rapid"
)

// The inverse of tan: atan(sin t / cos t) is t itself, all higher coefficients 0.
func TestAtanUndoesTan(t *testing.T) {
	for _, at := range []float64{-1.4, -0.3, 0, 0.8, 1.5} {
		s, c := taylor.FVar(at).SinCos()
		got := s.Div(c).Atan()
		for k, want := range []float64{at, 1, 0, 0, 0, 0} {
			if size := math.Pow(c.C[0], -float64(k)); math.Abs(got.C[k]-want) > 1e-14*size {
				t.Errorf("atan tan %v, coefficient %d: got %v, want %v", at, k, got.C[k], want)
			}
		}
	}
}

func TestAtanEncloses(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lo := rapid.Float64Range(-5, 5).Draw(t, "lo")
		w := rapid.Float64Range(0, 0.5).Draw(t, "width")
		p := rapid.Float64Range(0, 1).Draw(t, "at")
		iv := taylor.IVar(taylor.Interval{Lo: lo, Hi: lo + w}, taylor.Order).Atan()
		fv := taylor.FVar(min(lo+p*w, lo+w)).Atan()
		if iv.N != taylor.Order {
			t.Fatalf("order %d", iv.N)
		}
		for k := range fv.C {
			if slack := 1e-13 * (1 + math.Abs(fv.C[k])); fv.C[k] < iv.C[k].Lo-slack || fv.C[k] > iv.C[k].Hi+slack {
				t.Fatalf("coefficient %d: %v outside %v", k, fv.C[k], iv.C[k])
			}
		}
	})
}
