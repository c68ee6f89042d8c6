package follower

// TranslatingKnife is an edge that moves along a line: a roller of radius 0. Its base
// curve is the contour.
type TranslatingKnife struct{ Line }

// NewTranslatingKnife returns the follower whose edge rests on the base circle at lift
// 0. Fails, with a *Misfit, when the offset is not smaller than the base radius.
func NewTranslatingKnife(baseRadius, offset float64, clockwise bool) (TranslatingKnife, error) {
	return TranslatingKnife{newLine(baseRadius, offset, clockwise)}, offsetWithin(baseRadius, offset)
}

// Radius returns 0.
func (f TranslatingKnife) Radius() float64 { return 0 }

// Contact returns 0: an edge is touched where it is.
func (f TranslatingKnife) Contact(lift, slope float64) float64 { return 0 }
