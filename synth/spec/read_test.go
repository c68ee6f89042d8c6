package spec

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"math"
	"regexp"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

const smallest = `lobewright: 1
part: stick-lift
units: mm
camshaft: {speed: 180, rotation: counterclockwise}
motion:
  events:
    - {rise: 14, over: 150, law: modified-sine}
    - {fall: 14, over: 120, law: polynomial-3-4-5}
    - {dwell: rest}
follower: {kind: translating-roller, roller_diameter: 22}
cam: {kind: plate, base_radius: 45, thickness: 12}
tolerance: {profile: 0.02}
`

// mustRead reads a spec that has no fault.
func mustRead(t interface {
	Helper()
	Fatal(...any)
}, text string) *Spec {
	t.Helper()
	s, err := Read("good.yaml", []byte(text), vocabulary())
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// replaced returns the text with one thing replaced that must be there.
func replaced(t *testing.T, text, old, new string) string {
	t.Helper()
	if !strings.Contains(text, old) {
		t.Fatalf("%q is not in the spec", old)
	}
	return strings.Replace(text, old, new, 1)
}

func TestDefaults(t *testing.T) {
	s := mustRead(t, smallest)
	sum := sha256.Sum256([]byte(smallest))
	want := &Spec{File: "good.yaml", SHA256: hex.EncodeToString(sum[:]), Part: "stick-lift", Units: MM,
		Camshaft: Camshaft{Speed: 180},
		Motion: Motion{Place: Place{6, 3}, Events: []Event{
			{Kind: Rise, Lift: 14, Over: 150, Law: Law{Name: "modified-sine", Place: Place{7, 34}}, Place: Place{7, 7}},
			{Kind: Fall, Lift: 14, Over: 120, Law: Law{Name: "polynomial-3-4-5", Place: Place{8, 34}}, Place: Place{8, 7}},
			{Kind: Dwell, Over: 90, Place: Place{9, 7}}}},
		Follower:  Follower{Kind: "translating-roller", RollerDiameter: 22, Place: Place{10, 11}},
		Cam:       Cam{Kind: "plate", BaseRadius: 45, Thickness: 12, Place: Place{11, 6}},
		Limits:    Limits{PressureAngle: 30},
		Tolerance: Tolerance{Profile: 0.02, Combine: "fixed+rss", Place: Place{12, 12}},
		Control:   Control{Decimals: 3, ArcMismatch: 0.002, BlockNumbers: true, SafeZ: 5, RotaryDecimals: 3},
	}
	if diff := cmp.Diff(want, s); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
	inch := mustRead(t, replaced(t, smallest, "units: mm", "units: inch"))
	if diff := cmp.Diff(Control{Decimals: 4, ArcMismatch: 0.0002, BlockNumbers: true, SafeZ: 0.2, RotaryDecimals: 3}, inch.Control); diff != "" {
		t.Errorf("inch (-want +got):\n%s", diff)
	}
}

func TestStarter(t *testing.T) {
	text, err := Starter("")
	if err != nil {
		t.Fatal(err)
	}
	if again, err := Starter("plate"); err != nil || again != text {
		t.Errorf("plate: %v", err)
	}
	s := mustRead(t, text)
	offset, hole := 0.0, 0.0
	for _, op := range s.Operations {
		if op.Process == "wire" {
			offset, hole = op.Offsets[len(op.Offsets)-1], op.StartHole.Radius
		}
	}
	if len(s.Operations) != 2 || offset != 0.13 || hole != 66 || s.Operations[0].Direction != "climb" ||
		s.Operations[0].Compensation != "path" || s.Operations[1].Moves != "arcs" || s.Operations[1].Axes != "xy" {
		t.Errorf("operations %+v", s.Operations)
	}
	if s.Part != "stick-lift" || !s.Camshaft.Clockwise || s.Follower.Offset != 5 || s.Cam.Bore.Keyway.Depth != 2.8 || s.Cam.Holes[0].At != 200 || s.Motion.Events[4].Over != 50 {
		t.Errorf("spec %+v", s)
	}
}

func TestStarterOptionalKeys(t *testing.T) {
	text, err := Starter("plate")
	if err != nil {
		t.Fatal(err)
	}
	s := mustRead(t, regexp.MustCompile(`(?m)^( *)#\? `).ReplaceAllString(text, "$1"))
	share, step, at := 0.1, 5.0, 30.0
	back, radius, wall, v, a, j := 35.0, 12.0, 2.0, 400.0, 20000.0, 3e6
	if diff := cmp.Diff(Limits{30, &back, &radius, &v, &a, &j, &wall}, s.Limits); diff != "" {
		t.Errorf("limits (-want +got):\n%s", diff)
	}
	tolerance := Tolerance{0.02, 0.002, &share, &step, &MachineTool{0.0005, 0.003, 0.002, 0.002}, 0.01, 0.005, "fixed+rss", s.Tolerance.Place}
	if diff := cmp.Diff(tolerance, s.Tolerance); diff != "" {
		t.Errorf("tolerance (-want +got):\n%s", diff)
	}
	if diff := cmp.Diff(Control{Decimals: 3, ArcMismatch: 0.002, BlockNumbers: true, MaxBlocks: 20000, SafeZ: 5, RotaryDecimals: 3, Place: s.Control.Place}, s.Control); diff != "" {
		t.Errorf("control (-want +got):\n%s", diff)
	}
	if diff := cmp.Diff(&at, s.Operations[0].StartAt); diff != "" {
		t.Errorf("start_at_cam_angle (-want +got):\n%s", diff)
	}
	texts := []string{s.Material, s.Hardness, s.Finish, s.Drawn, s.Checked, s.Date, s.Cam.Bore.Fit, strings.Join(s.Notes, ";")}
	want := []string{"42CrMo4", "56 HRC", "Ra 0.8", "M. Example", "N. Example", "2025-03-01", "H7", "Break sharp edges;Mark the face"}
	if diff := cmp.Diff(want, texts); diff != "" || !s.Cam.NoDatum {
		t.Errorf("texts, no datum %v (-want +got):\n%s", s.Cam.NoDatum, diff)
	}
}

func TestStarterUnknown(t *testing.T) {
	for kind, want := range map[string]string{
		"barell": `found the kind "barell"; allowed: plate, groove, barrel; did you mean barrel?`,
		"plat":   `found the kind "plat"; allowed: plate, groove, barrel; did you mean plate?`,
	} {
		if text, err := Starter(kind); err == nil || err.Error() != want || text != "" {
			t.Errorf("%s: %q, %v", kind, text, err)
		}
	}
}

// At 180 rpm the shaft turns 360 degrees in 60/180 s: 1.08 degrees a millisecond.
func TestTimes(t *testing.T) {
	s := mustRead(t, replaced(t, replaced(t, smallest, "over: 150", "over: 62.5 ms"), "over: 120", "over: 100ms"))
	var over []float64
	for _, e := range s.Motion.Events {
		over = append(over, e.Over)
	}
	for i, want := range []float64{67.5, 108, 184.5} {
		if math.Abs(over[i]-want) > 1e-10 || s.Motion.Events[i].Timed != (i < 2) {
			t.Errorf("event %d: %v degrees, want %v", i+1, over[i], want)
		}
	}
}

func TestLawForms(t *testing.T) {
	for text, want := range map[string]Law{
		"{sine: 0.25, constant: 0.5, cosine: 0.25}": {Name: Trigonometric, Sine: 0.25, Constant: 0.5, Cosine: 0.25},
		"{cosine: 1}":                {Name: Trigonometric, Cosine: 1},
		"modified-constant-velocity": {Name: "modified-constant-velocity", ConstantShare: 0.5},
		"modified-constant-velocity, constant_share: 0.3": {Name: "modified-constant-velocity", ConstantShare: 0.3},
	} {
		got := mustRead(t, replaced(t, smallest, "modified-sine", text)).Motion.Events[0].Law
		got.Place = Place{}
		if diff := cmp.Diff(want, got); diff != "" {
			t.Errorf("%s (-want +got):\n%s", text, diff)
		}
	}
}

// Neighbors whose velocities meet are no fault: 7 mm in 75 degrees twice, and a
// half-cycloid (end velocity 2) run into a constant velocity of the same speed.
func TestVelocitiesThatMeet(t *testing.T) {
	for _, events := range []string{
		"[{rise: 7, over: 75, law: half-cycloid}, {rise: 14, over: 75, law: constant-velocity}, {fall: 14, over: 75, law: constant-velocity}, {fall: 7, over: 75, law: half-cycloid}, {dwell: rest}]",
		"[{rise: 7, over: 90, law: constant-velocity}, {rise: 7, over: 90, law: constant-velocity}, {fall: 14, over: 180, law: constant-velocity}]",
	} {
		text := smallest[:strings.Index(smallest, "motion:")] + "motion: {events: " + events + "}\n" + smallest[strings.Index(smallest, "follower:"):]
		_, err := Read("x.yaml", []byte(text), vocabulary())
		var jumps []int
		var faults Faults
		if errors.As(err, &faults) {
			for _, f := range faults {
				jumps = append(jumps, f.Column)
			}
		}
		// Rise to fall at the top is a jump in both, and so is the wrap of the second.
		want := 1
		if strings.Count(events, "half-cycloid") == 0 {
			want = 2
		}
		if len(jumps) != want || strings.Count(err.Error(), "a jump in velocity") != want {
			t.Errorf("%s: %v", events, err)
		}
	}
}

func TestTextAsWritten(t *testing.T) {
	for text, want := range map[string]string{"1.0": "1.0", "007": "007", "2025-03-01": "2025-03-01", "no": "no", "": "",
		`"true"`: "true", "Kreide Δ کتاب\u200cها": "Kreide Δ کتاب\u200cها"} {
		if got := mustRead(t, smallest+"revision: "+text+"\n").Revision; got != want {
			t.Errorf("revision %q, want %q", got, want)
		}
	}
}

func TestNumbersAsWritten(t *testing.T) {
	for text, want := range map[string]float64{"45": 45, "+45": 45, "45.": 45, "4.5e1": 45, "0.5": 0.5, ".5": 0.5, "0": 0, "-0": 0, "-3": -3} {
		got := mustRead(t, replaced(t, smallest, "roller_diameter: 22", "roller_diameter: 22, offset: "+text)).Follower.Offset
		if got != want || math.Signbit(got) != (want < 0) {
			t.Errorf("%s: %v, want %v", text, got, want)
		}
	}
}

func TestByteOrderMarkAndLineEnds(t *testing.T) {
	plain := mustRead(t, smallest)
	for name, text := range map[string]string{"mark": "\ufeff" + smallest, "crlf": strings.ReplaceAll(smallest, "\n", "\r\n"), "start": "---\n" + smallest + "...\n"} {
		s := mustRead(t, text)
		if s.Cam.BaseRadius != plain.Cam.BaseRadius || len(s.Motion.Events) != 3 {
			t.Errorf("%s: %+v", name, s)
		}
		if sum := sha256.Sum256([]byte(text)); s.SHA256 != hex.EncodeToString(sum[:]) {
			t.Errorf("%s: SHA-256 is not over the bytes given", name)
		}
	}
}

func TestSizeLimit(t *testing.T) {
	fill := func(n int) string { return smallest + strings.Repeat("#", n-len(smallest)-1) + "\n" }
	mustRead(t, fill(mostBytes))
	_, err := Read("big.yaml", []byte(fill(mostBytes+1)), vocabulary())
	if err == nil || err.Error() != "big.yaml:1:1: found a file of more than 1048576 bytes; allowed: at most 1048576 bytes; a spec holds one cam" {
		t.Error(err)
	}
}

func TestHostileFiles(t *testing.T) {
	for name, text := range map[string]string{
		"brackets": strings.Repeat("[", 500_000), "closed": strings.Repeat("[", 9000) + strings.Repeat("]", 9000),
		"maps": strings.Repeat("{a: ", 200_000), "dashes": strings.Repeat("- ", 100_000), "keys": strings.Repeat("? ", 100_000),
		"tag on a list": "motion: {events: !x}", "nul": "part: \x00", "half": "\xff\xfe\x00", "directive": "%YAML 9.9\n---\na: 1\n",
		"bomb": "a: &a [x,x]\nb: &b [*a,*a]\nc: [*b,*b]\n",
	} {
		s, err := Read("x.yaml", []byte(text), vocabulary())
		var faults Faults
		if s != nil || !errors.As(err, &faults) || len(faults) == 0 {
			t.Errorf("%s: %v", name, err)
		}
	}
}

func TestManyFaults(t *testing.T) {
	text := smallest
	for i := range 300 {
		text += fmt.Sprintf("key%d: 1\n", i)
	}
	_, err := Read("x.yaml", []byte(text), vocabulary())
	lines := strings.Split(err.Error(), "\n")
	if len(lines) != mostFaults+1 || lines[mostFaults] != "x.yaml:212:1: found 100 more faults, not listed" {
		t.Errorf("%d lines, last %q", len(lines), lines[len(lines)-1])
	}
}

func TestFaultsAreSorted(t *testing.T) {
	_, err := Read("x.yaml", []byte(strings.ReplaceAll(smallest, ": 1", ": x")), vocabulary())
	var faults Faults
	if !errors.As(err, &faults) || len(faults) < 5 {
		t.Fatal(err)
	}
	if !slices.IsSortedFunc(faults, func(a, b Fault) int {
		return (a.Line-b.Line)*1000 + a.Column - b.Column
	}) {
		t.Error(err)
	}
}

// Any division of the turn into degrees, with the rest left to the reader, sums
// to 360, and every lift closes.
func TestRestProperty(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 8).Draw(t, "moves")
		text, left := "", 359.0
		for i := range n {
			up := rapid.Float64Range(0.01, left/float64(2*n)).Draw(t, "up")
			down := rapid.Float64Range(0.01, left/float64(2*n)).Draw(t, "down")
			lift := rapid.Float64Range(0.001, 100).Draw(t, "lift")
			text += fmt.Sprintf("    - {rise: %v, over: %v, law: cycloidal}\n    - {fall: %v, over: %v, law: modified-sine}\n", lift, up, lift, down)
			if i == n-1 {
				text += "    - {dwell: rest}\n"
			}
		}
		head, tail := smallest[:strings.Index(smallest, "    - ")], smallest[strings.Index(smallest, "follower:"):]
		sum := 0.0
		for _, e := range mustRead(t, head+text+tail).Motion.Events {
			sum += e.Over
			if e.Over <= 0 {
				t.Fatalf("%+v", e)
			}
		}
		if math.Abs(sum-360) > 1e-9 {
			t.Fatalf("sum %v", sum)
		}
	})
}
