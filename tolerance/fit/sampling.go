package fit

import (
	"math"

	"lobewright/synth/plane"
)

// Where samples are taken: in proportion to the arcs that the curve needs, with a floor for flat
// places, and finely about jumps of the curvature, where a joint that has slid off by x makes a
// peak of the error that is only about x wide.

const (
	partIntervals = 24   // intervals that a part is first looked at with
	modelPerArc   = 24   // samples of an arc of average length
	modelLeast    = 240  // samples of a stretch at least
	floorShare    = 0.15 // of the mean density of samples: what flat places get
	jumpReach     = 3.0  // lengths √(2·eps/jump) beside a jump that are sampled finely
	jumpDensity   = 6.0  // samples to such a length
	sliver        = 1e-9 // of an interval: too short to be cut off
)

// grader fills the samples of a stretch in.
type grader struct {
	*model
	density func(sample) float64 // arcs to a length
	scale   float64              // samples to an arc
	flat    float64              // arcs to a length for flat places
	survey  [][]sample
}

// sample fills ss.
func (m *model) sample(eps, most float64) error {
	g := grader{model: m, density: m.arcsPer(eps), survey: make([][]sample, len(m.parts))}
	count, length := 0.0, 0.0
	for i, p := range m.parts {
		ss := make([]sample, partIntervals+1)
		for j := range ss {
			t := at(p.Piece, j, len(ss))
			ss[j] = sample{Frame: p.frame(m.curve, t), t: t}
			if j > 0 {
				ds := step(ss[j-1].Frame, ss[j].Frame)
				length += ds
				count += ds * g.mean(ss[j-1], ss[j])
			}
		}
		g.survey[i] = ss
	}
	if !(count >= 0 && length > 0) || math.IsInf(count+length, 0) {
		return irregular(part{Piece: plane.Piece{From: m.parts[0].From, To: m.parts[len(m.parts)-1].To}})
	}
	g.flat = math.Max(floorShare*count, floorShare) / length
	g.scale = math.Max(modelPerArc*count, modelLeast) / (count + g.flat*length)
	for i := range m.parts {
		g.fill(i, g.feltFrom(i, eps, most), g.feltFrom(i+1, eps, most))
	}
	return nil
}

func (g *grader) mean(a, b sample) float64 { return (g.density(a) + g.density(b)) / 2 }

// feltFrom returns √(2·eps/|dk|), the length over which the jump dk of the curvature before part
// i is felt, 0 when there is none.
func (g *grader) feltFrom(i int, eps, most float64) float64 {
	n := len(g.survey)
	a, b := g.survey[(i+n-1)%n][partIntervals].Frame, g.survey[i%n][0].Frame
	switch {
	case g.closed || i > 0 && i < n:
	case i == 0 && g.left.dwell:
		a = g.left.frame
	case i == n && g.right.dwell:
		b = g.right.frame
	default:
		return 0
	}
	if !jumps(a, b, most) {
		return 0
	}
	return math.Sqrt(2 * eps / math.Abs(a.K-b.K))
}

// fill samples part i; jumps at its ends are felt over the lengths left and right.
func (g *grader) fill(i int, left, right float64) {
	p, ss := g.parts[i], g.survey[i]
	length, done := 0.0, 0.0
	for j := 1; j < len(ss); j++ {
		length += step(ss[j-1].Frame, ss[j].Frame)
	}
	g.ss = append(g.ss, ss[0])
	for j := 1; j < len(ss); j++ {
		a, b := ss[j-1], ss[j]
		ds := step(a.Frame, b.Frame)
		plain := ds / math.Max(math.Ceil(g.scale*ds*(g.mean(a, b)+g.flat)), 1)
		for x := 0.0; x < ds*(1-sliver); {
			h := plain
			if left > 0 && done+x < jumpReach*left {
				h = math.Min(h, left/jumpDensity)
			}
			if back := length - done - x - jumpReach*right; right > 0 && back < plain {
				h = math.Min(h, math.Max(right/jumpDensity, back))
			}
			if x += h; x < ds*(1-sliver) {
				t := a.t + (b.t-a.t)*x/ds
				g.ss = append(g.ss, sample{Frame: p.frame(g.curve, t), t: t})
			}
		}
		g.ss = append(g.ss, b)
		done += ds
	}
}
