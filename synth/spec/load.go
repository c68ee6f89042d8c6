package spec

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
)

// Load reads the files a spec names with read, which is given each name as the spec
// has it, and returns the spec with their content; spec is the spec's own bytes.
// SHA256 is then that of the spec and the files one after the other, as
// `cat spec.yaml lift.csv | sha256sum` gives it. A spec that names none comes back as it
// is. The error is a Faults at the file's name.
func (s *Spec) Load(spec []byte, read func(name string) ([]byte, error)) (*Spec, error) {
	t := s.Motion.Table
	if t == nil {
		return s, nil
	}
	data, err := read(t.File)
	if err == nil && len(data) > mostTableBytes {
		err = fmt.Errorf("a file of more than %d bytes", mostTableBytes)
	}
	if err != nil {
		return nil, Faults{{File: s.File, Line: t.FilePlace.Line, Column: t.FilePlace.Column, Path: "motion.table.file",
			Found: t.File + ", which cannot be read: " + err.Error(), Allowed: "a CSV file of cam angle and lift",
			Advice: "its path is taken from the spec's folder"}}
	}
	out, table := *s, *t
	table.Data = data
	out.Motion.Table = &table
	sum := sha256.New()
	sum.Write(spec)
	sum.Write(data)
	out.SHA256 = hex.EncodeToString(sum.Sum(nil))
	return &out, nil
}

// mostTableBytes is room for 20 000 rows of two long numbers.
const mostTableBytes = 4 << 20
