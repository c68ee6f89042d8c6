// Package tolerance adds up what keeps a cut cam from the true contour: the error
// budget. Its rooms fit, certify and follow hold the chain of lines and arcs.
package tolerance

import (
	"fmt"
	"math"
)

// Kind says how a share combines with the others.
type Kind string

const (
	Fixed    Kind = "fixed"    // the same on every part: shares add
	Variable Kind = "variable" // scatters from part to part: shares combine by root sum of squares
)

// Share is one source of error, as a half width normal to the contour, length.
type Share struct {
	Source    string
	HalfWidth float64
	Kind      Kind
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
	Shares                       []Share
	WorstCase, RSS, FixedPlusRSS float64
	Limit                        float64 // half the profile zone
	Rule                         Rule
}

// Sum adds the shares up against half the profile zone.
func Sum(shares []Share, profile float64, rule Rule) Budget {
	b := Budget{Shares: shares, Limit: profile / 2, Rule: rule}
	fixed, squares, all := 0.0, 0.0, 0.0
	for _, s := range shares {
		b.WorstCase += s.HalfWidth
		all += s.HalfWidth * s.HalfWidth
		if s.Kind == Fixed {
			fixed += s.HalfWidth
		} else {
			squares += s.HalfWidth * s.HalfWidth
		}
	}
	b.RSS = math.Sqrt(all)
	b.FixedPlusRSS = fixed + math.Sqrt(squares)
	return b
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
		return Sum(append([]Share{{"chord", chord, Fixed}}, others...), profile, rule).Pass()
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
