package pack

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// The pictures of the README are what the program makes now.
func TestPicturesAreCurrent(t *testing.T) {
	p, err := Make(readSample(t, samplesFolder+"/stick-lift.yaml"), options())
	if err != nil {
		t.Fatal(err)
	}
	n := 0
	for _, f := range p.Files {
		if !strings.HasSuffix(f.Name, ".svg") {
			continue
		}
		n++
		have, err := os.ReadFile(filepath.Join(samplesFolder, "pictures", f.Name))
		if err != nil || !bytes.Equal(have, f.Data) {
			t.Errorf("samples/pictures/%s is stale (%v): run go run ./cmd/lobewright release samples/stick-lift.yaml, then cp release/stick-lift/*.svg samples/pictures/", f.Name, err)
		}
	}
	if n != 3 {
		t.Errorf("%d pictures", n)
	}
}
