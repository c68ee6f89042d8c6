package evidence

import (
	"fmt"
	"math"

	"lobewright/synth/motion"
)

// Factors of a law in the order velocity, acceleration, jerk, torque; "" where the
// source has none or it is infinite.
type factors struct {
	law       string
	published [4]string
}

var factorNames = [4]string{"peak velocity factor", "peak acceleration factor", "peak jerk factor", "peak inertia-torque factor"}

// peaks are the peak factors of the laws as two handbooks tabulate them.
func peaks(laws Laws) ([]Row, error) {
	var rows []Row
	for _, t := range []struct {
		source string
		laws   []factors
	}{
		{"VDI 2143 part 1 (1980)", []factors{
			{"simple-harmonic", [4]string{"1.57", "4.93", "", "3.88"}},
			{"cycloidal", [4]string{"2.00", "6.28", "39.5", "8.16"}},
			{"polynomial-3-4-5", [4]string{"1.88", "5.77", "60", "6.69"}},
			{"modified-trapezoidal", [4]string{"2.00", "4.89", "61.4", "8.09"}},
			{"modified-sine", [4]string{"1.76", "5.53", "69.5", "5.46"}},
		}},
		{"R. L. Norton, Cam Design and Manufacturing Handbook, 2nd ed. (2009)", []factors{
			{"parabolic", [4]string{"2.000", "4.000"}},
			{"modified-trapezoidal", [4]string{"2.000", "4.888", "61.43"}},
			{"simple-harmonic", [4]string{"1.571", "4.935"}},
			{"modified-sine", [4]string{"1.760", "5.528", "69.47"}},
			{"cycloidal", [4]string{"2.000", "6.283", "39.48"}},
			{"polynomial-3-4-5", [4]string{"1.875", "5.774", "60"}},
			{"polynomial-4-5-6-7", [4]string{"2.188", "7.513", "52.5"}},
		}},
		{"H. Makino; C. N. Neklutin (1969)", []factors{
			{"modified-constant-velocity", [4]string{"1.28", "8.01", "201.4"}},
		}},
	} {
		for _, f := range t.laws {
			law, err := laws(f.law)
			if err != nil {
				return nil, err
			}
			p := law.Peaks()
			for i, ours := range []float64{p.Velocity, p.Acceleration, p.SmoothJerk, p.Torque} {
				if f.published[i] != "" {
					rows = append(rows, Row{t.source, FromMemory, f.law + ", " + factorNames[i], f.published[i], ours})
				}
			}
		}
	}
	return rows, nil
}

// printed are figures of H. A. Rothbart (ed.), Cam Design Handbook, 2004.
func printed(laws Laws) ([]Row, error) {
	const source = "H. A. Rothbart (ed.), Cam Design Handbook (2004)"
	var rows []Row
	cycloid, err := laws("cycloidal")
	if err != nil {
		return nil, err
	}
	// p. 45: acceleration 2 pi h/beta² sin 2 pi u at a quarter of the stroke, jerk 4 pi².
	_, v, _, _ := cycloid.At(0.5)
	_, _, a, _ := cycloid.At(0.25)
	rows = append(rows,
		Row{source, Seen, "p. 45, cycloidal: velocity 2 h/B at mid-stroke", "2", v},
		Row{source, Seen, "p. 45, cycloidal: acceleration 2 pi h/B² at a quarter", "6.283185", a})
	// p. 227, fig. 8.7: rise 1 1/4 in, 5/16 in 40° up and 15/16 in 120° down by constant
	// acceleration at 1200 rpm (speed and law inferred): +20 200 and -6750 in/s².
	parabola, err := laws("parabolic")
	if err != nil {
		return nil, err
	}
	parabola, err = parabola.Skewed(40.0 / 160)
	if err != nil {
		return nil, err
	}
	const lift, over = 1.25, 160 * math.Pi / 180
	w := 1200 * math.Pi / 30
	for _, part := range []struct {
		what, published string
		u               float64
	}{{"p. 227: acceleration of the first part, 10³ in/s²", "20.2", 0.1}, {"p. 227: acceleration of the second part, 10³ in/s²", "-6.750", 0.5}} {
		_, _, a, _ := parabola.At(part.u)
		rows = append(rows, Row{source, Seen, part.what, part.published, a * lift * w * w / (over * over) / 1000})
	}
	return rows, nil
}

// skewed are laws whose inflection is not in their middle, and laws that are joined at
// speed.
func skewed(laws Laws) ([]Row, error) {
	const source = "Skewed laws, p. 71 (3.11-3.13) of Rothbart 2004: a (1+p)/2p, p = b1/b2"
	var rows []Row
	for _, c := range []struct {
		law, published string
		parts          float64
	}{
		{"parabolic", "6.00000000000", 3},
		{"modified-trapezoidal", "7.33218564422", 3},
		{"modified-sine", "8.29193560582", 3},
		{"cycloidal", "9.42477796077", 3},
		{"polynomial-3-4-5", "8.66025403784", 3},
		{"parabolic", "8.00000000000", 4},
		{"modified-trapezoidal", "9.77624752563", 4},
		{"modified-sine", "11.0559141411", 4},
	} {
		law, err := laws(c.law)
		if err != nil {
			return nil, err
		}
		skew, err := law.Skewed(1 / c.parts)
		if err != nil {
			return nil, err
		}
		rows = append(rows, Row{source, Derived, fmt.Sprintf("%s, inflection 1/%g: peak acceleration factor", c.law, c.parts), c.published, skew.Peaks().Acceleration})
	}
	return rows, nil
}

// joined are laws between neighbors at speed.
func joined(Laws) ([]Row, error) {
	const source = "H. A. Rothbart (ed.), Cam Design Handbook (2004), p. 85"
	c1, err := motion.FromRest("cycloidal")
	if err != nil {
		return nil, err
	}
	h2, err := motion.ToRest("simple-harmonic")
	if err != nil {
		return nil, err
	}
	quartic, err := motion.Polynomial(0, 2)
	if err != nil {
		return nil, err
	}
	_, up := c1.EndSpeeds()
	down, _ := h2.EndSpeeds()
	s, _, _, _ := quartic.At(0.25)
	return []Row{
		{source, Seen, "half cycloid (C-1): velocity at its end, L/B", "2", up},
		{source, Derived, "C-1 into H-2 over equal angles, 2 h1/b1 = pi h2/2 b2: share of the first in the lift", "0.4399008464884", down / (up + down)},
		{"Quintic Hermite interpolation", Derived, "dwell to velocity 2 L/B, 2u³ - u⁴: lift at a quarter", "0.02734375", s},
		{"Quintic Hermite interpolation", Derived, "dwell to velocity 2 L/B: peak acceleration factor", "3.0000000000", quartic.Peaks().Acceleration},
	}, nil
}

// tables are tabulated laws at n/120 of the stroke, in the normalization of Rothbart
// 2004, appendix B, p. 551, worked out with 12 digits.
func tables(laws Laws) ([]Row, error) {
	const source = "Tabulated laws at n/120 (normalization of Rothbart 2004, p. 551)"
	var rows []Row
	for _, t := range []struct {
		law  string
		n    int
		s, v string
	}{
		{"simple-harmonic", 10, ".01703708685547", ".4065520053516"},
		{"simple-harmonic", 50, ".3705904774487", "1.517272739891"},
		{"cycloidal", 10, ".003755861787386", ".1339745962156"},
		{"cycloidal", 50, ".3370891951207", "1.866025403784"},
		{"modified-trapezoidal", 10, ".005608076087297", ".1944922648242"},
		{"modified-trapezoidal", 50, ".3389414094206", "1.805507735176"},
		{"modified-sine", 10, ".006342147900339", ".2199504232442"},
		{"modified-sine", 50, ".3555861751981", "1.680015584456"},
	} {
		law, err := laws(t.law)
		if err != nil {
			return nil, err
		}
		s, v, _, _ := law.At(float64(t.n) / 120)
		rows = append(rows,
			Row{source, Derived, fmt.Sprintf("%s, n = %d, lift", t.law, t.n), t.s, s},
			Row{source, Derived, fmt.Sprintf("%s, n = %d, velocity", t.law, t.n), t.v, v})
	}
	return rows, nil
}
