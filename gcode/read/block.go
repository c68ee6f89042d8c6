package read

import (
	"fmt"
	"slices"
)

// block is a line's words by letter.
type block struct {
	no   int
	n    int // -1 when none
	g    []word
	m    []word
	axis map[byte]word // X Y Z A B C I J F S T D H P O
}

func (b block) has(letter byte) bool { _, ok := b.axis[letter]; return ok }

// sort files the words of a line; a letter but G and M stands once.
func sort(words []word, no int) (block, error) {
	b := block{no: no, n: -1, axis: map[byte]word{}}
	for _, w := range words {
		switch w.letter {
		case 'G':
			b.g = append(b.g, w)
		case 'M':
			b.m = append(b.m, w)
		case 'N':
			v, err := b.whole(w)
			if err != nil {
				return b, err
			}
			if b.n >= 0 {
				return b, b.fault(w, "a block has one N")
			}
			b.n = v
		default:
			if b.has(w.letter) {
				return b, b.fault(w, fmt.Sprintf("a block has one %c", w.letter))
			}
			b.axis[w.letter] = w
		}
	}
	return b, nil
}

func (b block) fault(w word, allowed string) error { return &Error{b.no, w.column, w.text, allowed} }

// whole returns a number that must be whole and not negative.
func (b block) whole(w word) (int, error) {
	if w.value < 0 || w.value%billion != 0 {
		return 0, b.fault(w, fmt.Sprintf("%c takes a whole number", w.letter))
	}
	return int(w.value / billion), nil
}

// wholeOf returns the whole number of a letter, or none when it is absent.
func (b block) wholeOf(letter byte, none int) (int, error) {
	if w, ok := b.axis[letter]; ok {
		return b.whole(w)
	}
	return none, nil
}

// modal groups of G words, after NISTIR 6556 table 4; two words of a group in a
// block contradict each other.
var groups = map[int]string{ // number times ten
	0: "motion", 10: "motion", 20: "motion", 30: "motion", 800: "motion",
	170: "plane", 200: "units", 210: "units", 400: "compensation", 410: "compensation", 420: "compensation",
	430: "length", 490: "length", 540: "work", 550: "work", 560: "work", 570: "work", 580: "work", 590: "work",
	610: "path", 640: "path", 900: "distance", 910: "distance", 901: "center", 911: "center", 930: "feed", 940: "feed",
}

const allowedG = "G0 G1 G2 G3 G17 G20 G21 G40 G41 G42 G43 G49 G54 to G59 G61 G64 G80 G90 G90.1 G91 G91.1 G93 G94 are read here"

// codes returns the G words of the block by group, their numbers times ten.
func (b block) codes() (map[string]int, error) {
	found := map[string]int{}
	for _, w := range b.g {
		if w.value < 0 || w.value%(billion/10) != 0 {
			return nil, b.fault(w, allowedG)
		}
		code := int(w.value / (billion / 10))
		group, ok := groups[code]
		if !ok {
			return nil, b.fault(w, allowedG)
		}
		// G80 cancels a cycle; with a motion word in the same block it says nothing more.
		if other, twice := found[group]; twice {
			return nil, b.fault(w, fmt.Sprintf("G%g of the same kind stands in this block already", float64(other)/10))
		}
		found[group] = code
	}
	return found, nil
}

var allowedM = []int{0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 30}

// misc returns the M numbers of the block.
func (b block) misc() ([]int, error) {
	var ms []int
	for _, w := range b.m {
		v, err := b.whole(w)
		if err != nil || !slices.Contains(allowedM, v) || slices.Contains(ms, v) {
			return nil, b.fault(w, "M0 M1 M2 M3 M4 M5 M6 M7 M8 M9 M30 are read here, each once a block")
		}
		ms = append(ms, v)
	}
	return ms, nil
}
