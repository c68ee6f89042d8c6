package fit

import (
	"math"
	"testing"

	"lobewright/tolerance/chain"
)

// A path takes its share of the tolerance everywhere, and only there more elements than without:
// with 1/27 over a third of the turn, arcs there become a third as long, lines √27 times shorter.
func TestShares(t *testing.T) {
	const eps, share = 0.002, 1.0 / 27
	within := func(t, margin float64) bool {
		t = math.Mod(t+720, 360)
		return t > 20+margin && t < 140-margin
	}
	tight := func(t float64) bool { return within(t, 0) }
	o := Options{Share: func(t float64) float64 {
		if tight(t) {
			return share
		}
		return 1
	}}
	for name, c := range map[string]testCurve{"cam": cyc345(1, 0), "ellipse": ellipse(60, 35), "parabolic": parabolic(11)} {
		for kind, fit := range map[chain.Kind]func(Options) (chain.Path, error){
			chain.Arc:  func(o Options) (chain.Path, error) { return Arcs(c, eps, o) },
			chain.Line: func(o Options) (chain.Path, error) { return Lines(c, eps, o) },
		} {
			plain, err := fit(Options{})
			if err != nil {
				t.Fatal(err)
			}
			shared, err := fit(o)
			if err != nil {
				t.Fatal(err)
			}
			closedAndJoined(t, c, shared)
			var count [2][2]int // plain and shared, outside and inside the tight stretch
			for i, p := range []chain.Path{plain, shared} {
				for _, e := range p {
					in := 0
					if tight((e.Source.From + e.Source.To) / 2) {
						in = 1
					}
					count[i][in]++
					if i == 0 {
						continue
					}
					for j := range 41 {
						u := e.Source.From + (e.Source.To-e.Source.From)*float64(j)/40
						if d := pathDistance(p, c.point(u)); d > eps*1.001 || within(u, 0.2) && d > share*eps*1.001 {
							t.Errorf("%s, kind %v: %g off at %g", name, kind, d, u)
						}
					}
				}
			}
			t.Logf("%s, kind %v: outside %d then %d, inside %d then %d", name, kind, count[0][0], count[1][0], count[0][1], count[1][1])
			most := 3.5*float64(count[0][1]) + 6
			if kind == chain.Line {
				most = 1.02*math.Sqrt(27)*float64(count[0][1]) + 6
			}
			if float64(count[1][1]) > most || count[1][0] > count[0][0]+4 {
				t.Errorf("%s, kind %v: outside %d then %d, inside %d then %d", name, kind, count[0][0], count[1][0], count[0][1], count[1][1])
			}
		}
	}
}
