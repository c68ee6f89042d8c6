package read

import "strings"

// tables reads the line types and the layers; other tables are passed over.
func (p *parser) tables(body []record) error {
	table := ""
	seen := map[string]bool{}
	for _, r := range body {
		switch {
		case r.name == "TABLE" && table != "":
			return fault(r.line, "table %.60q does not end before the next", table)
		case r.name == "TABLE":
			if len(r.groups) == 0 || r.groups[0].code != 2 || seen[r.groups[0].value] {
				return fault(r.line, "the table has no name (group 2), or one that is taken")
			}
			table = r.groups[0].value
			seen[table] = true
		case r.name == "ENDTAB":
			table = ""
		case table == "" || r.name != table:
			return fault(r.line+1, "%.60q stands in table %.60q", r.name, table)
		case r.name == "LTYPE":
			if err := p.lineType(r); err != nil {
				return err
			}
		case r.name == "LAYER":
			if err := p.layer(r); err != nil {
				return err
			}
		}
	}
	if table != "" {
		return fault(body[len(body)-1].line, "table %.60q does not end", table)
	}
	return nil
}

func (p *parser) lineType(r record) error {
	for _, g := range r.groups {
		if g.code == 2 {
			p.lineTypes[strings.ToUpper(g.value)] = true
			return nil
		}
	}
	return fault(r.line, "the line type has no name (group 2)")
}

// layer reads a layer, which must be on, thawed and unique whatever the case of
// its letters, and of a line type declared before.
func (p *parser) layer(r record) error {
	f, err := newFields(r, "layer", 2, 5, 6, 62, 70, 290, 330, 370, 390)
	if err != nil {
		return err
	}
	l := Layer{Line: r.line, Name: f.text(2), LineType: f.text(6)}
	if l.Name == "" {
		return fault(r.line, "the layer has no name (group 2)")
	}
	if p.names[strings.ToUpper(l.Name)] {
		return fault(r.line, "layer %q is declared twice", l.Name)
	}
	p.names[strings.ToUpper(l.Name)] = true
	if l.Color, err = f.integer(62, 7); err != nil {
		return err
	}
	flags, err := f.integer(70, 0)
	if err != nil {
		return err
	}
	if l.Color < 1 || l.Color > 255 || flags&^64 != 0 {
		return fault(r.line, "layer %q is off, frozen or locked (color %d, flags %d)", l.Name, l.Color, flags)
	}
	if !p.lineTypes[strings.ToUpper(l.LineType)] {
		return fault(r.line, "layer %q has the line type %q, which is not declared", l.Name, l.LineType)
	}
	p.layers[l.Name] = true
	p.file.Layers = append(p.file.Layers, l)
	return nil
}
