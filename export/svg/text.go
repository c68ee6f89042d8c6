package svg

import (
	"math"
	"strconv"
	"strings"
	"unicode"
)

// font is how a line of text looks.
type font struct {
	size   float64 // mm
	anchor string  // "", "middle" or "end"
	bold   bool
	turned bool // reads upwards
	color  string
}

// meanEm is the width of an average character in em, used as a floor of the estimate.
const meanEm = 0.6

// boldEm is how much wider bold letters are than regular ones.
const boldEm = 1.1

// widthOf estimates the width of s in mm at a size, on the wide side: the advance
// widths are those of a wide sans-serif face, and never less than 0.6 em a character.
func widthOf(s string, size float64, bold bool) float64 {
	var em float64
	n := 0
	for _, r := range legible(s) {
		em += advance(r)
		n++
	}
	em = max(em, meanEm*float64(n))
	if bold {
		em *= boldEm
	}
	return em * size
}

// advance is a character's width in em.
func advance(r rune) float64 {
	switch {
	case unicode.Is(unicode.Mn, r):
		return 0
	case r >= 0x1100:
		return 1.05
	case strings.ContainsRune(" .,:;'|!ijlI", r):
		return 0.34
	case strings.ContainsRune("mMW@%", r):
		return 1
	case unicode.IsUpper(r), r == 'w':
		return 0.76
	case r == '=', r == '<', r == '>', r == '+', r == '±', r == '−':
		return 0.84
	default:
		return 0.64
	}
}

// joiner and nonJoiner are invisible but belong to the spelling of several scripts.
const joiner, nonJoiner = '\u200D', '\u200C'

// legible replaces control and invisible format characters, so that a title cannot
// break the layout or hide text.
func legible(s string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\n' || r == '\t' || r == '\r':
			return ' '
		case r == joiner || r == nonJoiner:
			return r
		case unicode.IsControl(r), unicode.Is(unicode.Cf, r), unicode.Is(unicode.Zl, r), unicode.Is(unicode.Zp, r),
			r == 0xFFFE, r == 0xFFFF:
			return '\uFFFD'
		}
		return r
	}, strings.ToValidUTF8(s, "\uFFFD"))
}

// fitted returns the text and the largest size between least and size at which it is
// at most width mm wide; if there is none the text is cut and ends in an ellipsis.
func fitted(s string, width, size, least float64, bold bool) (string, float64) {
	if w := widthOf(s, size, bold); w > width {
		size *= width / w
	}
	if size >= least {
		return s, size
	}
	return cut(s, width, least, bold), least
}

// cut shortens s to width mm, ending in an ellipsis.
func cut(s string, width, size float64, bold bool) string {
	rs := []rune(s)
	for n := len(rs) - 1; n > 0; n-- {
		t := strings.TrimSpace(string(rs[:n])) + "…"
		if widthOf(t, size, bold) <= width {
			return t
		}
	}
	return "…"
}

// wrapped breaks s into lines of at most width mm; a word that is too long is broken.
func wrapped(s string, width, size float64, bold bool) []string {
	var lines []string
	line := ""
	for _, word := range strings.Fields(legible(s)) {
		for {
			joined := word
			if line != "" {
				joined = line + " " + word
			}
			if widthOf(joined, size, bold) <= width {
				line = joined
				break
			}
			if line != "" {
				lines, line = append(lines, line), ""
				continue
			}
			head := headOf(word, width, size, bold)
			lines = append(lines, head)
			word = word[len(head):]
			if word == "" {
				break
			}
		}
	}
	if line != "" {
		lines = append(lines, line)
	}
	return lines
}

// headOf is the longest beginning of word that fits, at least one character.
func headOf(word string, width, size float64, bold bool) string {
	rs := []rune(word)
	n := len(rs)
	for n > 1 && widthOf(string(rs[:n]), size, bold) > width {
		n--
	}
	return string(rs[:n])
}

// num prints a number with at most decimals places, without trailing zeros; beyond
// 12 digits before the point it takes an exponent.
func num(v float64, decimals int) string {
	if math.Abs(v) >= 1e12 {
		return power(v)
	}
	s := strconv.FormatFloat(v, 'f', decimals, 64)
	if strings.Contains(s, ".") {
		s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	}
	if s == "-0" {
		return "0"
	}
	return strings.Replace(s, "-", "−", 1)
}

// figures prints a number with about four significant figures for a chart label.
func figures(v float64) string {
	switch a := math.Abs(v); {
	case a == 0:
		return "0"
	case a >= 1000:
		return num(v, 0)
	case a >= 100:
		return num(v, 1)
	case a >= 10:
		return num(v, 2)
	case a >= 1:
		return num(v, 3)
	case a >= 0.01:
		return num(v, 4)
	default:
		return power(v)
	}
}

// power prints a number with three significant figures and an exponent where it needs one.
func power(v float64) string {
	return strings.ReplaceAll(strconv.FormatFloat(v, 'g', 3, 64), "-", "−")
}
