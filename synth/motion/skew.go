package motion

import (
	"fmt"
	"strings"
)

// SymmetricNames returns the names of Names whose laws Skewed takes.
func SymmetricNames() []string {
	var names []string
	for _, name := range Names() {
		if l, err := Named(name, DefaultConstantShare); err == nil && l.symmetric {
			names = append(names, name)
		}
	}
	return names
}

// Skewed moves the inflection of a law, where its acceleration changes sign, from the
// middle to another share of the angle, 0 < inflection < 1. It takes the symmetric laws,
// S(u) = 1 - S(1-u), but constant-velocity, which has no inflection. With p for the
// share (H. A. Rothbart ed., Cam Design Handbook, McGraw-Hill 2004, p. 37 for constant
// acceleration and p. 71 for the modified trapezoid):
//
//	u <= p:  2p S(u/2p)                          A times 1/2p,     J times 1/4p²
//	u >= p:  1 - 2(1-p) S((1-u)/2(1-p))          A times 1/2(1-p), J times 1/4(1-p)²
//
// Lift at the inflection is p and peak velocity stays. A law with constant velocity in
// its middle has a stretch without acceleration, which the inflection divides as it
// divides the angle.
func (l Law) Skewed(inflection float64) (Law, error) {
	p := inflection
	switch {
	case !l.symmetric:
		return Law{}, fmt.Errorf("law %s takes no inflection; the laws that take one are %s, and the trigonometric family", l.name, strings.Join(SymmetricNames(), ", "))
	case !(p > 0 && p < 1):
		return Law{}, fmt.Errorf("law %s: inflection is %g; it must be above 0 and below 1", l.name, p)
	case p == middle:
		return l, nil
	}
	skewed := Law{name: l.name}
	for _, z := range l.zones {
		if z.From < middle {
			first := z
			first.To = min(z.To, middle)
			skewed.zones = append(skewed.zones, first.moved(0, 2*p).scaled(2*p, 0))
		}
		if z.To > middle {
			second, q := z, 2*(1-p)
			second.From = max(z.From, middle)
			skewed.zones = append(skewed.zones, second.moved(1-q, q).scaled(q, 1-q))
		}
	}
	skewed.zones[0].From, skewed.zones[len(skewed.zones)-1].To = 0, 1
	for i := 1; i < len(skewed.zones); i++ {
		skewed.zones[i].From = skewed.zones[i-1].To
	}
	return skewed, nil
}

// middle is the inflection of a symmetric law.
const middle = 0.5
