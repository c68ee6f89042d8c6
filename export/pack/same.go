package pack

import (
	"fmt"
	"strings"

	"lobewright/export/dxf"
	"lobewright/export/dxf/read"
	"lobewright/synth/plane"
)

// sameDrawing holds what was read back against what was meant, for everything
// the certificate does not cover: units, circles, lines, texts, the bore.
func sameDrawing(d dxf.Drawing, f *read.File) error {
	want := read.Millimeter
	if d.Inch {
		want = read.Inch
	}
	if f.Version != string(d.Version) {
		return fmt.Errorf("the version read back is %q", f.Version)
	}
	if f.Unit != want {
		return fmt.Errorf("the unit read back is %q", f.Unit)
	}
	if len(d.Polylines) != len(f.Polylines) || len(d.Circles) != len(f.Circles) || len(d.Lines) != len(f.Lines) ||
		len(d.Texts) != len(f.Texts) || len(d.Arcs) != len(f.Arcs) {
		return fmt.Errorf("items were lost or added: %d polylines, %d circles, %d lines, %d texts read back; %d, %d, %d, %d written",
			len(f.Polylines), len(f.Circles), len(f.Lines), len(f.Texts), len(d.Polylines), len(d.Circles), len(d.Lines), len(d.Texts))
	}
	for i, c := range d.Circles {
		if g := f.Circles[i]; g.Layer != c.Layer || g.Center != c.Center || g.Radius != c.Radius {
			return fmt.Errorf("circle %d on layer %s was read back as %v", i+1, c.Layer, g)
		}
	}
	for i, l := range d.Lines {
		if g := f.Lines[i]; g.Layer != l.Layer || g.From != l.From || g.To != l.To {
			return fmt.Errorf("line %d on layer %s was read back as %v", i+1, l.Layer, g)
		}
	}
	for i, t := range d.Texts {
		if g := f.Texts[i]; g.Layer != t.Layer || g.At != t.At || g.Height != t.Height || g.Angle != t.Angle {
			return fmt.Errorf("text %d on layer %s was read back as %v", i+1, t.Layer, g)
		}
	}
	for i, p := range d.Polylines {
		if err := samePolyline(p, f.Polylines[i]); err != nil {
			return fmt.Errorf("polyline %d on layer %s: %w", i+1, p.Layer, err)
		}
	}
	return nil
}

// samePolyline compares bore and tool paths exactly; contour and pitch curve are left to
// the certificate.
func samePolyline(p dxf.Polyline, g read.Polyline) error {
	if g.Layer != p.Layer || g.Closed != p.Closed || len(g.Points) != len(p.Vertices) {
		return fmt.Errorf("it was read back on layer %s with %d vertices of %d", g.Layer, len(g.Points), len(p.Vertices))
	}
	if p.Layer != dxf.LayerBore && !strings.HasPrefix(p.Layer, dxf.LayerToolPath) {
		return nil
	}
	for i, v := range p.Vertices {
		if want := p.Grid.Value(v.P); g.Points[i] != (plane.Point{X: want.X, Y: want.Y}) || g.Bulges[i] != v.Bulge {
			return fmt.Errorf("vertex %d was read back as %v, bulge %v", i+1, g.Points[i], g.Bulges[i])
		}
	}
	return nil
}
