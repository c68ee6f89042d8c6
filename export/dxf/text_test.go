package dxf

import (
	"strings"
	"testing"
	"unicode"
	"unicode/utf8"

	"pgregory.net/rapid"

	"lobewright/export/dxf/read"
	"lobewright/synth/plane"
)

func withText(v Version, value string) Drawing {
	return Drawing{Version: v, Texts: []Text{{LayerNotes, plane.Point{}, 3, 0, value}}}
}

func TestEncodedTexts(t *testing.T) {
	for text, want := range map[string]string{
		"plain 1.5":    "plain 1.5",
		"45° ±1 ⌀20":   "45%%d %%p1 %%c20",
		"%°":           `%\U+00B0`,
		"%%c":          `%\U+0025c`,
		"100%":         "100%",
		"^J":           "^ J",
		`\U+0041`:      `\U+005CU+0041`,
		"Ø鉛":           `\U+00D8\U+925B`,
		"a\U0001F600b": "a?b",
		"  0\u2028":    `  0\U+2028`,
	} {
		if got := encode(text); got != want {
			t.Errorf("%q is written as %q, want %q", text, got, want)
		}
	}
}

// Any text either comes back as it was (but for characters above U+FFFF) from a file of printable
// ASCII, or is refused for a reason that a look at the text shows.
func TestAnyTextIsExactOrRefused(t *testing.T) {
	nasty := rapid.SampledFrom([]rune{'%', '^', '\\', 'U', '+', '0', 'd', 'D', 'c', '°', '±', '⌀', ' ', '\n', '\x00', 0x7f, 0x85, 0x2028, 0xfffd, 0x1f600})
	rapid.Check(t, func(t *rapid.T) {
		text := rapid.OneOf(rapid.StringOfN(nasty, 0, 40, -1), rapid.String()).Draw(t, "text")
		v := rapid.SampledFrom([]Version{R2000, R12}).Draw(t, "version")
		data, err := Write(withText(v, text))
		bad := strings.TrimSpace(text) == "" || strings.IndexFunc(text, unicode.IsControl) >= 0
		if err != nil {
			if !bad && len(encode(text)) <= longestR12 {
				t.Fatalf("%q is refused: %v", text, err)
			}
			return
		}
		if bad {
			t.Fatalf("%q is accepted", text)
		}
		f, err := read.Parse(data)
		if err != nil {
			t.Fatalf("%q: %v", text, err)
		}
		want := strings.Map(func(c rune) rune {
			if c > 0xffff {
				return '?'
			}
			return c
		}, text)
		if got := f.Texts[0].Value; got != want {
			t.Fatalf("%q comes back as %q", text, got)
		}
	})
}

func TestWrap(t *testing.T) {
	for _, c := range []struct {
		text    string
		columns int
		want    string
	}{
		{"all in one line", 20, "all in one line"},
		{"two lines of words", 10, "two lines|of words"},
		{"exactly ten", 7, "exactly|ten"},
		{"abcdefgh", 3, "abc|def|gh"},
		{"first\r\n\nsecond  ", 20, "first|second"},
		{" \n ", 5, ""},
	} {
		if got := strings.Join(Wrap(c.text, c.columns), "|"); got != c.want {
			t.Errorf("Wrap(%q, %d) = %q, want %q", c.text, c.columns, got, c.want)
		}
	}
}

// Wrapping keeps every character that is not a space, and 36 columns fit R12.
func TestWrapKeepsAndFits(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		text := rapid.StringOf(rapid.SampledFrom([]rune("a鉛%^\\ \n"))).Draw(t, "text")
		lines := Wrap(text, 36)
		dense := func(s string) string { return strings.Join(strings.Fields(s), "") }
		if dense(strings.Join(lines, " ")) != dense(text) {
			t.Fatalf("%q became %q", text, lines)
		}
		for _, l := range lines {
			if n := utf8.RuneCountInString(l); n == 0 || n > 36 {
				t.Fatalf("%q has %d characters", l, n)
			}
			if err := checkText(l, R12); err != nil {
				t.Fatal(err)
			}
		}
	})
}
