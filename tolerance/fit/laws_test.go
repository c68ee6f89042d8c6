package fit

import "math"

// Laws as published in any text on cams (H. A. Rothbart, Cam Design Handbook, McGraw-Hill
// 2004), with three derivatives.

func harmonic(u float64) [4]float64 {
	s, c := math.Sincos(math.Pi * u)
	p := math.Pi
	return [4]float64{(1 - c) / 2, p / 2 * s, p * p / 2 * c, -p * p * p / 2 * s}
}

func poly4567(u float64) [4]float64 {
	return [4]float64{u * u * u * u * (35 + u*(-84+u*(70-20*u))), u * u * u * (140 + u*(-420+u*(420-140*u))),
		u * u * (420 + u*(-1680+u*(2100-840*u))), u * (840 + u*(-5040+u*(8400-4200*u)))}
}

// sineEnd and sineMiddle are the modified sine law up to 1/8 and to 7/8; sineTail is the rest.
func sineEnd(u float64) [4]float64    { return sinePart(u, 0, 4*math.Pi, 0, 0.25) }
func sineMiddle(u float64) [4]float64 { return sinePart(u, 2, 4*math.Pi/3, math.Pi/3, 2.25) }
func sineTail(u float64) [4]float64   { return sinePart(u, 4, 4*math.Pi, 0, 0.25) }

func sinePart(u, c, w, phase, a float64) [4]float64 {
	b := 1 / (4 + math.Pi)
	sin, cos := math.Sincos(w*u + phase)
	return [4]float64{b * (c + math.Pi*u - a*sin), b * (math.Pi - a*w*cos), b * a * w * w * sin, b * a * w * w * w * cos}
}

// motions are the laws as parts of one stroke.
func motions() map[string][]zone {
	return map[string][]zone{
		"cyc":  {{lo: 0, hi: 1, law: cycloidal}},
		"345":  {{lo: 0, hi: 1, law: poly345}},
		"4567": {{lo: 0, hi: 1, law: poly4567}},
		"sine": {{lo: 0, hi: 0.125, law: sineEnd}, {lo: 0.125, hi: 0.875, law: sineMiddle}, {lo: 0.875, hi: 1, law: sineTail}},
		"ca":   {{lo: 0, hi: 0.5, law: half1}, {lo: 0.5, hi: 1, law: half2}},
		"harm": {{lo: 0, hi: 1, law: harmonic}},
	}
}

func motionNames() []string { return []string{"cyc", "345", "4567", "sine", "ca", "harm"} }

// stroke of a law over degrees from one lift to another.
func strokeZones(name string, over, from, to float64) []zone {
	var zs []zone
	for _, z := range motions()[name] {
		zs = append(zs, zone{over * (z.hi - z.lo), from, to, z.lo, z.hi, z.law})
	}
	return zs
}
