package floor

import (
	"fmt"
	"math"
	"testing"
)

func TestReachScratch(t *testing.T) {
	c := cyc345(0)
	s, _ := newSurvey(c, c.Pieces(), 0.001)
	for _, st := range []float64{104,2,230} {
	a := s.nodeAt(mark{0, st})
	h := &hunt{window: s.window(a)}
	j := h.first()
	fmt.Println(st, "first", j, h.to(j)[j].t, h.found, h.to(j)[h.found.at[0]].t)
	for k := j - 14; k < j+4; k++ {
		ns := h.to(k)
		f := h.fit(ns, 0.001)
		f1 := h.found
		h.fit(ns, math.Inf(1))
		f2 := h.found
		// brute
		ps := axes(ns, nil)
		best := 0.0
		var bat [4]int
		for i := 0; i < len(ps); i+=1+len(ps)/40 {
			for l := i + 1; l < len(ps); l+=1+len(ps)/40 {
				for m := l + 1; m < len(ps); m+=1+len(ps)/40 {
					q := [4]local{ps[i], ps[l], ps[m], ps[len(ps)-1]}
					u, lv := weights(q)
					e := math.Abs(lv) / through(q, u, lv).norm()
					if e > best {
						best, bat = e, [4]int{i, l, m, len(ps) - 1}
					}
				}
			}
		}
		fmt.Println(k, ns[k].t, f, f1, f2, "brute", best, bat)
	}
	}
}
