package spec

import (
	"errors"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// FuzzRead holds the promise of Read: never a panic, never neither spec nor
// error, every fault with a place in the file, and no figure in a spec that is
// not finite.
func FuzzRead(f *testing.F) {
	files, err := filepath.Glob(badFiles)
	if err != nil {
		f.Fatal(err)
	}
	for _, file := range files {
		data, err := os.ReadFile(file)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(data)
	}
	f.Add([]byte(starterPlate))
	f.Add([]byte(smallest))
	f.Fuzz(func(t *testing.T, data []byte) {
		s, err := Read("x.yaml", data, vocabulary())
		if err == nil {
			checkRead(t, s)
			return
		}
		var faults Faults
		if !errors.As(err, &faults) || len(faults) == 0 || s != nil {
			t.Fatalf("spec %v, error %v", s, err)
		}
		lines := len(sourceLines(withoutMark(data)))
		for _, one := range faults {
			if one.Line < 1 || one.Line > lines || one.Column < 1 || one.Found == "" || strings.ContainsAny(one.Error(), "\n\x00") {
				t.Errorf("%d lines, fault %q", lines, one.Error())
			}
		}
	})
}

func checkRead(t *testing.T, s *Spec) {
	if s == nil || s.Part == "" || s.Units == "" {
		t.Fatalf("spec %+v", s)
	}
	forms := 0
	for _, is := range []bool{len(s.Motion.Events) > 0, len(s.Motion.Points) > 0, s.Motion.Table != nil} {
		if is {
			forms++
		}
	}
	if forms != 1 {
		t.Fatalf("%d forms of motion: %+v", forms, s.Motion)
	}
	for _, f := range s.Motion.Points {
		if !(f.From >= 0 && f.From < 360 && f.To >= f.From && f.To <= f.From+360) || f.Point != (f.To == f.From) {
			t.Errorf("fact %+v", f)
		}
	}
	if len(s.Motion.Events) == 0 {
		return
	}
	sum, lift := 0.0, s.Motion.StartLift
	for _, e := range s.Motion.Events {
		sum += e.Over
		switch e.Kind {
		case Rise:
			lift += e.Lift
		case Fall:
			lift -= e.Lift
		}
		for _, v := range []*float64{e.FromVelocity, e.ToVelocity} {
			if v != nil && (e.Kind == Dwell || !(math.Abs(*v) <= math.MaxFloat64)) {
				t.Errorf("event %+v, velocity %v", e, *v)
			}
		}
		if !(e.Inflection >= 0 && e.Inflection < 1) || !(e.Over > 0) || !(lift > -1e-5) {
			t.Errorf("event %+v, lift %v", e, lift)
		}
	}
	if !(math.Abs(sum-360) <= 1e-8) || !(s.Cam.BaseRadius > 0) || !(s.Tolerance.Profile > 0) || !(s.Follower.RollerDiameter > 0) {
		t.Errorf("sum %v, spec %+v", sum, s)
	}
}
