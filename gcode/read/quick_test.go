package read

import (
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// A line that quick takes is read by scan as the same words without a comment; lines of words alone, of a few digits, are taken.
func TestQuickReadsAsScan(t *testing.T) {
	taken := 0
	rapid.Check(t, func(t *rapid.T) {
		line := []byte(rapid.StringMatching(`([GXYZABCIJRFSTDHNOMPgxnQ(;%] ?[-+]?[0-9]{0,11}\.?[0-9]{0,11}[ \t]?){0,6}`).Draw(t, "line"))
		words, ok := quick(nil, line)
		if !ok {
			return
		}
		taken++
		want, comments, err := scan(nil, line, 1)
		if err != nil || len(comments) > 0 || !slices.Equal(words, want) {
			t.Fatalf("%q: quick reads %v, scan %v, %v, %v", line, words, want, comments, err)
		}
	})
	if taken == 0 {
		t.Error("no line was taken")
	}
	for _, line := range []string{"N10 G1 X-12.345 Y0.5", "g2x1y2i-.5j3.", "N99990 G1 X12.3456 F300.000", ""} {
		if _, ok := quick(nil, []byte(line)); !ok {
			t.Errorf("%q is left to scan", line)
		}
	}
	for _, line := range []string{"G1 X1.2.3", "G1 X", "X-", "X1-2", "(a)", "Q1", "X99999999", "X12345678901"} {
		if _, ok := quick(nil, []byte(line)); ok {
			t.Errorf("%q is taken", line)
		}
	}
}
