package smooth

import (
	"bytes"
	"fmt"
	"math"
	"strings"
	"unicode/utf8"
)

// Fault is one thing wrong with the text of a table.
type Fault struct {
	Line, Column int    // from 1; columns count characters
	Found        string // what stands there
	Allowed      string // what may stand there
	Advice       string // what to do
}

// Error prints the fault on one line.
func (f Fault) Error() string {
	return fmt.Sprintf("%d:%d: found %s; allowed: %s; %s", f.Line, f.Column, f.Found, f.Allowed, f.Advice)
}

// mostLine is the longest line taken, bytes: the place of a column is counted from the
// line's start for every column, which on a line of megabytes would take hours.
const mostLine = 4096

// MostFaults is how many faults Read reports of one text.
const MostFaults = 20

// Read reads a table from text: a header line that names the columns, then a row a line.
// The first column is cam angle in degrees, the second lift; further columns are not read.
// Columns are parted by tabs, semicolons or commas, whichever of these the header has
// first in this order; blanks around a number and double quotes around a field do not
// count. Numbers have a decimal point. A byte order mark, carriage returns and empty
// lines at the end are accepted. Angles increase by at least Closest and may begin anywhere.
//
// A last row one turn after the first closes the turn: it is dropped when its lift is that of
// the first to within smoothing (length), and a fault otherwise.
//
// Either the table or at least one fault is returned, at most MostFaults in order of place.
func Read(text []byte, smoothing float64) (Table, []Fault) {
	r := &reader{smoothing: smoothing}
	text = bytes.TrimPrefix(text, []byte("\ufeff"))
	lines := strings.Split(strings.NewReplacer("\r\n", "\n", "\r", "\n").Replace(string(text)), "\n")
	for len(lines) > 1 && strings.Trim(lines[len(lines)-1], " \t,;") == "" {
		lines = lines[:len(lines)-1]
	}
	for k, line := range lines {
		if !utf8.ValidString(line) || strings.ContainsRune(line, 0) {
			r.fault(k+1, 1, "bytes that are no UTF-8 text", "plain text", "save the table as CSV, encoded as UTF-8")
			return Table{}, r.faults
		}
		if len(line) > mostLine {
			r.fault(k+1, 1, fmt.Sprintf("a line of more than %d bytes", mostLine), "a row of a few numbers", "leave out the columns after the lift")
			return Table{}, r.faults
		}
	}
	if r.header(lines[0]) {
		for k, line := range lines[1:] {
			if r.row(k+2, line); len(r.faults) >= MostFaults || len(r.Angle) > MostRows+1 {
				break
			}
		}
		r.close()
	}
	if len(r.faults) > 0 {
		return Table{}, r.faults[:min(len(r.faults), MostFaults)]
	}
	return r.Table, nil
}

// reader is a table being read.
type reader struct {
	Table
	smoothing float64
	separator rune
	columns   int     // that the header names
	previous  float64 // cam angle on the line before
	second    int     // column of the lift, of the last row
	beyond    bool    // a row beyond the turn has been reported
	faults    []Fault
}

func (r *reader) fault(line, column int, found, allowed, advice string) {
	r.faults = append(r.faults, Fault{line, column, found, allowed, advice})
}

// header reads the first line.
func (r *reader) header(line string) bool {
	const example = "cam angle (deg),lift (mm)"
	for _, sep := range "\t;," {
		if fields := split(line, sep); len(fields) > 1 {
			r.separator, r.columns = sep, len(fields)
			for k := range r.Names {
				if _, isNumber := number(fields[k].text); isNumber {
					r.fault(1, fields[k].column, "the number "+quoted(fields[k].text), "a header line that names the columns", "put a line above the first row, such as "+example)
					return false
				}
				if fields[k].text == "" {
					r.fault(1, fields[k].column, "a column without a name", "a name for the cam angle and one for the lift", "write a header such as "+example)
					return false
				}
				r.Names[k] = fields[k].text
			}
			return true
		}
	}
	found := "one column: " + quoted(strings.TrimSpace(line))
	if strings.TrimSpace(line) == "" {
		found = "an empty line"
	}
	r.fault(1, 1, found, "a header line of at least two columns, parted by comma, semicolon or tab", "write a header such as "+example)
	return false
}

// row reads one line of numbers.
func (r *reader) row(line int, text string) {
	fields := split(text, r.separator)
	switch {
	case strings.TrimSpace(text) == "":
		r.fault(line, 1, "an empty line", "a row on every line up to the last", "take the line out or fill it in")
		return
	case len(fields) == 1:
		r.fault(line, utf8.RuneCountInString(text)+1, "one column", "cam angle and lift", "write the missing number, parted from the other by "+separatorName(r.separator)+" as in the header")
		return
	case len(fields) > r.columns:
		advice := "take out what is too much"
		if r.separator == ',' {
			advice = "write numbers with a decimal point, or part the columns by semicolons"
		}
		r.fault(line, fields[r.columns].column, fmt.Sprintf("%d columns", len(fields)), fmt.Sprintf("the %d of the header", r.columns), advice)
		return
	}
	angle, okAngle := r.number(line, fields[0], "cam angle, degrees", MostAngle)
	lift, okLift := r.number(line, fields[1], "lift", MostLift)
	if okAngle {
		okAngle = r.order(line, fields[0], angle)
	}
	if okAngle && okLift {
		r.Angle, r.Lift, r.Line = append(r.Angle, angle), append(r.Lift, lift), append(r.Line, line)
		r.second = fields[1].column
	}
}

// order checks a cam angle against the line before and the first row.
func (r *reader) order(line int, f field, angle float64) bool {
	if len(r.Angle) == 0 {
		r.previous = angle
		return true
	}
	previous := r.previous
	r.previous = angle
	first := r.Angle[0]
	switch {
	case angle == previous:
		r.fault(line, f.column, "cam angle "+quoted(f.text)+" a second time", "every cam angle once", "take one of the two rows out")
	case angle < previous:
		r.fault(line, f.column, fmt.Sprintf("cam angle %s after %g", quoted(f.text), previous), "cam angles that increase from row to row", "sort the rows by cam angle; where the table runs through 360 go on with 361")
	case angle-previous < Closest:
		r.fault(line, f.column, fmt.Sprintf("cam angle %s after %g", quoted(f.text), previous), fmt.Sprintf("steps of at least %g degrees", Closest), "take one of the two rows out")
	case angle-first >= turn+Closest || previous-first > turn-Closest:
		if !r.beyond {
			r.fault(line, f.column, fmt.Sprintf("cam angle %s, more than a turn after the first row's %g", quoted(f.text), first), fmt.Sprintf("one turn: from %g to %g", first, first+turn), "end the table there")
		}
		r.beyond = true
	default:
		return true
	}
	return false
}

// close drops the row that closes the turn and counts the rows.
func (r *reader) close() {
	n := len(r.Angle)
	if n > 1 && r.Angle[n-1]-r.Angle[0] > turn-Closest {
		if apart := math.Abs(r.Lift[n-1] - r.Lift[0]); !(apart <= r.smoothing) {
			r.fault(r.Line[n-1], r.second, fmt.Sprintf("lift %g a turn after lift %g", r.Lift[n-1], r.Lift[0]),
				fmt.Sprintf("the first row's lift, within the smoothing of %g", r.smoothing), "correct one of the two rows, or take the last one out")
		}
		n--
		r.Angle, r.Lift, r.Line = r.Angle[:n], r.Lift[:n], r.Line[:n]
	}
	allowed := fmt.Sprintf("%d to %d rows over one turn", LeastRows, MostRows)
	switch {
	case n < LeastRows && len(r.faults) == 0:
		last := 1
		if n > 0 {
			last = r.Line[n-1]
		}
		r.fault(last, 1, fmt.Sprintf("%d rows", n), allowed, "give the lift at more cam angles")
	case n > MostRows:
		r.fault(r.Line[MostRows], 1, fmt.Sprintf("row %d", MostRows+1), allowed, "leave out every second row, or average neighbors")
	}
}

// number reads a field as a number of at most the given size.
func (r *reader) number(line int, f field, what string, most float64) (float64, bool) {
	v, ok := number(f.text)
	switch {
	case ok && math.Abs(v) <= most:
		return v, true
	case ok:
		r.fault(line, f.column, quoted(f.text), fmt.Sprintf("%s, at most %g", what, most), "correct the number")
	case f.text == "":
		r.fault(line, f.column, "nothing", what, "fill in the number or take the row out")
	case strings.ContainsRune(f.text, ',') && isDecimalComma(f.text):
		r.fault(line, f.column, quoted(f.text), what+", with a decimal point", "write "+strings.Replace(f.text, ",", ".", 1))
	default:
		r.fault(line, f.column, quoted(f.text), what+", a finite number such as 12.5", "correct the number or take the row out")
	}
	return 0, false
}
