// Package read reads NC programs: it knows no writer. It takes the words of
// ISO 6983-1 and RS-274-D that a milled or wire-cut cam needs, with the
// meaning NIST RS274/NGC v3 (NISTIR 6556, 2000) gives them, and refuses every
// word it does not know: a word passed over could move the tool.
//
// Numbers are kept as whole billionths of a unit until the last step, so
// that incremental centers and moves add exactly and a coordinate is the double
// nearest to the decimals in the file.
package read

import (
	"fmt"

	"lobewright/synth/plane"
)

// Kind says what a move is.
type Kind uint8

const (
	Rapid Kind = iota // G0
	Line              // G1
	Arc               // G2, G3
)

// Comp is the state of tool radius compensation.
type Comp uint8

const (
	Off   Comp = iota // G40
	Left              // G41: the tool is on the left of travel
	Right             // G42
)

func (c Comp) String() string { return [...]string{"G40", "G41", "G42"}[c] }

// State is what is modal while a move is made.
type State struct {
	Feed    float64 // length/min; under Inverse moves a minute, of this move alone; 0 when no F word came yet
	Inverse bool    // G93: F is one over the minutes the move takes
	Comp    Comp
	D       int  // register of G41 and G42; -1 when none was given
	H       int  // register of G43; -1 under G49
	Tool    int  // T word before the last M6, or the last T word when there is no M6; -1 when none
	Spindle int  // +1 M3, -1 M4, 0 stopped
	Speed   int  // S word, rpm; -1 when none came yet
	Work    int  // 54 to 59: the coordinate system of G54 to G59; 0 when none was called
	Fluid   bool // M7 or M8
}

// Move is one movement, absolute whatever the program says.
type Move struct {
	LineNo     int // line of the file, from 1
	N          int // block number; -1 when it has none
	Kind       Kind
	From, To   plane.Point
	FromZ, ToZ float64
	Center     plane.Point // arcs
	CCW        bool        // arcs
	// KnownXY, KnownZ: the program has said where the move starts. At the start of
	// a program it has not, and From, FromZ are 0.
	KnownXY, KnownZ bool
	// HasXY, HasZ: the block has words of the plane, of Z. A move under
	// compensation without XY words still is a move.
	HasXY, HasZ bool

	FromR, ToR   float64 // rotary axis, degrees, not brought into a turn
	KnownR, HasR bool    // as KnownZ and HasZ
	State
}

// Misc is an M word between moves.
type Misc struct {
	LineNo int
	Code   int // 0 to 9, 30
	Before int // index of the first move made after it; len(Moves) when none
}

// Own is a line of the user's own. What it does is not known.
type Own struct {
	LineNo int
	Text   string // without its block number
	Before int    // index of the first move made after it
}

// Program is what a control would make of a file.
type Program struct {
	Number    int  // O word; -1 when there is none
	Inch      bool // G20; else G21
	Rotary    byte // the letter of the rotary axis: 'A', 'B' or 'C'; 0 when there is none
	Moves     []Move
	Misc      []Misc
	Own       []Own   // lines that were declared to be the user's own, in order
	PathMode  int     // 61 or 64 of the last G61 or G64; 0 when there is none
	PathBlend float64 // length: P of that G64; 0 without
	End       State   // after the last block
	Ended     bool    // M2 or M30 came
	Comments  []Comment
	Blocks    int // lines that hold words
	Bytes     int
	Longest   int // bytes of the longest line
}

// Comment is the text of one comment.
type Comment struct {
	LineNo int
	Text   string
}

// Error says where a program is wrong, what stands there and what may.
type Error struct {
	Line, Column int // from 1; the column counts bytes
	Found        string
	Allowed      string
}

func (e *Error) Error() string {
	return fmt.Sprintf("line %d, column %d: found %s; %s", e.Line, e.Column, e.Found, e.Allowed)
}
