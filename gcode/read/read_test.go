package read_test

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"lobewright/gcode/read"
	"lobewright/synth/plane"
)

const head = "%\nO0007\nN10 G21 G17 G90 G40 G49 G80 G94 G54\n"

// Absolute and incremental centers and moves, after the meaning NISTIR 6556 gives
// the words (3.5.3.2, 3.5.14, 3.5.18): all four say the same quarter circles.
func TestCentersAndDistances(t *testing.T) {
	same := []string{
		"G0 X10 Y0\nG1 X20 F100\nG3 X10 Y10 I-10 J0\nG2 X0 Y20 I0 J10\nM30\n%\n",
		"G91.1 G0 X10 Y0\nG1 X20 F100\nG3 X10 Y10 I-10\nG2 X0 Y20 J10\nM30\n%\n",
		"G90.1 G0 X10 Y0\nG1 X20 F100\nG3 X10 Y10 I10 J0\nG2 X0 Y20 I10 J20\nM30\n%\n",
		"G0 X10 Y0\nG91 G1 X10 F100\nG3 X-10 Y10 I-10 J0\nG2 X-10 Y10 I0 J10\nM30\n%\n",
		"g0x1 0y0\ng1 x+20.000f1.0E2\n",
	}
	var first *read.Program
	for i, s := range same[:4] {
		p, err := read.Parse([]byte(head + s))
		if err != nil {
			t.Fatalf("program %d: %v", i, err)
		}
		if first == nil {
			first = p
		}
		for k, m := range p.Moves {
			if m != first.Moves[k] {
				t.Errorf("program %d, move %d: %+v, want %+v", i, k, m, first.Moves[k])
			}
		}
	}
	want := []read.Move{
		{Kind: read.Arc, CCW: true, From: plane.Point{X: 20}, To: plane.Point{X: 10, Y: 10}, Center: plane.Point{X: 10}},
		{Kind: read.Arc, From: plane.Point{X: 10, Y: 10}, To: plane.Point{Y: 20}, Center: plane.Point{X: 10, Y: 20}},
	}
	for i, w := range want {
		g := first.Moves[i+2]
		if g.Kind != w.Kind || g.CCW != w.CCW || g.From != w.From || g.To != w.To || g.Center != w.Center {
			t.Errorf("arc %d: %+v, want %+v", i, g, w)
		}
	}
	if _, err := read.Parse([]byte(head + same[4])); err == nil {
		t.Error("an exponent was read as a number")
	}
}

// One rotary axis, in degrees that go on beyond a turn; G93's F belongs to its own move, and
// no F of before or after it counts across (NISTIR 6556 3.5.20).
func TestRotary(t *testing.T) {
	p, err := read.Parse([]byte(head + "G0 A350.5 X10\nG93\nG1 A370.25 X12 F20\nA371 F4.5\nG94 G1 X13 F100\nG91 A-1.5\nM30\n%\n"))
	if err != nil {
		t.Fatal(err)
	}
	m := p.Moves
	if len(m) != 5 || p.Rotary != 'A' {
		t.Fatalf("%d moves, rotary %q", len(m), p.Rotary)
	}
	if m[0].KnownR || !m[0].HasR || m[0].ToR != 350.5 || m[0].Inverse {
		t.Errorf("first: %+v", m[0])
	}
	if !m[1].KnownR || m[1].FromR != 350.5 || m[1].ToR != 370.25 || !m[1].Inverse || m[1].Feed != 20 || m[2].Feed != 4.5 || m[2].HasXY {
		t.Errorf("under G93: %+v, %+v", m[1], m[2])
	}
	if m[3].HasR || m[3].ToR != 371 || m[3].Inverse || m[3].Feed != 100 || m[4].ToR != 369.5 {
		t.Errorf("after it: %+v, %+v", m[3], m[4])
	}
}

// Modal words reach the moves they belong to.
func TestState(t *testing.T) {
	p, err := read.Parse([]byte(head + "(first) T4 M6 (change)\nS2500 M3\nG0 X1 Y2\nG43 H4 Z5\nG1 Z-1 F80\nG41 D14 X5 F300\n" +
		"X6 M8\nG40 X7\nG0 Z5 M5\nM0\nN999 M30\n%\n"))
	if err != nil {
		t.Fatal(err)
	}
	m := p.Moves
	if len(m) != 7 || p.Number != 7 || p.Inch || !p.Ended {
		t.Fatalf("%d moves, number %d, inch %v, ended %v", len(m), p.Number, p.Inch, p.Ended)
	}
	if m[0].Tool != 4 || m[0].Spindle != 1 || m[0].Speed != 2500 || m[0].Work != 54 || m[0].KnownXY || m[0].H != -1 {
		t.Errorf("first move: %+v", m[0])
	}
	if m[1].H != 4 || !m[1].KnownXY || m[1].KnownZ || m[1].ToZ != 5 || m[2].Feed != 80 || m[2].FromZ != 5 || m[2].ToZ != -1 {
		t.Errorf("moves of Z: %+v, %+v", m[1], m[2])
	}
	if m[3].Comp != read.Left || m[3].D != 14 || m[3].Feed != 300 || m[3].To != (plane.Point{X: 5, Y: 2}) || !m[4].Fluid {
		t.Errorf("compensated: %+v, %+v", m[3], m[4])
	}
	if m[5].Comp != read.Off || m[5].D != -1 || m[6].Spindle != 1 || p.End.Spindle != 0 {
		t.Errorf("after G40: %+v, %+v", m[5], m[6])
	}
	var codes []string
	for _, c := range p.Misc {
		codes = append(codes, fmt.Sprintf("%d@%d", c.Code, c.Before))
	}
	if got := strings.Join(codes, " "); got != "6@0 3@0 8@4 5@7 0@7 30@7" {
		t.Errorf("M words %s", got)
	}
	if len(p.Comments) != 2 || p.Comments[1].Text != "change" || p.Comments[1].LineNo != 4 {
		t.Errorf("comments %+v", p.Comments)
	}
}

// Every fault has its place, and says what is allowed.
func TestFaults(t *testing.T) {
	for _, c := range []struct {
		line, want string // the line is line 4 of the program
		column     int
	}{
		{"G5 X1", "G0 G1 G2 G3", 1},
		{"G0 X1 U3", "words G X Y", 7},
		{"G0 A3 B4", "one is read", 7},
		{"G2 X1 I1 A3", "with G0 and G1", 10},
		{"G93 G1 X1 F100 A3 G94", "of the same kind", 19},
		{"G93 G1 X1", "its own F", 8},
		{"G0 G18 X1", "G0 G1 G2 G3", 4},
		{"G0 G1 X1", "of the same kind", 4},
		{"G1 X1 X2", "one X", 7},
		{"N1 N2 G1 X1", "one N", 4},
		{"G1 X1.2.3", "one point", 5},
		{"G1 X", "found nothing after X", 5},
		{"G1 X--1", "one point", 5},
		{"G1 X1,5", "words G X Y", 6},
		{"G1 XNaN", `found "N" after X`, 5},
		{"G1 X1.0000000001", "9 decimals", 5},
		{"G1 X123456789", "up to 9000000", 5},
		{"X1", "needs G0", 1},
		{"G80 X1", "needs G0", 0},
		{"G20", "units do not change", 1},
		{"G2 X1 Y1", "center", 4},
		{"G1 X1 I1", "G2 or G3", 4},
		{"G2 X1 Y1 I1 J0", "known start", 4},
		{"G1 X1 D3", "G41 or G42", 7},
		{"G1 Z1 H3", "G43", 7},
		{"M98", "M0 M1", 1},
		{"M6", "follows a T word", 1},
		{"M3 M4", "contradict", 1},
		{"F0", "above 0", 1},
		{"F-5", "above 0", 1},
		{"S-100", "whole number", 1},
		{"T1.5", "whole number", 1},
		{"O9", "once", 1},
		{"G54 P2", "G64", 5},
		{"G55", "does not change", 1},
		{"(open", "comments end", 1},
		{"(a (b) c)", "comments end", 1},
		{"G1 X#1", "one point", 5},
		{"/G1 X1", "words G X Y", 1},
		{"G1 X1 \x01", "printable", 7},
		{"(f\xc3\xbcr)", "printable", 3},
		{"(" + strings.Repeat("x", 300) + ")", "a line of more than 256 characters", 257},
		{"M30\nG0 X1", "nothing follows M2", 1},
		{"M30\n%\nG0 X1", "nothing follows it", 1},
	} {
		_, err := read.Parse([]byte(head + c.line + "\n"))
		var e *read.Error
		if !errors.As(err, &e) {
			t.Errorf("%q: error %v, want a located one", c.line, err)
			continue
		}
		line := 4 + strings.Count(c.line, "\n")
		if e.Line != line || (c.column > 0 && e.Column != c.column) || !strings.Contains(e.Error(), c.want) {
			t.Errorf("%q: %v, want line %d column %d with %q", c.line, e, line, c.column, c.want)
		}
	}
}

func TestEnds(t *testing.T) {
	for text, want := range map[string]string{
		"%\nG21\n":                  "ends with %",
		"G21\nG90\n":                "ends with M2",
		"%\n(nothing)\n%\n":         "at least one",
		"G21\n%\n":                  "stands once",
		"%\nG91 G21\nG0 X1\nM30\n%": "known start",
		"%\nG90\nG0 X1\nM30\n%":     "G20 or G21",
		"%\nG21\nG0 X1\nM30\n%":     "G90 or G91",
		"%\nG20\nG90.1 G90 G0 X1 Y1\nG2 X2 I2\nM30\n%": "both I and J",
		"%\nG20\nG90 G0 X1 Y1\nG2 X2 I1\nM30\n%":       "not one of its ends",
	} {
		if _, err := read.Parse([]byte(text)); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: error %v, want one with %q", text, err, want)
		}
	}
}

// Whatever the bytes, Parse returns and its errors have a place in the file.
func FuzzParse(f *testing.F) {
	f.Add([]byte(head + "G0 X10 Y0\nG1 X20 F100\nG3 X10 Y10 I-10 J0\nG41 D1 G1 X5\nM30\n%\n"))
	f.Add([]byte("G91 G21 G90.1 (x) ; y\nT1M6\nM2\n"))
	f.Add([]byte("%\n%\n"))
	f.Fuzz(func(t *testing.T, data []byte) {
		p, err := read.Parse(data)
		var e *read.Error
		switch {
		case err == nil && p == nil:
			t.Fatal("neither program nor error")
		case err != nil && (!errors.As(err, &e) || e.Line < 1 || e.Column < 1 || e.Line > strings.Count(string(data), "\n")+1):
			t.Fatalf("error without a place: %v", err)
		case err == nil:
			for _, m := range p.Moves {
				if m.LineNo < 1 || m.From.X != m.From.X || m.To.Y != m.To.Y {
					t.Fatalf("move %+v", m)
				}
			}
		}
	})
}
