package spec

import (
	"fmt"
	"slices"
	"strings"

	"go.yaml.in/yaml/v3"
)

// Every object of the format is one table of fields. The table says, once, a
// key's name, meaning, allowed values, whether it must stand there, and where
// its value goes; reader, messages and JSON Schema are all made from it, so
// they cannot drift apart.

// field is one key of an object that is read into a T.
type field[T any] struct {
	name, doc string
	allowed   string   // what the value may be, in words
	must      bool     // the key must be there
	only      []string // kinds of the object that have the key; all when empty
	schema    object   // of the value
	read      func(r *reader, w where, into *T)
}

// required returns the field as one that must be there.
func (f field[T]) required() field[T] { f.must = true; return f }

// of returns the field as one that only these kinds of the object have.
func (f field[T]) of(kinds ...string) field[T] { f.only = kinds; return f }

func (f field[T]) has(kind string) bool {
	return len(f.only) == 0 || slices.Contains(f.only, kind)
}

// table is one object of the format.
type table[T any] struct {
	what   string // "a hole": for messages about kinds
	fields []field[T]
	absent []absent
	kinds  []string                                  // empty when the object has one shape
	name   string                                    // the key that names the kind, when there is one
	kind   func(r *reader, w where) (string, bool)   // the kind of an object; false after a fault
	fresh  T                                         // holds the defaults
	place  func(into *T, p Place)                    // may be nil
	after  func(r *reader, w where, into *T, k bool) // may be nil; k: no fault in this object
}

// absent is a key the format has and this version, or this kind, has not.
type absent struct {
	name string
	of   string // the kind it belongs to; empty when only the version lacks it
}

// where is a value under way: its path, its key (nil for the root and for
// items of lists) and its node.
type where struct {
	path     string
	key, val *yaml.Node
}

func (w where) child(key, val *yaml.Node) where {
	path := key.Value
	if w.path != "" {
		path = w.path + "." + key.Value
	}
	return where{path, key, val}
}

func (w where) item(i int) where {
	return where{fmt.Sprintf("%s[%d]", w.path, i+1), nil, w.val.Content[i]}
}

// empty reports whether nothing stands after the key.
func (w where) empty() bool {
	return w.val.Kind == yaml.ScalarNode && w.val.Style == 0 && w.val.Value == ""
}

// place is that of the value, or of its key when there is no value.
func (w where) place() Place {
	if w.key != nil && w.empty() {
		return Place{w.key.Line, w.key.Column}
	}
	return Place{w.val.Line, w.val.Column}
}

// holder is the place to name when something is missing in the value.
func (w where) holder() Place {
	if w.key != nil {
		return Place{w.key.Line, w.key.Column}
	}
	return w.place()
}

// find returns the value under a key of a map.
func (w where) find(name string) (where, bool) {
	if w.val.Kind != yaml.MappingNode {
		return where{}, false
	}
	for i := 0; i+1 < len(w.val.Content); i += 2 {
		if k := w.val.Content[i]; k.Kind == yaml.ScalarNode && k.Value == name {
			return w.child(k, w.val.Content[i+1]), true
		}
	}
	return where{}, false
}

// readObject reads one object by its table.
func readObject[T any](r *reader, w where, t table[T], into *T) {
	r.seen(w)
	if w.val.Kind != yaml.MappingNode {
		r.wrong(w, "a map of keys: "+strings.Join(t.names(""), ", "), "")
		r.unread = append(r.unread, w.path)
		return
	}
	if t.place != nil {
		t.place(into, w.place())
	}
	kind := ""
	if t.kind != nil {
		var ok bool
		if kind, ok = t.kind(r, w); !ok {
			r.unread = append(r.unread, w.path)
			return
		}
	}
	before := r.count
	given := readKeys(r, w, t, kind, into)
	for _, f := range t.fields {
		if f.must && f.has(kind) && !given[f.name] {
			r.missing(w, f.name, f.allowed, ": "+f.doc)
		}
	}
	if t.after != nil {
		t.after(r, w, into, r.count == before)
	}
}

// readKeys reads the keys that are there and returns those it need not miss.
func readKeys[T any](r *reader, w where, t table[T], kind string, into *T) map[string]bool {
	first := map[string]int{}
	given := map[string]bool{}
	for i := 0; i+1 < len(w.val.Content); i += 2 {
		key := w.val.Content[i]
		at := Place{key.Line, key.Column}
		if key.Kind != yaml.ScalarNode {
			r.fault(at, Fault{Path: w.path, Found: describe(key) + " as a key", Allowed: strings.Join(t.names(kind), ", ")})
			continue
		}
		if line, again := first[key.Value]; again {
			r.fault(at, Fault{Path: w.path, Found: "the key " + quoted(key.Value) + " a second time",
				Allowed: "each key once", Advice: fmt.Sprintf("the first is in line %d", line)})
			continue
		}
		first[key.Value] = key.Line
		if f, ok := t.field(key.Value, kind); ok && f.has(kind) {
			given[f.name] = true
			f.read(r, w.child(key, w.val.Content[i+1]), into)
			continue
		}
		if r.count > mostFaults { // it is not listed, so nothing about it is looked for
			r.count++
			continue
		}
		if instead := t.unknown(r, w, key, kind); instead != "" {
			given[instead] = true
			r.unread = append(r.unread, join(w.path, instead))
		}
	}
	return given
}

// unknown reports a key that the object has not. It returns the key that need
// not be missed because this one stands for it.
func (t table[T]) unknown(r *reader, w where, key *yaml.Node, kind string) (instead string) {
	f := Fault{Path: w.path, Found: "the unknown key " + quoted(key.Value), Allowed: strings.Join(t.names(kind), ", ")}
	if other, ok := t.field(key.Value, kind); ok {
		f.Found = key.Value + ", a key of " + strings.Join(other.only, " and ") + ", in " + t.what + " of kind " + kind
		f.Advice = "take it out"
	} else if i := slices.IndexFunc(t.absent, func(a absent) bool { return a.name == key.Value }); i >= 0 {
		a := t.absent[i]
		f.Found = a.name + ", which is not available in this version"
		if a.of != "" {
			f.Found = a.name + ", a key of " + a.of
		}
	} else {
		f.Nearest = nearest(key.Value, t.names(kind))
		if _, both := w.find(f.Nearest); !both {
			instead = f.Nearest
		}
	}
	r.fault(Place{key.Line, key.Column}, f)
	return instead
}

// field returns the entry of a key. A key that means something else for another kind
// stands in the table once for each; of these the one that the kind has is
// returned, else the first.
func (t table[T]) field(name, kind string) (found field[T], ok bool) {
	for _, f := range t.fields {
		if f.name == name && (!ok || f.has(kind)) {
			found, ok = f, true
		}
	}
	return found, ok
}

// names lists the keys of a kind of the object, or all.
func (t table[T]) names(kind string) []string {
	var names []string
	for _, f := range t.fields {
		if (kind == "" || f.has(kind)) && !slices.Contains(names, f.name) {
			names = append(names, f.name)
		}
	}
	return names
}

// byKey finds the kind of an object by the value of one of its keys: available
// are the kinds of this version, every those of the format.
func byKey(key string, available, every []string) func(r *reader, w where) (string, bool) {
	return func(r *reader, w where) (string, bool) {
		v, ok := w.find(key)
		if !ok {
			r.missing(w, key, strings.Join(available, ", "), "")
			return "", false
		}
		return r.word(v, available, every)
	}
}

// missing records that an object lacks a key it must have.
func (r *reader) missing(w where, name, allowed, doc string) {
	path := join(w.path, name)
	r.unread = append(r.unread, path)
	r.fault(w.holder(), Fault{Path: path, Found: "nothing", Allowed: allowed, Advice: "add the key " + name + doc})
}

func join(path, name string) string {
	if path == "" {
		return name
	}
	return path + "." + name
}
