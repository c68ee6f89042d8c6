package spec

// Spec is one cam, read and complete: defaults filled in, times turned into
// angles. Lengths are in Units, angles in degrees.
type Spec struct {
	File   string // as the user named it, for messages
	SHA256 string // of the spec's bytes and of every file it names, hexadecimal

	Part, Title, Revision string
	Units                 Units
	Camshaft              Camshaft
	Motion                Motion
	Follower              Follower
	Cam                   Cam
	Limits                Limits
	Tolerance             Tolerance
	Blank                 *Blank
	Inspection            *Inspection // nil when the spec says nothing of it
	Operations            []Operation
	Control               Control

	Material, Hardness, Finish, Drawn, Checked, Date string
	Notes                                            []string
}

// Units is the unit of length of a spec.
type Units string

const (
	MM   Units = "mm"
	Inch Units = "inch"
)

// Short returns "mm" or "in".
func (u Units) Short() string {
	if u == Inch {
		return "in"
	}
	return "mm"
}

// Camshaft turns at a constant speed.
type Camshaft struct {
	Speed     float64 // rpm, above 0
	Clockwise bool    // as seen on the marked face; else counterclockwise
}

// Place is where something stands in the spec, from 1.
type Place struct{ Line, Column int }

// Motion is the specification of the lift; exactly one of Events, Points and Table is
// set.
type Motion struct {
	StartAt   float64 // cam angle where the first event begins, degrees, 0 <= StartAt < 360
	StartLift float64 // lift at the start of the first event, length
	Events    []Event

	Points    []Fact
	LeastJerk bool    // the peak jerk is minimized, else the peak acceleration
	JerkRatio float64 // the largest peak jerk as a multiple of the least possible; default 2

	Table *Table
	Place Place
}

// Fact is one thing known of the motion: at a cam angle any of Lift, Velocity and
// Acceleration; over a span Lift (held), or Velocity (carried), or a window, Above and
// Below.
type Fact struct {
	Point                        bool    // at a single cam angle
	From, To                     float64 // cam angles, degrees, 0 <= From < 360, From <= To <= From+360
	Lift, Velocity, Acceleration *float64
	Above, Below                 *float64 // length; Velocity in length/degree, Acceleration in length/degree²
	Timed                        bool     // a velocity or an acceleration other than 0 was given, per second
	Place                        Place
}

// Table is a table of cam angle and lift in a file of its own.
type Table struct {
	File      string  // as the spec names it, from the spec's folder
	Smoothing float64 // length
	Data      []byte  // the file's content
	Place     Place
	FilePlace Place // of the file's name in the spec
}

// EventKind says what an event does.
type EventKind string

const (
	Dwell EventKind = "dwell"
	Rise  EventKind = "rise"
	Fall  EventKind = "fall"
)

// Event is one stretch of the motion.
type Event struct {
	Kind  EventKind
	Lift  float64 // length, positive for rise and fall; 0 for a dwell
	Over  float64 // degrees of cam angle, above 0
	Law   Law     // rise and fall
	Timed bool    // Over was given as a time, or a velocity other than 0 shapes it
	Place Place

	// Inflection is the share of Over, counted as the cam turns, where the acceleration
	// changes sign: 0 < Inflection < 1, or 0 when not given, for the law's own.
	Inflection float64
	// FromVelocity and ToVelocity are the velocities where the event starts and ends,
	// length/degree, positive when the lift grows; nil when not given: at rest. With
	// one of them the law Polynomial meets it, and another law is run by half.
	FromVelocity, ToVelocity *float64
}

// Law names a motion law with its parameters.
type Law struct {
	Name                   string  // a contract name, Polynomial, or "trigonometric" for the general family
	ConstantShare          float64 // modified-constant-velocity; default 0.5
	Sine, Constant, Cosine float64 // trigonometric: shares of the angle, sum 1
	Place                  Place
}

// Follower is the follower; what a kind has not is 0.
type Follower struct {
	Kind           string
	RollerDiameter float64 // length
	FaceRadius     float64 // length, of a mushroom
	HeadDiameter   float64 // length, of a mushroom
	FaceWidth      float64 // length, of a translating flat face
	Offset         float64 // length, positive towards +Y
	OffsetFree     bool    // `offset: free`: sizing chooses it, and nothing else can be made of the spec
	ArmLength      float64 // length, pivot to roller center
	PivotDistance  float64 // length, camshaft axis to pivot
	Below          bool    // a swinging follower touches the cam below the center line
	FaceOffset     float64 // length, pivot to the line of a swinging face, positive towards the cam
	Face           Face    // of a swinging face
	Place          Place
}

// Face is a stretch of a swinging face's line, length from the foot of the pivot towards
// the cam.
type Face struct{ From, To float64 }

// Swings reports whether lifts are degrees of swing.
func (f Follower) Swings() bool { return f.Kind == swingRoller || f.Kind == swingFlat }

// Cam is the body of the cam.
type Cam struct {
	Kind            string
	BaseRadius      float64 // length
	Thickness       float64 // length
	Bore            *Bore   // nil when there is none
	Holes           []Hole
	OutsideDiameter float64 // length, 0 when not given
	GrooveDepth     float64 // length, of a groove or a barrel
	Clearance       float64 // length, groove width less roller diameter
	NoDatum         bool    // `datum: none` was said outright
	Radius          float64 // length, of a barrel: outer radius
	Length          float64 // length, of a barrel: along the camshaft
	TrackPosition   float64 // length, of a barrel: from the datum end to the track at lift 0
	Place           Place
}

// Bore is the hole about the camshaft axis.
type Bore struct {
	Diameter float64 // length
	Fit      string
	Keyway   *Keyway // nil when there is none
	Place    Place
}

// Keyway is a hub keyway: Depth is measured on its center line from the bore circle.
type Keyway struct {
	Width, Depth float64 // length
	At           float64 // polar angle of its center line, degrees
	Fit          string
	Place        Place
}

// Hole is a round through hole.
type Hole struct {
	Diameter, Radius float64 // length; Radius from the camshaft axis to its center
	At               float64 // polar angle, degrees
	Place            Place
}

// Limits hold what the spec limits; nil means not limited.
type Limits struct {
	PressureAngle       float64  // degrees; filled with the default
	PressureAngleReturn *float64 // degrees
	RadiusOfCurvature   *float64 // length, least convex radius of the contour
	Velocity            *float64 // length/s
	Acceleration        *float64 // length/s²
	Jerk                *float64 // length/s³
	Wall                *float64 // length
}

// Tolerance is the error budget as asked for.
type Tolerance struct {
	Profile      float64  // length, total width of the profile zone
	Chord        float64  // length; 0 when left out
	Acceleration *float64 // share of the design's peak, 0.1 for 10%
	VelocityStep *float64 // length/s
	MachineTool  *MachineTool
	Phase        float64 // degrees, plus or minus: setting of the cam against its angular datum
	Roller       float64 // length, plus or minus: error of the roller's diameter
	Combine      string  // "fixed+rss", "worst" or "rss"; default "fixed+rss"
	Place        Place
}

// MachineTool holds the machine's errors, each plus or minus on the contour, length.
type MachineTool struct{ Resolution, Positioning, Runout, Tool float64 }

// Inspection is how the finished cam is measured.
type Inspection struct {
	Step          float64 // degrees from row to row
	ProbeDiameter float64 // length, 0 without a probe
	Place         Place
}

// Blank is the disk the cam is cut from.
type Blank struct {
	Diameter    float64 // length
	ClampRadius float64 // length, 0 when not given
	Place       Place
}

// Operation is one program.
type Operation struct {
	Process string // "mill", "grind" or "wire"
	Axes    string // "xy", "polar" or "cylinder"; default "xy", of grind "polar", of a barrel "cylinder"

	Tool         int     // tool number, default 1
	ToolDiameter float64 // length, mill and grind
	SpindleSpeed float64 // rpm
	Feed         float64 // length/min
	PlungeFeed   float64 // length/min
	StepDown     float64 // length; 0 means full depth
	Stock        []float64
	Compensation string   // "path", "wear" or "control"; default "path"
	Direction    string   // "climb" or "conventional"; default "climb"
	StartAt      *float64 // start_at_cam_angle, degrees; nil for the default place
	RotaryAxis   string   // letter of the rotary axis; default "C" on axes polar, "A" on axes cylinder
	Shift        string   // of a narrow tool in a barrel's groove: "parallel" or "rotary"; default "parallel"
	Moves        string   // "arcs" or "lines"; default "arcs"
	StepOver     float64  // share of the tool's diameter, of passes from the blank to the first stock; 0 when there are none
	Spring       int      // spring_passes: how often the last pass is run again
	Overlap      float64  // degrees of cam angle; 0 for the planner's
	Breakthrough float64  // length; 0 for the planner's
	FluteLength  float64  // length; 0 when not given
	FeedAt       string   // "center" or "contour"; default "center"
	Coolant      string   // "flood", "mist" or "none"; default "none"
	Program      int      // program_number; 0 for the operation's place in the list

	WireDiameter float64 // length
	Offsets      []float64
	Tab          *Tab
	StartHole    *StartHole
	Slots        *Slots

	Place Place
}

// Tab holds the part in the blank while the wire roughs and skims it.
type Tab struct {
	Width float64 // length along the contour
	At    float64 // polar angle, degrees
}

// Slots are lines of the user's own in a wire program.
type Slots struct {
	Thread, CutWire string
	Conditions      []string // by pass
	Place           Place
}

// StartHole is where the wire is threaded.
type StartHole struct {
	Radius float64 // length from the camshaft axis
	At     float64 // polar angle, degrees
}

// Control describes the NC control that will read the programs.
type Control struct {
	File, Set    string  // a file of named sets, from the spec's folder, and the one that holds what the spec leaves out; empty after Load
	Decimals     int     // default 3 mm, 4 inch
	AbsoluteArcs bool    // arc_center: absolute; default incremental
	ArcMismatch  float64 // length; default 0.002 mm, 0.0002 inch
	BlockNumbers bool    // default true
	MaxBlocks    int     // 0 when not limited
	RadiusArcs   bool    // arc_form: radius; default center

	LargestRadius, LeastChord float64 // length; 0 when not given
	SplitAngle                float64 // degrees; default 90
	MaxBytes, LineLength      int     // 0 when not limited
	PathMode                  string  // "exact", "blend", or "" when left as it is set
	PathTolerance             float64 // length; 0 when the control's own
	ProgramStart, ProgramEnd  []string
	Semicolons                bool    // comments: semicolon
	SafeZ                     float64 // length above the top of the blank; default 5 mm, 0.2 inch

	RotarySense    string  // "tool" or "table"; empty when not given
	RotaryDecimals int     // of degrees; default 3
	RotarySpeed    float64 // degrees/min; 0 when not limited

	RotaryModulo       bool    // rotary_words: modulo; default unwound
	RotaryAcceleration float64 // degrees/s²; 0 when not limited
	InverseSeconds     bool    // F under G93 is seconds, else one over minutes
	Place              Place
}
