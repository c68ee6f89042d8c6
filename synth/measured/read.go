package measured

import (
	"bytes"
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode/utf8"
)

// Row is a row of a table.
type Row struct {
	Angle float64 // cam angle, degrees
	Lift  float64 // length
	Line  int     // in the file, from 1
}

// Fault is something wrong with a table, at a place in its file.
type Fault struct {
	Line, Column           int // from 1
	Found, Allowed, Advice string
}

const (
	leastRows  = 20
	mostRows   = 20000
	mostFaults = 20
	mostLift   = 1e4
)

// Parse reads a table: a header line, then a row a line, its first two columns the cam
// angle in degrees and the lift, separated by comma, semicolon or tab, whichever the
// header has; decimal point; further columns are not read. Angles grow from row to row
// within one turn and may begin anywhere. A last row a full turn after the first closes
// the table; it must repeat the first lift within slack (length), and is left out.
// Either faults or 20 to 20 000 rows are returned.
func Parse(data []byte, slack float64) ([]Row, []Fault) {
	p := parser{slack: slack}
	data = bytes.TrimPrefix(data, []byte("\ufeff"))
	if !utf8.Valid(data) || bytes.IndexByte(data, 0) >= 0 {
		return nil, []Fault{{1, 1, "bytes that are not UTF-8 text", "a CSV file", "save the table as CSV text"}}
	}
	lines := strings.Split(strings.ReplaceAll(string(data), "\r\n", "\n"), "\n")
	for len(lines) > 0 && strings.TrimSpace(lines[len(lines)-1]) == "" {
		lines = lines[:len(lines)-1]
	}
	if len(lines) == 0 {
		return nil, []Fault{{1, 1, "an empty file", "a header line and 20 to 20000 rows", ""}}
	}
	sep := p.header(lines[0])
	for i, l := range lines[1:] {
		if len(p.rows) > mostRows+1 || len(p.faults) >= mostFaults {
			break
		}
		p.row(i+2, l, sep)
	}
	if len(p.faults) == 0 {
		p.finish(len(lines))
	}
	if len(p.faults) > 0 {
		return nil, p.faults
	}
	return p.rows, nil
}

type parser struct {
	rows   []Row
	faults []Fault
	slack  float64
}

func (p *parser) fault(line, column int, found, allowed, advice string) {
	if len(p.faults) < mostFaults {
		p.faults = append(p.faults, Fault{line, column, found, allowed, advice})
	}
}

// header finds the separator, and refuses a first line of numbers.
func (p *parser) header(line string) (sep string) {
	for _, sep = range []string{";", "\t", ","} {
		if strings.Contains(line, sep) {
			break
		}
	}
	cells := strings.Split(line, sep)
	if len(cells) < 2 {
		p.fault(1, 1, "a header of one column", "a header of two columns, cam angle and lift", "separate them with a comma, a semicolon or a tab")
		return sep
	}
	if _, err := strconv.ParseFloat(strings.TrimSpace(cells[0]), 64); err == nil {
		p.fault(1, 1, "a number where the header stands", "a header line, as cam_angle"+sep+"lift", "add a header above the first row")
	}
	return sep
}

func (p *parser) row(line int, text, sep string) {
	cells := strings.SplitN(text, sep, 3)
	if strings.TrimSpace(text) == "" {
		p.fault(line, 1, "an empty line", "a cam angle and a lift", "take it out")
		return
	}
	if len(cells) < 2 {
		p.fault(line, 1, "a row of one column", "a cam angle and a lift, separated as in the header", "")
		return
	}
	angle, ok := p.number(line, 1, cells[0], sep)
	lift, ok2 := p.number(line, 2+utf8.RuneCountInString(cells[0]), cells[1], sep)
	if !ok || !ok2 {
		return
	}
	if math.Abs(angle) > 1e4 {
		p.fault(line, 1, fmt.Sprintf("the cam angle %g", angle), "cam angles within one turn, in degrees", "")
		return
	}
	if math.Abs(lift) > mostLift {
		p.fault(line, 2+utf8.RuneCountInString(cells[0]), fmt.Sprintf("the lift %g", lift), fmt.Sprintf("lifts up to %g", mostLift), "")
		return
	}
	if n := len(p.rows); n > 0 && angle <= p.rows[n-1].Angle {
		what := "is not sorted"
		if angle == p.rows[n-1].Angle {
			what = "stands twice"
		}
		p.fault(line, 1, fmt.Sprintf("the cam angle %g after %g in line %d: it %s", angle, p.rows[n-1].Angle, p.rows[n-1].Line, what),
			"cam angles that grow from row to row", "")
		return
	}
	p.rows = append(p.rows, Row{angle, lift, line})
}

func (p *parser) number(line, column int, cell, sep string) (float64, bool) {
	s := strings.TrimSpace(cell)
	column += utf8.RuneCountInString(cell[:strings.Index(cell, s)])
	x, err := strconv.ParseFloat(s, 64)
	switch {
	case s == "":
		p.fault(line, column, "an empty cell", "a number", "fill it, or take the row out")
	case sep != "," && err != nil && strings.Count(s, ",") == 1:
		p.fault(line, column, strconv.Quote(short(s)), "a number", "write the decimal sign as a point: "+short(strings.Replace(s, ",", ".", 1)))
	case err != nil || strings.ContainsAny(s, "xXpP_"):
		p.fault(line, column, strconv.Quote(short(s)), "a number in decimal digits", "")
	case math.IsNaN(x) || math.IsInf(x, 0):
		p.fault(line, column, short(s)+", which is not a finite number", "a finite number", "measure it again, or take the row out")
	default:
		return x, true
	}
	return 0, false
}

func short(s string) string {
	const most = 30
	if r := []rune(s); len(r) > most {
		return string(r[:most]) + "..."
	}
	return s
}

// finish looks at the table as a whole.
func (p *parser) finish(lines int) {
	n := len(p.rows)
	if n > 1 {
		first, last := p.rows[0], p.rows[n-1]
		switch turn := last.Angle - first.Angle; {
		case turn > 360+sameAngle:
			p.fault(last.Line, 1, fmt.Sprintf("the cam angle %g, %g after the first", last.Angle, turn), "cam angles within one turn of 360 degrees", "")
		case turn > 360-sameAngle && math.Abs(last.Lift-first.Lift) > p.slack:
			p.fault(last.Line, 1, fmt.Sprintf("the lift %g a full turn after %g in line %d", last.Lift, first.Lift, first.Line),
				"a table that closes: the same lift again, within the smoothing", "correct it, or take the last row out")
		case turn > 360-sameAngle:
			p.rows = p.rows[:n-1]
		}
	}
	if n := len(p.rows); len(p.faults) == 0 && (n < leastRows || n > mostRows) {
		p.fault(lines, 1, fmt.Sprintf("%d rows", n), fmt.Sprintf("%d to %d rows", leastRows, mostRows), "")
	}
}

// sameAngle is the distance in degrees below which two cam angles are one.
const sameAngle = 1e-9
