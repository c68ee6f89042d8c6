package pack

import (
	"math"
	"math/rand"
	"testing"

	"lobewright/export/dxf"
	"lobewright/export/dxf/read"
	"lobewright/synth"
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// flips changes one digit at each of n seeded places of a file.
func flips(data []byte, n int, seed int64, try func(at int, changed []byte)) {
	r := rand.New(rand.NewSource(seed))
	var digits []int
	for i, c := range data {
		if c >= '0' && c <= '9' {
			digits = append(digits, i)
		}
	}
	for range n {
		at := digits[r.Intn(len(digits))]
		changed := append([]byte(nil), data...)
		changed[at] = '0' + (data[at]-'0'+1+byte(r.Intn(9)))%10
		try(at, changed)
	}
}

// farthest is how far a path is from a curve at most, over many of its points and the curve's
// nearest of many: an independent, sampled figure.
func farthest(c *synth.Curve, path chain.Path) float64 {
	var pts []plane.Point
	for i, p := range c.Pieces() {
		n := 1 + int((p.To-p.From)*20)
		for k := range n {
			pts = append(pts, c.At(i, p.From+(p.To-p.From)*float64(k)/float64(n)).P)
		}
	}
	if last := len(c.Pieces()) - 1; !c.Closed() {
		pts = append(pts, c.At(last, c.Pieces()[last].To).P)
	}
	worst := 0.0
	for _, e := range path {
		for k := range 9 {
			q := e.PointAt(float64(k) / 8)
			best := math.Inf(1)
			for i := range pts {
				best = math.Min(best, toSegment(q, pts[i], pts[(i+1)%len(pts)]))
			}
			worst = math.Max(worst, best)
		}
	}
	return worst
}

func toSegment(q, a, b plane.Point) float64 {
	v, w := b.Sub(a), q.Sub(a)
	if l := v.Dot(v); l > 0 {
		return w.Sub(v.Scale(math.Max(0, math.Min(1, w.Dot(v)/l)))).Norm()
	}
	return w.Norm()
}

// A digit flipped anywhere in the DXF is refused unless contour and pitch curve stay
// within the chord tolerance.
func TestFlippedDigitsInDXF(t *testing.T) {
	t.Parallel()
	_, j, err := work(readSample(t, samplesFolder+"/stick-lift.yaml"), options())
	if err != nil {
		t.Fatal(err)
	}
	refused, harmless := 0, 0
	flips(j.outline.data, 60, 11, func(at int, changed []byte) {
		o, err := j.proveOutline(j.outline.drawing, changed)
		if err != nil || o.worst().Bound > j.chord {
			refused++
			return
		}
		harmless++
		file, err := read.Parse(changed)
		if err != nil {
			t.Fatal(err)
		}
		for layer, curve := range map[string]*synth.Curve{dxf.LayerContour: j.cam.Contour(), dxf.LayerPitchCurve: j.cam.Pitch()} {
			p := file.PolylinesOn(layer)[0]
			// A chord of the sampled curve is off by less than 60 x 0.05² deg²/8 = 6e-6.
			if d := farthest(curve, chain.FromBulges(p.Points, p.Bulges, true)); d > j.chord+1e-5 {
				t.Errorf("a digit flipped at byte %d moves layer %s by %.5f, and was not refused", at, layer, d)
			}
		}
	})
	if refused < 18 || harmless == 0 {
		t.Errorf("%d refused, %d harmless: the flips did not try the proof", refused, harmless)
	}
	t.Logf("DXF: %d of 60 flips refused, %d harmless", refused, harmless)
}

// A digit flipped anywhere in an NC program is refused unless it stands in a comment.
func TestFlippedDigitsInNC(t *testing.T) {
	t.Parallel()
	for _, name := range []string{"stick-lift", "box-pusher", "carton-shift", "tray-sweep", "label-dab", "row-stop"} {
		_, j, err := work(readSample(t, samplesFolder+"/"+name+".yaml"), options())
		if err != nil {
			t.Fatal(err)
		}
		for _, p := range j.programs {
			refused, harmless := 0, 0
			flips(p.data, 80, 12, func(at int, changed []byte) {
				q, err := j.proveProgram(p, changed)
				if err != nil || len(q.result.Failures) > 0 || q.result.Deviation.Bound > j.chord {
					refused++
					return
				}
				harmless++
				if line := lineOf(changed, at); line[0] != '(' && line[0] != 'N' {
					t.Errorf("%s: a digit flipped in %q was not refused", p.name, line)
				} else if line[0] == 'N' && !inNumber(changed, at) {
					t.Errorf("%s: a digit flipped in %q was not refused", p.name, line)
				}
			})
			if refused < 36 {
				t.Errorf("%s: only %d of 80 flips refused", p.name, refused)
			}
			t.Logf("%s: %d of 80 flips refused, %d harmless", p.name, refused, harmless)
		}
	}
}

func lineOf(data []byte, at int) string {
	from, to := at, at
	for from > 0 && data[from-1] != '\n' {
		from--
	}
	for to < len(data) && data[to] != '\n' {
		to++
	}
	return string(data[from:to])
}

// inNumber reports whether the byte stands in the block number at the head of its
// line, or in a comment.
func inNumber(data []byte, at int) bool {
	i := at
	for data[i] >= '0' && data[i] <= '9' {
		i--
	}
	if data[i] == 'N' {
		return true
	}
	for ; i >= 0 && data[i] != '\n'; i-- {
		if data[i] == '(' {
			return true
		}
	}
	return false
}
