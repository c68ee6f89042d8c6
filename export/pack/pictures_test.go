package pack

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// The pictures of the README are what the program makes now: all of the folder, each
// named by its sample.
func TestPicturesAreCurrent(t *testing.T) {
	t.Parallel()
	pictures, err := filepath.Glob(filepath.Join(samplesFolder, "pictures", "*.svg"))
	if err != nil || len(pictures) < 4 {
		t.Fatalf("%d pictures, %v", len(pictures), err)
	}
	packs := map[string]*Pack{}
	for _, picture := range pictures {
		name := filepath.Base(picture)
		part, _, _ := strings.Cut(name, ".")
		if packs[part] == nil {
			p, err := Make(readSample(t, filepath.Join(samplesFolder, part+".yaml")), options())
			if err != nil {
				t.Fatal(err)
			}
			packs[part] = p
		}
		have, err := os.ReadFile(picture)
		if err != nil {
			t.Fatal(err)
		}
		current := false
		for _, f := range packs[part].Files {
			current = current || f.Name == name && bytes.Equal(have, f.Data)
		}
		if !current {
			t.Errorf("%s is stale: run go run ./cmd/lobewright release samples/%s.yaml, then cp release/%s/%s samples/pictures/", picture, part, part, name)
		}
	}
}
