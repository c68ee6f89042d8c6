package pack

import (
	"fmt"
	"os"
	"path/filepath"
	"sync"
	"testing"
)

// Runs of one part at once: whoever looks finds a pack, whole, and nothing is left beside.
func TestPlaceAtOnce(t *testing.T) {
	dir := t.TempDir()
	if err := whole("0", 5).Place(dir); err != nil {
		t.Fatal(err)
	}
	const runs, each = 4, 5
	var wait sync.WaitGroup
	errs := make(chan error, runs*each)
	for r := range runs {
		wait.Go(func() {
			for k := range each {
				errs <- whole(fmt.Sprint(r, k), 2+r).Place(dir)
			}
		})
	}
	done := make(chan struct{})
	go func() { wait.Wait(); close(done) }()
	for looking := true; looking; {
		select {
		case <-done:
			looking = false
		default:
		}
		if info, err := os.Lstat(filepath.Join(dir, "chalk-tray")); err != nil || !info.IsDir() {
			t.Errorf("no pack in place: %v", err)
		}
	}
	for range runs * each {
		if err := <-errs; err != nil {
			t.Error(err)
		}
	}
	if got := entries(t, dir); len(got) != 1 || packIn(t, filepath.Join(dir, "chalk-tray")) == "" {
		t.Errorf("left %v", got)
	}
}
