package write_test

import (
	"os/exec"
	"strings"
	"testing"

	"lobewright/gcode"
	"lobewright/gcode/write"
	"lobewright/tolerance/chain"
)

func on(v int64) gcode.Count { return gcode.Count{V: v, On: true} }

// The text of a few blocks, word by word: the integers of the grid with a point in
// them, comments without anything a control could act on.
func TestProgram(t *testing.T) {
	p := gcode.Program{Number: 12, Grid: chain.Grid{Decimals: 3}, BlockNumbers: true,
		Header: []string{"part a-b (rev; é) %", strings.Repeat("word ", 30) + strings.Repeat("x", 90)},
		Blocks: []gcode.Block{
			{G: []gcode.Code{gcode.UnitMM, gcode.CenterFromStart}},
			{G: []gcode.Code{gcode.CompLeft}, Motion: gcode.Straight, X: on(-5), Y: on(0), F: on(300000), D: gcode.Number{V: 3, On: true}},
			{Motion: gcode.Counterclockwise, X: on(1234567), Y: on(-1000), I: on(7), J: on(-70), Comment: "an arc"},
			{Comment: "alone"},
			{M: []int{0}},
		}}
	want := "%\nO0012\n(PART A-B REV ?)\n" +
		"(" + strings.TrimSpace(strings.Repeat("WORD ", 15)) + ")\n(" + strings.TrimSpace(strings.Repeat("WORD ", 15)) + ")\n(" + strings.Repeat("X", 76) + ")\n" +
		"N10 G21 G91.1\nN20 G41 G1 X-0.005 Y0.000 F300.000 D3\nN30 G3 X1234.567 Y-1.000 I0.007 J-0.070 (AN ARC)\n(ALONE)\nN40 M00\n%\n"
	if got := string(write.Program(p)); got != want {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
}

// Reader and writer share the point and chain types only.
func TestReaderAndWriterShareNothing(t *testing.T) {
	deps := func(pkg string) string {
		out, err := exec.Command("go", "list", "-deps", pkg).CombinedOutput()
		if err != nil {
			t.Fatalf("go list: %v\n%s", err, out)
		}
		return string(out)
	}
	for _, d := range strings.Fields(deps("lobewright/gcode/read")) {
		if strings.HasPrefix(d, "lobewright/") && d != "lobewright/gcode/read" && d != "lobewright/synth/plane" && d != "lobewright/tolerance/chain" {
			t.Errorf("the reader imports %s", d)
		}
	}
}
