package spec

import (
	"fmt"
	"strings"

	"go.yaml.in/yaml/v3"
)

// number is a key with a number in the span.
func number[T any](name, doc string, s span, at func(*T) *float64) field[T] {
	return field[T]{name: name, doc: doc, allowed: s.String(), schema: s.schema(),
		read: func(r *reader, w where, into *T) {
			if x, ok := r.number(w, s); ok {
				*at(into) = x
			}
		}}
}

// numberOr is a key with a number in the span or one word.
func numberOr[T any](word, name, doc string, s span, at func(*T) *float64, said func(*T) *bool) field[T] {
	allowed := s.String() + ", or " + word
	return field[T]{name: name, doc: doc, allowed: allowed, schema: object{{"anyOf", []object{s.schema(), {{"const", word}}}}},
		read: func(r *reader, w where, into *T) {
			if w.val.Kind == yaml.ScalarNode && w.val.Value == word {
				r.seen(w)
				*said(into) = true
				return
			}
			if _, advice, ok := plainNumber(w); !ok {
				r.seen(w)
				r.wrong(w, allowed, advice)
				return
			}
			if x, ok := r.number(w, s); ok {
				*at(into) = x
			}
		}}
}

// optional is a key whose absence differs from every value.
func optional[T any](name, doc string, s span, at func(*T) **float64) field[T] {
	return field[T]{name: name, doc: doc, allowed: s.String(), schema: s.schema(),
		read: func(r *reader, w where, into *T) {
			if x, ok := r.number(w, s); ok {
				*at(into) = &x
			}
		}}
}

// numbers is a key with a list of numbers in the span, at least one.
func numbers[T any](name, doc string, s span, at func(*T) *[]float64) field[T] {
	return field[T]{name: name, doc: doc, allowed: "a list, each " + s.String(), schema: listOf(s.schema()),
		read: func(r *reader, w where, into *T) {
			var all []float64
			whole := r.items(w, "a list of numbers", func(w where) bool {
				x, ok := r.number(w, s)
				all = append(all, x)
				return ok
			})
			if whole {
				*at(into) = all
			}
		}}
}

// integer is a key with a whole number from lo to hi.
func integer[T any](name, doc string, lo, hi int, at func(*T) *int) field[T] {
	s := span{noun: "a whole number", lo: float64(lo), hi: float64(hi), whole: true}
	return field[T]{name: name, doc: doc, allowed: s.String(), schema: s.schema(),
		read: func(r *reader, w where, into *T) {
			if x, ok := r.number(w, s); ok {
				*at(into) = int(x)
			}
		}}
}

// flag is a key with true or false.
func flag[T any](name, doc string, at func(*T) *bool) field[T] {
	return field[T]{name: name, doc: doc, allowed: "true, false", schema: object{{"type", "boolean"}},
		read: func(r *reader, w where, into *T) {
			r.seen(w)
			if w.val.Kind != yaml.ScalarNode || w.val.Style != 0 || (w.val.Value != "true" && w.val.Value != "false") {
				r.wrong(w, "true, false", "")
				return
			}
			*at(into) = w.val.Value == "true"
		}}
}

// choice is a key with one of the available words; every word of the format
// that is not available is answered as such.
func choice[T any](name, doc string, available, every []string, put func(*T, string)) field[T] {
	return field[T]{name: name, doc: doc, allowed: strings.Join(available, ", "), schema: enum(available),
		read: func(r *reader, w where, into *T) {
			if word, ok := r.word(w, available, every); ok {
				put(into, word)
			}
		}}
}

// kindKey is the key that table.kind has read and checked already.
func kindKey[T any](name, doc string, available []string, put func(*T, string)) field[T] {
	f := choice(name, doc, available, available, put)
	f.read = func(r *reader, w where, into *T) { r.seen(w); put(into, w.val.Value) }
	return f.required()
}

// text is a key with one line of text.
func text[T any](name, doc string, at func(*T) *string) field[T] {
	return field[T]{name: name, doc: doc, allowed: textAllowed, schema: textSchema("null"),
		read: func(r *reader, w where, into *T) {
			if s, ok := r.text(w); ok {
				*at(into) = s
			}
		}}
}

// texts is a key with a list of lines of text.
func texts[T any](name, doc string, at func(*T) *[]string) field[T] {
	return field[T]{name: name, doc: doc, allowed: "a list of lines of text", schema: listOf(textSchema()),
		read: func(r *reader, w where, into *T) {
			var all []string
			whole := r.items(w, "a list of lines of text", func(w where) bool {
				s, ok := r.text(w)
				all = append(all, s)
				return ok
			})
			if whole {
				*at(into) = all
			}
		}}
}

// child is a key with an object whose defaults are already in place.
func child[T, C any](name, doc string, t table[C], at func(*T) *C) field[T] {
	return field[T]{name: name, doc: doc, allowed: "a map of keys: " + strings.Join(t.names(""), ", "), schema: t.schema(),
		read: func(r *reader, w where, into *T) { readObject(r, w, t, at(into)) }}
}

// maybe is a key with an object that may be absent.
func maybe[T, C any](name, doc string, t table[C], at func(*T) **C) field[T] {
	return field[T]{name: name, doc: doc, allowed: "a map of keys: " + strings.Join(t.names(""), ", "), schema: t.schema(),
		read: func(r *reader, w where, into *T) {
			c := t.fresh
			readObject(r, w, t, &c)
			*at(into) = &c
		}}
}

// list is a key with a list of objects, at least one.
func list[T, C any](name, doc string, t table[C], put func(r *reader, into *T, all []C)) field[T] {
	return field[T]{name: name, doc: doc, allowed: "a list of maps", schema: listOf(t.schema()),
		read: func(r *reader, w where, into *T) {
			var all []C
			r.items(w, "a list of maps", func(w where) bool {
				c := t.fresh
				readObject(r, w, t, &c)
				all = append(all, c)
				return true
			})
			put(r, into, all)
		}}
}

// items reads a list of 1 to mostItems values and reports whether all were read.
func (r *reader) items(w where, allowed string, one func(where) bool) bool {
	r.seen(w)
	if w.val.Kind != yaml.SequenceNode {
		advice := ""
		if !w.empty() {
			advice = "put it between [ and ]"
		}
		r.wrong(w, allowed, advice)
		r.unread = append(r.unread, w.path)
		return false
	}
	if n := len(w.val.Content); n < 1 || n > mostItems {
		found := fmt.Sprintf("a list of %d", n)
		if n == 0 {
			found = "an empty list"
		}
		r.fault(w.place(), Fault{Path: w.path, Found: found, Allowed: fmt.Sprintf("%s, 1 to %d of them", allowed, mostItems)})
		r.unread = append(r.unread, w.path)
		return false
	}
	whole := true
	for i := range w.val.Content {
		whole = one(w.item(i)) && whole
	}
	return whole
}
