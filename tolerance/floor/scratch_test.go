package floor

import (
	"fmt"
	"testing"
	"time"

	"lobewright/tolerance/chain"
	"lobewright/tolerance/fit"
)

func TestScratch(t *testing.T) {
	for _, k := range []struct {
		n string
		c curve
	}{{"circle", ellipse(30, 30)}, {"ellipse", ellipse(60, 35)}, {"cyc345", cyc345(0)}, {"cyc345 off", cyc345(11)}, {"para", parabolic(0)}, {"nodwell", noDwell()}, {"wavy", wavy()}} {
		for _, eps := range []float64{0.01, 0.005, 0.002, 0.001, 0.0005, 0.0001,1e-6} {
			t0 := time.Now()
			n, err := Arcs(k.c, eps)
			d := time.Since(t0)
			fmt.Println(k.n, eps, n, err, "N*", fit.Theory(k.c, eps, chain.Arc), n, d.Round(10*time.Microsecond))
		}
	}
}
