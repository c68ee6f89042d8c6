package spec

import (
	_ "embed"
	"slices"
	"strings"
)

//go:embed starter-plate.yaml
var starterPlate string

// Starter returns a commented spec that can be released as it stands, for a
// kind of cam: "plate", or "" for the same. Another kind is a Fault.
func Starter(kind string) (string, error) {
	available := []string{"plate"}
	if kind == "" || slices.Contains(available, kind) {
		return starterPlate, nil
	}
	f := Fault{Found: "the kind " + quoted(kind), Allowed: strings.Join(available, ", "), Nearest: nearest(kind, available)}
	if slices.Contains(everyCam(), kind) {
		f.Found = kind + ", which is not available in this version"
	}
	return "", f
}
