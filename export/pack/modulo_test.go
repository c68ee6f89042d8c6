package pack

import (
	"bytes"
	"math"
	"os"
	"testing"

	"lobewright/gcode/read"
	"lobewright/synth"
	"lobewright/synth/spec"
)

// With rotary_words: modulo the samples on a rotary axis release as they do without: same passes, same certificate where no move had to be
// split, and the words, run on by the short way, turn the work as much.
func TestRotaryWordsWithinATurn(t *testing.T) {
	t.Parallel()
	for _, name := range []string{"row-stop", "tray-sweep"} {
		text, err := os.ReadFile(samplesFolder + "/" + name + ".yaml")
		if err != nil {
			t.Fatal(err)
		}
		var turned [2][]float64
		var passes [2]int
		for i, to := range []string{"rotary_sense: ", "rotary_words: modulo, rotary_sense: "} {
			s, err := spec.Read(name+".yaml", bytes.Replace(text, []byte("rotary_sense: "), []byte(to), 1), synth.Vocabulary())
			if err != nil {
				t.Fatal(err)
			}
			p, j, err := work(s, options())
			if err != nil || !p.Passed {
				t.Fatal(name, err, p)
			}
			for _, program := range j.programs {
				back, err := read.Parse(program.data)
				if err != nil {
					t.Fatal(err)
				}
				sum := 0.0
				for _, m := range back.Moves {
					if m.Kind == read.Rapid || !m.KnownR {
						continue
					}
					by := m.ToR - m.FromR
					if i == 1 {
						by = math.Remainder(by, 360)
						if m.ToR < 0 || m.ToR >= 360 {
							t.Fatalf("%s, line %d: the word %g", program.name, m.LineNo, m.ToR)
						}
					}
					sum += math.Abs(by)
				}
				turned[i] = append(turned[i], sum)
				passes[i] += len(program.result.Cuts)
			}
		}
		for k := range turned[0] {
			if math.Abs(turned[0][k]-turned[1][k]) > 1e-6 || turned[0][k] < 360 {
				t.Errorf("%s: program %d turns the work by %g, with words within a turn by %g", name, k+1, turned[0][k], turned[1][k])
			}
		}
		if passes[0] != passes[1] || passes[0] == 0 {
			t.Errorf("%s: %d passes and %d", name, passes[0], passes[1])
		}
	}
}
