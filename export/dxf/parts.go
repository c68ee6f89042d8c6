package dxf

import (
	"github.com/yofu/dxf/entity"
	"github.com/yofu/dxf/format"
	"github.com/yofu/dxf/handle"
	"github.com/yofu/dxf/table"
)

// The parts of an AC1015 file that the library lacks or writes otherwise: the
// LWPOLYLINE with exact decimals, blocks with owners, dictionaries with owners.

// outline is an LWPOLYLINE whose coordinates are printed from grid counts. The
// library's polyline in it gives it handle and layer only.
type outline struct {
	*entity.LwPolyline
	polyline Polyline
	owner    handle.Handler
}

// Format collects the entity.
func (o outline) Format(f format.Formatter) {
	f.WriteString(0, "LWPOLYLINE")
	f.WriteHex(5, o.Handle())
	f.WriteHex(330, o.owner.Handle())
	f.WriteString(100, "AcDbEntity")
	f.WriteString(8, o.Layer().Name())
	f.WriteString(100, "AcDbPolyline")
	f.WriteInt(90, len(o.polyline.Vertices))
	f.WriteInt(70, closedFlag(o.polyline.Closed))
	for _, v := range o.polyline.Vertices {
		f.WriteString(10, decimal(o.polyline.Grid, v.P.X))
		f.WriteString(20, decimal(o.polyline.Grid, v.P.Y))
		if v.Bulge != 0 {
			f.WriteFloat(42, v.Bulge)
		}
	}
}

// closedFlag is the value of group 70 of a polyline.
func closedFlag(closed bool) int {
	if closed {
		return 1
	}
	return 0
}

// blocks is the BLOCKS section.
type blocks []*block

// Format collects the section.
func (bs blocks) Format(f format.Formatter) {
	f.WriteString(0, "SECTION")
	f.WriteString(2, "BLOCKS")
	for _, b := range bs {
		b.format(f)
	}
	f.WriteString(0, "ENDSEC")
}

// SetHandle numbers the blocks and their ends.
func (bs blocks) SetHandle(next *int) {
	for _, b := range bs {
		b.begin, b.end = *next, *next+1
		*next += 2
	}
}

// block is an empty block definition: the space that a block record names.
type block struct {
	record     *table.BlockRecord
	begin, end int
}

func newBlock(record *table.BlockRecord) *block { return &block{record: record} }

func (b *block) format(f format.Formatter) {
	common := func(name string, h int) {
		f.WriteString(0, name)
		f.WriteHex(5, h)
		f.WriteHex(330, b.record.Handle())
		f.WriteString(100, "AcDbEntity")
		f.WriteString(8, layerZero)
	}
	common("BLOCK", b.begin)
	f.WriteString(100, "AcDbBlockBegin")
	f.WriteString(2, b.record.Name())
	f.WriteInt(70, 0)
	for _, code := range []int{10, 20, 30} {
		f.WriteFloat(code, 0)
	}
	f.WriteString(3, b.record.Name())
	f.WriteString(1, "")
	common("ENDBLK", b.end)
	f.WriteString(100, "AcDbBlockEnd")
}

// dictionary is a DICTIONARY that names its owner; the root's owner is 0.
type dictionary struct {
	handle int
	owner  *dictionary
	items  []item
}

type item struct {
	name  string
	value handle.Handler
}

// IsObject marks the dictionary as one of the OBJECTS.
func (d *dictionary) IsObject() bool { return true }

// Handle returns the dictionary's handle.
func (d *dictionary) Handle() int { return d.handle }

// SetHandle numbers the dictionary; its items are numbered by their own section.
func (d *dictionary) SetHandle(next *int) {
	d.handle = *next
	*next++
}

// Format collects the object.
func (d *dictionary) Format(f format.Formatter) {
	f.WriteString(0, "DICTIONARY")
	f.WriteHex(5, d.handle)
	owner := 0
	if d.owner != nil {
		owner = d.owner.handle
	}
	f.WriteHex(330, owner)
	f.WriteString(100, "AcDbDictionary")
	f.WriteInt(281, 1)
	for _, i := range d.items {
		f.WriteString(3, i.name)
		f.WriteHex(350, i.value.Handle())
	}
}
