package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"

	"github.com/urfave/cli/v2"

	"lobewright/synth"
	"lobewright/synth/spec"
)

// fileLimit is the largest spec or table read, bytes: a spec's own limit is lower, a table's
// as high.
const fileLimit = 4 << 20

// tablesFlag names the folder a spec may read its table from besides its own. A spec may come
// from anybody, so it reaches no file that its user did not put beside it or name.
func tablesFlag() cli.Flag {
	return &cli.StringFlag{Name: "tables", Usage: "folder outside the spec's own that its table or control settings may be read from"}
}

func readSpec(c *cli.Context, file string) (*spec.Spec, error) {
	data, err := readFile(file)
	if err != nil {
		return nil, fmt.Errorf("cannot read the spec: %w", err)
	}
	s, err := spec.Read(file, data, synth.Vocabulary())
	if err != nil {
		return nil, err
	}
	return s.Load(data, synth.Vocabulary(), func(name string) ([]byte, error) { return readTable(file, name, c.String("tables")) })
}

// readTable reads a file that a spec names from its own folder, and which must be in it or in
// the folder of --tables. Links that lead out of them are not followed.
func readTable(spec, name, tables string) ([]byte, error) {
	path := filepath.FromSlash(name)
	if !filepath.IsAbs(path) {
		path = filepath.Join(filepath.Dir(spec), path)
	}
	folders := []string{filepath.Dir(spec)}
	if tables != "" {
		folders = append(folders, tables)
	}
	for _, folder := range folders {
		if in, ok := within(folder, path); ok {
			return readWithin(folder, in)
		}
	}
	return nil, fmt.Errorf("it is outside the spec's folder; name its folder with --tables")
}

// within returns a path as seen from a folder, and whether it is in it, links aside.
func within(folder, path string) (string, bool) {
	from, err := filepath.Abs(folder)
	if err != nil {
		return "", false
	}
	to, err := filepath.Abs(path)
	if err != nil {
		return "", false
	}
	in, err := filepath.Rel(from, to)
	return in, err == nil && filepath.IsLocal(in)
}

func readWithin(folder, name string) ([]byte, error) {
	root, err := os.OpenRoot(folder)
	if err != nil {
		return nil, err
	}
	defer root.Close()
	info, err := root.Stat(name)
	if err != nil {
		return nil, err
	}
	if !info.Mode().IsRegular() { // a pipe nobody writes to would wait for ever
		return nil, errors.New("it is no plain file")
	}
	f, err := root.Open(name)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	return readAtMost(f, fileLimit)
}

// readFile reads a file that the command line names.
func readFile(name string) ([]byte, error) {
	f, err := os.Open(name)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	return readAtMost(f, fileLimit)
}

// readAtMost reads no more than one byte above the limit.
func readAtMost(r io.Reader, limit int64) ([]byte, error) {
	return io.ReadAll(io.LimitReader(r, limit+1))
}
