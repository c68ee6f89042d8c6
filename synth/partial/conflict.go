package partial

import "slices"

// Conflict returns a set of facts that no motion can meet, from which no fact can be
// dropped without becoming possible; nil when the facts, with the implied floor,
// can be met. The floor itself, ID Floor, may be one of the set. Of several such
// sets it returns the one of the facts named last in the list.
//
// A deletion filter: each fact in turn is left out, for good when the rest is still
// impossible (J. W. Chinneck and E. W. Dravnieks, Locating minimal infeasible constraint
// sets in linear programs, ORSA J. Computing 3 (1991) 157-168, cited from memory).
func Conflict(facts []Fact) []Fact {
	rest := append([]Fact{floor()}, facts...)
	if possible(rest) {
		return nil
	}
	for i := 0; i < len(rest); {
		less := slices.Delete(slices.Clone(rest), i, i+1)
		if possible(less) {
			i++
		} else {
			rest = less
		}
	}
	return rest
}

func possible(facts []Fact) bool {
	_, ok := newTimeline(facts)
	return ok
}
