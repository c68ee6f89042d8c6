package sheet

import (
	"math"

	"lobewright/synth/gate"
)

// Report is everything a release or a check found, as report.json prints it. Lengths
// are in Units, angles in degrees, times in seconds, velocities per second,
// accelerations per second squared at the camshaft's speed. A nil pointer is a
// value that does not exist and becomes null. A float that is not finite is an error.
type Report struct {
	Tool       string `json:"tool"` // "lobewright x.y.z"
	Part       string `json:"part"`
	Title      string `json:"title"`
	Revision   string `json:"revision"`
	Units      string `json:"units"`               // "mm" or "inch"
	LiftUnit   string `json:"lift_unit,omitempty"` // "deg" of a swinging follower: the unit of lifts; else that of lengths
	SpecSHA256 string `json:"spec_sha256"`
	Released   bool   `json:"released"`

	Camshaft   Camshaft    `json:"camshaft"`
	Facts      []Fact      `json:"facts"` // what the part is, in words: material, follower, bore, ...
	Events     []Event     `json:"events"`
	Gates      []Gate      `json:"gates"`
	Findings   []Finding   `json:"findings"`
	Contour    Contour     `json:"contour"`
	Motion     Motion      `json:"motion"`
	Paths      []Path      `json:"paths"`
	Operations []Operation `json:"operations"`
	Budget     Budget      `json:"budget"`
	Tolerance  Tolerance   `json:"tolerance"`
	Notes      []string    `json:"notes"`
	Cautions   []string    `json:"cautions"`
	Probe      *Probe      `json:"probe,omitempty"` // the table for a probe, when the spec asks for one
	Files      []string    `json:"files"`
	FileHashes []FileHash  `json:"file_hashes"` // of the files that were finished before the report
}

// Probe is the table a probe on a rotary table is held against. Lengths are those of the
// probe's center from the camshaft axis.
type Probe struct {
	File     string     `json:"file"`
	Diameter float64    `json:"probe_diameter"`
	Step     float64    `json:"step"`  // degrees of table angle
	Sense    string     `json:"sense"` // in which the table turns, seen on the marked face: "clockwise" or "counterclockwise"
	Rows     int        `json:"rows"`  // of the file
	Shown    []ProbeRow `json:"-"`     // those the page shows, at equal table angles
}

// ProbeRow is one row of it; Outer is that of a groove's outer wall.
type ProbeRow struct {
	TableAngle, Radius, Lower, Upper, Difference float64
	Outer                                        *ProbeRow
}

// FileHash is the SHA-256 of a file of the pack, hexadecimal.
type FileHash struct {
	Name   string `json:"name"`
	SHA256 string `json:"sha256"`
}

// Camshaft is the shaft's speed in rpm and rotation, "clockwise" or
// "counterclockwise" as seen on the marked face.
type Camshaft struct {
	Speed    float64 `json:"speed"`
	Rotation string  `json:"rotation"`
}

// Fact is a name and what is so, for a two-column table.
type Fact struct {
	Name string `json:"name"`
	Text string `json:"text"`
}

// Event is one stretch of the motion, From and To in degrees of cam angle.
type Event struct {
	From float64 `json:"from"`
	To   float64 `json:"to"`
	Text string  `json:"text"`
}

// Gate is a value against a limit at a place; see Gates.
type Gate struct {
	ID         string   `json:"id"`
	Of         string   `json:"of,omitempty"` // what is judged when there are several: "1-mill"
	Value      *float64 `json:"value"`        // in Unit
	Limit      *float64 `json:"limit"`        // in Unit
	Unit       string   `json:"unit"`
	AtLeast    bool     `json:"at_least"`    // the value must be at least the limit; else at most
	CamAngle   *float64 `json:"cam_angle"`   // degrees
	PolarAngle *float64 `json:"polar_angle"` // degrees
	Pass       bool     `json:"pass"`
	Text       string   `json:"text"`
}

// Finding informs; see Findings.
type Finding struct {
	ID       string   `json:"id"`
	CamAngle *float64 `json:"cam_angle"` // degrees
	Text     string   `json:"text"`
}

// Contour is what the exact contour measures.
type Contour struct {
	Length             float64   `json:"length"`
	Area               float64   `json:"area"`
	LeastConvexRadius  *float64  `json:"least_convex_radius"`
	LeastConcaveRadius *float64  `json:"least_concave_radius"` // positive; nil when nowhere concave
	Junctions          []float64 `json:"junctions"`            // cam angles, degrees
}

// Motion is the design's peaks, each the greatest size.
type Motion struct {
	PeakVelocity     float64 `json:"peak_velocity"`
	PeakAcceleration float64 `json:"peak_acceleration"`
	PeakJerk         float64 `json:"peak_jerk"`

	Jumps      []Jump      `json:"jumps"`                // where acceleration or jerk jump, in order of cam angle
	Completion *Completion `json:"completion,omitempty"` // of a motion completed from facts
}

// Jump is a place where the motion is not smooth: what acceleration and jerk step by.
type Jump struct {
	CamAngle     float64 `json:"cam_angle"`    // degrees
	Acceleration float64 `json:"acceleration"` // length/s², 0 where it is continuous
	Jerk         float64 `json:"jerk"`         // length/s³
}

// Completion says how near to the optimum a motion is that was completed from facts.
type Completion struct {
	Minimized string   `json:"minimized"`  // "acceleration" or "jerk": the peak that was made least
	Reached   float64  `json:"reached"`    // length/s² or length/s³
	Least     float64  `json:"least"`      // proven: no motion that meets the facts has a smaller one
	JerkLimit *float64 `json:"jerk_limit"` // length/s³; nil when the jerk was minimized
	LeastJerk float64  `json:"least_jerk"` // length/s³, proven
}

// Deviation is the certified deviation of a written path.
type Deviation struct {
	Bound    float64  `json:"bound"`     // length: certified upper bound of the size
	Outside  float64  `json:"outside"`   // length: largest found outside
	Inside   float64  `json:"inside"`    // length: largest found inside, negative or 0
	CamAngle *float64 `json:"cam_angle"` // degrees, of the larger of the two
}

// Follower is what the follower would do on a written path, against the design.
type Follower struct {
	Lift              float64 `json:"lift"`               // length, greatest error
	Velocity          float64 `json:"velocity"`           // length/s, greatest error
	VelocityStep      float64 `json:"velocity_step"`      // length/s, greatest step at a joint
	Acceleration      float64 `json:"acceleration"`       // length/s², greatest error inside lines and arcs
	AccelerationShare float64 `json:"acceleration_share"` // Acceleration over the design's peak
}

// Path is one written path. Follower is nil for a curve no follower runs on.
type Path struct {
	File          string    `json:"file"`
	Curve         string    `json:"curve"` // "contour", "pitch-curve", "tool center, pass 3"
	Lines         int       `json:"lines"`
	Arcs          int       `json:"arcs"`
	SegmentsFloor *int      `json:"segments_floor"` // nil when none is computed
	Theory        float64   `json:"segments_theory"`
	Deviation     Deviation `json:"deviation"`
	Follower      *Follower `json:"follower"`
}

// Operation is one NC program. Deviation and Follower are those of its last pass.
type Operation struct {
	File        string     `json:"file"`
	Process     string     `json:"process"`
	Axes        string     `json:"axes"`
	Blocks      int        `json:"blocks"`
	Lines       int        `json:"lines"` // G0 and G1 moves in the whole program
	Arcs        int        `json:"arcs"`  // G2 and G3 moves
	Bytes       int        `json:"bytes"`
	PathLength  float64    `json:"path_length"`
	Seconds     float64    `json:"seconds"`
	ArcMismatch float64    `json:"arc_mismatch"` // length, greatest
	Deviation   Deviation  `json:"deviation"`
	Follower    *Follower  `json:"follower"`
	NotFinished bool       `json:"not_finished"` // stock is left on purpose
	LargestTool *float64   `json:"largest_tool"` // length, diameter of the largest that reaches everywhere; null when any does
	Setup       []Fact     `json:"setup"`        // tool, zero, clamping, speed, feed, in words
	Offsets     []Register `json:"offsets"`      // what the setter enters, one row a register
	Passes      []Pass     `json:"passes"`
}

// Register is an offset register to be set before the program runs.
type Register struct {
	Name  string  `json:"name"`  // "D3"
	Value float64 `json:"value"` // length, signed
	Text  string  `json:"text"`  // what it is: "tool radius", "trim: + moves the tool away"
}

// Pass is one pass of an operation.
type Pass struct {
	Number        int        `json:"number"`         // from 1
	Stock         float64    `json:"stock"`          // length left on the contour
	Offset        float64    `json:"offset"`         // length, tool or wire center from the contour
	Word          string     `json:"word"`           // "G41 D3", or "" for path compensation
	Lines         int        `json:"lines"`          // of the stretch that follows the contour
	Arcs          int        `json:"arcs"`           // of the same
	SegmentsFloor *int       `json:"segments_floor"` // nil when none is computed
	Theory        *float64   `json:"segments_theory"`
	Deviation     *Deviation `json:"deviation"`
}

// Share is one contribution to the budget.
type Share struct {
	Source    string  `json:"source"`
	HalfWidth float64 `json:"half_width"` // length, plus or minus on the contour
	Kind      string  `json:"kind"`       // "fixed" or "variable"

	// What it makes of the follower's motion, largest absolute values around the turn.
	Wave              string  `json:"wave"`               // how the error lies around the cam: "blocks", "turn", "parallel" or "shifted"
	Lift              float64 `json:"lift"`               // lift unit
	Acceleration      float64 `json:"acceleration"`       // per s²
	AccelerationShare float64 `json:"acceleration_share"` // of the design's peak
}

// Totals are the three sums of one kind of figure.
type Totals struct {
	WorstCase    float64 `json:"worst_case"`
	RSS          float64 `json:"rss"`
	FixedPlusRSS float64 `json:"fixed_plus_rss"`
}

// Budget is the sum of the errors in three ways against profile/2.
type Budget struct {
	Shares       []Share `json:"shares"`
	WorstCase    float64 `json:"worst_case"`
	RSS          float64 `json:"rss"`
	FixedPlusRSS float64 `json:"fixed_plus_rss"`
	Lift         Totals  `json:"lift"`         // of the shares' lift errors
	Acceleration Totals  `json:"acceleration"` // of the shares' acceleration errors, per s²
	Combine      string  `json:"combine"`      // the one that is gated: "fixed+rss", "worst" or "rss"
	Limit        float64 `json:"limit"`
}

// Tolerance is what the spec allows.
type Tolerance struct {
	Profile float64 `json:"profile"` // length, total width of the zone
	Chord   float64 `json:"chord"`   // length, either way
}

// Name is the gate's name with what it judges.
func (g Gate) Name() string {
	if g.Of == "" {
		return g.ID
	}
	return g.ID + ": " + g.Of
}

// Maybe returns nil for a value that does not exist (NaN or infinite).
func Maybe(v float64) *float64 {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return nil
	}
	return &v
}

// Gates turns gates into report rows; NaN places become null.
func Gates(gs []gate.Gate) []Gate {
	rows := make([]Gate, 0, len(gs))
	for _, g := range gs {
		rows = append(rows, Gate{
			ID: g.ID, Of: g.Of, Value: Maybe(g.Value), Limit: Maybe(g.Limit), Unit: g.Unit, AtLeast: g.AtLeast,
			CamAngle: Maybe(g.CamAngle), PolarAngle: Maybe(g.Polar), Pass: g.Pass, Text: g.Text,
		})
	}
	return rows
}

// Findings turns findings into report rows; NaN places become null.
func Findings(fs []gate.Finding) []Finding {
	rows := make([]Finding, 0, len(fs))
	for _, f := range fs {
		rows = append(rows, Finding{ID: f.ID, CamAngle: Maybe(f.CamAngle), Text: f.Text})
	}
	return rows
}

// Figures are the three SVG files of the pack and the moving figure; an empty one is left out.
type Figures struct {
	Drawing, Motion, Deviation []byte
	Turn                       *Turn
}
