package read

import (
	"slices"
	"strings"

	"lobewright/synth/plane"
)

// parser holds what is known of the file so far.
type parser struct {
	file      File
	comments  []string        // before the first section
	lineTypes map[string]bool // in capitals
	layers    map[string]bool // as written
	names     map[string]bool // of layers, in capitals
}

// order lists the sections as they must follow each other.
func order() []string {
	return []string{"HEADER", "CLASSES", "TABLES", "BLOCKS", "ENTITIES", "OBJECTS"}
}

// sections walks the records of the file, section by section.
func (p *parser) sections(pairs []pair) error {
	for _, g := range pairs {
		if g.code != codeComment {
			break
		}
		p.comments = append(p.comments, g.value)
	}
	all, err := records(pairs)
	if err != nil {
		return err
	}
	last := -1
	for len(all) > 1 { // EOF is the last record
		name, body, rest, err := cutSection(all)
		if err != nil {
			return err
		}
		at := slices.Index(order(), name)
		if at < 0 {
			return fault(all[0].line, "section %.60q is unknown; allowed are %s", name, strings.Join(order(), ", "))
		}
		if at <= last {
			return fault(all[0].line, "section %s comes after %s; the order is %s, each once", name, order()[last], strings.Join(order(), ", "))
		}
		if err := p.section(name, all[0], body); err != nil {
			return err
		}
		last, all = at, rest
	}
	end := all[0]
	switch {
	case p.file.Version == "":
		return fault(end.line, "the file has no header")
	case last < slices.Index(order(), "ENTITIES"):
		return fault(end.line, "the file has no ENTITIES section")
	case len(end.groups) > 0:
		return fault(end.groups[0].line, "there are groups after EOF")
	}
	return nil
}

// cutSection takes one section off: its name, the records in it, what follows.
func cutSection(all []record) (name string, body, rest []record, err error) {
	head := all[0]
	if head.name != "SECTION" {
		return "", nil, nil, fault(head.line+1, "%.60q stands where a SECTION must begin", head.name)
	}
	if len(head.groups) == 0 || head.groups[0].code != 2 {
		return "", nil, nil, fault(head.line, "the section has no name (group 2)")
	}
	name = head.groups[0].value
	for i, r := range all[1:] {
		switch r.name {
		case "ENDSEC":
			if len(r.groups) > 0 {
				return "", nil, nil, fault(r.groups[0].line, "a group stands between ENDSEC and the next SECTION")
			}
			return name, all[1 : i+1], all[i+2:], nil
		case "SECTION", "EOF":
			return "", nil, nil, fault(r.line, "section %.60q does not end: %s stands before its ENDSEC", name, r.name)
		}
	}
	return "", nil, nil, fault(head.line, "section %.60q does not end", name)
}

func (p *parser) section(name string, head record, body []record) error {
	if name == "HEADER" {
		if len(body) > 0 {
			return fault(body[0].line, "%.60q stands in the header, which has variables only", body[0].name)
		}
		return p.header(head)
	}
	if p.file.Version == "" {
		return fault(head.line, "section %s stands before the header", name)
	}
	if len(head.groups) > 1 {
		return fault(head.groups[1].line, "group %d stands between the name of section %s and its first record", head.groups[1].code, name)
	}
	switch name {
	case "TABLES":
		return p.tables(body)
	case "BLOCKS":
		return blocks(body)
	case "ENTITIES":
		return p.entities(body)
	}
	return nil
}

// header reads the variables; those it does not know are passed over.
func (p *parser) header(head record) error {
	variables := map[string][]pair{}
	name := ""
	for _, g := range head.groups[1:] {
		switch {
		case g.code == 9 && variables[g.value] != nil:
			return fault(g.line+1, "variable %.60s is there twice", g.value)
		case g.code == 9:
			name = g.value
			variables[name] = []pair{}
		case name == "":
			return fault(g.line, "group %d stands before the first variable", g.code)
		default:
			variables[name] = append(variables[name], g)
		}
	}
	if err := p.version(head, variables["$ACADVER"]); err != nil {
		return err
	}
	if err := p.units(head, variables["$INSUNITS"], variables["$MEASUREMENT"]); err != nil {
		return err
	}
	var err error
	if p.file.Min, err = corner(head, "$EXTMIN", variables["$EXTMIN"]); err != nil {
		return err
	}
	p.file.Max, err = corner(head, "$EXTMAX", variables["$EXTMAX"])
	return err
}

func (p *parser) version(head record, groups []pair) error {
	if len(groups) != 1 || groups[0].code != 1 {
		return fault(head.line, "the header does not state the version ($ACADVER)")
	}
	switch groups[0].value {
	case "AC1015":
		p.file.Version = "2000"
	case "AC1009":
		p.file.Version = "r12"
	default:
		return fault(groups[0].line+1, "version %.60q; taken are AC1015 (2000) and AC1009 (r12)", groups[0].value)
	}
	return nil
}

// units reads the unit from the header, or in r12 from a comment before it.
func (p *parser) units(head record, insunits, measurement []pair) error {
	for _, c := range p.comments {
		switch c {
		case "UNITS: MILLIMETERS":
			p.file.Unit = Millimeter
		case "UNITS: INCHES":
			p.file.Unit = Inch
		}
	}
	if len(insunits) != 1 {
		if p.file.Version == "2000" {
			return fault(head.line, "the header does not state the unit ($INSUNITS)")
		}
		return nil
	}
	said := p.file.Unit
	switch strings.Trim(insunits[0].value, " ") {
	case "1":
		p.file.Unit = Inch
	case "4":
		p.file.Unit = Millimeter
	default:
		return fault(insunits[0].line+1, "$INSUNITS is %.60q; taken are 1 (inch) and 4 (millimeter)", insunits[0].value)
	}
	if said != Unknown && said != p.file.Unit {
		return fault(insunits[0].line+1, "$INSUNITS says %s, a comment above says %s", p.file.Unit, said)
	}
	if len(measurement) == 1 && (strings.Trim(measurement[0].value, " ") == "1") != (p.file.Unit == Millimeter) {
		return fault(measurement[0].line+1, "$MEASUREMENT is %.60q although $INSUNITS says %s", measurement[0].value, p.file.Unit)
	}
	return nil
}

// corner reads a point of the header.
func corner(head record, name string, groups []pair) (plane.Point, error) {
	if len(groups) < 2 || groups[0].code != 10 || groups[1].code != 20 {
		return plane.Point{}, fault(head.line, "the header does not state %s as groups 10 and 20", name)
	}
	x, err := groups[0].float()
	if err != nil {
		return plane.Point{}, err
	}
	y, err := groups[1].float()
	return plane.Point{X: x, Y: y}, err
}

// blocks refuses entities inside block definitions, where they are not cut.
func blocks(body []record) error {
	for _, r := range body {
		if r.name != "BLOCK" && r.name != "ENDBLK" {
			return fault(r.line+1, "%.60q stands inside a block; blocks must be empty", r.name)
		}
	}
	return nil
}
