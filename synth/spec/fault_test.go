package spec

import (
	"strings"
	"testing"
)

// Distances counted by hand; the first is the example of Wagner and Fischer's
// algorithm that most textbooks print (from memory, no source at hand).
func TestDistance(t *testing.T) {
	for _, c := range []struct {
		a, b string
		want int
	}{{"kitten", "sitting", 3}, {"", "abc", 3}, {"abc", "acb", 1}, {"radius", "radus", 1}, {"same", "same", 0}} {
		if got := distance([]rune(c.a), []rune(c.b)); got != c.want {
			t.Errorf("%s, %s: %d, want %d", c.a, c.b, got, c.want)
		}
	}
}

// One letter dropped from a name of six or more still finds the name.
func TestNearestFindsDroppedLetter(t *testing.T) {
	names := append(specTable(vocabulary()).names(""), vocabulary().Laws...)
	for _, name := range names {
		for i := range name {
			if got := nearest(name[:i]+name[i+1:], names); len(name) >= 6 && got != name {
				t.Errorf("%s without letter %d: %q", name, i, got)
			}
		}
	}
}

func TestNearestIgnoresFarAndLongWords(t *testing.T) {
	for _, word := range []string{"", "cm", "wobble", strings.Repeat("base_radius", 50)} {
		if got := nearest(word, []string{"mm", "base_radius", "polynomial-3-4-5"}); got != "" {
			t.Errorf("%q: %q", word, got)
		}
	}
	if got := nearest("Base-Radius", []string{"mm", "base_radius"}); got != "base_radius" {
		t.Errorf("case and hyphen: %q", got)
	}
}

// An unclosed quote planted after any line of a sound file is found at the quote.
func TestSyntaxPlace(t *testing.T) {
	lines := strings.SplitAfter(smallest, "\n")
	for n := 1; n < len(lines)-1; n++ {
		if strings.HasPrefix(lines[n], " ") {
			continue // within the events, where a key at the margin is another error
		}
		text := strings.Join(lines[:n], "") + `notes: [é, "x]` + "\n" + strings.Join(lines[n:], "")
		_, faults := parse("x.yaml", []byte(text))
		if len(faults) != 1 || faults[0].Line != n+1 || faults[0].Column != 12 {
			t.Errorf("planted in line %d: %v", n+1, faults)
		}
	}
}

// Above the limits of the search the library's line is given, in the file.
func TestSyntaxPlaceOfLongFile(t *testing.T) {
	_, faults := parse("x.yaml", []byte(strings.Repeat("a: [1]\n", 5000)+"b: \"\n"))
	if len(faults) != 1 || faults[0].Line != 5001 || faults[0].Column != 1 {
		t.Error(faults)
	}
}
