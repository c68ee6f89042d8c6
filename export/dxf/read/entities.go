package read

// commonCodes are the groups every entity may have: handle, line type, layer,
// thickness, line type scale, visibility, color, space, extrusion, owner, weight.
func commonCodes() []int { return []int{5, 6, 8, 39, 48, 60, 62, 67, 210, 220, 230, 330, 370} }

// entities reads the ENTITIES section.
func (p *parser) entities(body []record) error {
	for len(body) > 0 {
		used, err := p.entity(body)
		if err != nil {
			return err
		}
		body = body[used:]
	}
	return nil
}

// entity reads the first entity and tells how many records it has.
func (p *parser) entity(body []record) (int, error) {
	r := body[0]
	switch r.name {
	case "LWPOLYLINE":
		if p.file.Version == "r12" {
			return 0, fault(r.line+1, "LWPOLYLINE in an r12 file; that version has POLYLINE")
		}
		return 1, p.lwPolyline(r)
	case "POLYLINE":
		return p.polyline(body)
	case "CIRCLE":
		return 1, p.circle(r)
	case "ARC":
		return 1, p.arc(r)
	case "LINE":
		return 1, p.line(r)
	case "TEXT":
		return 1, p.text(r)
	}
	return 0, fault(r.line+1, "entity %.60q; taken are LWPOLYLINE, POLYLINE, CIRCLE, ARC, LINE and TEXT", r.name)
}

// entityFields sorts an entity's groups, and checks layer and flatness.
func (p *parser) entityFields(r record, codes ...int) (fields, string, error) {
	f, err := newFields(r, r.name, append(codes, commonCodes()...)...)
	if err != nil {
		return f, "", err
	}
	layer := f.text(8)
	if !p.layers[layer] {
		return f, "", fault(r.line, "the %s is on layer %.60q, which is not declared", r.name, layer)
	}
	return f, layer, f.flat()
}

func (p *parser) circle(r record) error {
	f, layer, err := p.entityFields(r, 10, 20, 30, 40)
	if err != nil {
		return err
	}
	c := Circle{Layer: layer, Line: r.line}
	if c.Center, err = f.point(10); err != nil {
		return err
	}
	if c.Radius, err = f.size(40); err != nil {
		return err
	}
	p.file.Circles = append(p.file.Circles, c)
	return nil
}

func (p *parser) arc(r record) error {
	f, layer, err := p.entityFields(r, 10, 20, 30, 40, 50, 51)
	if err != nil {
		return err
	}
	a := Arc{Layer: layer, Line: r.line}
	if a.Center, err = f.point(10); err != nil {
		return err
	}
	if a.Radius, err = f.size(40); err != nil {
		return err
	}
	if a.From, err = f.float(50); err != nil {
		return err
	}
	if a.To, err = f.float(51); err != nil {
		return err
	}
	if a.From == a.To {
		return fault(r.line, "the ARC starts and ends at %g degrees", a.From)
	}
	p.file.Arcs = append(p.file.Arcs, a)
	return nil
}

func (p *parser) line(r record) error {
	f, layer, err := p.entityFields(r, 10, 20, 30, 11, 21, 31)
	if err != nil {
		return err
	}
	l := Line{Layer: layer, Line: r.line}
	if l.From, err = f.point(10); err != nil {
		return err
	}
	if l.To, err = f.point(11); err != nil {
		return err
	}
	if l.From == l.To {
		return fault(r.line, "the LINE has no length")
	}
	p.file.Lines = append(p.file.Lines, l)
	return nil
}

func (p *parser) text(r record) error {
	f, layer, err := p.entityFields(r, 1, 7, 10, 20, 30, 40, 41, 50, 51, 71, 72, 73)
	if err != nil {
		return err
	}
	for _, code := range []int{51, 71, 72, 73} {
		if err := f.is(code, 0); err != nil {
			return err
		}
	}
	t := Text{Layer: layer, Line: r.line}
	if t.At, err = f.point(10); err != nil {
		return err
	}
	if t.Height, err = f.size(40); err != nil {
		return err
	}
	if _, turned := f.byCode[50]; turned {
		if t.Angle, err = f.float(50); err != nil {
			return err
		}
	}
	value, ok := f.byCode[1]
	if !ok {
		return fault(r.line, "the TEXT has no text (group 1)")
	}
	if t.Value, err = decode(value); err != nil {
		return err
	}
	p.file.Texts = append(p.file.Texts, t)
	return nil
}
