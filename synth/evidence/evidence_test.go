package evidence_test

import (
	"testing"

	"lobewright/synth/evidence"
	"lobewright/synth/motion"
)

func laws(name string) (motion.Law, error) { return motion.Named(name, motion.DefaultConstantShare) }

// Every row passes, and has a source, a status and a figure.
func TestEveryRowPasses(t *testing.T) {
	rows, err := evidence.Rows(laws)
	if err != nil || len(rows) < 60 {
		t.Fatal(len(rows), err)
	}
	for _, r := range rows {
		if r.Source == "" || r.Status == "" || r.What == "" {
			t.Errorf("a row without its source: %+v", r)
		}
		if !r.Pass() {
			t.Errorf("%s: %s: published %s, ours %.13g", r.Source, r.What, r.Published, r.Ours)
		}
	}
}

// A spoiled law turns its rows to FAIL, and only those.
func TestSpoiledLawFails(t *testing.T) {
	rows, err := evidence.Rows(func(name string) (motion.Law, error) {
		if name == "modified-sine" {
			return motion.Trigonometric(0.26, 0, 0.74) // a hair beside 0.25, 0, 0.75
		}
		return laws(name)
	})
	if err != nil {
		t.Fatal(err)
	}
	failed := 0
	for _, r := range rows {
		if !r.Pass() {
			failed++
			if len(r.What) < 13 || r.What[:13] != "modified-sine" {
				t.Errorf("%s fails too", r.What)
			}
		}
	}
	if failed < 4 {
		t.Errorf("only %d rows of the spoiled law fail", failed)
	}
}
