package pack

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lobewright/synth"
	"lobewright/synth/spec"
)

const samplesFolder = "../../samples"

// releasingSamples are the specs of the samples folder that must release: all but
// those named refused-*.
func releasingSamples(t testing.TB) []string {
	t.Helper()
	all, err := filepath.Glob(filepath.Join(samplesFolder, "*.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	var good []string
	for _, f := range all {
		if !strings.HasPrefix(filepath.Base(f), "refused-") {
			good = append(good, f)
		}
	}
	if len(good) < 4 || len(all)-len(good) < 2 {
		t.Fatalf("%d samples that release, %d that are refused", len(good), len(all)-len(good))
	}
	return good
}

func readSample(t testing.TB, file string) *spec.Spec {
	t.Helper()
	data, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	s, err := spec.Read(file, data, synth.Vocabulary())
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func options() Options { return Options{Tool: "lobewright test", DXF: "2000"} }

// makeJob runs the job and returns its programs besides.
func makeJob(t testing.TB, s *spec.Spec) (*Pack, []program) {
	t.Helper()
	p, j, err := work(s, options())
	if err != nil {
		t.Fatal(err)
	}
	return p, j.programs
}
