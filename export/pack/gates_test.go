package pack

import (
	"bufio"
	"bytes"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"lobewright/synth/gate"
)

// expectation is the head of a spec in testdata/gates: the one gate that must fail,
// with value, limit and cam angle worked out outside the code; "from the file" where the
// test works it out of the written bytes by sampling, "any" where the head gives an
// argument instead of a figure, "none" where there is no place.
type expectation map[string]string

func head(t *testing.T, file string) expectation {
	t.Helper()
	data, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	e := expectation{}
	for in := bufio.NewScanner(bytes.NewReader(data)); in.Scan(); {
		text, ok := strings.CutPrefix(in.Text(), "# ")
		if key, value, found := strings.Cut(text, ": "); ok && found {
			switch key {
			case "gate", "value", "limit", "cam_angle", "slack":
				e[key] = value
			}
		}
	}
	return e
}

func (e expectation) hold(t *testing.T, key string, got, slack float64) {
	t.Helper()
	switch want := e[key]; want {
	case "any", "":
	case "none":
		if !math.IsNaN(got) {
			t.Errorf("%s: got %v, want none", key, got)
		}
	default:
		v, err := strconv.ParseFloat(want, 64)
		if err != nil {
			t.Fatal(err)
		}
		if !(math.Abs(got-v) <= slack*math.Max(1, math.Abs(v))) {
			t.Errorf("%s: got %.13g, want %.13g", key, got, v)
		}
	}
}

// Every gate has a spec that fails it and no other.
func TestEachGateAlone(t *testing.T) {
	t.Parallel()
	files, err := filepath.Glob("../../testdata/gates/*.yaml")
	if err != nil || len(files) < 21 {
		t.Fatal(len(files), err)
	}
	for _, f := range files {
		t.Run(strings.TrimSuffix(filepath.Base(f), ".yaml"), func(t *testing.T) {
			want := head(t, f)
			p, j, err := work(readSample(t, f), options())
			if err != nil {
				t.Fatal(err)
			}
			var failed []gate.Gate
			for _, g := range j.gates {
				if !g.Pass {
					failed = append(failed, g)
				}
			}
			if p.Passed || p.Report.Released {
				t.Fatal("it was released")
			}
			for _, g := range failed {
				if g.ID != want["gate"] {
					t.Errorf("gate %s fails too: %v against %v, %s", g.ID, g.Value, g.Limit, g.Text)
				}
			}
			if len(failed) == 0 || failed[0].ID != want["gate"] {
				t.Fatalf("gate %s does not fail", want["gate"])
			}
			g := failed[0]
			if want["value"] == "from the file" {
				if v, slack := fromTheFile(t, g.ID, j); math.Abs(v-g.Value) > slack {
					t.Errorf("value: got %v, the file says %v", g.Value, v)
				}
			} else {
				slack := 1e-9
				if s, ok := want["slack"]; ok {
					if slack, err = strconv.ParseFloat(s, 64); err != nil {
						t.Fatal(err)
					}
				}
				want.hold(t, "value", g.Value, slack)
			}
			want.hold(t, "limit", g.Limit, 1e-9)
			want.hold(t, "cam_angle", g.CamAngle, 1e-5)
			if want["value"] == "any" && g.AtLeast == (g.Value > g.Limit) {
				t.Errorf("value %v and limit %v do not say why it fails", g.Value, g.Limit)
			}
			if err := p.Place(t.TempDir()); err == nil {
				t.Error("a refused pack was placed")
			}
		})
	}
}
