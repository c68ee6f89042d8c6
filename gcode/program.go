package gcode

import "lobewright/tolerance/chain"

// Code is a G word's number times ten: G91.1 is 911.
type Code int

// The words a Program may hold besides motion.
const (
	PlaneXY         Code = 170
	UnitInch        Code = 200
	UnitMM          Code = 210
	CompOff         Code = 400
	CompLeft        Code = 410
	CompRight       Code = 420
	LengthOn        Code = 430
	LengthOff       Code = 490
	WorkFirst       Code = 540
	CycleOff        Code = 800
	Absolute        Code = 900
	CenterAbsolute  Code = 901
	CenterFromStart Code = 911
	ExactPath       Code = 610
	Blend           Code = 640
	FeedInverse     Code = 930
	FeedPerMinute   Code = 940
)

// Motion is the motion word of a block.
type Motion uint8

const (
	NoMotion         Motion = iota
	Rapid                   // G0
	Straight                // G1
	Clockwise               // G2
	Counterclockwise        // G3
)

// Count is a number of the output grid, when On.
type Count struct {
	V  int64
	On bool
}

func count(v int64) Count { return Count{v, true} }

// Number is a whole number, when On.
type Number struct {
	V  int
	On bool
}

func number(v int) Number { return Number{v, true} }

// Block is one line: its words by type, then its comment. Lengths and feeds are in
// counts of the program's grid; I and J as they are printed.
type Block struct {
	G          []Code
	Motion     Motion
	X, Y, Z    Count
	R          Count // the rotary axis, in counts of the program's rotary grid
	I, J       Count
	Round      Count  // radius of an arc that is written with R
	P          Count  // with Blend: how far corners may be rounded
	Own        string // a line of the user's own; then nothing else but a comment
	F          Count
	S, T, D, H Number
	M          []int
	Comment    string
}

// Register is a line of the set-up table.
type Register struct {
	Number int     // D number
	Value  float64 // length to set before the first part
	Text   string
}

// Program is an NC program in order of execution.
type Program struct {
	Number       int // O word
	Inch         bool
	Grid         chain.Grid
	Rotary       byte       // letter of the rotary axis; 0 when there is none
	RotaryGrid   chain.Grid // of its degrees
	AbsoluteArcs bool
	BlockNumbers bool
	Semicolons   bool     // comments follow a semicolon, else stand in parentheses
	LineLength   int      // most characters of a line of comment; 0 for the writer's own
	Header       []string // comments before the first block
	Blocks       []Block
	Registers    []Register // D table; empty when none is used
}
