package chain

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"lobewright/synth/plane"
)

// The text notation of paths and chains, for tests and failures:
//
//	M x,y              start (again, when the path does not go on from where it was)
//	L x,y              line to
//	A cx,cy cw x,y     arc about cx,cy, cw or ccw, to
//	A r cw x,y         the same by its radius, at most a half circle: read only, and only in paths
//	Z                  line back to the last M
//
// Words are parted by white space. A path prints its floats with the fewest digits
// that read back as the same float, a chain its counts with all Decimals digits, so
// printing and parsing are exact inverses but for Source and Slack, which are not
// written. An empty path or chain has no notation.

// String prints the path.
func (p Path) String() string {
	num := func(x float64) string { return strconv.FormatFloat(x, 'g', -1, 64) }
	point := func(q plane.Point) string { return num(q.X) + "," + num(q.Y) }
	steps := make([]step, len(p))
	for i, e := range p {
		steps[i] = step{e.Kind, point(e.From), point(e.To), point(e.Center), e.CCW, i}
	}
	return printSteps(steps)
}

// String prints the chain.
func (c Chain) String() string {
	point := func(q Point) string { return c.Grid.Format(q.X) + "," + c.Grid.Format(q.Y) }
	steps := make([]step, len(c.Segments))
	for i, s := range c.Segments {
		steps[i] = step{s.Kind, point(s.From), point(s.To), point(s.Center), s.CCW, i}
	}
	return printSteps(steps)
}

// step is an element in words. center is "cx,cy", or a radius as read.
type step struct {
	kind             Kind
	from, to, center string
	ccw              bool
	word             int // where it stands, for messages
}

func printSteps(steps []step) string {
	var w []string
	start := ""
	for i, s := range steps {
		if i == 0 || steps[i-1].to != s.from {
			start = s.from
			w = append(w, "M", s.from)
		}
		switch {
		case s.kind == Arc && s.ccw:
			w = append(w, "A", s.center, "ccw", s.to)
		case s.kind == Arc:
			w = append(w, "A", s.center, "cw", s.to)
		case s.to == start && s.from != start:
			w = append(w, "Z")
		default:
			w = append(w, "L", s.to)
		}
	}
	return strings.Join(w, " ")
}

// ParsePath reads the notation of a path. Errors name the word, what was found and
// what may stand there.
func ParsePath(text string) (Path, error) {
	steps, err := parseSteps(text)
	if err != nil {
		return nil, err
	}
	p := make(Path, len(steps))
	for i, s := range steps {
		e := Element{Kind: s.kind, CCW: s.ccw}
		if e.From, err = floatPoint(s.from); err == nil {
			e.To, err = floatPoint(s.to)
		}
		if err == nil && s.kind == Arc {
			e.Center, err = centerOf(e, s.center)
		}
		if err != nil {
			return nil, fmt.Errorf("word %d: %w", s.word, err)
		}
		p[i] = e
	}
	return p, nil
}

// ParseChain reads the notation of a chain: every number with the same count of
// digits after the point, which is the grid's.
func ParseChain(text string) (Chain, error) {
	steps, err := parseSteps(text)
	if err != nil {
		return Chain{}, err
	}
	c := Chain{Grid: Grid{decimalsOf(steps[0].from)}, Segments: make([]Segment, len(steps))}
	if c.Grid.Decimals > maxDecimals {
		return Chain{}, fmt.Errorf("word %d: %d decimals in %q, at most %d are possible", steps[0].word, c.Grid.Decimals, steps[0].from, maxDecimals)
	}
	for i, s := range steps {
		g := Segment{Kind: s.kind, CCW: s.ccw}
		if g.From, err = c.Grid.parse(s.from); err == nil {
			g.To, err = c.Grid.parse(s.to)
		}
		if err == nil && s.kind == Arc {
			g.Center, err = c.Grid.parse(s.center)
		}
		if err != nil {
			return Chain{}, fmt.Errorf("word %d: %w", s.word, err)
		}
		c.Segments[i] = g
	}
	return c, nil
}

// parseSteps parts the text into elements, without reading numbers yet.
func parseSteps(text string) ([]step, error) {
	words := strings.Fields(text)
	var steps []step
	var at, start string
	for i := 0; i < len(words); {
		op, need := words[i], map[string]int{"M": 1, "L": 1, "A": 3, "Z": 0}
		n, known := need[op]
		switch {
		case !known:
			return nil, fmt.Errorf("word %d: %q, want M, L, A or Z", i+1, op)
		case i+n >= len(words):
			return nil, fmt.Errorf("word %d: %s wants %d words after it, the text ends", i+1, op, n)
		case op != "M" && at == "":
			return nil, fmt.Errorf("word %d: %s before any M", i+1, op)
		}
		args := words[i+1 : i+1+n]
		s := step{kind: Line, from: at, word: i + 1}
		switch op {
		case "M":
			at, start = args[0], args[0]
			i += 2
			continue
		case "L":
			s.to = args[0]
		case "Z":
			s.to = start
		case "A":
			if args[1] != "cw" && args[1] != "ccw" {
				return nil, fmt.Errorf("word %d: %q, want cw or ccw", i+3, args[1])
			}
			s.kind, s.center, s.ccw, s.to = Arc, args[0], args[1] == "ccw", args[2]
		}
		i += n + 1
		if op != "Z" || at != start {
			steps = append(steps, s)
		}
		at = s.to
	}
	if len(steps) == 0 {
		return nil, fmt.Errorf("no element in %q; want M x,y followed by L x,y, A cx,cy cw x,y or Z", text)
	}
	return steps, nil
}

func pair(word string) (x, y string, err error) {
	x, y, ok := strings.Cut(word, ",")
	if !ok {
		return "", "", fmt.Errorf("%q, want a point x,y", word)
	}
	return x, y, nil
}

func floatPoint(word string) (plane.Point, error) {
	sx, sy, err := pair(word)
	if err != nil {
		return plane.Point{}, err
	}
	x, errX := strconv.ParseFloat(sx, 64)
	y, errY := strconv.ParseFloat(sy, 64)
	if errX != nil || errY != nil || !(math.Abs(x)+math.Abs(y) <= math.MaxFloat64) {
		return plane.Point{}, fmt.Errorf("%q, want a point x,y of two numbers", word)
	}
	return plane.Point{X: x, Y: y}, nil
}

// centerOf reads the center of arc e, given as a point or as a radius.
func centerOf(e Element, word string) (plane.Point, error) {
	if strings.Contains(word, ",") {
		return floatPoint(word)
	}
	r, err := strconv.ParseFloat(word, 64)
	chord := e.To.Sub(e.From)
	half := chord.Norm() / 2
	if err != nil || !(r >= half) || half == 0 || math.IsInf(r, 0) {
		return plane.Point{}, fmt.Errorf("%q, want a center x,y, or a radius of at least half the chord, %g", word, half)
	}
	h := math.Sqrt((r - half) * (r + half))
	if !e.CCW {
		h = -h
	}
	mid := e.From.Add(chord.Scale(0.5))
	return mid.Add(chord.Unit().Left().Scale(h)), nil
}

// decimalsOf returns how many digits stand after the point of the first number.
func decimalsOf(word string) int {
	x, _, _ := strings.Cut(word, ",")
	_, fraction, _ := strings.Cut(x, ".")
	return len(fraction)
}

// parse reads a point of two decimal numbers with exactly the grid's decimals.
func (g Grid) parse(word string) (Point, error) {
	sx, sy, err := pair(word)
	if err != nil {
		return Point{}, err
	}
	x, okX := g.count(sx)
	y, okY := g.count(sy)
	if !okX || !okY {
		return Point{}, fmt.Errorf("%q, want a point x,y of two numbers with %d decimals", word, g.Decimals)
	}
	return Point{x, y}, nil
}

// count reads a decimal number as counts.
func (g Grid) count(s string) (int64, bool) {
	whole, fraction, point := strings.Cut(s, ".")
	if len(fraction) != g.Decimals || point != (g.Decimals > 0) || strings.HasPrefix(s, "+") || strings.ContainsAny(fraction, "+-") {
		return 0, false
	}
	n, err := strconv.ParseInt(whole+fraction, 10, 64)
	return n, err == nil && whole != "" && whole != "-"
}
