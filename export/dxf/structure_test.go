package dxf

import (
	"strconv"
	"strings"
	"testing"
)

// groups splits a file into codes and values without any other knowledge.
func groups(t *testing.T, data []byte) [][2]string {
	t.Helper()
	lines := strings.Split(strings.TrimSuffix(string(data), lineEnd), lineEnd)
	if len(lines)%2 != 0 {
		t.Fatalf("%d lines do not pair", len(lines))
	}
	var all [][2]string
	for i := 0; i < len(lines); i += 2 {
		all = append(all, [2]string{strings.TrimSpace(lines[i]), lines[i+1]})
	}
	return all
}

// Every object of an AC1015 file has a handle of its own below $HANDSEED, and every
// pointer to a handle finds it; 0 stands for no owner.
func TestHandles(t *testing.T) {
	owners := map[string]bool{}
	var pointers []string
	seed := uint64(0)
	last := ""
	for _, g := range groups(t, mustWrite(t, sample(R2000, false))) {
		switch {
		case last == "$HANDSEED":
			n, err := strconv.ParseUint(g[1], 16, 64)
			if err != nil {
				t.Fatal(err)
			}
			seed = n
		case g[0] == "5" || g[0] == "105":
			if owners[g[1]] {
				t.Errorf("handle %s is there twice", g[1])
			}
			owners[g[1]] = true
		case g[0] == "330" || g[0] == "340" || g[0] == "350" || g[0] == "390":
			pointers = append(pointers, g[1])
		}
		last = g[1]
	}
	for h := range owners {
		if n, err := strconv.ParseUint(h, 16, 64); err != nil || n == 0 || n >= seed {
			t.Errorf("handle %s is not between 0 and $HANDSEED %X", h, seed)
		}
	}
	if len(pointers) < len(owners)/2 {
		t.Errorf("%d pointers among %d objects: owners are missing", len(pointers), len(owners))
	}
	for _, p := range pointers {
		if p != "0" && !owners[p] {
			t.Errorf("a pointer to handle %s finds nothing", p)
		}
	}
}

// R12 readers choke on what came after their release.
func TestR12HasNothingYounger(t *testing.T) {
	for _, g := range groups(t, mustWrite(t, sample(R12, true))) {
		switch g[0] {
		case "5", "100", "102", "330", "370", "390":
			t.Errorf("group %s %s is younger than R12", g[0], g[1])
		}
		switch g[1] {
		case "LWPOLYLINE", "CLASSES", "OBJECTS", "$INSUNITS", "$MEASUREMENT", "$HANDSEED", "BLOCK_RECORD":
			t.Errorf("%s is younger than R12", g[1])
		}
	}
}

func TestUnitsAndDigits(t *testing.T) {
	for _, c := range []struct {
		inch bool
		want []string
	}{
		{false, []string{"$INSUNITS 70 4", "$MEASUREMENT 70 1"}},
		{true, []string{"$INSUNITS 70 1", "$MEASUREMENT 70 0"}},
	} {
		var flat []string
		for _, g := range groups(t, mustWrite(t, sample(R2000, c.inch))) {
			flat = append(flat, g[0], g[1])
		}
		all := " " + strings.Join(flat, " ") + " "
		digits := []string{
			"10 30.000000 20 -20.000000 42 1.0", "10 -30.000001 20 20.000000",
			"10 9.539 20 3.000 42 6.512345678901234 10 9.539 20 -3.000", "10 40.0 20 0.0",
		}
		for _, want := range append(digits, c.want...) {
			if !strings.Contains(all, " "+want+" ") {
				t.Errorf("inch %v: the file does not hold %q", c.inch, want)
			}
		}
		if strings.Contains(all, " -0.0 ") {
			t.Errorf("inch %v: the file holds a minus zero", c.inch)
		}
	}
}
