package sheet

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode"
)

// sig prints v with n significant figures, without an exponent while it stays
// readable and without trailing zeros after the point.
func sig(v float64, n int) string {
	a := math.Abs(v)
	switch {
	case a == 0:
		return "0"
	case a >= 1e9 || a < 1e-7:
		return strconv.FormatFloat(v, 'g', n, 64)
	}
	decimals := n - 1 - int(math.Floor(math.Log10(a)))
	s := strconv.FormatFloat(v, 'f', max(0, decimals), 64)
	if strings.Contains(s, ".") {
		s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	}
	return s
}

// Figures printed of a value on the sheet and in the summary.
const (
	valueFigures = 5 // values, limits, lengths
	errorFigures = 3 // deviations and errors
	largeFigures = 4 // speeds and accelerations
)

// maybe prints v, or a dash where it does not exist.
func maybe(v *float64, n int) string {
	if v == nil {
		return "-"
	}
	return sig(*v, n)
}

// angle prints an angle in degrees to a tenth, or a dash.
func angle(v *float64) string {
	if v == nil {
		return "-"
	}
	return strconv.FormatFloat(*v, 'f', 1, 64)
}

// signed prints v with its sign.
func signed(v float64, n int) string {
	if v > 0 {
		return "+" + sig(v, n)
	}
	return sig(v, n)
}

// percent prints a share.
func percent(v float64) string { return sig(100*v, errorFigures) + " %" }

// duration prints seconds as minutes and seconds.
func duration(s float64) string {
	if s < 60 {
		return sig(s, errorFigures) + " s"
	}
	if whole := int64(math.Round(s)); whole < 3600 {
		return fmt.Sprintf("%d min %02d s", whole/60, whole%60)
	}
	minutes := int64(math.Round(s / 60))
	return fmt.Sprintf("%d h %02d min", minutes/60, minutes%60)
}

// size prints a number of bytes.
func size(n int) string {
	if n < 10000 {
		return fmt.Sprintf("%d bytes", n)
	}
	return fmt.Sprintf("%.1f kB", float64(n)/1000)
}

// liftUnit is the unit of lifts as it follows a number: deg of a swinging follower.
func (r Report) liftUnit() string {
	if r.LiftUnit != "" {
		return r.LiftUnit
	}
	return r.short()
}

// short is the unit of length as it follows a number.
func (r Report) short() string {
	if r.Units == "inch" {
		return "in"
	}
	return r.Units
}

// verdict is the one word everything hangs on.
func (r Report) verdict() string {
	if r.Released {
		return "RELEASED"
	}
	return "NOT RELEASED"
}

// failed counts the gates that fail.
func (r Report) failed() int {
	n := 0
	for _, g := range r.Gates {
		if !g.Pass {
			n++
		}
	}
	return n
}

// bound is the sign between a value and its limit.
func (g Gate) bound() string {
	switch {
	case g.Limit == nil:
		return ""
	case g.AtLeast:
		return ">="
	}
	return "<="
}

// joiner and nonJoiner are invisible but belong to the spelling of several scripts.
const joiner, nonJoiner = '\u200D', '\u200C'

// plain replaces control and invisible format characters, so that a title from a file
// cannot drive a terminal or hide text.
func plain(s string) string {
	return strings.Map(func(c rune) rune {
		switch {
		case c == '\n' || c == '\t' || c == '\r':
			return ' '
		case c == joiner || c == nonJoiner:
			return c
		case unicode.IsControl(c), unicode.Is(unicode.Cf, c), unicode.Is(unicode.Zl, c), unicode.Is(unicode.Zp, c):
			return '\uFFFD'
		}
		return c
	}, strings.ToValidUTF8(s, "\uFFFD"))
}
