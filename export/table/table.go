// Package table writes the two tables of a release pack as comma-separated
// values: what the inspector measures, and how the follower moves.
//
// Form. One header line, then one line a row; fields are parted by commas and
// hold only digits, a point, a minus sign or the word inf, so that none needs
// quoting. This is the format of RFC 4180 but for the line end, which is a
// single line feed: every spreadsheet takes it, and the bytes survive tools
// that treat a carriage return as text. The decimal mark is always a point.
//
// Numbers have a fixed count of decimals and are never -0. A length, and
// every quantity made of lengths, has the decimals asked for; an angle has
// AngleDecimals. The last digit is rounded to nearest; the value may
// be half a digit off.
//
// Junctions. Where a law changes, acceleration, jerk or the radius of curvature may
// jump. Such an angle has two rows with the same cam angle: the first holds
// the values just before it, the second those just after. Rows are otherwise
// in order of cam angle.
package table

import (
	"fmt"
	"math"
	"strconv"

	"lobewright/synth/plane"
)

// AngleDecimals is the count of decimals of every angle, in degrees. One
// millionth of a degree is 1.7e-6 of length at radius 100.
const AngleDecimals = 6

// LargestDecimals bounds the decimals of a length: a float64 carries about
// 15 digits, and the lengths of a cam have up to 4 before the point.
const LargestDecimals = 11

// StraightRadius is the radius of curvature, in units of length, from which a
// curve is called straight and its radius written as inf: a chord of 100 on a
// radius of 1e9 has a height of 1.25e-6, the last digit of a table in mm.
const StraightRadius = 1e9

// LargestValue bounds every other number. Above it a float64 no longer holds
// the decimals that would be printed, and no cam has such a figure.
const LargestValue = 1e15

// field is one number of a row with the way it is printed.
type field struct {
	name  string
	value float64
	as    form
}

type form uint8

const (
	plain  form = iota // a length or a quantity made of lengths
	angle              // degrees, as it stands
	turn               // degrees, brought into 0 <= a < 360
	radius             // a radius of curvature: infinite is allowed
	blank              // no value: the field is left empty
)

// header joins the names of a row's fields.
func header(fields []field) []byte {
	var b []byte
	for i, f := range fields {
		if i > 0 {
			b = append(b, ',')
		}
		b = append(b, f.name...)
	}
	return append(b, '\n')
}

// appendRow prints one row. The error names the field.
func appendRow(b []byte, fields []field, decimals int) ([]byte, error) {
	for i, f := range fields {
		if i > 0 {
			b = append(b, ',')
		}
		s, err := f.print(decimals)
		if err != nil {
			return nil, err
		}
		b = append(b, s...)
	}
	return append(b, '\n'), nil
}

// print gives the text of a field.
func (f field) print(decimals int) (string, error) {
	if f.as == blank {
		return "", nil
	}
	if math.IsNaN(f.value) {
		return "", fmt.Errorf("%s is not a number (NaN); every figure of a table must be known", f.name)
	}
	if f.as == radius && math.Abs(f.value) >= StraightRadius {
		return "inf", nil
	}
	if math.Abs(f.value) > LargestValue {
		return "", fmt.Errorf("%s is %g; a table holds magnitudes up to %g", f.name, f.value, LargestValue)
	}
	switch f.as {
	case angle:
		return fixed(f.value, AngleDecimals), nil
	case turn:
		return fixedTurn(f.value), nil
	}
	return fixed(f.value, decimals), nil
}

// fixed prints v with the given decimals, and zero without a minus sign.
func fixed(v float64, decimals int) string {
	s := strconv.FormatFloat(v, 'f', decimals, 64)
	if s[0] != '-' {
		return s
	}
	for _, c := range s[1:] {
		if c != '0' && c != '.' {
			return s
		}
	}
	return s[1:]
}

// fixedTurn prints an angle of a full turn, 0 <= a < 360 also after rounding.
func fixedTurn(deg float64) string {
	s := fixed(plane.Wrap360(deg), AngleDecimals)
	if s == fixed(360, AngleDecimals) {
		return fixed(0, AngleDecimals)
	}
	return s
}

// checkDecimals refuses decimals a float64 cannot carry.
func checkDecimals(decimals int) error {
	if decimals < 0 || decimals > LargestDecimals {
		return fmt.Errorf("%d decimals of length asked for; a table prints 0 to %d", decimals, LargestDecimals)
	}
	return nil
}

// write prints a whole table of n rows, whose fields row gives.
func write(what string, n, decimals int, row func(i int) []field) ([]byte, error) {
	if err := checkDecimals(decimals); err != nil {
		return nil, fmt.Errorf("%s table: %w", what, err)
	}
	if n == 0 {
		return nil, fmt.Errorf("%s table: it has no rows", what)
	}
	b := header(row(0))
	last := math.Inf(-1)
	for i := range n {
		fields := row(i)
		at := fields[0].value
		if at < last {
			return nil, fmt.Errorf("%s table: row %d: cam angle %g comes after %g; rows must be in order of cam angle", what, i+1, at, last)
		}
		last = at
		var err error
		if b, err = appendRow(b, fields, decimals); err != nil {
			return nil, fmt.Errorf("%s table: row %d at cam angle %g: %w", what, i+1, at, err)
		}
	}
	return b, nil
}
