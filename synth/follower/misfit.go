package follower

import (
	"fmt"
	"math"
)

// Misfit says why a follower's geometry cannot exist: the value of one key of the spec
// and the open range it would have to lie in. It is the error of every constructor.
type Misfit struct {
	Key      string  // as in the spec, e.g. "arm_length"
	Value    float64 // in the spec's units
	From, To float64 // what would do: From < value < To
	Why      string  // what must hold, for a message
}

// Error reads "arm_length 30: must be above 50 and below 150, so that ...".
func (m *Misfit) Error() string {
	if math.IsInf(m.To, 1) {
		return fmt.Sprintf("%s %g: must be above %g, so that %s", m.Key, m.Value, m.From, m.Why)
	}
	return fmt.Sprintf("%s %g: must be above %g and below %g, so that %s", m.Key, m.Value, m.From, m.To, m.Why)
}

// within returns nil when m.From < m.Value < m.To; not a number is never within.
func (m Misfit) within() error {
	if m.From < m.Value && m.Value < m.To {
		return nil
	}
	return &m
}
