package spec

import (
	_ "embed"
	"strings"
)

//go:embed starter-plate.yaml
var starterPlate string

//go:embed starter-groove.yaml
var starterGroove string

//go:embed starter-barrel.yaml
var starterBarrel string

// Starter returns a commented spec that can be released as it stands, for a
// kind of cam: "plate", or "" for the same, "groove" or "barrel". Another kind is a Fault.
func Starter(kind string) (string, error) {
	switch kind {
	case "", plateCam:
		return starterPlate, nil
	case grooveCam:
		return starterGroove, nil
	case barrelCam:
		return starterBarrel, nil
	}
	return "", Fault{Found: "the kind " + quoted(kind), Allowed: strings.Join(everyCam(), ", "), Nearest: nearest(kind, everyCam())}
}
