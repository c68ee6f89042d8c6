package spec

import (
	"errors"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// vocabulary is a small one, by hand: what a program might hand in.
func vocabulary() Vocabulary {
	return Vocabulary{
		Laws: []string{"constant-velocity", "simple-harmonic", "cycloidal", "modified-sine",
			"polynomial-3-4-5", "modified-constant-velocity", "half-cycloid"},
		ShareLaws:     []string{"modified-constant-velocity"},
		SymmetricLaws: []string{"simple-harmonic", "cycloidal", "modified-sine", "polynomial-3-4-5", "modified-constant-velocity"},
		HalfLaws:      []HalfLaw{{"simple-harmonic", math.Pi / 2}, {"cycloidal", 2}},
		Followers:     everyFollower(),
		Cams:          []string{"plate", "groove", "barrel"},
		Processes:     []string{"mill", "grind", "wire"},
		EndSpeeds: func(l Law) (start, end float64) {
			switch l.Name {
			case "constant-velocity":
				return 1, 1
			case "half-cycloid": // S = u - sin(pi u)/pi: at rest at its start, twice the mean at its end
				return 0, 2
			}
			return 0, 0
		},
	}
}

// badFiles are the specs with faults that other rooms may use as well. Their
// first lines, marked "#= ", are the faults expected, one a line.
const badFiles = "../../testdata/spec/bad/*.yaml"

func TestBadSpecs(t *testing.T) {
	files, err := filepath.Glob(badFiles)
	if err != nil || len(files) < 40 {
		t.Fatalf("%d files, %v", len(files), err)
	}
	for _, file := range files {
		t.Run(strings.TrimSuffix(filepath.Base(file), ".yaml"), func(t *testing.T) {
			data, err := os.ReadFile(file)
			if err != nil {
				t.Fatal(err)
			}
			var want []string
			for line := range strings.Lines(strings.TrimPrefix(string(data), "\ufeff")) {
				if s, ok := strings.CutPrefix(line, "#= "); ok {
					want = append(want, "bad.yaml:"+strings.TrimRight(s, "\r\n"))
				}
			}
			s, err := Read("bad.yaml", data, vocabulary())
			var faults Faults
			if !errors.As(err, &faults) || s != nil {
				t.Fatalf("spec %v, error %v", s, err)
			}
			if diff := cmp.Diff(want, strings.Split(err.Error(), "\n")); diff != "" {
				t.Errorf("messages (-want +got):\n%s", diff)
			}
		})
	}
}
