package follower

// TranslatingRoller is a roller whose center moves along a line.
type TranslatingRoller struct {
	Line
	RollerRadius float64 // length, above 0
}

// NewTranslatingRoller returns the follower that rests on the base circle at lift 0:
// its center at x = sqrt((Rb+r)² - offset²), y = offset. ok is false when the offset is
// not smaller than the prime radius.
func NewTranslatingRoller(baseRadius, rollerRadius, offset float64, clockwise bool) (f TranslatingRoller, ok bool) {
	prime := baseRadius + rollerRadius
	return TranslatingRoller{newLine(prime, offset, clockwise), rollerRadius}, offsetWithin(prime, offset) == nil
}

// Radius returns the roller's radius, length.
func (f TranslatingRoller) Radius() float64 { return f.RollerRadius }

// Contact returns 0: a roller turns, and is touched everywhere.
func (f TranslatingRoller) Contact(lift, slope float64) float64 { return 0 }
