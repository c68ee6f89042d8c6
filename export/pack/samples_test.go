package pack

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"lobewright/export/sheet"
	"lobewright/synth"
	"lobewright/synth/spec"
)

const samplesFolder = "../../samples"

// releasingSamples are the specs of the samples folder that must release: all but
// those named refused-*.
func releasingSamples(t testing.TB) []string {
	t.Helper()
	all, err := filepath.Glob(filepath.Join(samplesFolder, "*.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	var good []string
	for _, f := range all {
		if !strings.HasPrefix(filepath.Base(f), "refused-") {
			good = append(good, f)
		}
	}
	if len(good) < 4 || len(all)-len(good) < 2 {
		t.Fatalf("%d samples that release, %d that are refused", len(good), len(all)-len(good))
	}
	return good
}

func readSample(t testing.TB, file string) *spec.Spec {
	t.Helper()
	data, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	s, err := spec.Read(file, data, synth.Vocabulary())
	if err != nil {
		t.Fatal(err)
	}
	s, err = s.Load(data, synth.Vocabulary(), func(name string) ([]byte, error) { return os.ReadFile(filepath.Join(filepath.Dir(file), name)) })
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func options() Options { return Options{Tool: "lobewright test", DXF: "2000"} }

// Every sample releases, with every file of the contract, the same bytes each time,
// and a report whose figures hold.
func TestSamplesRelease(t *testing.T) {
	t.Parallel()
	for _, name := range releasingSamples(t) {
		t.Run(strings.TrimSuffix(filepath.Base(name), ".yaml"), func(t *testing.T) {
			s := readSample(t, name)
			p, err := Make(s, options())
			if err != nil {
				t.Fatal(err)
			}
			if !p.Passed || !p.Report.Released {
				t.Fatalf("refused: %+v", p.Report.Gates)
			}
			var names []string
			for _, f := range p.Files {
				names = append(names, f.Name)
			}
			want := []string{s.Part + ".dxf", s.Part + ".svg", s.Part + ".motion.svg", s.Part + ".error.svg"}
			for i, op := range s.Operations {
				want = append(want, fmt.Sprintf("%s.%d-%s.nc", s.Part, i+1, op.Process))
			}
			tails := []string{"inspection.csv", "motion.csv", "probe.csv", "report.html", "report.json"}
			if s.Inspection == nil {
				tails = slices.Delete(tails, 2, 3)
			}
			for _, tail := range tails {
				want = append(want, s.Part+"."+tail)
			}
			if !slices.Equal(names, want) {
				t.Errorf("files %v, want %v", names, want)
			}
			if !slices.Equal(p.Report.Files, append(want, "manifest.json")) {
				t.Errorf("the report lists %v", p.Report.Files)
			}
			for _, q := range p.Report.Paths {
				wall := s.Cam.Kind == "barrel" && strings.HasSuffix(q.Curve, " wall") // no parallel of the roller's path
				if d := q.Deviation; !(d.Bound <= p.Report.Tolerance.Chord && d.Outside <= d.Bound && -d.Inside <= d.Bound) || (q.Follower == nil) != wall {
					t.Errorf("%s, %s: deviation %+v, follower %v", q.File, q.Curve, q.Deviation, q.Follower)
				}
				if spirals := slices.ContainsFunc(p.Report.Operations, func(o sheet.Operation) bool { return o.File == q.File && o.Axes == "polar" }); spirals {
					if q.SegmentsFloor != nil || q.Arcs > 0 || float64(q.Lines) > 1.2*q.Theory {
						t.Errorf("%s, %s: %d spirals, %g in theory, floor %v", q.File, q.Curve, q.Lines, q.Theory, q.SegmentsFloor)
					}
					continue
				}
				if q.SegmentsFloor == nil || *q.SegmentsFloor < 5 || *q.SegmentsFloor > q.Lines+q.Arcs {
					t.Errorf("%s, %s: proven floor %v, %d lines and %d arcs", q.File, q.Curve, q.SegmentsFloor, q.Lines, q.Arcs)
				}
			}
			again, err := Make(s, options())
			if err != nil {
				t.Fatal(err)
			}
			for i, f := range p.Files {
				if !bytes.Equal(f.Data, again.Files[i].Data) {
					t.Errorf("%s differs from run to run", f.Name)
				}
			}
		})
	}
}

// The refused samples are refused by the gate their comment speaks of, alone.
func TestSamplesRefused(t *testing.T) {
	t.Parallel()
	for name, gate := range map[string]string{"refused-steep": "pressure-angle", "refused-roller": "undercut"} {
		p, err := Make(readSample(t, filepath.Join(samplesFolder, name+".yaml")), options())
		if err != nil {
			t.Fatal(err)
		}
		var failed []string
		for _, g := range p.Report.Gates {
			if !g.Pass {
				failed = append(failed, g.ID)
			}
		}
		if !slices.Equal(failed, []string{gate}) {
			t.Errorf("%s fails %v, want %s alone", name, failed, gate)
		}
	}
}

// The starters that lobewright new prints release as they stand.
func TestStarterReleases(t *testing.T) {
	for _, kind := range []string{"plate", "groove"} {
		text, err := spec.Starter(kind)
		if err != nil {
			t.Fatal(err)
		}
		s, err := spec.Read("starter.yaml", []byte(text), synth.Vocabulary())
		if err != nil {
			t.Fatal(err)
		}
		p, err := Make(s, options())
		if err != nil || !p.Passed {
			t.Fatal(kind, err, p.Report.Gates)
		}
	}
}
