package fit

import (
	"math"
	"testing"

	"lobewright/tolerance/chain"
)

// classical is the usual way, kept as the yardstick: the longest biarc from node to node, nodes on
// the curve and tangent to it, joint placed as well as it can be; nodes at dwells' ends and where the
// curvature jumps. It returns the number of arcs that are not dwells.
func classical(t fataler, c testCurve, eps float64) int {
	t.Helper()
	count := 0
	for _, it := range route(c, c.pieces) {
		if it.circle {
			continue
		}
		r, err := newRun(c, it.parts, arcsPer(eps), samplesPerArc)
		if err != nil {
			t.Fatalf("%v", err)
		}
		from := 0
		for _, pin := range append(append([]int(nil), r.pins...), len(r.samples)) {
			found, err := section{run: r, from: from, to: pin - 1, eps: eps, swing: math.Inf(1)}.greedy(pairsMost)
			if err != nil {
				t.Fatalf("%v", err)
			}
			count += 2 * len(found)
			from = pin
		}
	}
	return count
}

// sineCam is the cam of the comparison with the modified sine law.
func sineCam() testCurve {
	zones := append(strokeZones("sine", 90, 0, 24), zone{60, 24, 24, 0, 0, nil})
	zones = append(append(zones, strokeZones("sine", 120, 24, 0)...), zone{90, 0, 0, 0, 0, nil})
	return polarCam(40, 0, 1, 0, zones)
}

type comparison struct {
	name string
	c    testCurve
	want []int // classical arcs at micrometers()
}

func micrometers() []float64 { return []float64{10, 5, 2, 1, 0.5, 0.1} }

// compared are the curves of the comparison; the classical counts were measured by a separate program
// (greedy, best joint, dwells not counted).
func compared() []comparison {
	return []comparison{
		{"cycloidal,3-4-5", cyc345(1, 0), []int{24, 30, 38, 46, 58, 98}},
		{"modified-sine", sineCam(), []int{20, 26, 38, 42, 54, 92}},
		{"parabolic", parabolic(0), []int{16, 20, 24, 30, 36, 60}},
		{"ellipse-60x35", ellipse(60, 35), []int{32, 38, 50, 66, 80, 136}},
	}
}

// TestAgainstClassical holds the classical count against the table, and ours against it.
func TestAgainstClassical(t *testing.T) {
	const mostShare = 0.72
	sum, cases := 0.0, 0.0
	for _, k := range compared() {
		for i, um := range micrometers() {
			p, err := Arcs(k.c, um/1000, Options{})
			if err != nil {
				t.Fatal(err)
			}
			ours, usual, limit := freeArcs(k.c, p), classical(t, k.c, um/1000), bound(k.c, um/1000)
			ratio := float64(ours) / float64(usual)
			t.Logf("%-16s %4g um: N* %5.1f, ours %3d (limit %6.2f), classical %3d (table %3d), ratio %.3f",
				k.name, um, Theory(k.c, um/1000, chain.Arc), ours, limit, usual, k.want[i], ratio)
			if usual < k.want[i]-2 || usual > k.want[i]+2 {
				t.Errorf("%s, %g um: classical takes %d arcs, want %d within 2", k.name, um, usual, k.want[i])
			}
			if float64(ours) > limit {
				t.Errorf("%s, %g um: %d arcs, limit %.2f", k.name, um, ours, limit)
			}
			if um == 1 {
				sum, cases = sum+ratio, cases+1
			}
		}
	}
	t.Logf("mean ratio at 1 um: %.3f", sum/cases)
	if sum/cases > mostShare {
		t.Errorf("mean ratio %.3f, want at most %g", sum/cases, mostShare)
	}
}
