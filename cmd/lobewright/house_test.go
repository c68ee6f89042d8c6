package main

import (
	"bytes"
	"os/exec"
	"slices"
	"strings"
	"testing"
)

// rooms is the import table of the house: which rooms of this module each room may
// reach, directly or through others. DEVELOPERS.md draws it.
func rooms() map[string][]string {
	leaves := []string{"synth/taylor", "synth/plane"}
	with := func(base []string, more ...string) []string { return append(slices.Clone(base), more...) }
	motion := with(leaves, "synth/motion")
	cam := with(motion, "synth/gate", "synth/spec", "synth/follower", "synth/qp", "synth/partial", "synth/smooth", "synth")
	chain := []string{"synth/plane", "tolerance/chain"}
	proof := with(leaves, "tolerance/chain", "tolerance/certify")
	return map[string][]string{
		"synth/taylor":      {},
		"synth/plane":       {},
		"synth/gate":        {"synth/plane"},
		"synth/spec":        {"synth/plane"},
		"synth/motion":      leaves,
		"synth/qp":          {},
		"synth/partial":     with(motion, "synth/qp"),
		"synth/smooth":      {},
		"synth/follower":    motion,
		"synth":             cam,
		"synth/evidence":    cam,
		"tolerance":         {},
		"tolerance/chain":   {"synth/plane"},
		"tolerance/fit":     with(leaves, "tolerance/chain"),
		"tolerance/certify": with(leaves, "tolerance/chain"),
		"tolerance/floor":   with(leaves, "tolerance/chain"),
		"tolerance/follow":  with(leaves, "tolerance/chain"),
		"gcode":             with(proof, "gcode/read"),
		"gcode/write":       with(proof, "gcode", "gcode/read"),
		"gcode/read":        chain,
		"export/dxf":        with(chain, "synth/gate"),
		"export/dxf/read":   chain,
		"export/svg":        with(chain, "synth/gate"),
		"export/sheet":      with(chain, "synth/gate"),
		"export/table":      with(chain, "synth/gate"),
	}
}

// deps lists what a room reaches inside this module, itself left out.
func deps(t *testing.T, room string) []string {
	t.Helper()
	out, err := exec.Command("go", "list", "-deps", "lobewright/"+room).Output()
	if err != nil {
		t.Fatalf("go list -deps lobewright/%s: %v", room, err)
	}
	var in []string
	for _, l := range strings.Fields(string(out)) {
		if r, ok := strings.CutPrefix(l, "lobewright/"); ok && r != room {
			in = append(in, r)
		}
	}
	return in
}

func TestImportTable(t *testing.T) {
	table := rooms()
	for room, allowed := range table {
		for _, d := range deps(t, room) {
			if !slices.Contains(allowed, d) {
				t.Errorf("%s reaches %s; allowed: %s", room, d, strings.Join(allowed, ", "))
			}
		}
	}
	out, err := exec.Command("go", "list", "lobewright/...").Output()
	if err != nil {
		t.Fatal(err)
	}
	for _, l := range strings.Fields(string(out)) {
		room, _ := strings.CutPrefix(l, "lobewright/")
		if _, ok := table[room]; !ok && room != "export/pack" && room != "cmd/lobewright" {
			t.Errorf("room %s is not in the import table", room)
		}
	}
}

// What is written must be read back by code that shares nothing with the writer but
// the point and chain types.
func TestReadersShareNothingWithWriters(t *testing.T) {
	shared := []string{"synth/plane", "tolerance/chain"}
	for reader, writer := range map[string]string{"gcode/read": "gcode/write", "export/dxf/read": "export/dxf"} {
		w := deps(t, writer)
		for _, d := range append(deps(t, reader), reader) {
			if d == writer {
				t.Errorf("%s reaches its writer %s", reader, writer)
			}
			if slices.Contains(w, d) && !slices.Contains(shared, d) && d != reader {
				t.Errorf("%s and %s share %s", reader, writer, d)
			}
		}
	}
	for _, lib := range []string{"github.com/yofu/dxf"} {
		out, err := exec.Command("go", "list", "-deps", "lobewright/export/dxf/read").Output()
		if err != nil {
			t.Fatal(err)
		}
		if bytes.Contains(out, []byte(lib)) {
			t.Errorf("the DXF reader uses %s, as its writer does", lib)
		}
	}
	if slices.Contains(deps(t, "tolerance/certify"), "tolerance/fit") {
		t.Error("certify reaches fit")
	}
}
