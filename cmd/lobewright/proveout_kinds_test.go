package main

import (
	"fmt"
	"math/rand"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// feedBlock is a block that cuts: it has axis words and no G0.
var feedBlock = regexp.MustCompile(`^N\d+ .*[XYZABC]-?[\d.]+`)

// Programs of every kind stay proven under edits that change nothing a control does, 40 on each, and of 40
// damages on the mill and the wire, 14 on the others (a word of an axis moved, a block left out, a feed of ten times as much, a tool that is another) every one is
// reported, and at its line: that of the block, or, of a block left out, that of the next.
func TestProveoutEveryKind(t *testing.T) {
	for k, c := range []struct {
		sample, program string
		leads           int // blocks at either end of a cut that may be off without harm
	}{
		{"stick-lift", "1-mill", 3}, {"stick-lift", "2-wire", 4}, {"carton-shift", "1-mill", 3}, {"tally-pin", "1-mill", 3},
	} {
		spec, lines := programOf(t, c.sample, c.program)
		r := rand.New(rand.NewSource(int64(11 + k)))
		var cuts []int
		down := false
		for i, l := range lines {
			if strings.Contains(l, " Z-") {
				down = true
			}
			if strings.Contains(l, "G0 ") {
				down = strings.Contains(c.program, "wire")
				continue
			}
			if down && feedBlock.MatchString(l) && !strings.Contains(l, " Z") {
				cuts = append(cuts, i)
			}
		}
		inside := func(i int) bool { // cuts are what lies between comments, rapids and moves of Z
			for k := i - c.leads; k <= i+c.leads; k++ {
				if !slices.Contains(cuts, k) {
					return false
				}
			}
			return true
		}
		var deep []int
		for _, i := range cuts {
			if inside(i) {
				deep = append(deep, i)
			}
		}
		cuts = deep
		operation := c.program[:1]
		harmless := append([]string(nil), lines...)
		for range 40 {
			i := cuts[r.Intn(len(cuts))]
			harmless[i] = harmlessEdit(r, harmless[i])
		}
		if p, _, messages := proved(t, spec, harmless, "--operation", operation); !p.Proven {
			t.Errorf("%s: edits that change nothing are reported: %.300s %s", c.program, fmt.Sprint(p.Faults), messages)
		}
		missed := 0
		damages := 14
		if k < 2 {
			damages = 40
		}
		for n := range damages {
			i := cuts[r.Intn(len(cuts))]
			damaged := append([]string(nil), lines...)
			want := map[int]bool{i + 1: true}
			kind := []string{"moved", "left out", "feed"}[n%3]
			switch kind {
			case "moved":
				damaged[i] = movedWord(r, lines[i])
				want[i+2] = true // the next block starts where it ends
			case "left out":
				damaged = append(damaged[:i], damaged[i+1:]...)
			case "feed":
				if !strings.Contains(lines[i], " F") {
					damaged[i] += " F9999."
				} else {
					damaged[i] = regexp.MustCompile(` F[\d.]+`).ReplaceAllString(lines[i], " F9999.")
				}
			}
			p, _, messages := proved(t, spec, damaged, "--operation", operation)
			found := strings.Contains(messages, fmt.Sprintf("edited.nc:%d:", i+1))
			for _, f := range p.Faults {
				found = found || want[f.Line]
			}
			if !found {
				missed++
				t.Logf("%s %s, %s at line %d: %s\n%.400s %s", c.sample, c.program, kind, i+1, lines[i], fmt.Sprint(p.Faults), messages)
			}
		}
		if missed > 0 {
			t.Errorf("%s %s: %d of %d damages are not reported at their line", c.sample, c.program, missed, damages)
		}
	}
}

// harmlessEdit changes spacing, number, comment or the order of words of a block.
func harmlessEdit(r *rand.Rand, line string) string {
	words := strings.Fields(line)
	if len(words) < 3 || strings.Contains(line, "(") { // edited already
		return line
	}
	switch r.Intn(5) {
	case 0:
		return strings.Join(words, "   ") + " "
	case 1:
		return "N" + strconv.Itoa(1+r.Intn(9999)) + " " + strings.Join(words[1:], " ")
	case 2:
		return line + " (SEEN)"
	case 3:
		rest := words[1:]
		r.Shuffle(len(rest), func(i, j int) { rest[i], rest[j] = rest[j], rest[i] })
		return words[0] + " " + strings.Join(rest, " ")
	}
	return strings.ToLower(strings.Join(words, ""))
}

// movedWord moves one word of an axis by 0.05.
func movedWord(r *rand.Rand, line string) string {
	word := regexp.MustCompile(`\b([XYABC])(-?[\d.]+)`)
	all := word.FindAllStringSubmatchIndex(line, -1)
	m := all[r.Intn(len(all))]
	v, _ := strconv.ParseFloat(line[m[4]:m[5]], 64)
	return line[:m[4]] + fmt.Sprintf("%.4f", v+0.05) + line[m[5]:]
}
