package svg

import (
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Head is what all three figures say of the part.
type Head struct {
	Part, Title, Revision string // as in the spec
	Units                 string // "mm" or "inch": the unit of every length
	Speed                 float64
	Clockwise             bool // turning direction as seen on the marked face; Speed is in rpm
	SHA256                string
	Released              bool // false puts NOT RELEASED on the figure
}

// name is the part with its revision, when it has one.
func (h Head) name(join string) string {
	if h.Revision == "" {
		return h.Part
	}
	return h.Part + join + h.Revision
}

// DrawingData is the toolroom drawing of a plate cam. Lengths are in
// Head.Units, angles in degrees, points in the cam frame with Y up. Empty texts
// and zero pointers are left out of the drawing.
type DrawingData struct {
	Head
	Material, Hardness, Finish, Date, Drawn, Checked string

	Thickness       float64      // length, 0 when not given
	OutsideDiameter float64      // length, 0 when not given
	Contours        []chain.Path // closed outlines, drawn thick as real arcs; a plate cam has one
	PitchCurve      chain.Path   // path of the roller center, chain line; may be empty
	BaseRadius      float64      // length
	RollerDiameter  float64      // length, 0 when the follower has no roller
	Roller          plane.Point  // roller center at lift 0, as at cam angle 0: (sqrt((Rb+r)²-offset²), offset)
	RollerText      string       // what the circle at lift 0 is; empty for ROLLER and its diameter
	Offset          float64      // length, distance of the follower's line from the axis, positive to +Y
	Swings          bool         // the follower swings about a pivot: it has no line
	Follower        string       // a note that says what the follower is and where it stands; may be empty
	Linkage         *Linkage     // arm, face and pivot at lift 0; nil for a follower that is a center on a line
	ToolPaths       []chain.Path // paths of the tools' centers; empty leaves them out
	Sheet           string       // "A4", "A3" or "Letter"; empty takes what the units and the size ask for
	Profile         float64      // length, total width of the profile zone
	Barrel          *Barrel      // set when the view is a barrel's development; Contours are then its two walls
	Bore            *Bore        // nil when there is none
	Holes           []Hole
	NoDatum         bool        // the spec says there is no angular datum
	Zero            plane.Point // contour point at cam angle 0, where the zero mark is stamped
	Events          []Event     // in order of cam angle
	Notes           []string
	Cautions        []string
}

// Barrel is a barrel cam, developed at its outer radius and seen from outside: X is the
// radius times the polar angle, Y from the datum end. All are lengths.
type Barrel struct {
	Radius, Length, Depth, Width float64
	Track                        float64 // Y of the track at lift 0
	Left, Right                  float64 // range of X
}

// Linkage is a follower's arm and face at lift 0, cam frame. A line whose ends are the same is not there.
type Linkage struct {
	Pivots             bool        // there is a pivot
	Pivot              plane.Point // fixed
	Arm, Face          [2]plane.Point
	Outline            chain.Path // a face that is no line: a mushroom's arc, a knife's edge; else empty
	PivotText, ArmText string     // labels: "PIVOT, 88 FROM THE AXIS", "ARM 70, TRAILING"
	FaceText           string     // of the face or the outline: "FACE 30 WIDE AT LIFT 0"
}

// Bore is the hole about the camshaft axis: datum A.
type Bore struct {
	Diameter float64 // length
	Fit      string  // "H7" or empty
	Keyway   *Keyway // nil when there is none; datum C
}

// Keyway is a hub keyway. Depth is from the bore circle on the keyway's center line.
type Keyway struct {
	Width, Depth float64 // length
	At           float64 // polar angle, degrees
	Fit          string
}

// Hole is a round through hole; without a keyway the first one is datum C.
type Hole struct {
	Diameter, Radius float64 // length; Radius from the camshaft axis to its center
	At               float64 // polar angle, degrees
}

// Event is one stretch of the motion.
type Event struct {
	From, To float64     // cam angle, degrees; an event that wraps has To above 360
	Text     string      // "rise 14 mm, modified-sine"
	Start    plane.Point // contour point at From, where the tick is drawn
}

// ends is To as it is read on the cam: one that runs past 360 starts again from 0.
func (e Event) ends() float64 {
	if e.To > 360 {
		return e.To - 360
	}
	return e.To
}

// Sample is a value at a cam angle in degrees.
type Sample struct{ CamAngle, Value float64 }

// Run is a stretch of a series without jumps, cam angle not falling. Where one run
// ends and the next begins at the same cam angle, the chart draws a vertical step.
type Run []Sample

// Limit is a line across a chart; it holds From..To, or everywhere when both are 0.
type Limit struct {
	Value    float64
	From, To float64 // cam angle, degrees
	Text     string  // "limit 30"; empty for "limit" and the value
}

// Curve is one series of a motion chart.
type Curve struct {
	Runs   []Run
	Unit   string   // printed on the axis: "mm", "mm/s", "deg"
	Second *Scale   // a second scale, on the right; nil for none
	Limits []Limit  // in Unit
	Peaks  []Sample // labeled places, in Unit; nil labels the greatest and the least sample
	Steps  []Step   // jumps, labeled with their size as far as there is room, the largest first
	Marks  []Mark   // what is known, in Unit; table points in order of cam angle
}

// Scale is another unit of the same curve: its values are those in Unit times Factor.
type Scale struct {
	Unit   string // "mm/deg²"
	Factor float64
}

// Step is a jump of a curve at a cam angle, degrees.
type Step struct{ CamAngle, Before, After float64 }

// MotionChart is the six panels over cam angle 0 to 360.
type MotionChart struct {
	Head
	Lift, Velocity, Acceleration, Jerk, PressureAngle Curve
	// Radius is the radius of curvature of the contour. Its Runs hold the curvature
	// instead (1/length, positive where the contour is convex, 0 at an inflection), so
	// that every sample is finite; Limits and Peaks are radii (length, negative where concave).
	Radius Curve
	Events []Event // boundaries are drawn at From; Start is not used
}

// DeviationSample is the normal deviation of a written path.
type DeviationSample struct {
	CamAngle float64 // degrees, 0 to 360
	Polar    float64 // polar angle of the place, degrees
	Value    float64 // length, positive outside the exact curve (away from the camshaft)
}

// PathDeviation is one written path against the exact curve.
type PathDeviation struct {
	Name   string              // "stick-lift.dxf, contour"
	Runs   [][]DeviationSample // in order of cam angle
	Bound  float64             // length: certified upper bound of the deviation's size
	Blocks string              // "48 arcs, 2 lines" or empty
	// LiftError and AccelerationError are the follower's lift and acceleration on the written path less those
	// of the design, length and length/s² (degrees for a swinging follower); empty leaves the panel out.
	LiftError, AccelerationError []Run
}

// DeviationChart is the deviation of the written paths around the cam.
type DeviationChart struct {
	Head
	Chord            float64 // length: the zone is -Chord to +Chord
	DesignPeak       float64 // peak acceleration of the design, in AccelerationUnit
	AccelerationUnit string  // "mm/s²"
	LiftUnit         string  // "mm", "in" or "deg"
	Paths            []PathDeviation
	Events           []Event // boundaries are drawn at From; Start is not used
}
