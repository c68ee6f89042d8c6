package dxf

import (
	"github.com/yofu/dxf/class"
	"github.com/yofu/dxf/drawing"
	"github.com/yofu/dxf/entity"
	"github.com/yofu/dxf/handle"
	"github.com/yofu/dxf/object"
	"github.com/yofu/dxf/table"
)

// Codes of the header.
const (
	acadR2000 = "AC1015"
	acadR12   = "AC1009"

	unitsInch       = 1 // $INSUNITS
	unitsMillimeter = 4
)

// writeR2000 builds the sections of an AC1015 file, numbers every object in
// them, and collects them. All objects belong to this call alone.
func writeR2000(f *pairs, d Drawing) {
	extent := d.extent()
	objects := newObjects()
	t := newTables(d, extent, objects.normal)
	sections := []drawing.Section{
		class.New(),
		t.all,
		blocks{newBlock(t.model), newBlock(t.paper)},
		t.entities(d),
		objects.all,
	}
	next := 1
	for _, s := range sections {
		s.SetHandle(&next)
	}
	writeHeader(f, d, extent, next)
	for _, s := range sections {
		s.Format(f)
	}
	f.WriteString(0, "EOF")
}

// writeHeader collects the header of an AC1015 file; seed is the first unused handle.
func writeHeader(f *pairs, d Drawing, extent box, seed int) {
	units, metric := unitsMillimeter, 1
	if d.Inch {
		units, metric = unitsInch, 0
	}
	f.WriteString(0, "SECTION")
	f.WriteString(2, "HEADER")
	f.WriteString(9, "$ACADVER")
	f.WriteString(1, acadR2000)
	f.WriteString(9, "$DWGCODEPAGE")
	f.WriteString(3, "ANSI_1252")
	writeExtent(f, extent)
	f.WriteString(9, "$LUNITS") // decimal
	f.WriteInt(70, 2)
	f.WriteString(9, "$LTSCALE")
	f.WriteFloat(40, 1)
	f.WriteString(9, "$INSUNITS")
	f.WriteInt(70, units)
	f.WriteString(9, "$MEASUREMENT")
	f.WriteInt(70, metric)
	f.WriteString(9, "$HANDSEED")
	f.WriteHex(5, seed)
	f.WriteString(0, "ENDSEC")
}

// writeExtent collects the header variables both versions have.
func writeExtent(f *pairs, extent box) {
	f.WriteString(9, "$INSBASE")
	f.point(10, 0, 0)
	f.WriteString(9, "$EXTMIN")
	f.point(10, extent.min.X, extent.min.Y)
	f.WriteString(9, "$EXTMAX")
	f.point(10, extent.max.X, extent.max.Y)
}

// tables is the TABLES section with what the entities need of it.
type tables struct {
	all          table.Tables
	layers       map[string]*table.Layer
	style        *table.Style
	model, paper *table.BlockRecord
}

// newTables builds the nine tables in the order the format asks for. The
// library's own New is not used: it shares entries between drawings.
func newTables(d Drawing, extent box, plotStyle handle.Handler) tables {
	t := tables{
		layers: map[string]*table.Layer{},
		style:  table.NewStyle("STANDARD"),
		model:  table.NewBlockRecord("*Model_Space"),
		paper:  table.NewBlockRecord("*Paper_Space"),
	}
	t.style.FontName = "txt"
	t.style.LastHeightUsed = 1

	types := map[string]*table.LineType{}
	lineTypes := named("LTYPE", table.NewLineType("ByBlock", ""), table.NewLineType("ByLayer", ""))
	for _, p := range patterns(d.Inch) {
		types[p.name] = table.NewLineType(p.name, p.description, p.lengths...)
		lineTypes.Add(types[p.name])
	}
	layers := named("LAYER")
	for _, name := range append([]string{layerZero}, layersOf(d)...) {
		look := lookOf(name)
		l := table.NewLayer(name, look.color, types[look.lineType])
		l.SetLineWidth(look.weight)
		l.SetPlotStyle(plotStyle)
		t.layers[name] = l
		layers.Add(l)
	}
	t.all = table.Tables{
		named("VPORT", viewport(extent)), lineTypes, layers, named("STYLE", t.style), named("VIEW"), named("UCS"),
		named("APPID", table.NewAppID("ACAD")), named("DIMSTYLE", table.NewDimStyle("STANDARD")),
		named("BLOCK_RECORD", t.model, t.paper),
	}
	return t
}

func named(name string, entries ...table.SymbolTable) *table.Table {
	t := table.NewTable(name)
	for _, e := range entries {
		t.Add(e)
	}
	return t
}

// viewport shows the whole drawing with a margin when the file is opened.
func viewport(extent box) *table.Viewport {
	const margin = 1.1
	v := table.NewViewport("*ACTIVE")
	v.UpperRight = []float64{1, 1}
	v.ViewCenter = []float64{(extent.min.X + extent.max.X) / 2, (extent.min.Y + extent.max.Y) / 2}
	v.SnapSpacing = []float64{1, 1}
	v.GridSpacing = []float64{1, 1}
	v.ViewDirection = []float64{0, 0, 1}
	v.Height = margin * max(extent.max.X-extent.min.X, extent.max.Y-extent.min.Y)
	return v
}

// entities builds the ENTITIES section: outlines first, texts last.
func (t tables) entities(d Drawing) entity.Entities {
	all := entity.New()
	place := func(e owned, layer string) {
		e.SetLayer(t.layers[layer])
		e.SetOwner(t.model)
		all = all.Add(e)
	}
	for _, p := range d.Polylines {
		place(outline{entity.NewLwPolyline(0), p, t.model}, p.Layer)
	}
	for _, c := range d.Circles {
		e := entity.NewCircle()
		e.Center, e.Radius = []float64{c.Center.X, c.Center.Y, 0}, c.Radius
		place(e, c.Layer)
	}
	for _, a := range d.Arcs {
		e := entity.NewArc(nil)
		e.Center, e.Radius, e.Angle = []float64{a.Center.X, a.Center.Y, 0}, a.Radius, []float64{a.From, a.To}
		place(e, a.Layer)
	}
	for _, l := range d.Lines {
		e := entity.NewLine()
		e.Start, e.End = []float64{l.From.X, l.From.Y, 0}, []float64{l.To.X, l.To.Y, 0}
		place(e, l.Layer)
	}
	for _, x := range d.Texts {
		place(t.text(x), x.Layer)
	}
	return all
}

// owned is an entity that takes an owner, which readers look for in group 330.
type owned interface {
	entity.Entity
	SetOwner(handle.Handler)
}

// text builds a TEXT.
func (t tables) text(x Text) *entity.Text {
	e := entity.NewText()
	e.Coord1, e.Height, e.Rotation = []float64{x.At.X, x.At.Y, 0}, x.Height, x.Angle
	e.WidthFactor, e.Style = 1, t.style
	e.Value = encode(x.Value)
	return e
}

// objectSet is the OBJECTS section with the plot style layers point to.
type objectSet struct {
	all    object.Objects
	normal handle.Handler
}

// newObjects builds the dictionaries: the root, which has no owner, and in it the
// groups (none) and the plot styles (one).
func newObjects() objectSet {
	root := &dictionary{}
	groups := &dictionary{owner: root}
	styles, normal := object.NewAcDbDictionaryWDFLT(root)
	root.items = []item{{"ACAD_GROUP", groups}, {"ACAD_PLOTSTYLENAME", styles}}
	return objectSet{object.Objects{root, groups, styles, normal}, normal}
}
