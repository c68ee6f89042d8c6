package pack

// A pack is put into place so that whoever looks finds the older one or the new one, whole.
//
// The obvious way, writing the files over the older ones, leaves a mixture when the disk
// is full or the machine loses power half way: a new outline beside an old program is the one
// thing a toolroom cannot see. So the pack is written into a folder beside, every file and
// the folder are flushed, and the two folders are exchanged by one rename. What that
// leaves open:
//
//   - A run that is killed leaves its folder beside. The next run of the same part removes it.
//     It must not remove that of a run that is alive, so a run holds a lock on the output
//     folder, which the system gives up with the process however that ends; two runs at once
//     wait for each other.
//   - Not every system and file system exchanges folders. There the older one is renamed
//     aside and the new one renamed into place. A run killed between the two leaves no pack, and
//     the next run first puts the older one back.
//   - A folder of the part's name that is no pack (-o named the wrong folder) would be
//     thrown away with what it holds. It is refused.

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"path/filepath"
	"slices"
	"strings"
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

// Place puts the pack into dir/part, whole or not at all. On Linux it is exchanged with an
// older pack in one step; elsewhere there is a moment without a pack.
func (p *Pack) Place(dir string) error { return p.placeOn(system{}, dir) }

func (p *Pack) placeOn(d disk, dir string) error {
	if !p.Report.Released {
		return errors.New("a refused pack is never placed")
	}
	data, err := p.Manifest()
	if err != nil {
		return err
	}
	s := shelf{d, dir, p.Part, func(names []string) bool { return slices.Contains(names, manifestName) }}
	return s.place(append(slices.Clone(p.Files), File{manifestName, data}))
}

// manifestName names the file by which a folder is known to be a pack.
const manifestName = "manifest.json"

// PlaceDraft puts drawing, charts and sheet, each marked NOT RELEASED, into
// dir/part-draft. It never writes a DXF or NC file, and never replaces a pack.
func (p *Pack) PlaceDraft(dir string) error {
	s := shelf{system{}, dir, p.Part + "-draft", func(names []string) bool {
		return !slices.ContainsFunc(names, func(n string) bool { return !strings.HasPrefix(n, p.Part+".") })
	}}
	return s.place(p.draft)
}

// shelf is a place for one folder of files.
type shelf struct {
	disk
	dir, name string
	ours      func(names []string) bool // whether a folder with these files may be replaced
}

func (s shelf) target() string { return filepath.Join(s.dir, s.name) }

func (s shelf) place(files []File) (err error) {
	if err := s.MakeFolder(s.dir); err != nil {
		return err
	}
	unlock, err := s.Lock(s.dir)
	switch {
	case err == nil:
		defer unlock()
		if err := s.tidy(); err != nil {
			return err
		}
	case !errors.Is(err, errors.ErrUnsupported):
		return err
	}
	older, err := s.older()
	if err != nil {
		return err
	}
	beside, err := s.MakeBeside(s.dir, "."+s.name+newMark)
	if err != nil {
		return err
	}
	defer func() {
		// After a good exchange this holds the older pack; after a failure, the new one.
		if e := s.RemoveAll(beside); err == nil && e != nil {
			err = fmt.Errorf("the pack is in place, but %s could not be removed: %w", beside, e)
		}
	}()
	for _, f := range files {
		if err := s.write(filepath.Join(beside, f.Name), f.Data); err != nil {
			return err
		}
	}
	if err := s.Flush(beside); err != nil {
		return err
	}
	if err := s.swap(beside, older); err != nil {
		return err
	}
	return s.Flush(s.dir)
}

// swap puts the folder beside into place, and an older one, if there is one, at beside.
func (s shelf) swap(beside string, older bool) error {
	if !older {
		return s.Rename(beside, s.target())
	}
	err := s.Exchange(beside, s.target())
	if !errors.Is(err, errors.ErrUnsupported) {
		return err
	}
	aside := filepath.Join(s.dir, "."+s.name+oldMark+strings.TrimPrefix(filepath.Base(beside), "."+s.name+newMark))
	if err := s.Rename(s.target(), aside); err != nil {
		return err
	}
	if err := s.Rename(beside, s.target()); err != nil {
		return errors.Join(err, s.Rename(aside, s.target()))
	}
	return s.Rename(aside, beside)
}

// Between the part's name and a number stand these in the names of folders beside: one
// that is being written, and an older pack that is being replaced.
const (
	newMark = ".new-"
	oldMark = ".old-"
)

// tidy removes what runs of this part left that were killed, and puts back a pack that one
// of them had just taken away. The lock says that none of them is alive.
func (s shelf) tidy() error {
	names, err := s.Names(s.dir)
	if err != nil {
		return err
	}
	there := slices.Contains(names, s.name)
	for _, n := range names {
		left := filepath.Join(s.dir, n)
		switch {
		case numbered(n, "."+s.name+oldMark) && !there:
			err = s.Rename(left, s.target())
			there = true
		case numbered(n, "."+s.name+oldMark), numbered(n, "."+s.name+newMark):
			err = s.RemoveAll(left)
		}
		if err != nil {
			return fmt.Errorf("%s was left by a run that was ended and cannot be tidied up: %w", left, err)
		}
	}
	return nil
}

// numbered reports whether a name is the prefix and a number.
func numbered(name, prefix string) bool {
	rest, ok := strings.CutPrefix(name, prefix)
	return ok && rest != "" && strings.Trim(rest, "0123456789") == ""
}

// older reports whether there is a folder to be replaced; it is an error when what is
// there is not ours.
func (s shelf) older() (bool, error) {
	there, folder, err := s.Look(s.target())
	switch {
	case err != nil || !there:
		return false, err
	case !folder:
		return false, fmt.Errorf("%s is there and is not a folder; move it away", s.target())
	}
	names, err := s.Names(s.target())
	if err != nil {
		return false, err
	}
	if len(names) > 0 && !s.ours(names) {
		return false, fmt.Errorf("%s is there and holds %s, but was not placed by lobewright; move it away or name another folder with -o", s.target(), names[0])
	}
	return true, nil
}

// write writes a file and flushes it to the disk.
func (s shelf) write(name string, data []byte) (err error) {
	f, err := s.Create(name)
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
