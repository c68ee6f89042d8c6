package tolerance

import "math"

// Wave says how an error lies around the cam, which decides what the follower's acceleration makes of it.
type Wave string

const (
	Blocks   Wave = "blocks"   // changes sign from block to block of the path
	Turn     Wave = "turn"     // one wave a turn, as an axis out of place or an eccentric clamping makes it
	Parallel Wave = "parallel" // the same all around: a contour too large or too small
	Shifted  Wave = "shifted"  // the right contour, turned
)

// Answer is how the follower of a cam answers small errors of its contour, at one cam angle:
// the lift that a unit of error normal to the contour makes (1/cos of the pressure angle for a
// translating roller, 1 for a flat face, less by the arm for swinging followers), its first and second derivative by
// the cam angle in radians, and the design's velocity and jerk per rad and rad³.
//
// With a normal error n(θ) the lift is off by g·n to first order in n. So an error that is the same all around
// makes an acceleration error of g”·n; a wave n·cos(θ+β) one of n·√((g”-g)² + 4g'²) at most over β; one that
// changes sign every Δ radians is taken for a wave of that half length, g·n·(π/Δ)². A turn
// of the contour by φ makes v·φ of lift and j·φ of acceleration.
type Answer struct {
	G, DG, DDG float64
	V, J       float64
}

// Effect is what an error makes of the follower's motion: the largest absolute errors of lift and,
// per rad², acceleration.
type Effect struct{ Lift, Acceleration float64 }

// Worst returns the effect of a share on a follower with these answers around the turn. blocks is the number of the path's
// blocks a turn; of a share that is Shifted, the angle in radians is taken, of others the error normal to what the
// follower runs on, a length.
func (s Share) Worst(answers []Answer, blocks int) Effect {
	var e Effect
	waves := float64(blocks) / 2
	for _, a := range answers {
		lift, acceleration := a.G*s.Normal, 0.0
		switch s.Wave {
		case Blocks:
			acceleration = a.G * s.Normal * waves * waves
		case Turn:
			acceleration = s.Normal * math.Hypot(a.DDG-a.G, 2*a.DG)
		case Parallel:
			acceleration = a.DDG * s.Normal
		case Shifted:
			lift, acceleration = a.V*s.Angle, a.J*s.Angle
		}
		e.Lift = math.Max(e.Lift, math.Abs(lift))
		e.Acceleration = math.Max(e.Acceleration, math.Abs(acceleration))
	}
	return e
}

// Totals are the three sums of one kind of figure.
type Totals struct{ WorstCase, RSS, FixedPlusRSS float64 }

// Add sums values up, each fixed or variable as its share is.
func Add(shares []Share, values []float64) Totals {
	var t Totals
	fixed, squares, all := 0.0, 0.0, 0.0
	for i, v := range values {
		t.WorstCase += v
		all += v * v
		if shares[i].Kind == Fixed {
			fixed += v
		} else {
			squares += v * v
		}
	}
	t.RSS, t.FixedPlusRSS = math.Sqrt(all), fixed+math.Sqrt(squares)
	return t
}
