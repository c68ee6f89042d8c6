package pack

import (
	"path/filepath"
	"strings"
	"testing"
)

// BenchmarkRelease is the whole job in memory for each sample.
func BenchmarkRelease(b *testing.B) {
	for _, name := range releasingSamples(b) {
		s := readSample(b, name)
		b.Run(strings.TrimSuffix(filepath.Base(name), ".yaml"), func(b *testing.B) {
			for b.Loop() {
				if p, err := Make(s, options()); err != nil || !p.Passed {
					b.Fatal(err)
				}
			}
		})
	}
}
