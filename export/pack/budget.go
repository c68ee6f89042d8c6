package pack

import (
	"math"

	"lobewright/export/sheet"
	"lobewright/synth/gate"
	"lobewright/synth/plane"
	"lobewright/tolerance"
)

// allocate settles the chord tolerance and holds the budget against the profile zone.
func (j *job) allocate() {
	t := j.spec.Tolerance
	rule := tolerance.Rule(t.Combine)
	others := j.otherShares()
	j.chord = t.Chord
	if j.chord == 0 {
		chord, err := tolerance.Chord(others, t.Profile, rule)
		if err != nil || chord == 0 {
			chord = t.Profile / 10 // the budget gate says that this does not fit
		}
		j.chord = chord
	}
	j.budget = tolerance.Sum(append([]tolerance.Share{tolerance.OnContour("chord", j.chord, tolerance.Fixed, tolerance.Blocks)}, others...), t.Profile, rule)
	j.gates = append(j.gates, gate.Gate{
		ID: "budget", Value: j.budget.Value(), Limit: j.budget.Limit, Unit: j.spec.Units.Short(),
		CamAngle: math.NaN(), Polar: math.NaN(), Pass: j.budget.Pass(),
		Text: "sum of the errors (" + string(rule) + ") against half the profile zone; reduce chord, take a better machine or a wider zone",
	})
}

// otherShares are all errors but the chord's. The certified deviation already
// holds the rounding of what is printed; the grid share is the half count by which
// a control may round the points it interpolates.
func (j *job) otherShares() []tolerance.Share {
	shares := []tolerance.Share{tolerance.OnContour("grid", math.Pow10(-j.spec.Control.Decimals)/2, tolerance.Fixed, tolerance.Blocks)}
	if x := j.wallShift(); x > 0 {
		shares = append(shares, tolerance.OnContour("shift", x, tolerance.Fixed, tolerance.Parallel))
	}
	t := j.spec.Tolerance
	if x := j.spec.Control.PathTolerance; x > 0 {
		shares = append(shares, tolerance.OnContour("path mode", x, tolerance.Fixed, tolerance.Blocks))
	}
	if m := t.MachineTool; m != nil {
		shares = append(shares,
			tolerance.OnContour("resolution", m.Resolution, tolerance.Variable, tolerance.Blocks),
			tolerance.OnContour("positioning", m.Positioning, tolerance.Variable, tolerance.Turn),
			tolerance.OnContour("runout", m.Runout, tolerance.Variable, tolerance.Turn),
			tolerance.OnContour("tool", m.Tool, tolerance.Variable, tolerance.Parallel))
	}
	if t.Phase > 0 {
		angle := t.Phase * math.Pi / 180
		shares = append(shares, tolerance.Share{Source: "phase", HalfWidth: angle * j.steepestRadius(), Kind: tolerance.Variable, Wave: tolerance.Shifted, Angle: angle})
	}
	if t.Roller > 0 { // of the diameter; the cam is none the worse for it
		shares = append(shares, tolerance.Share{Source: "roller", Kind: tolerance.Variable, Wave: tolerance.Parallel, Normal: t.Roller / 2})
	}
	return shares
}

// overTurn calls do at about every half degree of the base curve, both sides of each junction.
func (j *job) overTurn(do func(zone int, from, to, t float64)) {
	for i, z := range j.cam.Pitch().Pieces() {
		n := int(math.Ceil(2 * (z.To - z.From)))
		for k := range n + 1 {
			do(i, z.From, z.To, z.From+(z.To-z.From)*float64(k)/float64(n))
		}
	}
}

// steepestRadius is by how much a point of the contour moves along its normal when the cam is turned by a radian, at
// most: the radius vector's part along the tangent; of a barrel the radius times the part along the turn.
func (j *job) steepestRadius() float64 {
	most := 0.0
	j.overTurn(func(zone int, _, _, t float64) {
		f := j.cam.Contour().At(zone, t)
		along := plane.Vector(f.P).Dot(f.T)
		if b, ok := j.cam.Barrel(); ok {
			along = b.OuterRadius * f.T.Y
		}
		most = math.Max(most, math.Abs(along))
	})
	return most
}

// answers are what the follower makes of small errors of the contour, around the turn.
func (j *job) answers() []tolerance.Answer {
	const (
		tiny = 1e-4 // of the prime radius: the error that is tried
		wide = 0.25 // degrees between values whose differences are taken
	)
	n, pitch := tiny*j.size(), j.cam.Pitch()
	gain := func(zone int, t float64) float64 {
		f := pitch.At(zone, t)
		up, down := f, f
		up.P, down.P = f.P.Add(f.T.Left().Scale(n)), f.P.Add(f.T.Left().Scale(-n))
		up.K, down.K = f.K/(1-n*f.K), f.K/(1+n*f.K)
		a, _ := j.cam.Follower().OnArc(t, up)
		b, _ := j.cam.Follower().OnArc(t, down)
		return (a.Lift - b.Lift) / (2 * n)
	}
	var all []tolerance.Answer
	j.overTurn(func(zone int, from, to, t float64) {
		h := math.Min(wide, (to-from)/2)
		at := math.Max(from+h, math.Min(to-h, t))
		a, b, c := gain(zone, at-h), gain(zone, at), gain(zone, at+h)
		rad := h * math.Pi / 180
		l := j.cam.LiftIn(zone, t)
		all = append(all, tolerance.Answer{G: b, DG: (c - a) / (2 * rad), DDG: (a - 2*b + c) / (rad * rad), V: l.V, J: l.J})
	})
	return all
}

// size is a radius of the cam.
func (j *job) size() float64 {
	if b, ok := j.cam.Barrel(); ok {
		return b.OuterRadius
	}
	return j.cam.Prime()
}

// budgetFacts are the budget and what each share of it makes of the follower's motion. The path's own share is what the
// follower was found to do on what was written.
func (j *job) budgetFacts() sheet.Budget {
	b := sheet.Budget{WorstCase: j.budget.WorstCase, RSS: j.budget.RSS, FixedPlusRSS: j.budget.FixedPlusRSS, Combine: string(j.budget.Rule), Limit: j.budget.Limit}
	w, peak := j.cam.Omega(), j.cam.Peaks().A
	answers := j.answers()
	var lifts, accelerations []float64
	for _, s := range j.budget.Shares {
		var e tolerance.Effect
		switch {
		case s.Source == "chord":
			e = tolerance.Effect{Lift: j.felt.Lift, Acceleration: j.felt.Acceleration}
		case j.outline != nil:
			e = s.Worst(answers, len(j.outline.paths[0].path))
		}
		if math.IsInf(e.Acceleration, 0) { // the follower could not be run over a path: that is a finding
			e.Acceleration = 0
		}
		lifts, accelerations = append(lifts, e.Lift), append(accelerations, e.Acceleration*w*w)
		share := sheet.Share{Source: s.Source, HalfWidth: s.HalfWidth, Kind: string(s.Kind), Wave: string(s.Wave), Lift: e.Lift, Acceleration: e.Acceleration * w * w}
		if peak > 0 {
			share.AccelerationShare = e.Acceleration / peak
		}
		b.Shares = append(b.Shares, share)
	}
	b.Lift = sheet.Totals(tolerance.Add(j.budget.Shares, lifts))
	b.Acceleration = sheet.Totals(tolerance.Add(j.budget.Shares, accelerations))
	return b
}
