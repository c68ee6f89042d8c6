package read

import (
	"fmt"
	"slices"
)

// block is a line's words by letter.
type block struct {
	no   int
	n    int // -1 when none
	text []byte
	g    []word
	m    []word
	axis [26]word // X Y Z A B C I J R F S T D H P O, from A
	held uint32   // which of them the line has, a bit each
}

func (b *block) has(letter byte) bool { return b.held>>(letter-'A')&1 != 0 }

// get returns the word of a letter, if the line has one.
func (b *block) get(letter byte) (w word, ok bool) {
	if !b.has(letter) {
		return word{}, false
	}
	return b.axis[letter-'A'], true
}

// sort files the words of a line, in place of those of the line before it; a letter but G and M stands once.
func (b *block) sort(words []word, text []byte, no int) error {
	b.no, b.n, b.text, b.g, b.m, b.held = no, -1, text, b.g[:0], b.m[:0], 0
	for _, w := range words {
		switch w.letter {
		case 'G':
			b.g = append(b.g, w)
		case 'M':
			b.m = append(b.m, w)
		case 'N':
			v, err := b.whole(w)
			if err != nil {
				return err
			}
			if b.n >= 0 {
				return b.fault(w, "a block has one N")
			}
			b.n = v
		default:
			if b.has(w.letter) {
				return b.fault(w, fmt.Sprintf("a block has one %c", w.letter))
			}
			b.axis[w.letter-'A'] = w
			b.held |= 1 << (w.letter - 'A')
		}
	}
	return nil
}

func (b *block) fault(w word, allowed string) error {
	return &Error{b.no, int(w.column), w.in(b.text), allowed}
}

// in returns the word as it stands in its line, without spaces.
func (w word) in(line []byte) string { return string(w.letter) + string(line[w.start:w.end]) }

// whole returns a number that must be whole and not negative.
func (b *block) whole(w word) (int, error) {
	if w.value < 0 || w.value%billion != 0 {
		return 0, b.fault(w, fmt.Sprintf("%c takes a whole number", w.letter))
	}
	return int(w.value / billion), nil
}

// wholeOf returns the whole number of a letter, or none when it is absent.
func (b *block) wholeOf(letter byte, none int) (int, error) {
	if w, ok := b.get(letter); ok {
		return b.whole(w)
	}
	return none, nil
}

// group is a modal group of G words, after NISTIR 6556 table 4; two words of a group in a
// block contradict each other.
type group uint8

const (
	motionWords group = iota
	planeWords
	unitsWords
	compensationWords
	lengthWords
	workWords
	pathWords
	distanceWords
	centerWords
	feedWords
	groups
	unknown = groups
)

// groupOf returns the group of a G word by its number times ten.
func groupOf(code int) group {
	switch code {
	case 0, 10, 20, 30, 800:
		return motionWords
	case 170:
		return planeWords
	case 200, 210:
		return unitsWords
	case 400, 410, 420:
		return compensationWords
	case 430, 490:
		return lengthWords
	case 540, 550, 560, 570, 580, 590:
		return workWords
	case 610, 640:
		return pathWords
	case 900, 910:
		return distanceWords
	case 901, 911:
		return centerWords
	case 930, 940:
		return feedWords
	}
	return unknown
}

const allowedG = "G0 G1 G2 G3 G17 G20 G21 G40 G41 G42 G43 G49 G54 to G59 G61 G64 G80 G90 G90.1 G91 G91.1 G93 G94 are read here"

// modes are the G words of a block by group, their numbers times ten.
type modes struct {
	code [groups]int
	set  [groups]bool
}

func (m *modes) get(g group) (code int, ok bool) { return m.code[g], m.set[g] }

// codes returns the G words of the block.
func (b *block) codes() (found modes, err error) {
	for _, w := range b.g {
		if w.value < 0 || w.value%(billion/10) != 0 {
			return found, b.fault(w, allowedG)
		}
		code := int(w.value / (billion / 10))
		g := groupOf(code)
		if g == unknown {
			return found, b.fault(w, allowedG)
		}
		// G80 cancels a cycle; with a motion word in the same block it says nothing more.
		if other, twice := found.get(g); twice {
			return found, b.fault(w, fmt.Sprintf("G%g of the same kind stands in this block already", float64(other)/10))
		}
		found.code[g], found.set[g] = code, true
	}
	return found, nil
}

// misc returns the M numbers of the block.
func (b *block) misc() ([]int, error) {
	var ms []int
	for _, w := range b.m {
		v, err := b.whole(w)
		if err != nil || v > 9 && v != 30 || slices.Contains(ms, v) {
			return nil, b.fault(w, "M0 M1 M2 M3 M4 M5 M6 M7 M8 M9 M30 are read here, each once a block")
		}
		ms = append(ms, v)
	}
	return ms, nil
}
