package pack

import (
	"math"
	"strings"
	"testing"

	"lobewright/tolerance/fit"
)

// The follower's acceleration error is brought inside its limit with fewer blocks than the
// largest smaller tolerance that does it when it is the same everywhere, found here by bisection
// of the logarithm; the DXF's grid is too fine to matter.
func TestRefinesWhereItIsFelt(t *testing.T) {
	t.Parallel()
	sum, uniformly := 0, 0
	for _, name := range []string{"stick-lift", "tray-tilt"} {
		limit := 0.15
		s := readSample(t, "../../samples/"+name+".yaml")
		s.Tolerance.Acceleration, s.Operations = &limit, nil
		p, j, err := work(s, options())
		if err != nil {
			t.Fatal(err)
		}
		peak := j.cam.Peaks().A
		got := j.follows[j.outline.paths[0].file+"contour"]
		if !p.Passed || got.err.Acceleration > limit*peak {
			t.Errorf("%s, %g: passed %v with an acceleration error of %g of the peak", name, limit, p.Passed, got.err.Acceleration/peak)
		}
		if !strings.Contains(findings(p), "blocks-added") {
			t.Errorf("%s, %g: nothing says why there are more blocks: %s", name, limit, findings(p))
		}
		blocks := len(j.outline.paths[0].path)
		lo, hi := 0.02*j.chord, j.chord
		n := 0
		for hi/lo > 1.1 {
			eps := math.Sqrt(lo * hi)
			path, err := fit.Arcs(j.cam.Pitch(), eps, fit.Options{})
			if err != nil {
				t.Fatal(err)
			}
			r, err := j.follower(written{path: path})
			if err != nil {
				t.Fatal(err)
			}
			if r.err.Acceleration <= limit*peak {
				lo, n = eps, len(path)
			} else {
				hi = eps
			}
		}
		t.Logf("%s at %g%%: %d blocks where they are felt, %d by a tolerance that is %.3g of the chord everywhere", name, 100*limit, blocks, n, lo/j.chord)
		sum, uniformly = sum+blocks, uniformly+n
		if blocks > n+1 {
			t.Errorf("%s, %g: %d blocks, %d with the same tolerance everywhere", name, limit, blocks, n)
		}
	}
	if sum >= uniformly {
		t.Errorf("%d blocks in all, %d with the same tolerance everywhere", sum, uniformly)
	}
}

func findings(p *Pack) string {
	var all []string
	for _, f := range p.Report.Findings {
		all = append(all, f.ID)
	}
	return strings.Join(all, " ")
}
