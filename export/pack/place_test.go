package pack

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func released(t *testing.T) *Pack {
	t.Helper()
	p, err := Make(readSample(t, samplesFolder+"/tray-shake.yaml"), options())
	if err != nil || !p.Report.Released {
		t.Fatal(err)
	}
	return p
}

// entries lists a folder, hidden names too.
func entries(t *testing.T, dir string) []string {
	t.Helper()
	list, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, e := range list {
		names = append(names, e.Name())
	}
	return names
}

// A placed pack holds the files of the manifest with their hashes, an older pack is
// exchanged whole, and nothing is left beside.
func TestPlaceExchanges(t *testing.T) {
	p, dir := released(t), t.TempDir()
	old := filepath.Join(dir, p.Part)
	if err := os.MkdirAll(old, 0o755); err != nil {
		t.Fatal(err)
	}
	for _, name := range []string{"older.nc", manifestName} {
		if err := os.WriteFile(filepath.Join(old, name), []byte("older"), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	if err := p.Place(dir); err != nil {
		t.Fatal(err)
	}
	if got := entries(t, dir); len(got) != 1 || got[0] != p.Part {
		t.Errorf("the folder holds %v", got)
	}
	data, err := os.ReadFile(filepath.Join(old, "manifest.json"))
	if err != nil {
		t.Fatal(err)
	}
	var m manifest
	if err := json.Unmarshal(data, &m); err != nil {
		t.Fatal(err)
	}
	if len(m.Files)+1 != len(entries(t, old)) {
		t.Errorf("%d files in the manifest, %v in the folder", len(m.Files), entries(t, old))
	}
	for _, f := range m.Files {
		got, err := os.ReadFile(filepath.Join(old, f.Name))
		if err != nil {
			t.Fatal(err)
		}
		if sum := sha256.Sum256(got); hex.EncodeToString(sum[:]) != f.SHA256 {
			t.Errorf("%s does not have the hash of the manifest", f.Name)
		}
	}
}

// Where the pack cannot be placed whole nothing is placed, and an older one stays.
func TestPlaceWholeOrNot(t *testing.T) {
	p, dir := released(t), t.TempDir()
	// A file in the way of the folder.
	way := filepath.Join(dir, p.Part)
	if err := os.WriteFile(way, []byte("in the way"), 0o644); err != nil {
		t.Fatal(err)
	}
	if err := p.Place(dir); err == nil {
		t.Error("placed over a file")
	}
	if got := entries(t, dir); len(got) != 1 {
		t.Errorf("left behind: %v", got)
	}
	// A file that cannot be written: a name longer than the system takes.
	if err := os.Remove(way); err != nil {
		t.Fatal(err)
	}
	if err := os.Mkdir(way, 0o755); err != nil {
		t.Fatal(err)
	}
	long := make([]byte, 300)
	for i := range long {
		long[i] = 'x'
	}
	broken := *p
	broken.Files = append(append([]File(nil), p.Files...), File{string(long), nil})
	if err := broken.Place(dir); err == nil {
		t.Error("placed a file with an impossible name")
	}
	if got := entries(t, dir); len(got) != 1 || len(entries(t, way)) != 0 {
		t.Errorf("left behind: %v, and %v in the older pack", got, entries(t, way))
	}
}

// A folder of the part's name that is no pack keeps what it holds; a draft replaces drafts
// alone.
func TestPlaceKeepsOtherFolders(t *testing.T) {
	dir := t.TempDir()
	p := whole("new", 3)
	p.draft = []File{{p.Part + ".svg", []byte("drawing")}}
	mine := filepath.Join(dir, p.Part, "letters.txt")
	if err := os.MkdirAll(filepath.Dir(mine), 0o755); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(mine, []byte("mine"), 0o644); err != nil {
		t.Fatal(err)
	}
	if err := p.Place(dir); err == nil || !strings.Contains(err.Error(), "letters.txt") {
		t.Errorf("error %v", err)
	}
	if data, err := os.ReadFile(mine); err != nil || string(data) != "mine" || len(entries(t, dir)) != 1 {
		t.Errorf("%q, %v, %v", data, err, entries(t, dir))
	}
	for range 2 {
		if err := p.PlaceDraft(dir); err != nil {
			t.Error(err)
		}
	}
	q := whole("new", 3)
	q.Part += "-draft"
	if err := q.Place(dir); err == nil {
		t.Error("a pack replaced a draft of another part")
	}
	if err := os.RemoveAll(filepath.Join(dir, q.Part)); err != nil {
		t.Fatal(err)
	}
	if err := q.Place(dir); err != nil {
		t.Fatal(err)
	}
	if err := p.PlaceDraft(dir); err == nil {
		t.Error("a draft replaced a pack")
	}
	if got := packIn(t, filepath.Join(dir, q.Part)); got != "new" {
		t.Errorf("the pack is %q", got)
	}
}
