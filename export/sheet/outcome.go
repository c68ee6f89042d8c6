package sheet

import (
	"fmt"
	"strings"
)

// Outcome is how one of several specs ended, for the table after them.
type Outcome struct {
	Part    string
	Verdict string // "RELEASED"
	Good    bool   // it ended as it should
	Gates   int
	Passed  int    // of the gates
	Note    string // what failed
}

// Judged is the outcome of a report, with the word for a passing and for a failing one.
func Judged(r Report, pass, fail string) Outcome {
	o := Outcome{Part: r.Part, Verdict: pass, Good: true, Gates: len(r.Gates)}
	var failed []string
	for _, g := range r.Gates {
		if g.Pass {
			o.Passed++
			continue
		}
		failed = append(failed, g.Name())
	}
	if len(failed) > 0 {
		o.Verdict, o.Good, o.Note = fail, false, strings.Join(failed, ", ")
	}
	return o
}

// Widths of the table's columns; with their gaps and the note they are columns wide.
const (
	partWidth    = 26
	verdictWidth = 11
	gatesWidth   = 7
	noteWidth    = columns - partWidth - verdictWidth - gatesWidth - 3*2
)

// Table lists outcomes, a row each of at most 80 columns; what is longer ends in three points. color adds ANSI colors to the
// verdicts.
func Table(rows []Outcome, color bool) string {
	t := &summary{color: color}
	t.title("Summary")
	t.line("%-*s  %-*s  %*s  %s", partWidth, "part", verdictWidth, "verdict", gatesWidth, "gates", "fails")
	good := 0
	for _, o := range rows {
		code := failColor
		if o.Good {
			code = passColor
			good++
		}
		gates := "-"
		if o.Gates > 0 {
			gates = fmt.Sprintf("%d/%d", o.Passed, o.Gates)
		}
		t.line("%-*s  %s  %*s  %s", partWidth, shortened(o.Part, partWidth), t.paint(code, fmt.Sprintf("%-*s", verdictWidth, o.Verdict)),
			gatesWidth, gates, shortened(o.Note, noteWidth))
	}
	t.line("%d of %d specs pass", good, len(rows))
	return t.b.String()
}

// shortened cuts a text to n columns.
func shortened(s string, n int) string {
	r := []rune(plain(s))
	if len(r) <= n {
		return string(r)
	}
	return string(r[:n-3]) + "..."
}
