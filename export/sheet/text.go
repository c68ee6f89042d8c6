package sheet

import (
	"fmt"
	"strings"
	"unicode/utf8"
)

// columns is the width of the terminal summary.
const columns = 80

// summary is a terminal summary being written.
type summary struct {
	b     strings.Builder
	r     Report
	color bool
}

// Text returns the terminal summary of check and release: a line a gate, the
// findings, then each written path with its blocks, certified deviation and what
// the follower would do on it. It is at most 80 columns wide, longer names and words
// aside; color adds ANSI colors to the verdicts.
func Text(r Report, color bool) string {
	t := &summary{r: r, color: color}
	t.head()
	t.gates()
	t.findings()
	t.paths()
	t.operations()
	t.verdict()
	return t.b.String()
}

func (t *summary) line(format string, args ...any) {
	t.b.WriteString(strings.TrimRight(fmt.Sprintf(format, args...), " "))
	t.b.WriteByte('\n')
}

// ANSI codes of the verdicts: bold red, green, bold.
const (
	failColor = "\x1b[1;31m"
	passColor = "\x1b[32m"
	headColor = "\x1b[1m"
	noColor   = "\x1b[0m"
)

func (t *summary) paint(code, s string) string {
	if !t.color {
		return s
	}
	return code + s + noColor
}

func (t *summary) title(s string) {
	t.b.WriteByte('\n')
	t.b.WriteString(t.paint(headColor, s))
	t.b.WriteByte('\n')
}

// para writes text wrapped to the columns, the first line after head, the rest indented.
func (t *summary) para(head string, indent int, text string) {
	pad := strings.Repeat(" ", indent)
	line := head
	for _, w := range strings.Fields(plain(text)) {
		if utf8.RuneCountInString(line)+1+utf8.RuneCountInString(w) > columns && strings.TrimSpace(line) != "" {
			t.line("%s", line)
			line = pad
		}
		if line != "" && !strings.HasSuffix(line, " ") {
			line += " "
		}
		line += w
	}
	t.line("%s", line)
}

// name is the part with its revision, when it has one.
func (r Report) name(join string) string {
	if r.Revision == "" {
		return r.Part
	}
	return r.Part + join + r.Revision
}

func (t *summary) head() {
	r := t.r
	head := r.name(" revision ")
	if r.Title != "" {
		head += ": " + r.Title
	}
	t.para("", 2, head)
	sha := r.SpecSHA256
	if len(sha) > 12 {
		sha = sha[:12]
	}
	t.para("", 2, fmt.Sprintf("%s rpm %s, lengths in %s, spec %s", sig(r.Camshaft.Speed, valueFigures), r.Camshaft.Rotation,
		r.short(), sha))
}

// gateRow is the layout of a gate's line.
const gateRow = "%-26s %10s %2s %10s %-6s %6s %6s  "

func (t *summary) gates() {
	t.title("Gates")
	if len(t.r.Gates) == 0 {
		t.line("  none")
		return
	}
	t.line(gateRow, "", "value", "", "limit", "unit", "cam°", "polar°")
	for _, g := range t.r.Gates {
		verdict := t.paint(passColor, "pass")
		if !g.Pass {
			verdict = t.paint(failColor, "FAIL")
		}
		name := plain(g.Name())
		if utf8.RuneCountInString(name) > 26 {
			t.line("%s", name)
			name = ""
		}
		t.line(gateRow+"%s", name, maybe(g.Value, valueFigures), g.bound(), maybe(g.Limit, valueFigures), plain(g.Unit),
			angle(g.CamAngle), angle(g.PolarAngle), verdict)
		if !g.Pass && g.Text != "" {
			t.para("    ", 4, g.Text)
		}
	}
}

func (t *summary) findings() {
	t.title("Findings")
	if len(t.r.Findings) == 0 {
		t.line("  none")
	}
	for _, f := range t.r.Findings {
		at := ""
		if f.CamAngle != nil {
			at = " at " + angle(f.CamAngle) + "°"
		}
		t.para("  ", 4, f.ID+at+": "+f.Text)
	}
}

// row writes a labeled line of a path.
func (t *summary) row(label, text string) { t.para(fmt.Sprintf("  %-20s ", label), 23, text) }

func (t *summary) paths() {
	if len(t.r.Paths) == 0 {
		return
	}
	t.title("Written paths")
	for _, p := range t.r.Paths {
		t.para("", 2, p.File+", "+p.Curve)
		t.blocks(p.Lines, p.Arcs, &p.Theory, p.SegmentsFloor)
		t.deviation(p.Deviation)
		t.follower(p.Follower)
	}
}

func (t *summary) blocks(lines, arcs int, theory *float64, floor *int) {
	t.row("blocks", fmt.Sprintf("%d (%d lines, %d arcs)", lines+arcs, lines, arcs))
	if floor == nil {
		t.row("in theory", maybe(theory, largeFigures))
		return
	}
	t.row("proven floor", fmt.Sprintf("no chain of lines and arcs within %g %s has fewer than %d (in theory about %s)", t.r.Tolerance.Chord, t.r.short(), *floor, maybe(theory, largeFigures)))
}

func (t *summary) deviation(d Deviation) {
	u := t.r.short()
	text := fmt.Sprintf("%s %s (found outside %s, inside %s", sig(d.Bound, errorFigures), u,
		signed(d.Outside, errorFigures), signed(d.Inside, errorFigures))
	if d.CamAngle != nil {
		text += ", worst at " + angle(d.CamAngle) + "°"
	}
	t.row("certified deviation", text+")")
}

func (t *summary) follower(f *Follower) {
	if f == nil {
		return
	}
	u := t.r.liftUnit()
	t.row("follower lift error", sig(f.Lift, errorFigures)+" "+u)
	t.row("velocity error", fmt.Sprintf("%s %s/s, step at a joint %s %s/s", sig(f.Velocity, errorFigures), u,
		sig(f.VelocityStep, errorFigures), u))
	t.row("acceleration error", fmt.Sprintf("%s %s/s², %s of the design's peak", sig(f.Acceleration, errorFigures), u,
		percent(f.AccelerationShare)))
}

func (t *summary) operations() {
	if len(t.r.Operations) == 0 {
		return
	}
	t.title("Operations")
	for _, o := range t.r.Operations {
		state := ""
		if o.NotFinished {
			state = ", NOT FINISHED: stock is left"
		}
		t.para("", 2, o.File+", "+o.Process+state)
		t.row("program", fmt.Sprintf("%d blocks (%d lines, %d arcs), %s, %s", o.Blocks, o.Lines, o.Arcs, size(o.Bytes),
			duration(o.Seconds)))
		for _, p := range o.Passes {
			t.pass(p, o.Process)
		}
		if !t.r.hasPath(o.File) {
			t.deviation(o.Deviation)
			t.follower(o.Follower)
		}
	}
}

// pass is one line: blocks, theory, floor and bound of a pass.
func (t *summary) pass(p Pass, process string) {
	text := fmt.Sprintf("%d blocks (%d lines, %d arcs)", p.Lines+p.Arcs, p.Lines, p.Arcs)
	if p.Theory != nil {
		text += ", theory " + sig(*p.Theory, largeFigures)
	}
	if p.SegmentsFloor != nil {
		text += fmt.Sprintf(", floor %d", *p.SegmentsFloor)
	}
	if p.Deviation != nil {
		text += ", certified " + sig(p.Deviation.Bound, errorFigures) + " " + t.r.short()
	}
	left := "stock " + sig(p.Stock, errorFigures)
	if process == "wire" {
		left = "offset " + sig(p.Offset, errorFigures)
	}
	t.row(fmt.Sprintf("pass %d, %s", p.Number, left), text)
}

func (t *summary) verdict() {
	t.b.WriteByte('\n')
	if t.r.Released {
		t.line("%s", t.paint(passColor, t.r.verdict()))
		return
	}
	n := t.r.failed()
	text := t.r.verdict()
	switch {
	case n == 0:
		t.line("%s. %s", t.paint(passColor, "Every gate passes"), text)
		return
	case n == 1:
		text += ": 1 gate fails"
	case n > 1:
		text += fmt.Sprintf(": %d gates fail", n)
	}
	t.line("%s", t.paint(failColor, text))
}
