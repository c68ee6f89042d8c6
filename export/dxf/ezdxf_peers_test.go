//go:build peers

package dxf

import (
	"bytes"
	"encoding/json"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
)

// python is the interpreter that has ezdxf (Debian package python3-ezdxf).
const python = "/usr/bin/python3"

// peer is what the script prints of a file.
type peer struct {
	Version   string
	InsUnits  int
	ExtMin    [2]float64
	ExtMax    [2]float64
	Errors    []string
	Fixes     []string
	Layers    map[string]string
	Count     int
	Polylines []any
	Circles   []any
	Arcs      []any
	Lines     []any
	Texts     []any
}

// expected is what the peer must find of a drawing, said without the writer. A
// text is compared as ezdxf shows it: for the diameter sign it shows a letter.
func expected(d Drawing) peer {
	b := d.extent()
	p := peer{
		Version: acadR2000, InsUnits: unitsMillimeter, Errors: []string{}, Fixes: []string{},
		ExtMin: [2]float64{b.min.X, b.min.Y}, ExtMax: [2]float64{b.max.X, b.max.Y},
		Count: len(d.Polylines) + len(d.Circles) + len(d.Arcs) + len(d.Lines) + len(d.Texts),
	}
	if d.Inch {
		p.InsUnits = unitsInch
	}
	if d.Version == R12 {
		p.Version = acadR12
	}
	for _, x := range d.Polylines {
		var vertices []any
		for _, v := range x.Vertices {
			at := x.Grid.Value(v.P)
			vertices = append(vertices, []any{at.X, at.Y, v.Bulge})
		}
		p.Polylines = append(p.Polylines, []any{x.Layer, x.Closed, vertices})
	}
	for _, c := range d.Circles {
		p.Circles = append(p.Circles, []any{c.Layer, c.Center.X, c.Center.Y, c.Radius})
	}
	for _, a := range d.Arcs {
		p.Arcs = append(p.Arcs, []any{a.Layer, a.Center.X, a.Center.Y, a.Radius, a.From, a.To})
	}
	for _, l := range d.Lines {
		p.Lines = append(p.Lines, []any{l.Layer, l.From.X, l.From.Y, l.To.X, l.To.Y})
	}
	for _, t := range d.Texts {
		p.Texts = append(p.Texts, []any{t.Layer, strings.ReplaceAll(t.Value, "⌀", "Ø"), []any{t.At.X, t.At.Y}, t.Height, t.Angle})
	}
	return p
}

func ask(t *testing.T, files ...string) []peer {
	t.Helper()
	cmd := exec.Command(python, append([]string{filepath.Join("testdata", "ezdxf_read.py")}, files...)...)
	var fault bytes.Buffer
	cmd.Stderr = &fault
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("%s with ezdxf (Debian package python3-ezdxf) is needed: %v\n%s", python, err, &fault)
	}
	var found []peer
	if err := json.Unmarshal(out, &found); err != nil {
		t.Fatal(err)
	}
	return found
}

// ezdxf reads every kind of file without an error or a fix, and finds the
// same figures to the last bit.
func TestPeerEzdxfReadsTheSame(t *testing.T) {
	dir := t.TempDir()
	var drawings []Drawing
	var files []string
	for _, v := range []Version{R2000, R12} {
		for _, inch := range []bool{false, true} {
			d := sample(v, inch)
			// A text that ezdxf shows as this package means it: without %% and \\ of its own.
			d.Texts[1].Value = "Hub 20 ⌀ ±0.01, 45° 50% 鉛筆 ^J"
			drawings = append(drawings, d, Drawing{Inch: inch, Version: v, Polylines: []Polyline{gear(3000)}})
		}
	}
	for i, d := range drawings {
		name := filepath.Join(dir, fmt.Sprintf("%d.dxf", i))
		if err := os.WriteFile(name, mustWrite(t, d), 0o644); err != nil {
			t.Fatal(err)
		}
		files = append(files, name)
	}
	found := ask(t, files...)
	if len(found) != 2*len(drawings) {
		t.Fatalf("%d answers for %d files read twice", len(found), len(drawings))
	}
	for i, got := range found {
		want := expected(drawings[i/2])
		if want.Version == acadR12 {
			want.InsUnits = got.InsUnits // R12 has none; ezdxf makes one up
		}
		if got.Layers[LayerContour] != solid || len(got.Layers) < 2 {
			t.Errorf("file %d: layers %v", i/2, got.Layers)
		}
		if diff := cmp.Diff(want, got, cmpopts.EquateEmpty(), cmpopts.IgnoreFields(peer{}, "Layers")); diff != "" {
			t.Errorf("file %d, mode %d (-written +read):\n%s", i/2, i%2, diff)
		}
	}
}

// The peer does refuse: a spoiled file does not pass.
func TestPeerEzdxfNoticesFaults(t *testing.T) {
	data := mustWrite(t, sample(R2000, false))
	name := filepath.Join(t.TempDir(), "bad.dxf")
	bad := bytes.Replace(data, []byte("AcDbPolyline\r\n 90"), []byte("AcDbPolyline\r\n ninety"), 1)
	if bytes.Equal(bad, data) {
		t.Fatal("nothing was spoiled")
	}
	if err := os.WriteFile(name, bad, 0o644); err != nil {
		t.Fatal(err)
	}
	if out, err := exec.Command(python, filepath.Join("testdata", "ezdxf_read.py"), name).CombinedOutput(); err == nil || !bytes.Contains(out, []byte("ezdxf.lldxf.const.DXF")) {
		t.Errorf("no complaint by ezdxf, error %v:\n%s", err, out)
	}
}
