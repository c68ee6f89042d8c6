package spec

import (
	_ "embed"
	"slices"
	"strings"
)

//go:embed starter-plate.yaml
var starterPlate string

//go:embed starter-groove.yaml
var starterGroove string

// Starter returns a commented spec that can be released as it stands, for a
// kind of cam: "plate", or "" for the same, or "groove". Another kind is a Fault.
func Starter(kind string) (string, error) {
	switch kind {
	case "", plateCam:
		return starterPlate, nil
	case grooveCam:
		return starterGroove, nil
	}
	available := []string{plateCam, grooveCam}
	f := Fault{Found: "the kind " + quoted(kind), Allowed: strings.Join(available, ", "), Nearest: nearest(kind, available)}
	if slices.Contains(everyCam(), kind) {
		f.Found = kind + ", which is not available in this version"
	}
	return "", f
}
