// Package fit turns an exact closed curve into a short path of lines or of
// tangent-continuous arcs within a given deviation. What it returns is a
// proposal: its deviation is estimated from samples, and the certificate of the
// written path is made elsewhere, by code that shares none of this.
package fit

import (
	"fmt"
	"math"
	"sort"

	"lobewright/synth/plane"
)

// Curve is a closed curve given by pieces on which it is analytic; the pieces follow
// each other over one turn of the parameter (cam angle, degrees). A curve with a method
// Closed that returns false ends elsewhere than it starts, as the development of a
// barrel's track does; its path begins and ends exactly where it does.
type Curve interface {
	Pieces() []plane.Piece
	At(piece int, t float64) plane.Frame
}

// isOpen reports whether the curve says of itself that it is not closed.
func isOpen(c Curve) bool {
	o, ok := c.(interface{ Closed() bool })
	return ok && !o.Closed()
}

// sample is the curve at one parameter. s is the arc length from the start of the run.
type sample struct {
	plane.Frame
	t, s  float64
	share float64 // of eps; set in runs of lines
}

// part is a piece of the curve as a run sees it: its parameter is the curve's plus
// shift, which is a whole turn for pieces behind the curve's start.
type part struct {
	plane.Piece
	piece int
	shift float64
}

// run is a stretch of parts that follow each other.
type run struct {
	curve   Curve
	options Options
	parts   []part
	samples []sample // growing t; at a part's boundary both sides
	pins    []int    // indices into samples: where the curvature or tangent jumps, or the curve starts; the right side
	ends    []int    // the same, where a straight piece begins or ends
}

const (
	arcConstant  = 124.7077 // N* = ∫(|k'|/(arcConstant·eps))^(1/3) ds; 216/√3, see arcs.go
	lineConstant = 16       // N = ∫√(|k|/(lineConstant·eps)) ds, vertices up to eps off the curve

	turnDegrees  = 360
	parameterGap = 1e-9 // degrees: what rounding may leave between pieces or of a turn
	closingShare = 0.1  // of eps: how far the curve may be from closing, or pieces from joining
	jumpShare    = 1e-6 // of the largest curvature: a smaller step is taken for rounding
	kinkAngle    = 1e-7 // rad: a smaller step of the tangent is taken for rounding

	surveyed   = 65   // samples that a piece is first looked at with
	minSamples = 129  // samples of a piece at least
	maxSamples = 8001 // and at most
)

// validate checks what the fitters rely on.
func validate(c Curve, eps float64) ([]plane.Piece, error) {
	if !(eps > 0) || math.IsInf(eps, 0) {
		return nil, fmt.Errorf("deviation %g: want a length above 0", eps)
	}
	pieces := c.Pieces()
	if len(pieces) == 0 {
		return nil, fmt.Errorf("the curve has no pieces")
	}
	last := len(pieces) - 1
	if turn := pieces[last].To - pieces[0].From; !(math.Abs(turn-turnDegrees) <= parameterGap) {
		return nil, fmt.Errorf("the curve covers %g degrees of cam angle, want %d", turn, turnDegrees)
	}
	size := 0.0
	end := c.At(last, pieces[last].To).P
	if isOpen(c) {
		end = c.At(0, pieces[0].From).P
	}
	for i, p := range pieces {
		if !(p.To > p.From) || i > 0 && !(math.Abs(p.From-pieces[i-1].To) <= parameterGap) {
			return nil, fmt.Errorf("piece %d goes from %g to %g degrees and does not follow the one before it", i, p.From, p.To)
		}
		start := c.At(i, p.From).P
		if !(start.Dist(end) <= closingShare*eps) {
			return nil, fmt.Errorf("the curve is open by %.3g at cam angle %.6g, more than %.3g", start.Dist(end), p.From, closingShare*eps)
		}
		end = c.At(i, p.To).P
		size = math.Max(size, start.Radius())
	}
	if least := size * floatShare; eps < least {
		return nil, fmt.Errorf("deviation %g is too small for a curve of size %.6g: at least %.1g", eps, size, least)
	}
	return pieces, nil
}

// floatShare is the smallest deviation, as a share of the curve's size, that
// doubles can tell from rounding with some digits to spare.
const floatShare = 1e-11

// per says how many elements a unit of length takes at a frame.
type per func(f plane.Frame) float64

func arcsPer(eps float64) per {
	return func(f plane.Frame) float64 { return math.Cbrt(math.Abs(f.DK) / (arcConstant * eps)) }
}

func linesPer(eps float64) per {
	return func(f plane.Frame) float64 { return math.Sqrt(math.Abs(f.K) / (lineConstant * eps)) }
}

// step returns the arc length between two near samples: the chord of an arc of their
// mean curvature.
func step(a, b plane.Frame) float64 {
	chord := a.P.Dist(b.P)
	x := chord * (a.K + b.K) / 2
	return chord * (1 + x*x/24)
}

// partsOf returns all pieces of a curve as parts.
func partsOf(pieces []plane.Piece) []part {
	parts := make([]part, len(pieces))
	for i, p := range pieces {
		parts[i] = part{Piece: p, piece: i}
	}
	return parts
}

// turned returns the part one turn on.
func (p part) turned() part {
	p.From, p.To, p.shift = p.From+turnDegrees, p.To+turnDegrees, p.shift+turnDegrees
	return p
}

// frame evaluates the curve at t of the part.
func (p part) frame(c Curve, t float64) plane.Frame { return c.At(p.piece, t-p.shift) }

// sampleEvenly returns samples of one part, equally spread over its parameter, enough for each element that
// density foresees at its densest place to have the wanted number.
func sampleEvenly(c Curve, p part, density per, wanted float64) ([]sample, error) {
	densest, length := 0.0, 0.0
	var before plane.Frame
	for j := 0; j < surveyed; j++ {
		f := p.frame(c, at(p.Piece, j, surveyed))
		densest = math.Max(densest, density(f))
		if j > 0 {
			length += step(before, f)
		}
		before = f
	}
	if !(length*densest >= 0) || math.IsInf(length*densest, 0) {
		return nil, irregular(p)
	}
	n := int(math.Min(math.Max(wanted*length*densest, minSamples), maxSamples))
	ss := make([]sample, n)
	for j := range ss {
		t := at(p.Piece, j, n)
		ss[j] = sample{Frame: p.frame(c, t), t: t}
	}
	return ss, nil
}

func irregular(p part) error {
	return fmt.Errorf("the curve is not regular between cam angles %g and %g (curvature or its rate is not finite)", p.From, p.To)
}

// at returns the j-th of n equally spread parameters of a piece, its ends exact.
func at(p plane.Piece, j, n int) float64 {
	if j == n-1 {
		return p.To
	}
	return p.From + (p.To-p.From)*float64(j)/float64(n-1)
}

// newRun samples parts evenly.
func newRun(c Curve, parts []part, density per, wanted float64) (*run, error) {
	r := &run{curve: c, parts: parts}
	s, steepest := 0.0, 0.0
	for i, p := range parts {
		ss, err := sampleEvenly(c, p, density, wanted)
		if err != nil {
			return nil, err
		}
		for j := range ss {
			if j > 0 {
				s += step(ss[j-1].Frame, ss[j].Frame)
			}
			ss[j].s = s
			steepest = math.Max(steepest, math.Abs(ss[j].K))
		}
		if n := len(r.samples); n > 0 && (p.Straight || r.parts[i-1].Straight) {
			r.ends = append(r.ends, n)
		} else if n > 0 && (p.piece == 0 || jumps(r.samples[n-1].Frame, ss[0].Frame, steepest) || breaks(r.samples[n-1].Frame, ss[0].Frame)) {
			r.pins = append(r.pins, n)
		}
		r.samples = append(r.samples, ss...)
	}
	return r, nil
}

// jumps reports whether the curvature steps between frames at the same place of a curve whose
// largest curvature is given.
func jumps(a, b plane.Frame, steepest float64) bool {
	return math.Abs(a.K-b.K) > jumpShare*steepest
}

// breaks reports whether the tangent does.
func breaks(a, b plane.Frame) bool {
	return !(math.Abs(a.T.Cross(b.T)) <= kinkAngle && a.T.Dot(b.T) > 0)
}

// frame returns the curve at t inside the run.
func (r *run) frame(t float64) plane.Frame {
	i := sort.Search(len(r.parts)-1, func(i int) bool { return t < r.parts[i].To })
	return r.parts[i].frame(r.curve, t)
}

// after returns the index of the first sample with a parameter above t.
func (r *run) after(t float64) int {
	return sort.Search(len(r.samples), func(i int) bool { return r.samples[i].t > t })
}

// tAt returns the parameter at arc length s, linear between samples.
func (r *run) tAt(s float64) float64 {
	i := sort.Search(len(r.samples), func(i int) bool { return r.samples[i].s >= s })
	if i == 0 {
		return r.samples[0].t
	}
	if i == len(r.samples) {
		return r.samples[i-1].t
	}
	a, b := r.samples[i-1], r.samples[i]
	if b.s == a.s {
		return b.t
	}
	return a.t + (b.t-a.t)*(s-a.s)/(b.s-a.s)
}
