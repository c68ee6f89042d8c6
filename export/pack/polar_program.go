package pack

import (
	"math"

	"lobewright/gcode"
	"lobewright/synth"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/fit"
)

// polarAxes completes an operation on a rotary and a radial axis: its tool's path in spirals that are within eps.
func (j *job) polarAxes(op *gcode.Operation, o spec.Operation, eps float64) {
	op.Process, op.Rotary, op.Grinds = gcode.Mill, o.RotaryAxis[0], o.Process == "grind"
	op.Path = func(offset float64) (chain.Path, error) {
		path, _, err := op.Spirals(offset)
		return path, err
	}
	type spirals struct {
		path  chain.Path
		scale float64
		err   error
	}
	made := map[float64]spirals{}
	op.Spirals = func(offset float64) (chain.Path, float64, error) {
		m, ok := made[offset]
		if !ok { // a pass is run again at each depth and as a spring pass
			m.path, m.scale, m.err = j.fitSpirals(offset, eps)
			made[offset] = m
		}
		return m.path, m.scale, m.err
	}
}

// fitSpirals fits the path of a tool's center at an offset from the contour.
func (j *job) fitSpirals(offset, eps float64) (chain.Path, float64, error) {
	u, err := j.toolPath(offset).Unrolled()
	if err != nil {
		return nil, 0, err
	}
	most, options := j.even(u)
	path, err := fit.Lines(u, eps*most, options)
	return path, u.Scale(), err
}

// even makes a tolerance of the cam's plane one of the unrolled plane: the largest factor, and the share of it at each cam angle.
func (j *job) even(u *synth.Unrolled) (most float64, o fit.Options) {
	pieces := u.Pieces()
	first := pieces[0].From
	at := func(t float64) float64 {
		t -= 360 * math.Floor((t-first)/360)
		i := 0
		for i < len(pieces)-1 && t > pieces[i].To {
			i++
		}
		return u.Shrinks(i, math.Max(pieces[i].From, math.Min(pieces[i].To, t)))
	}
	for deg := range 720 {
		most = math.Max(most, at(first+float64(deg)/2))
	}
	most *= 1.001 // between the samples
	felt := j.rough.options()
	return most, fit.Options{Share: func(t float64) float64 {
		share := math.Min(1, at(t)/most)
		if felt.Share != nil {
			share *= felt.Share(t)
		}
		return share
	}}
}

// leastSpirals is the number of spirals in theory that stay within the chord tolerance of a path, as fit.Theory counts lines;
// 0 where there are none.
func (j *job) leastSpirals(exact *synth.Curve) float64 {
	u, err := exact.Unrolled()
	if err != nil {
		return 0
	}
	const straight = 16 // ∫√(|k|/(16·eps)) ds, of vertices to either side
	sum := 0.0
	for i, p := range u.Pieces() {
		const steps = 200
		rate := func(t float64) (float64, plane.Point) {
			f := u.At(i, t)
			return math.Sqrt(math.Abs(f.K) / (straight * j.chord * u.Shrinks(i, t))), f.P
		}
		a, p0 := rate(p.From)
		for k := 1; k <= steps; k++ {
			b, p1 := rate(p.From + (p.To-p.From)*float64(k)/steps)
			sum += (a + b) / 2 * p0.Dist(p1)
			a, p0 = b, p1
		}
	}
	return sum
}

// spirals is how many moves of both axes the last cut takes; 0 of a program without a rotary axis. That it runs past its start is in it.
func (p program) spirals() int {
	n := len(p.result.Cuts)
	if p.expect.Rotary == 0 || n == 0 {
		return 0
	}
	return p.result.Cuts[n-1].Lines
}
