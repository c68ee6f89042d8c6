package gcode

import (
	"lobewright/gcode/read"
)

// words holds everything that is no place: units, numbers, tool, spindle, end.
func (v *verifier) words() {
	p, x := v.p, v.x
	if p.Inch != x.Inch {
		v.wrong("words", 0, "the units are %s, the part is in %s", unitWord(p.Inch), unitWord(x.Inch))
	}
	if p.Number != x.Number {
		v.fail("words", float64(p.Number), float64(x.Number), nan(), 0, "program number %d, expected %d", p.Number, x.Number)
	}
	if p.Rotary != 0 && x.Rotary == 0 {
		v.wrong("words", 0, "words of the rotary axis %c in a program without one", p.Rotary)
	}
	if n := len(p.Misc); n == 0 || p.Misc[n-1].Code != 30 {
		v.wrong("words", 0, "the program does not end with M30")
	}
	for _, m := range p.Misc {
		if !v.allowed(m) {
			v.wrong("words", m.LineNo, "M%d is not expected here", m.Code)
		}
	}
	v.settings()
	if p.End.Comp != read.Off {
		v.wrong("words", 0, "the program ends under %v", p.End.Comp)
	}
	last, known := read.State{}, false
	for i, m := range p.Moves {
		high := m.HasZ || m.KnownZ // from the first move of Z on, its register counts
		if i > 0 && sameWords(m.State, last) && high == known {
			continue
		}
		last, known = m.State, high
		v.state(m)
	}
}

// settings holds what the control is told besides the path.
func (v *verifier) settings() {
	p, x := v.p, v.x
	if n := x.Limits.Bytes; n > 0 && p.Bytes > n {
		v.fail("bytes", float64(p.Bytes), float64(n), nan(), 0, "%d bytes, the control takes %d; allow a larger chord tolerance, or leave block numbers out", p.Bytes, n)
	}
	if n := x.Limits.Line; n > 0 && p.Longest > n {
		v.fail("line-length", float64(p.Longest), float64(n), nan(), 0, "a line of %d characters, the control takes %d", p.Longest, n)
	}
	mode := map[PathMode]int{Exact: 61, Blended: 64}[x.Path]
	if p.PathMode != mode || p.PathBlend != x.PathBlend && mode == 64 {
		v.wrong("words", 0, "path mode G%d with P%g, expected G%d with P%g (0: none)", p.PathMode, p.PathBlend, mode, x.PathBlend)
	}
	if x.Process == Wire {
		return
	}
	for i := range max(len(x.Own), len(p.Own)) {
		switch {
		case i >= len(p.Own):
			v.wrong("words", 0, "the line %q of the user's own is missing", x.Own[i])
		case i >= len(x.Own) || p.Own[i].Text != x.Own[i]:
			v.wrong("words", p.Own[i].LineNo, "the line %q of the user's own is not expected here", p.Own[i].Text)
		}
	}
}

func unitWord(inch bool) string {
	if inch {
		return "inches (G20)"
	}
	return "mm (G21)"
}

// allowed says whether an M word may stand where it does. A wire's stops are held
// in order.
func (v *verifier) allowed(m read.Misc) bool {
	switch m.Code {
	case 30:
		return true
	case 0:
		return v.x.Process == Wire
	case 3, 5, 6:
		return v.x.Process != Wire
	case 7, 8, 9:
		return true
	}
	return false
}

// sameWords compares what state looks at.
func sameWords(a, b read.State) bool {
	a.Feed, b.Feed, a.Comp, b.Comp, a.D, b.D = 0, 0, 0, 0, 0, 0
	return a == b
}

// state holds the modal words of a move.
func (v *verifier) state(m read.Move) {
	if m.Inverse && v.x.Rotary == 0 {
		v.wrong("words", m.LineNo, "inverse time G93 where the feed is per minute")
	}
	if m.Work != 54 {
		v.fail("words", float64(m.Work), 54, nan(), m.LineNo, "the move is not under G54")
	}
	if v.x.Process == Wire {
		if m.Spindle != 0 || m.H >= 0 || m.Tool >= 0 {
			v.wrong("words", m.LineNo, "spindle, tool or length words in a wire program")
		}
		return
	}
	if v.x.Fluid && m.Kind != read.Rapid && !m.Fluid {
		v.wrong("words", m.LineNo, "a cut without coolant: no M7 or M8 came before")
	}
	if m.Tool != v.x.Tool {
		v.fail("words", float64(m.Tool), float64(v.x.Tool), nan(), m.LineNo, "tool T%d, expected T%d", m.Tool, v.x.Tool)
	}
	if (m.HasZ || m.KnownZ) && m.H != v.x.Tool {
		v.fail("words", float64(m.H), float64(v.x.Tool), nan(), m.LineNo, "length register H%d, expected H%d under G43 (-1: none)", m.H, v.x.Tool)
	}
	if m.Spindle != 1 || m.Speed != v.x.Speed {
		v.fail("words", float64(m.Speed*m.Spindle), float64(v.x.Speed), nan(), m.LineNo,
			"spindle at %d rpm (negative: counterclockwise), expected %d under M3", m.Speed*m.Spindle, v.x.Speed)
	}
}

// changed reports whether an M6 stands before the first move.
func (v *verifier) changed() bool {
	for _, m := range v.p.Misc {
		if m.Code == 6 {
			return m.Before == 0
		}
	}
	return false
}
