package read

import (
	"slices"

	"lobewright/synth/plane"
)

// fields are the groups of a record in which each code stands once.
type fields struct {
	record record
	what   string
	byCode map[int]pair
}

// newFields sorts the groups of a record by code. Codes that are not allowed or
// stand twice are faults; subclass markers (100) may stand anywhere.
func newFields(r record, what string, allowed ...int) (fields, error) {
	f := fields{r, what, map[int]pair{}}
	for _, g := range r.groups {
		if g.code == 100 {
			continue
		}
		if !slices.Contains(allowed, g.code) {
			return f, fault(g.line, "group %d is not known in a %s", g.code, what)
		}
		if _, twice := f.byCode[g.code]; twice {
			return f, fault(g.line, "group %d stands twice in a %s", g.code, what)
		}
		f.byCode[g.code] = g
	}
	return f, nil
}

// text returns a value as it stands, empty when it is missing.
func (f fields) text(code int) string { return f.byCode[code].value }

// integer returns a whole number, or other when it is missing.
func (f fields) integer(code, other int) (int, error) {
	if g, ok := f.byCode[code]; ok {
		return g.integer()
	}
	return other, nil
}

// float returns a figure that must be there.
func (f fields) float(code int) (float64, error) {
	g, ok := f.byCode[code]
	if !ok {
		return 0, fault(f.record.line, "the %s lacks group %d", f.what, code)
	}
	return g.float()
}

// point returns a point of the plane Z0; code is that of X.
func (f fields) point(code int) (plane.Point, error) {
	x, err := f.float(code)
	if err != nil {
		return plane.Point{}, err
	}
	y, err := f.float(code + 10)
	if err != nil {
		return plane.Point{}, err
	}
	return plane.Point{X: x, Y: y}, f.is(code+20, 0)
}

// size returns a figure above 0.
func (f fields) size(code int) (float64, error) {
	v, err := f.float(code)
	if err == nil && v <= 0 {
		err = fault(f.byCode[code].line+1, "%g in a %s; it must be above 0 (group %d)", v, f.what, code)
	}
	return v, err
}

// is refuses another figure than the one given, unless the group is missing.
func (f fields) is(code int, only float64) error {
	g, ok := f.byCode[code]
	if !ok {
		return nil
	}
	return g.is(only, f.what)
}

// is refuses another figure than the one given.
func (p pair) is(only float64, what string) error {
	v, err := p.float()
	if err == nil && v != only {
		err = fault(p.line+1, "group %d is %g in a %s; only %g is taken", p.code, v, what, only)
	}
	return err
}

// flat checks the groups of entities that must have their resting value: in the model, visible, without
// thickness, extruded along +Z.
func (f fields) flat() error {
	for _, c := range []struct {
		code int
		only float64
	}{{39, 0}, {60, 0}, {67, 0}, {210, 0}, {220, 0}, {230, 1}} {
		if err := f.is(c.code, c.only); err != nil {
			return err
		}
	}
	return nil
}
