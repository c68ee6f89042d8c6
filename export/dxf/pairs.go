package dxf

import (
	"bytes"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"

	"github.com/yofu/dxf/format"

	"lobewright/tolerance/chain"
)

// LargestCoordinate bounds every length and coordinate, in the units of the
// drawing. Nothing drawn here is ten kilometers wide; a figure beyond is a fault.
const LargestCoordinate = 1e7

// lineEnd ends every line of the file.
const lineEnd = "\r\n"

// pairs collects group codes and values. It is the formatter handed to the
// library's sections, and it remembers the first value that no file may hold:
// a figure that is not finite, a character that is not printable ASCII.
type pairs struct {
	buf bytes.Buffer
	err error
}

var _ format.Formatter = (*pairs)(nil)

// Reset empties the buffer and forgets the fault.
func (f *pairs) Reset() { f.buf.Reset(); f.err = nil }

// WriteTo writes what was collected.
func (f *pairs) WriteTo(w io.Writer) (int64, error) { return f.buf.WriteTo(w) }

// SetPrecision does nothing: figures have the digits they need.
func (f *pairs) SetPrecision(int) {}

// Output returns what was collected and empties the buffer.
func (f *pairs) Output() string {
	s := f.buf.String()
	f.buf.Reset()
	return s
}

// String returns a pair with a text value, which must be printable ASCII.
func (f *pairs) String(code int, value string) string {
	for i := range len(value) {
		if value[i] < 0x20 || value[i] > 0x7e {
			f.fail("group %d: the value %q is not printable ASCII", code, value)
			break
		}
	}
	return fmt.Sprintf("%3d%s%s%s", code, lineEnd, value, lineEnd)
}

// Hex returns a pair with a handle.
func (f *pairs) Hex(code int, value int) string { return f.String(code, fmt.Sprintf("%X", value)) }

// Int returns a pair with an integer.
func (f *pairs) Int(code int, value int) string { return f.String(code, strconv.Itoa(value)) }

// Float returns a pair with a figure, which must be finite.
func (f *pairs) Float(code int, value float64) string {
	if math.IsNaN(value) || math.IsInf(value, 0) {
		f.fail("group %d: %g is not a finite figure", code, value)
	}
	return f.String(code, shortest(value))
}

// WriteString, WriteHex, WriteInt and WriteFloat collect what their namesakes return.
func (f *pairs) WriteString(code int, value string) { f.buf.WriteString(f.String(code, value)) }
func (f *pairs) WriteHex(code int, value int)       { f.buf.WriteString(f.Hex(code, value)) }
func (f *pairs) WriteInt(code int, value int)       { f.buf.WriteString(f.Int(code, value)) }
func (f *pairs) WriteFloat(code int, value float64) { f.buf.WriteString(f.Float(code, value)) }

// point collects three coordinates of a point in the plane Z0; code is that of X.
func (f *pairs) point(code int, x, y float64) {
	f.WriteFloat(code, x)
	f.WriteFloat(code+10, y)
	f.WriteFloat(code+20, 0)
}

func (f *pairs) fail(message string, args ...any) {
	if f.err == nil {
		f.err = fmt.Errorf(message, args...)
	}
}

// shortest prints the shortest decimals that give v back, always with a point
// and without an exponent; minus zero is printed as zero.
func shortest(v float64) string {
	s := strconv.FormatFloat(v+0, 'f', -1, 64)
	if s == "-0" {
		s = "0"
	}
	if !strings.Contains(s, ".") {
		s += ".0"
	}
	return s
}

// decimal prints a count of grid steps as the integer with a point in it; a
// grid without decimals gives one zero after the point.
func decimal(g chain.Grid, count int64) string {
	s := g.Format(count)
	if g.Decimals == 0 {
		s += ".0"
	}
	return s
}
