package spec

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"strings"

	"go.yaml.in/yaml/v3"
)

// Load reads the files a spec names with read, which is given each name as the spec
// has it, and returns the spec with their content; spec is the spec's own bytes.
// SHA256 is then that of the spec and the files one after the other, the control's before the table, as
// `cat spec.yaml controls.yaml lift.csv | sha256sum` gives it. A spec that names none comes back as it
// is. The error is a Faults at the file's name, or inside the file of the controls.
func (s *Spec) Load(spec []byte, v Vocabulary, read func(name string) ([]byte, error)) (*Spec, error) {
	out, sum := s, sha256.New()
	sum.Write(spec)
	if s.Control.File != "" {
		var data []byte
		var err error
		if out, data, err = s.withSet(spec, v, read); err != nil {
			return nil, err
		}
		sum.Write(data)
	}
	if t := out.Motion.Table; t != nil {
		data, err := out.file("motion.table.file", t.FilePlace, t.File, "a CSV file of cam angle and lift", read)
		if err != nil {
			return nil, err
		}
		with, table := *out, *t
		table.Data = data
		with.Motion.Table = &table
		out = &with
		sum.Write(data)
	}
	if out != s {
		with := *out
		with.SHA256 = hex.EncodeToString(sum.Sum(nil))
		out = &with
	}
	return out, nil
}

// file reads a file that the spec names at a place.
func (s *Spec) file(path string, at Place, name, allowed string, read func(name string) ([]byte, error)) ([]byte, error) {
	data, err := read(name)
	if err == nil && len(data) > mostTableBytes {
		err = fmt.Errorf("a file of more than %d bytes", mostTableBytes)
	}
	if err != nil {
		return nil, Faults{{File: s.File, Line: at.Line, Column: at.Column, Path: path,
			Found: name + ", which cannot be read: " + err.Error(), Allowed: allowed, Advice: "its path is taken from the spec's folder"}}
	}
	return data, nil
}

// withSet reads the spec again with what its control leaves out taken from a set of the file it names.
// The set is read on its own first, so that its faults have its place.
func (s *Spec) withSet(spec []byte, v Vocabulary, read func(name string) ([]byte, error)) (*Spec, []byte, error) {
	at := s.Control.Place
	data, err := s.file("control.file", at, s.Control.File, "a YAML file of named control settings", read)
	if err != nil {
		return nil, nil, err
	}
	sets, faults := parse(s.Control.File, data)
	if len(faults) > 0 {
		return nil, nil, faults
	}
	var set *yaml.Node
	var names []string
	if sets.Kind == yaml.MappingNode {
		for i := 0; i+1 < len(sets.Content); i += 2 {
			names = append(names, sets.Content[i].Value)
			if sets.Content[i].Value == s.Control.Set {
				set = sets.Content[i+1]
			}
		}
	}
	if set == nil {
		return nil, nil, Faults{{File: s.File, Line: at.Line, Column: at.Column, Path: "control.set", Found: s.Control.Set,
			Allowed: "a set of " + s.Control.File + ": " + strings.Join(names, ", "), Nearest: nearest(s.Control.Set, names)}}
	}
	r := &reader{file: s.Control.File, vocabulary: v, places: map[string]spot{}}
	alone := Spec{Control: Control{BlockNumbers: true}}
	readObject(r, where{path: "control", val: set}, controlTable(), &alone.Control)
	if alone.Control.File != "" && r.ok("control.file") {
		r.faultAt("control.file", Fault{Found: "a file in a set", Allowed: "settings alone", Advice: "take the key out"})
	}
	r.checkControl(&alone)
	if len(r.faults) > 0 {
		return nil, nil, r.all()
	}
	root, faults := parse(s.File, spec)
	if len(faults) > 0 {
		return nil, nil, faults
	}
	merge(root, set)
	out, err := readRoot(s.File, spec, root, v)
	return out, data, err
}

// merge puts the pairs of a set into the control of a spec that lacks their keys, in place of file and set.
func merge(root, set *yaml.Node) {
	for i := 0; i+1 < len(root.Content); i += 2 {
		control := root.Content[i+1]
		if root.Content[i].Value != "control" || control.Kind != yaml.MappingNode {
			continue
		}
		var pairs []*yaml.Node
		given := map[string]bool{}
		for k := 0; k+1 < len(control.Content); k += 2 {
			key := control.Content[k].Value
			given[key] = true
			if key != "file" && key != "set" {
				pairs = append(pairs, control.Content[k], control.Content[k+1])
			}
		}
		for k := 0; k+1 < len(set.Content); k += 2 {
			if !given[set.Content[k].Value] {
				pairs = append(pairs, set.Content[k], set.Content[k+1])
			}
		}
		control.Content = pairs
	}
}

// mostTableBytes is room for 20 000 rows of two long numbers.
const mostTableBytes = 4 << 20
