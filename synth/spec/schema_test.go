package spec

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"slices"
	"strings"
	"testing"
)

// shape is the part of a JSON Schema this test looks at.
type shape struct {
	Schema      string            `json:"$schema"`
	Type        any               `json:"type"`
	Description string            `json:"description"`
	Properties  map[string]*shape `json:"properties"`
	Required    []string          `json:"required"`
	Closed      *bool             `json:"additionalProperties"`
	OneOf       []*shape          `json:"oneOf"`
	Items       *shape            `json:"items"`
	Const       any               `json:"const"`
	Enum        []string          `json:"enum"`
}

func readSchema(t *testing.T) *shape {
	t.Helper()
	var root shape
	if err := json.Unmarshal(Schema(vocabulary()), &root); err != nil {
		t.Fatal(err)
	}
	return &root
}

func TestSchemaIsDeterministic(t *testing.T) {
	first := Schema(vocabulary())
	for range 20 {
		if !bytes.Equal(first, Schema(vocabulary())) {
			t.Fatal("two schemas differ")
		}
	}
	if root := readSchema(t); root.Schema != "https://json-schema.org/draft/2020-12/schema" {
		t.Error(root.Schema)
	}
}

// value is the smallest valid value of a schema, as YAML in flow style, with
// every required key and one unknown key in the object at the place looked for.
func (s *shape) value(path, wanted string) string {
	switch {
	case s.Const != nil:
		return fmt.Sprint(s.Const)
	case len(s.Enum) > 0:
		return s.Enum[0]
	case s.Items != nil:
		return "[" + s.Items.value(path+"[]", wanted) + "]"
	case s.Properties == nil && len(s.OneOf) > 0:
		return s.branch(path, wanted).value(path, wanted)
	case s.Properties == nil:
		return "1"
	}
	var keys []string
	for name, p := range s.Properties {
		below := join(path, name)
		if slices.Contains(s.Required, name) || strings.HasPrefix(wanted, below) && len(p.objects(below)) > 0 {
			keys = append(keys, name+": "+p.value(below, wanted))
		}
	}
	slices.Sort(keys)
	if path == wanted || s.label(path) == wanted {
		keys = append(keys, "zzzzzzzz: 1")
	}
	return "{" + strings.Join(keys, ", ") + "}"
}

// label tells the branches of a choice apart by the required key or constant.
func (s *shape) label(path string) string {
	for _, p := range s.Properties {
		if p.Const != nil {
			return path + "(" + fmt.Sprint(p.Const) + ")"
		}
	}
	return path + "(" + strings.Join(s.Required, ",") + ")"
}

func (s *shape) branch(path, wanted string) *shape {
	for _, b := range s.OneOf {
		if b.Properties == nil {
			continue
		}
		if _, below := b.objects(path)[wanted]; below || b.label(path) == wanted {
			return b
		}
	}
	return s.OneOf[0]
}

// objects lists every object of the schema below a path, by label.
func (s *shape) objects(path string) map[string]*shape {
	all := map[string]*shape{}
	add := func(more map[string]*shape) {
		for k, v := range more {
			all[k] = v
		}
	}
	if s.Items != nil {
		add(s.Items.objects(path + "[]"))
	}
	for _, b := range s.OneOf {
		if b.Properties != nil {
			all[b.label(path)] = b
			for name, p := range b.Properties {
				add(p.objects(join(path, name)))
			}
		}
	}
	if s.Properties != nil {
		all[path] = s
		for name, p := range s.Properties {
			add(p.objects(join(path, name)))
		}
	}
	return all
}

// The reader lists the keys it knows when it meets one it does not. In every
// object of the schema they must be the schema's keys, and every description
// must be there.
func TestReaderAndSchemaKnowTheSameKeys(t *testing.T) {
	root := readSchema(t)
	objects := root.objects("")
	const fewest = 18 // objects of the format, branches counted
	if len(objects) < fewest {
		t.Fatalf("only %d objects in the schema", len(objects))
	}
	for path, object := range objects {
		if object.Closed == nil || *object.Closed {
			t.Errorf("%s: open to other keys", path)
		}
		var want []string
		for name, p := range object.Properties {
			want = append(want, name)
			if p.Description == "" {
				t.Errorf("%s.%s has no description", path, name)
			}
		}
		text := root.value("", path)
		got := acceptedKeys(t, text)
		slices.Sort(want)
		slices.Sort(got)
		if !slices.Equal(want, got) {
			t.Errorf("%s: schema has %v, reader %v, spec %s", path, want, got, text)
		}
	}
}

func acceptedKeys(t *testing.T, text string) []string {
	t.Helper()
	_, err := Read("x.yaml", []byte(text), vocabulary())
	var faults Faults
	if !errors.As(err, &faults) {
		t.Fatalf("no fault in %s", text)
	}
	for _, f := range faults {
		if f.Found == `the unknown key "zzzzzzzz"` {
			return strings.Split(f.Allowed, ", ")
		}
	}
	t.Fatalf("no unknown key in %s: %v", text, err)
	return nil
}

// A key the schema requires is one the reader misses.
func TestReaderMissesWhatTheSchemaRequires(t *testing.T) {
	_, err := Read("x.yaml", []byte("{title: x}"), vocabulary())
	for _, name := range readSchema(t).Required {
		if !strings.Contains(err.Error(), ": "+name+": found nothing") {
			t.Errorf("%s is not missed: %v", name, err)
		}
	}
}
