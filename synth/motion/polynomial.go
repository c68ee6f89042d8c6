package motion

// The polynomials between dwells are known by their powers of u, and in that
// form they lose digits near u = 1, where terms as large as 84 cancel to 1.
// About the middle, x = 2u - 1, they are 1/2 plus an odd polynomial whose
// coefficients are at most 35/32, and both ends are met to the last place.

// polynomial345: S = 10u³ - 15u⁴ + 6u⁵, the least degree with zero velocity and
// acceleration at both ends.
//
//	S = 1/2 + (15x - 10x³ + 3x⁵)/16
func polynomial345() []Zone {
	return []Zone{{From: 0, To: 1, Origin: 0.5, Span: 0.5, Poly: []float64{
		0.5, 15.0 / 16, 0, -10.0 / 16, 0, 3.0 / 16,
	}}}
}

// polynomial4567: S = 35u⁴ - 84u⁵ + 70u⁶ - 20u⁷, zero jerk at both ends as well.
//
//	S = 1/2 + (35x - 35x³ + 21x⁵ - 5x⁷)/32
func polynomial4567() []Zone {
	return []Zone{{From: 0, To: 1, Origin: 0.5, Span: 0.5, Poly: []float64{
		0.5, 35.0 / 32, 0, -35.0 / 32, 0, 21.0 / 32, 0, -5.0 / 32,
	}}}
}
