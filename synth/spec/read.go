// Package spec reads the YAML specification of one cam: strictly, with every
// fault at its place, and all faults at once. It also prints the format's JSON
// Schema and a starter. What laws and kinds exist is handed in as a Vocabulary;
// no other package knows YAML.
package spec

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"strings"

	"go.yaml.in/yaml/v3"
)

// Default pressure angles in degrees: common practice, no source.
const (
	defaultPressureAngle = 30.0 // translating followers
	defaultSwingAngle    = 35.0 // swinging followers
)

// Read reads a spec. The file's name is only used in messages. The spec comes
// back complete: defaults filled in, times and rest turned into degrees, SHA256
// over data as given. Otherwise the error is a Faults, sorted by place, and the
// spec is nil. It does not panic on any data.
//
// What depends on the geometry (undercut, pressure angle, walls, an angular
// datum) is not a matter of reading and not looked at here.
func Read(file string, data []byte, v Vocabulary) (*Spec, error) {
	root, faults := parse(file, data)
	if len(faults) > 0 {
		return nil, faults
	}
	return readRoot(file, data, root, v)
}

// readRoot reads the spec of a parsed file.
func readRoot(file string, data []byte, root *yaml.Node, v Vocabulary) (*Spec, error) {
	r := &reader{file: file, vocabulary: v, places: map[string]spot{}}
	sum := sha256.Sum256(data)
	s := &Spec{File: file, SHA256: hex.EncodeToString(sum[:]),
		Tolerance: Tolerance{Combine: "fixed+rss"},
		Control:   Control{BlockNumbers: true},
	}
	readObject(r, where{val: root}, specTable(v), s)
	r.finishMotion(s)
	r.check(s)
	defaults(s)
	if len(r.faults) > 0 {
		return nil, r.all()
	}
	return s, nil
}

// defaults fills in what depends on the unit of length or the kind of follower.
func defaults(s *Spec) {
	if s.Limits.PressureAngle == 0 {
		s.Limits.PressureAngle = defaultPressureAngle
		if s.Follower.Swings() {
			s.Limits.PressureAngle = defaultSwingAngle
		}
	}
	decimals, mismatch, safe := 3, 0.002, 5.0
	if s.Units == Inch {
		decimals, mismatch, safe = 4, 0.0002, 0.2
	}
	c := &s.Control
	if c.Decimals == 0 {
		c.Decimals = decimals
	}
	if c.ArcMismatch == 0 {
		c.ArcMismatch = mismatch
	}
	if c.RotaryDecimals == 0 {
		c.RotaryDecimals = rotaryDecimals
	}
	if c.SafeZ == 0 {
		c.SafeZ = safe
	}
}

// reader gathers faults and remembers places while a spec is read.
type reader struct {
	file       string
	vocabulary Vocabulary
	faults     Faults
	count      int             // of all faults, also of those above mostFaults
	places     map[string]spot // of every value that was looked at
	unread     []string        // paths of objects and lists that could not be read
	events     []draft
}

// spot is where a value and its key stand.
type spot struct{ value, key Place }

// seen remembers the place of a value.
func (r *reader) seen(w where) { r.places[w.path] = spot{w.place(), w.holder()} }

// fault records a fault at a place.
func (r *reader) fault(p Place, f Fault) {
	f.File, f.Line, f.Column = r.file, p.Line, p.Column
	if r.count++; r.count <= mostFaults {
		r.faults = append(r.faults, f)
	}
}

// faultAt records a fault at the value of a path that was looked at.
func (r *reader) faultAt(path string, f Fault) {
	f.Path = path
	r.fault(r.places[path].value, f)
}

// faultAtKey records a fault at the key of a path that was looked at.
func (r *reader) faultAtKey(path string, f Fault) {
	f.Path = path
	r.fault(r.places[path].key, f)
}

// wrong records a value of the wrong type.
func (r *reader) wrong(w where, allowed, advice string) {
	found := describe(w.val)
	if w.val.Kind == yaml.ScalarNode && notFinite.MatchString(w.val.Value) && w.val.Style == 0 {
		found += ", which is not a finite number"
	}
	r.fault(w.place(), Fault{Path: w.path, Found: found, Allowed: allowed, Advice: advice})
}

// ok reports whether the values at all the paths were read without a fault (or
// are absent where they may be), so that a check that compares them makes sense.
func (r *reader) ok(paths ...string) bool {
	if r.count > mostFaults {
		return false
	}
	for _, path := range paths {
		for _, f := range r.faults {
			if under(f.Path, path) {
				return false
			}
		}
		for _, u := range r.unread {
			if under(path, u) {
				return false
			}
		}
	}
	return true
}

// under reports whether path is the other path or below it.
func under(path, other string) bool {
	if other == "" {
		return true
	}
	rest, found := strings.CutPrefix(path, other)
	return found && (rest == "" || rest[0] == '.' || rest[0] == '[')
}

// all returns the faults in order; when there were too many to keep, the last says so.
func (r *reader) all() Faults {
	sorted := r.faults.sorted()
	if more := r.count - len(r.faults); more > 0 {
		last := sorted[len(sorted)-1]
		sorted = append(sorted, Fault{File: r.file, Line: last.Line, Column: last.Column,
			Found: fmt.Sprintf("%d more faults, not listed", more)})
	}
	return sorted
}
