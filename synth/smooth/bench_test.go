package smooth_test

import (
	"fmt"
	"testing"

	"lobewright/synth/smooth"
)

// A table of a modified-sine rise and a 3-4-5 fall, rounded to 0.001, smoothing twice that.
func BenchmarkFit(b *testing.B) {
	for _, rows := range []int{360, 3600, 20000} {
		b.Run(fmt.Sprint(rows), func(b *testing.B) {
			table := tabulated(cycle(b, "modified-sine", "polynomial-3-4-5", 20, 20, 90, 60, 80), rows, 0, 0.001)
			for b.Loop() {
				if _, _, err := smooth.Fit(table, 0.002); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// The slowest that still ends in a curve: the smoothing is half the last place.
func BenchmarkFitOnTheLimit(b *testing.B) {
	for _, rows := range []int{360, 3600, 20000} {
		b.Run(fmt.Sprint(rows), func(b *testing.B) {
			table := tabulated(cycle(b, "modified-sine", "polynomial-3-4-5", 20, 20, 90, 60, 80), rows, 0, 0.001)
			for b.Loop() {
				if _, _, err := smooth.Fit(table, 0.0005); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkRead(b *testing.B) {
	text := []byte("deg,mm\n")
	for i := range 20000 {
		text = fmt.Appendf(text, "%.3f,%.3f\n", 0.018*float64(i), 0.0005*float64(i))
	}
	for b.Loop() {
		if _, faults := smooth.Read(text, 0.002); faults != nil {
			b.Fatal(faults)
		}
	}
}
