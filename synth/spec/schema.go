package spec

import (
	"bytes"
	"encoding/json"
)

// object is a JSON object whose keys keep their order.
type object []pair

type pair struct {
	key   string
	value any
}

// MarshalJSON writes the pairs in their order.
func (o object) MarshalJSON() ([]byte, error) {
	var b bytes.Buffer
	b.WriteByte('{')
	for i, p := range o {
		if i > 0 {
			b.WriteByte(',')
		}
		key, err := json.Marshal(p.key)
		if err != nil {
			return nil, err
		}
		value, err := json.Marshal(p.value)
		if err != nil {
			return nil, err
		}
		b.Write(key)
		b.WriteByte(':')
		b.Write(value)
	}
	b.WriteByte('}')
	return b.Bytes(), nil
}

func enum(words []string) object {
	return object{{"type", "string"}, {"enum", append([]string{}, words...)}}
}

func listOf(item object) object {
	return object{{"type", "array"}, {"minItems", 1}, {"maxItems", mostItems}, {"items", item}}
}

// schema describes the object; one whose kinds differ in their keys is a choice.
func (t table[T]) schema() object {
	if !t.varies() {
		return t.shape("")
	}
	var shapes []object
	for _, kind := range t.kinds {
		shapes = append(shapes, t.shape(kind))
	}
	return object{{"oneOf", shapes}}
}

func (t table[T]) varies() bool {
	for _, f := range t.fields {
		if len(f.only) > 0 {
			return true
		}
	}
	return false
}

func (t table[T]) shape(kind string) object {
	var properties object
	required := []string{}
	for _, f := range t.fields {
		if !f.has(kind) {
			continue
		}
		value := f.schema
		if kind != "" && f.name == t.name {
			value = object{{"const", kind}}
		}
		properties = append(properties, pair{f.name, append(object{{"description", f.doc}}, value...)})
		if f.must {
			required = append(required, f.name)
		}
	}
	return object{{"type", "object"}, {"properties", properties}, {"required", required}, {"additionalProperties", false}}
}

// Schema returns the JSON Schema (draft 2020-12) of the format, for editors and
// other checkers. It is made from the tables the reader works by, so both know
// the same keys; checks that compare keys with one another (angles that sum to
// 360, a bore smaller than the base circle) are the reader's alone. The same
// vocabulary gives the same bytes. Lengths are in the spec's units, angles in
// degrees; every description says which.
func Schema(v Vocabulary) []byte {
	root := append(object{
		{"$schema", "https://json-schema.org/draft/2020-12/schema"},
		{"title", "lobewright cam spec"},
		{"description", "One cam: its motion, follower, body, tolerance and operations. Lengths are in the spec's units, angles in degrees, speed in rpm, time in seconds unless a key says otherwise."},
	}, specTable(v).schema()...)
	var b bytes.Buffer
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	if err := enc.Encode(root); err != nil {
		// The tree holds strings, finite numbers, lists and objects only.
		panic("spec: schema: " + err.Error())
	}
	return b.Bytes()
}
