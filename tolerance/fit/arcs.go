package fit

import (
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Arcs. With e the distance of a chain of arcs from the curve, e'' = k_i - k(s): the
// chain is to first order a quadratic spline to a function whose third derivative is
// k', and the least number of arcs for ±eps is N* = ∫(|k'|/(124.7·eps))^(1/3) ds.
//
// The obvious method, biarcs that meet the curve in point and tangent at both ends, takes
// 1.45·N* even with the best nodes, because a best chain crosses the curve at every
// joint: its tangent is off by -k'·h²/12 there (h the length of an arc).
//
// Used here: greedy, the longest biarc from node to node, nodes on the curve, their tangents
// tilted by a good part of that, and the share of the first leg searched; then the
// deviation is lowered as far as the count allows, which spreads the arcs evenly
// (greedy.go). Nodes are fixed at the ends of dwells, where the curvature jumps, and where
// the parameter starts; there is no tilt there.
//
// Price, measured on cams with smooth laws at 0.5 to 5 µm: 1.2 to 1.4 times N*, 10 to 30 ms;
// the excess is one to two arcs for every fixed node.
//
// Literature: Meek and Walton, Approximation of discrete data by G1 arc splines (1992);
// Bolton, Biarc curves (1975).

// Options says how Arcs works. There is nothing to choose yet: the zero value is right.
type Options struct{}

const (
	searchShare   = 0.99 // of eps: what the search allows itself, since samples see a little less than all
	samplesPerArc = 24   // where the curve needs arcs most densely
)

// Arcs returns a closed path of arcs (and lines where the curve is straight) with
// continuous tangent, within eps (a length) of the curve everywhere by the estimate of
// dense samples; the certificate is for others to make. Every piece that is a circle
// becomes exactly one arc. The path breaks its tangent only where the curve does. It
// runs with growing parameter; Source holds the stretch each element stands for, the
// first from the start of the first piece, the last to 360 on. Errors: eps not a
// length, a curve that is not one closed turn or has no finite curvature.
func Arcs(c Curve, eps float64, _ Options) (chain.Path, error) {
	pieces, err := validate(c, eps)
	if err != nil {
		return nil, err
	}
	var path chain.Path
	for i := 0; i < len(pieces); {
		if pieces[i].Circle != nil {
			path = append(path, circle(c, i, pieces[i]))
			i++
			continue
		}
		n := 1
		for i+n < len(pieces) && pieces[i+n].Circle == nil {
			n++
		}
		r, err := newRun(c, pieces, i, n, arcsPer(eps), samplesPerArc)
		if err != nil {
			return nil, err
		}
		biarcs, err := r.arcs(searchShare * eps)
		if err != nil {
			return nil, err
		}
		path = append(path, elements(r.samples[0].t, biarcs)...)
		i += n
	}
	return tie(path), nil
}

// circle returns the arc of a piece that is a circle.
func circle(c Curve, i int, p plane.Piece) chain.Element {
	from, to := c.At(i, p.From), c.At(i, p.To)
	if p.To-p.From >= turnDegrees-parameterGap {
		to = from // a full circle must not become an empty arc by rounding
	}
	return chain.Element{Kind: chain.Arc, From: from.P, To: to.P, Center: p.Circle.Center, CCW: from.K > 0,
		Source: chain.Span{From: p.From, To: p.To}}
}

// arcs fits the sections of the run one by one.
func (r *run) arcs(eps float64) ([]biarc, error) {
	var all []biarc
	from := 0
	for _, pin := range append(append([]int(nil), r.pins...), len(r.samples)) {
		found, err := section{run: r, from: from, to: pin - 1, eps: eps}.fit()
		if err != nil {
			return nil, err
		}
		all = append(all, found...)
		from = pin
	}
	return all, nil
}

// elements writes biarcs that follow each other from parameter t.
func elements(t float64, biarcs []biarc) chain.Path {
	var p chain.Path
	for _, b := range biarcs {
		if one, ok := b.single(); ok {
			p = append(p, one.element(chain.Span{From: t, To: b.end}))
		} else {
			p = append(p, b.legs[0].element(chain.Span{From: t, To: b.t}), b.legs[1].element(chain.Span{From: b.t, To: b.end}))
		}
		t = b.end
	}
	return p
}

// tie makes joints equal that are equal but for rounding, and closes the path.
func tie(p chain.Path) chain.Path {
	for i := range p {
		next := (i + 1) % len(p)
		p[i].To = p[next].From
		if next > 0 {
			p[next].Source.From = p[i].Source.To
		}
	}
	return p
}
