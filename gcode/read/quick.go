package read

// Most lines of a long program are words alone, of numbers with a few digits. quick reads those in one pass and gives up on
// everything else: a comment, a byte that is not printable, a number that is wrong or long. scan then reads the line from its
// start, and it alone says what is wrong. Both give the same words for a line that quick takes (TestQuickReadsAsScan). Without it
// a program of 100 000 lines took twice as long.

// usualDigits are so few characters that their billionths do not overflow.
const usualDigits = 9

var tens = [decimals + 1]int64{1, 10, 100, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9}

// quick appends the words of a line; ok is false when scan must read it.
func quick(words []word, line []byte) (_ []word, ok bool) {
	for i := 0; i < len(line); {
		letter := upper(line[i])
		if letter == ' ' {
			i++
			continue
		}
		if letter < 'A' || letter > 'Z' || letters>>(letter-'A')&1 == 0 {
			return words, false
		}
		start := i + 1
		j := start
		neg := j < len(line) && line[j] == '-'
		if neg {
			j++
		}
		v, digits, whole := int64(0), 0, -1 // digits in all, and before the point
		for ; j < len(line); j++ {
			if d := line[j] - '0'; d <= 9 {
				v = v*10 + int64(d)
				digits++
				continue
			}
			if line[j] != '.' || whole >= 0 {
				break
			}
			whole = digits
		}
		if digits == 0 || j-start > usualDigits || j < len(line) && inNumber(line[j]) {
			return words, false
		}
		if whole < 0 {
			whole = digits
		}
		if v *= tens[decimals-(digits-whole)]; v > maxWhole*billion {
			return words, false
		}
		if neg {
			v = -v
		}
		words = append(words, word{value: v, column: uint16(i + 1), start: uint16(start), end: uint16(j), letter: letter})
		i = j
	}
	return words, true
}
