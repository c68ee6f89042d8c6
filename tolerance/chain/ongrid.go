package chain

// Path returns the chain as elements exactly as written: the doubles a reader
// makes of the printed decimals, arcs about the written center, so that the
// radii at their ends may differ by Mismatch. Slack is 0.
func (c Chain) Path() Path {
	p := make(Path, len(c.Segments))
	for i, s := range c.Segments {
		p[i] = Element{Kind: s.Kind, From: c.Grid.Value(s.From), To: c.Grid.Value(s.To), Source: s.Source}
		if s.Kind == Arc {
			p[i].Center, p[i].CCW = c.Grid.Value(s.Center), s.CCW
		}
	}
	return p
}

// Closed reports whether the chain ends exactly where it starts.
func (c Chain) Closed() bool {
	n := len(c.Segments)
	return n > 0 && c.Segments[n-1].To == c.Segments[0].From
}

// Mismatch returns the largest difference between the radii at the ends of an arc
// of the chain, in the unit of length.
func (c Chain) Mismatch() float64 {
	worst := 0.0
	for _, m := range c.Mismatches() {
		worst = max(worst, m)
	}
	return worst
}

// Mismatches returns for every segment the difference between the radii at its
// ends as written, in the unit of length; 0 for lines.
func (c Chain) Mismatches() []float64 {
	ms := make([]float64, len(c.Segments))
	for i, s := range c.Segments {
		if s.Kind == Arc {
			ms[i] = s.mismatch(s.Center) * c.Grid.Step()
		}
	}
	return ms
}

// Counts returns how many lines and arcs the chain has.
func (c Chain) Counts() (lines, arcs int) {
	for _, s := range c.Segments {
		if s.Kind == Arc {
			arcs++
		} else {
			lines++
		}
	}
	return lines, arcs
}
