package sheet

import (
	"bytes"
	"encoding/json"
	"fmt"
	"reflect"
)

// ProveOut is what an NC program would cut against the exact contour of its spec.
// Units and rules are those of Report.
type ProveOut struct {
	Tool         string    `json:"tool"` // "lobewright x.y.z"
	Part         string    `json:"part"`
	Units        string    `json:"units"`
	File         string    `json:"file"`
	Operation    int       `json:"operation"` // of the spec, from 1
	Process      string    `json:"process"`
	ToolDiameter float64   `json:"tool_diameter"` // cutter or wire, length
	Chord        float64   `json:"chord"`         // length, the tolerance either way
	Blocks       int       `json:"blocks"`
	Bytes        int       `json:"bytes"`
	PathLength   float64   `json:"path_length"`
	Seconds      float64   `json:"seconds"`
	Passes       []Pass    `json:"passes"`
	Follower     *Follower `json:"follower"` // on the last pass; nil when it does not go all around
	Faults       []Fault   `json:"faults"`
	Proven       bool      `json:"proven"`
}

// Fault is one thing a program does that it must not, or does not do.
type Fault struct {
	ID       string   `json:"id"`
	Line     int      `json:"line"`      // of the file, 0 when it has none
	Block    *int     `json:"block"`     // N number there, nil when it has none
	Value    *float64 `json:"value"`     // found
	Limit    *float64 `json:"limit"`     // allowed
	CamAngle *float64 `json:"cam_angle"` // degrees
	Text     string   `json:"text"`
}

// JSON returns the facts for a program; the error names a number that is not finite.
func (p ProveOut) JSON() ([]byte, error) {
	if err := finite("", reflect.ValueOf(p)); err != nil {
		return nil, err
	}
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetIndent("", "  ")
	if err := e.Encode(filled(reflect.ValueOf(p)).Interface()); err != nil {
		return nil, fmt.Errorf("proveout: %w", err)
	}
	return b.Bytes(), nil
}

// Text returns the terminal summary, at most 80 columns wide.
func (p ProveOut) Text(color bool) string {
	t := &summary{r: Report{Part: p.Part, Units: p.Units}, color: color}
	t.para("", 2, fmt.Sprintf("%s against operation %d (%s) of %s, diameter %s %s", p.File, p.Operation, p.Process, p.Part,
		sig(p.ToolDiameter, valueFigures), t.r.short()))
	t.title("Read from the file")
	t.row("program", fmt.Sprintf("%d blocks, %s, %s", p.Blocks, size(p.Bytes), duration(p.Seconds)))
	for _, q := range p.Passes {
		t.pass(q, p.Process)
	}
	t.follower(p.Follower)
	t.title("Faults")
	if len(p.Faults) == 0 {
		t.line("  none")
	}
	for _, f := range p.Faults {
		at := fmt.Sprintf("line %d", f.Line)
		if f.Line == 0 {
			at = "program"
		}
		if f.Block != nil {
			at += fmt.Sprintf(" (N%d)", *f.Block)
		}
		if f.CamAngle != nil {
			at += ", cam angle " + angle(f.CamAngle) + "°"
		}
		t.para("  ", 4, at+": "+f.ID+": "+f.Text)
	}
	t.b.WriteByte('\n')
	if p.Proven {
		t.line("%s", t.paint(passColor, "PROVEN"))
	} else {
		t.line("%s", t.paint(failColor, fmt.Sprintf("NOT PROVEN: %d faults", len(p.Faults))))
	}
	return t.b.String()
}
