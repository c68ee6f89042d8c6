// Package gate holds the verdicts of a check as data: computed once, shown by
// the table, the sheet, the JSON and the exit status.
package gate

// Gate is a value against a limit, at a place. A failing gate refuses a release.
type Gate struct {
	ID       string  // stable name, as in report.json: "pressure-angle"
	Of       string  // what is judged when the spec has several: "contour.dxf", "operation 2"; may be empty
	Value    float64 // in Unit
	Limit    float64 // in Unit
	Unit     string  // "deg", "mm", "in", "mm/s", "" for counts
	AtLeast  bool    // the value must be at least the limit; otherwise at most
	CamAngle float64 // degrees, NaN when the gate has no place on the cam
	Polar    float64 // polar angle of the place in degrees, NaN when none
	Pass     bool
	Text     string // what it means, and for a failing gate what to do
}

// Finding informs; it refuses nothing.
type Finding struct {
	ID       string
	CamAngle float64 // degrees, NaN when it has no place
	Text     string
}
