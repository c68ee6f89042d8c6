package main

import (
	"fmt"
	"math/rand"
	"regexp"
	"strings"
	"testing"
)

// onRotary are programs of samples cut on a rotary axis: of a plate, and of a barrel in inches.
var onRotary = []struct{ sample, program string }{
	{"row-stop", "1-mill"}, {"lane-guide", "1-mill"},
}

// rotaryProgram is one of them after its release: its spec, its lines, and those of them on which the work turns while it is cut.
type rotaryProgram struct {
	spec  string
	lines []string
	turns []int
}

var turning = regexp.MustCompile(`^N\d+ (?:G93 )?G1 .*[ABC]-?[\d.]+ F`)

func releasedOn(t *testing.T, sample, program string) rotaryProgram {
	t.Helper()
	var p rotaryProgram
	p.spec, p.lines = programOf(t, sample, program)
	for i, l := range p.lines {
		if turning.MatchString(l) {
			p.turns = append(p.turns, i)
		}
	}
	return p
}

// moved adds to the word of a letter.
func moved(line, letters string, by float64) string {
	word := regexp.MustCompile(`([` + letters + `])(-?[\d.]+)`)
	return word.ReplaceAllStringFunc(line, func(w string) string {
		var v float64
		fmt.Sscanf(w[1:], "%f", &v)
		return fmt.Sprintf("%c%.4f", w[0], v+by)
	})
}

// Damages at seeded places over all passes are each reported at their line: a rotary word, a linear word, a block that is
// missing, inch in a metric file (or the other way), a feed, a rotary word of which a digit was doubled.
func TestProveoutRotaryDamage(t *testing.T) {
	t.Parallel()
	r := rand.New(rand.NewSource(5))
	for _, c := range onRotary {
		p := releasedOn(t, c.sample, c.program)
		other, across, step := "G20", "", 0.05
		if c.sample == "lane-guide" {
			other, across, step = "G21", "Y", 0.004
		}
		for n := range 12 {
			kind := []string{"rotary", "linear", "missing", "units", "feed", "far"}[n%6]
			i := p.turns[r.Intn(len(p.turns))]
			for kind == "missing" && !turning.MatchString(p.lines[i+1]) {
				i-- // the end of a slide, which a pass may do without
			}
			l := append([]string(nil), p.lines...)
			switch kind {
			case "rotary":
				l[i] = moved(l[i], "ABC", 1.5)
			case "linear":
				l[i] = moved(l[i], "X"+across, step)
			case "missing":
				l = append(l[:i:i], l[i+1:]...)
			case "units":
				l[i] = strings.Replace(l[i], " ", " "+other+" ", 1)
			case "feed":
				l[i] = moved(l[i], "F", 2)
			case "far":
				l[i] = moved(l[i], "ABC", 3600)
			}
			out, status, messages := proved(t, p.spec, l)
			// The end of a block is the start of the next.
			if status == statusDone {
				t.Errorf("%s %s, damage %d, %s at line %d, %q: not found", c.sample, c.program, n, kind, i+1, p.lines[i])
			} else if !at(out, messages, i+1) && !at(out, messages, i+2) {
				t.Errorf("%s %s, damage %d, %s at line %d, %q: reported elsewhere: %+v %s", c.sample, c.program, n, kind, i+1, p.lines[i], out.Faults, messages)
			}
		}
		whole := append([]string(nil), p.lines...)
		for i, l := range whole {
			if strings.Contains(l, "G17") {
				whole[i] = regexp.MustCompile(`G2[01]`).ReplaceAllString(l, other)
			}
		}
		if out, status, _ := proved(t, p.spec, whole); status != statusGate || len(out.Faults) == 0 || out.Faults[0].ID != "words" {
			t.Errorf("%s %s, all of it in the other units: status %d, %+v", c.sample, c.program, status, out.Faults)
		}
	}
}

// Another tool leaves the contour of a plate too large by half of what its diameter lacks, and is found in a barrel whose groove it makes
// narrower, or whose walls it does not reach.
func TestProveoutRotaryTool(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		sample, program, diameter, id string
		off                           float64
	}{
		{"row-stop", "1-mill", "19.9", "deviation", 0.05},
		{"row-stop", "2-grind", "80.02", "deviation", 0.01},
		{"tray-sweep", "1-mill", "16.2", "groove-width", 0},
		{"lane-guide", "1-mill", "0.68", "deviation", 0.00375},
	} {
		p := releasedOn(t, c.sample, c.program)
		out, status, _ := proved(t, p.spec, p.lines, "--tool-diameter", c.diameter)
		found := false
		for _, f := range out.Faults {
			found = found || f.ID == c.id
		}
		last := out.Passes[len(out.Passes)-1].Deviation
		if status != statusGate || !found || last == nil || last.Bound < c.off || c.off > 0 && last.Bound > c.off+0.0025 {
			t.Errorf("%s %s with %s: status %d, deviation %+v, %+v", c.sample, c.program, c.diameter, status, last, out.Faults)
		}
	}
}
