package pack

import (
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"lobewright/gcode"
	"lobewright/gcode/read"
)

var axisWord = regexp.MustCompile(`([XYZIJF])(-?[0-9.]+)`)

// change is by how much the words of a block differ: of X, Y and a Z below the face the
// most, and of F. A center moved along its chord turns a short arc hardly at all, and Z
// above the face is only higher.
func change(before, after string) (axes, feed float64) {
	a, b := axisWord.FindAllStringSubmatch(before, -1), axisWord.FindAllStringSubmatch(after, -1)
	for i := range a {
		p, _ := strconv.ParseFloat(a[i][2], 64)
		q, _ := strconv.ParseFloat(b[i][2], 64)
		switch d := math.Abs(p - q); {
		case a[i][1] == "F":
			feed = d
		case a[i][1] == "X", a[i][1] == "Y", a[i][1] == "Z" && math.Min(p, q) < 0:
			axes = math.Max(axes, d)
		}
	}
	return axes, feed
}

// The proof of a groove's program alone, without the plan to compare with, as proveout has
// it: a digit that moves the tool by more than a few hundredths, or changes a feed, is
// refused wherever it stands.
func TestFlippedDigitsInSlot(t *testing.T) {
	t.Parallel()
	for _, name := range []string{"carton-shift", "lid-swing"} {
		_, j, err := work(readSample(t, samplesFolder+"/"+name+".yaml"), options())
		if err != nil {
			t.Fatal(err)
		}
		p, refused, tried := j.programs[0], 0, 0
		flips(p.data, 110, 17, func(at int, changed []byte) {
			before, after := lineOf(p.data, at), lineOf(changed, at)
			if before[0] != 'N' || inNumber(changed, at) || !axisWord.MatchString(before) {
				return
			}
			axes, feed := change(before, after)
			if axes < 0.03 && feed == 0 {
				return
			}
			tried++
			back, err := read.Parse(changed)
			if err == nil {
				var r gcode.Result
				if r, err = gcode.Verify(back, p.expect); err == nil && len(r.Failures) == 0 {
					t.Errorf("%s: %q for %q was not refused", name, strings.TrimSpace(after), strings.TrimSpace(before))
					return
				}
			}
			refused++
		})
		if tried < 18 {
			t.Errorf("%s: only %d flips tried", name, tried)
		}
		t.Logf("%s: %d of %d flips refused", name, refused, tried)
	}
}
