package partial

import (
	"cmp"
	"errors"
	"fmt"
	"math"

	"lobewright/synth/motion"
	"lobewright/synth/qp"
)

// Problem is a partial specification.
type Problem struct {
	Facts     []Fact  // at least one fixes a lift; without conflict (see Conflict)
	Jerk      bool    // the peak jerk is minimized, else the peak acceleration
	JerkRatio float64 // at least 1: the largest peak jerk as a multiple of the least possible, when the acceleration is minimized
}

// Result is a completed motion. Peaks are per degree² and degree³ of cam angle.
type Result struct {
	Zones []motion.Zone // one turn, each zone of Event -1

	Acceleration, Jerk           float64 // the peaks reached
	LeastAcceleration, LeastJerk float64 // proven: no motion that meets the facts has smaller ones (the acceleration: with the jerk held as here)
	JerkLimit                    float64 // what the jerk was held to; infinite when it was minimized
}

// Share returns by how much of the bound the minimized peak is above it.
func (r Result) Share(jerk bool) float64 {
	reached, least := r.Acceleration, r.LeastAcceleration
	if jerk {
		reached, least = r.Jerk, r.LeastJerk
	}
	if reached == 0 {
		return 0
	}
	return reached/least - 1
}

// Errors of Solve.
var (
	ErrNoLift   = errors.New("no fact fixes a lift")
	ErrConflict = errors.New("the facts contradict each other")
	ErrTooHard  = errors.New("the facts lie too close together for the arithmetic")
)

// Stretches of a mesh in all, the least in a free cell, and what that least may sum to.
const (
	meshCount, meshLeast, meshMost    = 96, 16, 260
	boundCount, boundLeast, boundMost = 140, 20, 240
)

// Solve completes the motion.
func Solve(p Problem) (Result, error) {
	lifts := false
	for _, f := range p.Facts {
		lifts = lifts || f.Lift != nil
	}
	if !lifts {
		return Result{}, ErrNoLift
	}
	line, ok := newTimeline(append([]Fact{floor()}, p.Facts...))
	if !ok {
		return Result{}, ErrConflict
	}
	if level, ok := line.constant(); ok {
		return Result{Zones: []motion.Zone{{From: line.nodes[0].at, To: line.nodes[0].at + turn, Origin: line.nodes[0].at, Span: turn, Poly: []float64{level}, Dwell: true, Event: -1}}}, nil
	}
	s := &search{p: p, line: line}
	free := 0
	for _, c := range line.cells {
		if !c.rigid {
			free++
		}
	}
	s.m = newMesh(line, meshCount, min(max(meshMost/free, 4), meshLeast))
	s.coarse = newMesh(line, boundCount, min(max(boundMost/free, 4), boundLeast))
	if err := s.run(); err != nil {
		return Result{}, err
	}
	return s.result()
}

// constant reports whether a motion that never moves meets the facts.
func (t *timeline) constant() (level float64, ok bool) {
	var lift known
	for _, n := range t.nodes {
		if n.f.is && !lift.set(n.f.x, same*t.size) || n.v.is && n.v.x != 0 || n.a.is && n.a.x != 0 {
			return 0, false
		}
	}
	for _, n := range t.nodes {
		if lift.x < n.lo || lift.x > n.hi {
			return 0, false
		}
	}
	for _, c := range t.cells {
		if lift.x < c.lo || lift.x > c.hi {
			return 0, false
		}
	}
	return lift.x, true
}

// search is a running solution.
type search struct {
	p       Problem
	line    *timeline
	m       *mesh // of the motion
	coarse  *mesh // of the bound
	primal  *primal
	unitA   float64 // sizes of the peaks, for scale
	unitJ   float64
	found   Result
	reached struct{ a, j float64 } // the least peaks on the mesh
	limitA  float64                // what the programs hold
	limitJ  float64
	peakA   float64 // of the answer
	x       []float64
}

// slack is the share by which the peaks may exceed the least found, so that the
// smoothest of the best motions can be chosen among more than one.
const slack = 1e-3

// run solves, in this order: the smoothest motion, for the sizes; the least peak jerk
// and its bound; the least peak acceleration under the jerk's limit, and its bound; the
// smoothest of the motions whose peaks are least.
func (s *search) run() error {
	s.primal = newPrimal(s.m)
	free := math.Inf(1)
	x, err := s.solve(limits{free, free, roughness}, 1)
	if err != nil {
		return err
	}
	s.unitA, s.unitJ = s.primal.peaks(x)
	bound := s.startBound(leastPeakJerk, 0, s.unitJ)
	x, err = s.solve(limits{free, free, leastPeakJerk}, s.unitJ)
	least, wrong := bound()
	if err = cmp.Or(err, wrong); err != nil {
		return err
	}
	_, s.reached.j = s.primal.peaks(x)
	s.found.LeastJerk = least
	s.limitA, s.limitJ, s.found.JerkLimit = free, s.reached.j*(1+slack), free
	if !s.p.Jerk {
		if x, err = s.leastAcceleration(); err != nil {
			return err
		}
	}
	s.x = x // serves when its limits leave the smoothest no room for the arithmetic
	if smooth, err := s.solve(limits{s.limitA, s.limitJ, roughness}, 1); err == nil {
		s.x = smooth
	}
	s.peakA, _ = s.primal.peaks(s.x)
	return nil
}

// leastAcceleration holds the jerk to its ratio of the bound, so that it is within the
// ratio of the least possible, and bounds the acceleration with what the ratio of the
// least found would allow, so that the bound is true whatever the least possible is.
func (s *search) leastAcceleration() ([]float64, error) {
	s.found.JerkLimit = math.Max(s.p.JerkRatio*s.found.LeastJerk, s.limitJ*(1+slack))
	s.limitJ = s.found.JerkLimit / (1 + slack)
	bound := s.startBound(leastPeakA, math.Max(s.p.JerkRatio*s.reached.j, s.found.JerkLimit), s.unitA)
	x, err := s.solve(limits{math.Inf(1), s.limitJ, leastPeakA}, s.unitA)
	least, wrong := bound()
	if err = cmp.Or(err, wrong); err != nil {
		return nil, err
	}
	s.reached.a, _ = s.primal.peaks(x)
	s.limitA, s.found.LeastAcceleration = s.reached.a*(1+slack), least
	return x, nil
}

// startBound computes a bound beside the motion, which it does not depend on. The
// function returned waits for it.
func (s *search) startBound(least goal, jerk, unit float64) func() (float64, error) {
	var b float64
	var err error
	done := make(chan struct{})
	go func() {
		defer close(done)
		b, err = s.bound(least, jerk, unit)
	}()
	return func() (float64, error) {
		<-done
		return b, err
	}
}

func (s *search) solve(l limits, unit float64) ([]float64, error) {
	at, err := qp.Solve(s.primal.program(l, unit))
	if err != nil {
		return nil, ErrTooHard
	}
	return at.X, nil
}

func (s *search) bound(least goal, jerk, unit float64) (float64, error) {
	r := newRelaxed(s.coarse, least, jerk, unit)
	at, _ := qp.Solve(r.program) // the bound is true for any multipliers, and good for good ones
	if b := r.functional(at).peak(jerk); b > 0 {
		return b, nil
	}
	return 0, ErrTooHard
}

// peaks returns the largest acceleration and jerk, by their Bernstein coefficients.
func (p *primal) peaks(x []float64) (a, j float64) {
	for i, s := range p.m.stretches {
		if s.rigid {
			continue
		}
		for _, b := range p.acceleration(i) {
			a = math.Max(a, math.Abs(b.at(x)))
		}
		for _, b := range p.jerk(i) {
			j = math.Max(j, math.Abs(b.at(x)))
		}
	}
	return a, j
}

// result makes the zones, of few pieces when they pass the proof, else of all.
func (s *search) result() (Result, error) {
	r := s.found
	r.Zones = s.zones(true)
	if s.line.prove(r.Zones) != nil {
		r.Zones = s.zones(false)
		if err := s.line.prove(r.Zones); err != nil {
			return Result{}, fmt.Errorf("%w: %w", ErrTooHard, err)
		}
	}
	for _, z := range r.Zones {
		a, j := extremes(z)
		r.Acceleration, r.Jerk = math.Max(r.Acceleration, a), math.Max(r.Jerk, j)
	}
	return r, nil
}

// extremes returns the largest acceleration and jerk of a zone of degree 5 or less:
// at its ends, or where the next derivative is 0.
func extremes(z motion.Zone) (a, j float64) {
	var c [6]float64
	copy(c[:], z.Poly)
	h := math.Abs(z.Span)
	for _, u := range append(roots(6*c[3], 24*c[4], 60*c[5]), 0, 1) {
		if u >= 0 && u <= 1 {
			a = math.Max(a, math.Abs(2*c[2]+u*(6*c[3]+u*(12*c[4]+u*20*c[5])))/(h*h))
		}
	}
	for _, u := range append(roots(24*c[4], 120*c[5], 0), 0, 1) {
		if u >= 0 && u <= 1 {
			j = math.Max(j, math.Abs(6*c[3]+u*(24*c[4]+u*60*c[5]))/(h*h*h))
		}
	}
	return a, j
}
