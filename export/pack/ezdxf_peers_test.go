//go:build peers

package pack

import (
	"bytes"
	"encoding/json"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"lobewright/export/dxf/read"
)

// ezdxfFile is what export/dxf/testdata/ezdxf_read.py prints of a file.
type ezdxfFile struct {
	Insunits  int
	Errors    []string
	Fixes     []string
	Polylines [][3]json.RawMessage // layer, closed, [[x, y, bulge], ...]
}

// ezdxf (Debian package python3-ezdxf) reads every sample's DXF, in both versions,
// without an audit error or fix, and finds the vertices our reader finds.
func TestPeerEzdxfSamples(t *testing.T) {
	files, ours := outlines(t)
	cmd := exec.Command("/usr/bin/python3", append([]string{"../dxf/testdata/ezdxf_read.py"}, files...)...)
	var messages bytes.Buffer
	cmd.Stderr = &messages
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("python3 with ezdxf is needed: %v\n%s", err, messages.String())
	}
	var found []ezdxfFile
	if err := json.Unmarshal(out, &found); err != nil {
		t.Fatal(err)
	}
	if len(found) != 2*len(files) || len(files) < 8 {
		t.Fatalf("%d answers for %d files", len(found), len(files))
	}
	vertices := 0
	for i, f := range found {
		vertices += compareVertices(t, filepath.Base(files[i/2]), f, ours[i/2])
	}
	t.Logf("ezdxf: %d files read in two modes, %d vertices alike", len(files), vertices)
}

func compareVertices(t *testing.T, name string, f ezdxfFile, ours *read.File) int {
	t.Helper()
	if len(f.Errors)+len(f.Fixes) > 0 {
		t.Errorf("%s: audit errors %v, fixes %v", name, f.Errors, f.Fixes)
	}
	if !strings.HasPrefix(name, "r12") && f.Insunits != map[read.Unit]int{read.Millimeter: 4, read.Inch: 1}[ours.Unit] {
		t.Errorf("%s: $INSUNITS %d", name, f.Insunits)
	}
	if len(f.Polylines) != len(ours.Polylines) {
		t.Fatalf("%s: ezdxf finds %d polylines, we %d", name, len(f.Polylines), len(ours.Polylines))
	}
	n := 0
	for k, p := range f.Polylines {
		var v [][3]float64
		if err := json.Unmarshal(p[2], &v); err != nil {
			t.Fatal(err)
		}
		our := ours.Polylines[k]
		if len(v) != len(our.Points) {
			t.Fatalf("%s: polyline %d has %d vertices, we read %d", name, k, len(v), len(our.Points))
		}
		for i := range v {
			if v[i] != [3]float64{our.Points[i].X, our.Points[i].Y, our.Bulges[i]} {
				t.Errorf("%s: polyline %d, vertex %d: ezdxf %v, ours %v %v", name, k, i, v[i], our.Points[i], our.Bulges[i])
			}
			n++
		}
	}
	return n
}
