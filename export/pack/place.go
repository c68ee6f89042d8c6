package pack

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"path/filepath"
)

// manifest is manifest.json.
type manifest struct {
	Tool   string         `json:"tool"`
	SHA256 string         `json:"spec_sha256"`
	Files  []manifestFile `json:"files"`
}

type manifestFile struct {
	Name   string `json:"name"`
	SHA256 string `json:"sha256"`
}

// Manifest returns the bytes of manifest.json for the files of the pack.
func (p *Pack) Manifest() ([]byte, error) {
	m := manifest{Tool: p.Report.Tool, SHA256: p.Report.SpecSHA256}
	for _, f := range p.Files {
		sum := sha256.Sum256(f.Data)
		m.Files = append(m.Files, manifestFile{f.Name, hex.EncodeToString(sum[:])})
	}
	data, err := json.MarshalIndent(m, "", "  ")
	return append(data, '\n'), err
}

// Place puts the pack into dir/part, whole or not at all: it is written beside,
// flushed, and exchanged with an older pack in one rename. On systems without an
// exchanging rename there is a moment without a pack.
func (p *Pack) Place(dir string) error {
	if !p.Report.Released {
		return errors.New("a refused pack is never placed")
	}
	data, err := p.Manifest()
	if err != nil {
		return err
	}
	return place(dir, p.Part, append(append([]File(nil), p.Files...), File{"manifest.json", data}))
}

// PlaceDraft puts drawing, charts and sheet, each marked NOT RELEASED, into
// dir/part-draft. It never writes a DXF or NC file.
func (p *Pack) PlaceDraft(dir string) error { return place(dir, p.Part+"-draft", p.draft) }

func place(dir, name string, files []File) (err error) {
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return err
	}
	beside, err := os.MkdirTemp(dir, "."+name+".new-")
	if err != nil {
		return err
	}
	defer func() {
		// After a good exchange this holds the older pack; after a failure, the new one.
		if e := os.RemoveAll(beside); err == nil && e != nil {
			err = fmt.Errorf("the pack is in place, but %s could not be removed: %w", beside, e)
		}
	}()
	if err := os.Chmod(beside, 0o755); err != nil {
		return err
	}
	for _, f := range files {
		if err := writeWhole(filepath.Join(beside, f.Name), f.Data); err != nil {
			return err
		}
	}
	target := filepath.Join(dir, name)
	info, err := os.Lstat(target)
	switch {
	case errors.Is(err, os.ErrNotExist):
		return os.Rename(beside, target)
	case err != nil:
		return err
	case !info.IsDir():
		return fmt.Errorf("%s is there and is not a folder; move it away", target)
	}
	return exchange(beside, target)
}

// writeWhole writes a file and flushes it to the disk.
func writeWhole(name string, data []byte) (err error) {
	f, err := os.OpenFile(name, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o644)
	if err != nil {
		return err
	}
	defer func() {
		if e := f.Close(); err == nil {
			err = e
		}
	}()
	if _, err := f.Write(data); err != nil {
		return err
	}
	return f.Sync()
}
