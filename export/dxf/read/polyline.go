package read

import "lobewright/synth/plane"

// LargestBulge bounds a bulge; an arc of 1000 covers 359.8 degrees.
const LargestBulge = 1000

// lwPolyline reads an LWPOLYLINE: groups that stand once, and for each vertex X, Y
// and perhaps a bulge.
func (p *parser) lwPolyline(r record) error {
	l := Polyline{Line: r.line}
	others, err := l.gather(r.groups)
	if err != nil {
		return err
	}
	f, layer, err := p.entityFields(record{r.name, r.line, others}, 38, 43, 70, 90)
	if err != nil {
		return err
	}
	l.Layer = layer
	count, err := f.integer(90, 0)
	if err != nil {
		return err
	}
	if count != len(l.Points) {
		return fault(r.line, "the LWPOLYLINE states %d vertices (group 90) and has %d", count, len(l.Points))
	}
	return p.add(l, f, 38, 43)
}

// gather takes the vertices out of the groups of an LWPOLYLINE and returns the others.
func (l *Polyline) gather(groups []pair) (others []pair, err error) {
	last := 0 // code of the group before
	for _, g := range groups {
		if last == 10 && g.code != 20 {
			return nil, fault(g.line, "group %d follows X (10); Y (20) must stand here", g.code)
		}
		switch g.code {
		case 10:
			err = l.addX(g)
		case 20:
			if last != 10 {
				return nil, fault(g.line, "Y (20) stands without an X (10) before it")
			}
			l.Points[len(l.Points)-1].Y, err = g.float()
		case 42:
			if last != 20 {
				return nil, fault(g.line, "a bulge (42) must follow Y (20) of its vertex, once")
			}
			l.Bulges[len(l.Bulges)-1], err = g.bulge()
		default:
			others = append(others, g)
		}
		if err != nil {
			return nil, err
		}
		last = g.code
	}
	if last == 10 {
		return nil, fault(l.Line, "the last X (10) has no Y (20)")
	}
	return others, nil
}

func (l *Polyline) addX(g pair) error {
	x, err := g.float()
	l.Points = append(l.Points, plane.Point{X: x})
	l.Bulges = append(l.Bulges, 0)
	return err
}

func (p pair) bulge() (float64, error) {
	b, err := p.float()
	if err == nil && (b > LargestBulge || b < -LargestBulge) {
		err = fault(p.line+1, "bulge %g; magnitudes up to %d are taken", b, LargestBulge)
	}
	return b, err
}

// polyline reads a POLYLINE with its VERTEX records up to SEQEND.
func (p *parser) polyline(body []record) (int, error) {
	head := body[0]
	f, layer, err := p.entityFields(head, 10, 20, 30, 40, 41, 66, 70, 75)
	if err != nil {
		return 0, err
	}
	if _, follow := f.byCode[66]; !follow {
		return 0, fault(head.line, "the POLYLINE does not say that vertices follow (group 66)")
	}
	if err := f.is(66, 1); err != nil {
		return 0, err
	}
	l := Polyline{Layer: layer, Line: head.line}
	for i, r := range body[1:] {
		switch r.name {
		case "VERTEX":
			if err := p.vertex(&l, r); err != nil {
				return 0, err
			}
		case "SEQEND":
			if _, _, err := p.entityFields(r); err != nil {
				return 0, err
			}
			return i + 2, p.add(l, f, 10, 20, 30, 40, 41, 75)
		default:
			return 0, fault(r.line+1, "%.60q stands among the vertices of a POLYLINE", r.name)
		}
	}
	return 0, fault(head.line, "the POLYLINE has no SEQEND")
}

func (p *parser) vertex(l *Polyline, r record) error {
	f, layer, err := p.entityFields(r, 10, 20, 30, 40, 41, 42, 70)
	if err != nil {
		return err
	}
	if layer != l.Layer {
		return fault(r.line, "the VERTEX is on layer %q, its POLYLINE on %q", layer, l.Layer)
	}
	for _, code := range []int{40, 41, 70} {
		if err := f.is(code, 0); err != nil {
			return err
		}
	}
	at, err := f.point(10)
	if err != nil {
		return err
	}
	bulge := 0.0
	if g, ok := f.byCode[42]; ok {
		if bulge, err = g.bulge(); err != nil {
			return err
		}
	}
	l.Points = append(l.Points, at)
	l.Bulges = append(l.Bulges, bulge)
	return nil
}

// add checks a polyline as a whole and keeps it. The groups of rest (width, elevation,
// curve kind) must be 0 where they stand; of the flags only "closed" (1) may be set, and
// the pattern rule (128), which says nothing about the shape.
func (p *parser) add(l Polyline, f fields, rest ...int) error {
	for _, code := range rest {
		if err := f.is(code, 0); err != nil {
			return err
		}
	}
	flags, err := f.integer(70, 0)
	if err != nil {
		return err
	}
	if flags&^(1|128) != 0 {
		return fault(f.byCode[70].line+1, "flags %d; a flat polyline of lines and arcs has 0 or 1", flags)
	}
	l.Closed = flags&1 != 0
	n := len(l.Points)
	if n < 2 {
		return fault(l.Line, "the polyline has %d vertices; at least 2 are needed", n)
	}
	for i, at := range l.Points {
		if i == n-1 && !l.Closed {
			break
		}
		if at == l.Points[(i+1)%n] {
			return fault(l.Line, "vertex %d of the polyline is the same point as the next, (%g, %g)", i+1, at.X, at.Y)
		}
	}
	if !l.Closed && l.Bulges[n-1] != 0 {
		return fault(l.Line, "the last bulge of an open polyline is %g; it leads nowhere", l.Bulges[n-1])
	}
	p.file.Polylines = append(p.file.Polylines, l)
	return nil
}
