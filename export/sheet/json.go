// Package sheet turns the facts of a release into the terminal summary, report.json
// and the release sheet. It decides nothing: every figure, verdict and limit is
// handed in.
package sheet

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math"
	"reflect"
	"strings"
)

// JSON returns report.json: indented, keys in the order of the struct, lists never
// null, a newline at the end. The same report gives the same bytes. The error names
// the key of the first number that is not finite.
func (r Report) JSON() ([]byte, error) {
	if err := r.check(); err != nil {
		return nil, err
	}
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetIndent("", "  ")
	if err := e.Encode(filled(reflect.ValueOf(r)).Interface()); err != nil {
		return nil, fmt.Errorf("report: %w", err)
	}
	return b.Bytes(), nil
}

// check refuses numbers that are not finite.
func (r Report) check() error { return finite("", reflect.ValueOf(r)) }

// finite walks v and names the first float that is NaN or infinite by its JSON keys.
func finite(key string, v reflect.Value) error {
	switch v.Kind() {
	case reflect.Float64:
		if f := v.Float(); math.IsNaN(f) || math.IsInf(f, 0) {
			return fmt.Errorf("report: %s is %v; it must be finite, or left out where it does not exist",
				strings.TrimPrefix(key, "."), f)
		}
	case reflect.Pointer:
		if !v.IsNil() {
			return finite(key, v.Elem())
		}
	case reflect.Slice:
		for i := range v.Len() {
			if err := finite(fmt.Sprintf("%s[%d]", key, i), v.Index(i)); err != nil {
				return err
			}
		}
	case reflect.Struct:
		for i := range v.NumField() {
			if err := finite(key+"."+v.Type().Field(i).Tag.Get("json"), v.Field(i)); err != nil {
				return err
			}
		}
	}
	return nil
}

// filled is a copy of v whose nil slices are empty ones, so that a list is always a
// list, and whose -0 is 0.
func filled(v reflect.Value) reflect.Value {
	c := reflect.New(v.Type()).Elem()
	c.Set(v)
	switch v.Kind() {
	case reflect.Float64:
		c.SetFloat(v.Float() + 0)
	case reflect.Pointer:
		if !v.IsNil() {
			p := reflect.New(v.Type().Elem())
			p.Elem().Set(filled(v.Elem()))
			c.Set(p)
		}
	case reflect.Slice:
		c.Set(reflect.MakeSlice(v.Type(), v.Len(), v.Len()))
		for i := range v.Len() {
			c.Index(i).Set(filled(v.Index(i)))
		}
	case reflect.Struct:
		for i := range v.NumField() {
			c.Field(i).Set(filled(v.Field(i)))
		}
	}
	return c
}
