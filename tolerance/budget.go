// Package tolerance adds up what keeps a cut cam from the true contour: the error
// budget. Its rooms fit, certify and follow hold the chain of lines and arcs.
package tolerance

import (
	"fmt"
)

// Kind says how a share combines with the others.
type Kind string

const (
	Fixed    Kind = "fixed"    // the same on every part: shares add
	Variable Kind = "variable" // scatters from part to part: shares combine by root sum of squares
)

// Share is one source of error.
type Share struct {
	Source    string
	HalfWidth float64 // on the contour, normal to it, length; 0 for an error that is not the contour's, as the roller's
	Kind      Kind
	Wave      Wave
	Normal    float64 // normal to what the follower runs on, length: HalfWidth for errors of the contour
	Angle     float64 // of a share that is Shifted: the angle, radians
}

// OnContour is a share whose error is the contour's.
func OnContour(source string, halfWidth float64, kind Kind, wave Wave) Share {
	return Share{Source: source, HalfWidth: halfWidth, Kind: kind, Wave: wave, Normal: halfWidth}
}

// Rule says which of the three sums is held against the profile zone.
type Rule string

const (
	FixedPlusRSS Rule = "fixed+rss"
	Worst        Rule = "worst"
	RSS          Rule = "rss"
)

// Budget is the sum in its three forms, length. Fixed errors add, variable ones
// combine statistically; all three sums are shown (H. A. Rothbart, ed., Cam Design
// Handbook, McGraw-Hill 2004, p. 293).
type Budget struct {
	Shares []Share
	Totals
	Limit float64 // half the profile zone
	Rule  Rule
}

// Sum adds the shares up against half the profile zone.
func Sum(shares []Share, profile float64, rule Rule) Budget {
	widths := make([]float64, len(shares))
	for i, s := range shares {
		widths[i] = s.HalfWidth
	}
	return Budget{Shares: shares, Totals: Add(shares, widths), Limit: profile / 2, Rule: rule}
}

// Value returns the sum that the rule holds against the limit.
func (b Budget) Value() float64 {
	switch b.Rule {
	case Worst:
		return b.WorstCase
	case RSS:
		return b.RSS
	}
	return b.FixedPlusRSS
}

// Pass reports whether the sum is within half the profile zone.
func (b Budget) Pass() bool { return b.Value() <= b.Limit }

// largestChordShare is the most of the profile zone that a chord tolerance left
// out of the spec takes.
const largestChordShare = 0.1

// Chord returns the chord tolerance for a spec that gives none: what the budget
// leaves of half the profile zone when the other shares are in, and at most a tenth of
// the zone. It fails when nothing is left.
func Chord(others []Share, profile float64, rule Rule) (float64, error) {
	top := largestChordShare * profile
	fits := func(chord float64) bool {
		return Sum(append([]Share{OnContour("chord", chord, Fixed, Blocks)}, others...), profile, rule).Pass()
	}
	if fits(top) {
		return top, nil
	}
	if !fits(0) {
		return 0, fmt.Errorf("the other errors alone take %.4g of half the profile zone %.4g; nothing is left for the path",
			Sum(others, profile, rule).Value(), profile/2)
	}
	lo, hi := 0.0, top
	for range 60 { // bisection to rounding: every rule grows with the chord
		if mid := (lo + hi) / 2; fits(mid) {
			lo = mid
		} else {
			hi = mid
		}
	}
	return lo, nil
}
