package dxf

// writeR12 collects an AC1009 file: header, tables, no blocks, entities. It has
// no handles, no subclass markers and no entity younger than the release.
// The unit is told by a comment (group 999), which readers pass over.
func writeR12(f *pairs, d Drawing) {
	f.WriteString(999, unitComment(d.Inch))
	f.WriteString(0, "SECTION")
	f.WriteString(2, "HEADER")
	f.WriteString(9, "$ACADVER")
	f.WriteString(1, acadR12)
	writeExtent(f, d.extent())
	f.WriteString(0, "ENDSEC")
	f.WriteString(0, "SECTION")
	f.WriteString(2, "TABLES")
	writeLineTypesR12(f, d)
	writeLayersR12(f, d)
	writeStyleR12(f)
	f.WriteString(0, "ENDSEC")
	f.WriteString(0, "SECTION")
	f.WriteString(2, "BLOCKS")
	f.WriteString(0, "ENDSEC")
	f.WriteString(0, "SECTION")
	f.WriteString(2, "ENTITIES")
	writeEntitiesR12(f, d)
	f.WriteString(0, "ENDSEC")
	f.WriteString(0, "EOF")
}

// unitComment names the unit at the head of an R12 file.
func unitComment(inch bool) string {
	if inch {
		return "UNITS: INCHES"
	}
	return "UNITS: MILLIMETERS"
}

func writeLineTypesR12(f *pairs, d Drawing) {
	all := patterns(d.Inch)
	f.WriteString(0, "TABLE")
	f.WriteString(2, "LTYPE")
	f.WriteInt(70, len(all))
	for _, p := range all {
		total := 0.0
		for _, l := range p.lengths {
			total += max(l, -l)
		}
		f.WriteString(0, "LTYPE")
		f.WriteString(2, p.name)
		f.WriteInt(70, 64)
		f.WriteString(3, p.description)
		f.WriteInt(72, 65)
		f.WriteInt(73, len(p.lengths))
		f.WriteFloat(40, total)
		for _, l := range p.lengths {
			f.WriteFloat(49, l)
		}
	}
	f.WriteString(0, "ENDTAB")
}

func writeLayersR12(f *pairs, d Drawing) {
	names := append([]string{layerZero}, layersOf(d)...)
	f.WriteString(0, "TABLE")
	f.WriteString(2, "LAYER")
	f.WriteInt(70, len(names))
	for _, name := range names {
		look := lookOf(name)
		f.WriteString(0, "LAYER")
		f.WriteString(2, name)
		f.WriteInt(70, 64)
		f.WriteInt(62, int(look.color))
		f.WriteString(6, look.lineType)
	}
	f.WriteString(0, "ENDTAB")
}

func writeStyleR12(f *pairs) {
	f.WriteString(0, "TABLE")
	f.WriteString(2, "STYLE")
	f.WriteInt(70, 1)
	f.WriteString(0, "STYLE")
	f.WriteString(2, "STANDARD")
	f.WriteInt(70, 0)
	f.WriteFloat(40, 0)
	f.WriteFloat(41, 1)
	f.WriteFloat(50, 0)
	f.WriteInt(71, 0)
	f.WriteFloat(42, 1)
	f.WriteString(3, "txt")
	f.WriteString(4, "")
	f.WriteString(0, "ENDTAB")
}

func writeEntitiesR12(f *pairs, d Drawing) {
	for _, p := range d.Polylines {
		writePolylineR12(f, p)
	}
	for _, c := range d.Circles {
		f.entity("CIRCLE", c.Layer)
		f.point(10, c.Center.X, c.Center.Y)
		f.WriteFloat(40, c.Radius)
	}
	for _, a := range d.Arcs {
		f.entity("ARC", a.Layer)
		f.point(10, a.Center.X, a.Center.Y)
		f.WriteFloat(40, a.Radius)
		f.WriteFloat(50, a.From)
		f.WriteFloat(51, a.To)
	}
	for _, l := range d.Lines {
		f.entity("LINE", l.Layer)
		f.point(10, l.From.X, l.From.Y)
		f.point(11, l.To.X, l.To.Y)
	}
	for _, t := range d.Texts {
		f.entity("TEXT", t.Layer)
		f.point(10, t.At.X, t.At.Y)
		f.WriteFloat(40, t.Height)
		f.WriteString(1, encode(t.Value))
		f.WriteFloat(50, t.Angle)
	}
}

func writePolylineR12(f *pairs, p Polyline) {
	f.entity("POLYLINE", p.Layer)
	f.WriteInt(66, 1)
	f.point(10, 0, 0)
	f.WriteInt(70, closedFlag(p.Closed))
	for _, v := range p.Vertices {
		f.entity("VERTEX", p.Layer)
		f.WriteString(10, decimal(p.Grid, v.P.X))
		f.WriteString(20, decimal(p.Grid, v.P.Y))
		f.WriteFloat(30, 0)
		if v.Bulge != 0 {
			f.WriteFloat(42, v.Bulge)
		}
	}
	f.entity("SEQEND", p.Layer)
}

// entity collects the two groups every R12 entity begins with.
func (f *pairs) entity(name, layer string) {
	f.WriteString(0, name)
	f.WriteString(8, layer)
}
