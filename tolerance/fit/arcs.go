package fit

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Arcs.
//
// The problem: the fewest arcs with continuous tangent that stay within ±eps of a curve. An
// exact answer is known for a channel between polygons (G. Maier, Optimal arc spline approximation,
// Computer Aided Geometric Design 31 (2014) 211-226); a cam has no polygon, and its
// smoothness allows something simpler that comes within a few arcs of the least count.
//
// The obvious method, biarcs that meet the curve in point and tangent at both ends
// (D. S. Meek and D. J. Walton, Approximation of discrete data by G1 arc splines, Computer-Aided
// Design 24 (1992) 301-306), each as long as eps allows, takes 1.45 to 1.6 times the count below:
// a best chain crosses the curve at every joint, where its tangent is off by k'·h²/12
// (h the length of an arc). Such nodes cannot be found by going greedily from one to the next: a tilt
// meant for a long arc makes a shorter one impossible, and an error of the tangent
// is handed on undiminished.
//
// Used here: let e be the distance of the chain to the left of the curve. Its second derivative is
// k_i - k(s) to first order, so with F the second integral of k, F + e is a quadratic spline: the chain
// with the least largest e is the best uniform approximation of F by quadratic splines with free knots. For k' = 1 and arcs of
// length 1 its error is the Bernoulli monospline B3/6, of largest value √3/216 = 1/124.7, and so
//
//	N* = ∫ (|k'|/(124.7·eps))^(1/3) ds
//
// arcs are needed as eps goes to 0, and the fit keeps near that:
//
//	route.go     cuts the curve at dwells (each is one exact arc) and at corners
//	model.go     samples a stretch between cuts and integrates F
//	spline.go    fits splines on given knots, equations.go by weighted least squares
//	knots.go     spreads the knots so that all arcs have the same error
//	polish.go    moves knots by Gauss-Newton steps, first on powers of e, then on its maximum
//	realise.go   makes a chain of it: joints beside the curve, a biarc to every two arcs
//	distance.go  measures that chain against the curve itself; what counts is this
//	search.go    takes the first count for which that succeeds
//
// Joints may slide off the jumps of the curvature and onto or off the circle of a dwell (an arc that
// overlaps it by x is off by |dk|·x²/2), and a curve without dwell or corner is solved as the
// periodic spline it is: no joint is pinned but at a corner. At equal count a joint where the
// parameter starts is preferred. When no count serves, the tilted greedy of greedy.go does.
//
// Price, measured: 1.03·N* arcs in sum on 2100 generated cams and waved curves at 0.5 to 10 µm, N* being
// 5 to 110, each at most 1.03·N* + S + Z/2 (S stretches between dwells and jumps of the curvature, Z sign
// changes of k'), none left to the greedy; 0.69 of the classical count at 1 µm; 10 ms in the median,
// 10 to 50 ms for a cam at 1 µm, 0.2 to 0.6 s at 1 nm.

// Options says how a curve is fitted; the zero value is right for a plain tolerance.
type Options struct {
	// Share is the part of eps, above 0 and at most 1, that the path may take at parameter t (degrees;
	// closed curves: also asked a turn on or back, where it must be the same). Arcs and lines
	// become shorter only where it asks for it, as the cube or the square root of the share. Nil is 1 everywhere. It may
	// step; it is looked at in samples, so what is shorter than an element may be missed.
	Share func(t float64) float64
}

// at returns the share at t.
func (o Options) at(t float64) float64 {
	if o.Share == nil {
		return 1
	}
	return o.Share(t)
}

// Arcs returns a path of arcs (and lines where the curve is straight), closed when the curve is, with
// continuous tangent, within eps (a length) of the curve everywhere by the estimate of
// dense samples; the certificate is for others to make. Every piece that is a circle
// becomes exactly one arc of that circle, every straight piece one line; either may end a little before or behind the piece. The
// path breaks its tangent only where the curve does. No arc's curvature is further from
// the curve's than that changes along an arc. The path runs with growing parameter; Source
// holds the stretch each element stands for, the first from the joint nearest to the start of the first
// piece (at it, where a joint lies there), the last to 360 on from that. Errors: eps not a
// length, a curve that is not one turn or has no finite curvature.
func Arcs(c Curve, eps float64, o Options) (chain.Path, error) {
	pieces, err := validate(c, eps)
	if err != nil {
		return nil, err
	}
	most := mostBent(c, pieces)
	return assemble(c, pieces, func(st stretch) (chain.Path, error) { return st.fit(eps, most, o) })
}

// assemble fits all stretches of the curve and joins them with the dwells.
func assemble(c Curve, pieces []plane.Piece, fit func(stretch) (chain.Path, error)) (chain.Path, error) {
	items := route(c, pieces)
	paths := make([]chain.Path, len(items))
	for i, it := range items {
		var err error
		if it.circle {
			paths[i] = chain.Path{circleElement(c, it.parts[0])}
		} else if paths[i], err = fit(it.stretch); err != nil {
			return nil, err
		}
	}
	settle(items, paths)
	var path chain.Path
	for _, p := range paths {
		path = append(path, p...)
	}
	if isOpen(c) {
		return tie(path, false), nil
	}
	return started(tie(path, true), pieces[0].From), nil
}

// mostBent returns the curve's largest curvature, from a few samples: the scale of its jumps.
func mostBent(c Curve, pieces []plane.Piece) float64 {
	most := 0.0
	for i, p := range pieces {
		for j := range partIntervals + 1 {
			most = math.Max(most, math.Abs(c.At(i, at(p, j, partIntervals+1)).K))
		}
	}
	return most
}

// settle lets dwells begin and end where the stretches beside them do.
func settle(items []item, paths []chain.Path) {
	n := len(items)
	for i, it := range items {
		if !it.circle || n == 1 {
			continue
		}
		e := &paths[i][0]
		if before := (i + n - 1) % n; !items[before].circle && it.joined.left {
			last := paths[before][len(paths[before])-1]
			e.From, e.Source.From = last.To, last.Source.To
			if before > i {
				e.Source.From -= turnDegrees
			}
		}
		if after := (i + 1) % n; !items[after].circle && it.joined.right {
			next := paths[after][0]
			e.To, e.Source.To = next.From, next.Source.From
			if after < i {
				e.Source.To += turnDegrees
			}
		}
	}
}

// started turns the path so that its first element is the one that starts nearest to
// parameter t or a turn on. It keeps the name of its own joint: a stretch cut by
// parameter must land where it was asked for.
func started(p chain.Path, t float64) chain.Path {
	best, turns := 0, 0.0
	for i := range p {
		for _, shift := range []float64{0, turnDegrees} {
			if math.Abs(p[i].Source.From-shift-t) < math.Abs(p[best].Source.From-turns-t) {
				best, turns = i, shift
			}
		}
	}
	q := make(chain.Path, 0, len(p))
	for i := range p {
		e, shift := p[(best+i)%len(p)], -turns
		if best+i >= len(p) {
			shift += turnDegrees
		}
		e.Source.From, e.Source.To = e.Source.From+shift, e.Source.To+shift
		q = append(q, e)
	}
	for i := 1; i < len(q); i++ {
		q[i].Source.From = q[i-1].Source.To
	}
	q[len(q)-1].Source.To = q[0].Source.From + turnDegrees
	return q
}

// tie makes joints equal that are equal but for rounding, and may close the path.
func tie(p chain.Path, closed bool) chain.Path {
	for i := range p {
		next := (i + 1) % len(p)
		if next == 0 && !closed {
			break
		}
		p[i].To = p[next].From
		if next > 0 {
			p[next].Source.From = p[i].Source.To
		}
	}
	return p
}
