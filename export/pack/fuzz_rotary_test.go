package pack

import (
	"bytes"
	"testing"

	"lobewright/synth/spec"
)

// Whatever a program of a rotary axis was edited into, ProveOut comes back with a verdict; one that is proven has its last pass within the
// chord tolerance.
func FuzzProveOutRotary(f *testing.F) {
	specs := map[bool]*spec.Spec{}
	for _, name := range []string{"row-stop", "tray-sweep"} {
		s := readSample(f, samplesFolder+"/"+name+".yaml")
		specs[name == "row-stop"] = s
		_, j, err := work(s, options())
		if err != nil {
			f.Fatal(err)
		}
		for i, p := range j.programs {
			lines := bytes.SplitAfter(p.data, []byte("\n"))
			short := bytes.Join(append(lines[:60:60], lines[len(lines)-5:]...), nil)
			for _, data := range [][]byte{p.data, short, bytes.ReplaceAll(short, []byte("G1 "), []byte("G0 ")), bytes.ReplaceAll(short, []byte("G90"), []byte("G91")), bytes.ReplaceAll(short, []byte("X5"), []byte("X-5"))} {
				f.Add(data, name == "row-stop", i+1)
			}
		}
	}
	f.Fuzz(func(t *testing.T, data []byte, plate bool, operation int) {
		s := specs[plate]
		if operation < 1 || operation > len(s.Operations) {
			operation = 1
		}
		out, err := ProveOut(s, "edited.nc", data, operation, 0, "lobewright")
		if err != nil || !out.Proven {
			return
		}
		if n := len(out.Passes); n == 0 || out.Passes[n-1].Deviation == nil || out.Passes[n-1].Deviation.Bound > out.Chord {
			t.Fatalf("proven with %+v", out.Passes)
		}
	})
}
