// Package partial completes a motion of which only some facts are known: lifts,
// velocities and accelerations at cam angles, stretches that are held or carried at
// a velocity, and windows that the lift must keep to. The result meets every
// fact, keeps every window everywhere, is continuous in acceleration with bounded
// jerk, and has the least peak acceleration (or jerk) to within a proven gap.
//
// The order of work:
//
//	facts      what is known
//	timeline   the turn cut at every angle a fact names; contradictions (conflict.go)
//	primal     a quintic in Hermite form between the knots of a mesh, whose
//	           Bernstein coefficients keep windows and peaks: a program for package qp
//	bound      no motion at all, of any form, has a smaller peak
//	zones      what was found, in few zones, proved once more
package partial

import "math"

// turn is a full turn of the cam in degrees.
const turn = 360.0

// Fact is one thing known about the motion: at a cam angle (From equal to To) any of
// Lift, Velocity and Acceleration; over a span either the Lift that is held, or the
// Velocity it is carried at, or a window, Above and Below. Angles in degrees, To
// from From to From+360; velocities in length per degree, accelerations in length
// per degree².
type Fact struct {
	From, To                     float64
	Lift, Velocity, Acceleration *float64
	Above, Below                 *float64
	ID                           int // the caller's own number, for Conflict
}

// Floor is the ID of the fact every partial specification implies: the lift is
// never below 0.
const Floor = -1

// floor returns the implied fact.
func floor() Fact { return Fact{From: 0, To: turn, Above: new(float64), ID: Floor} }

func (f Fact) point() bool { return f.To == f.From }

func (f Fact) window() bool { return f.Above != nil || f.Below != nil }

// everywhere reports whether the fact covers the whole turn.
func (f Fact) everywhere() bool { return f.To-f.From >= turn-sameAngle }

// sameAngle is the distance in degrees below which two cam angles are one.
const sameAngle = 1e-9

// past returns how far deg lies past from, 0 <= past < 360, in degrees.
func past(from, deg float64) float64 {
	d := math.Mod(deg-from, turn)
	if d < 0 {
		d += turn
	}
	if d >= turn-sameAngle {
		d = 0
	}
	return d
}

// covers reports whether a cam angle lies in the fact's closed span.
func (f Fact) covers(deg float64) bool {
	d := past(f.From, deg)
	return d <= f.To-f.From+sameAngle
}
