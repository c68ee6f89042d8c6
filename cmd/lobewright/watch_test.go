package main

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"testing"
	"time"
)

// A watched spec is released, and released again when it changes; a fault in between
// leaves the pack in place.
func TestWatch(t *testing.T) {
	data, err := os.ReadFile("../../samples/tray-shake.yaml")
	if err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	file, manifest := filepath.Join(dir, "cam.yaml"), filepath.Join(dir, "out", "tray-shake", "manifest.json")
	write := func(data []byte) {
		if err := os.WriteFile(file, data, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	write(data)
	ctx, stop := context.WithCancel(context.Background())
	defer stop()
	done := make(chan int)
	var out, messages bytes.Buffer
	go func() {
		done <- runContext(ctx, []string{"lobewright", "release", file, "-o", filepath.Join(dir, "out"), "--watch"}, &out, &messages)
	}()
	// waitFor waits until the manifest is there and is not the old one.
	waitFor := func(old []byte) []byte {
		for range 300 {
			if now, err := os.ReadFile(manifest); err == nil && !bytes.Equal(now, old) {
				return now
			}
			time.Sleep(50 * time.Millisecond)
		}
		t.Fatal("no new pack")
		return nil
	}
	first := waitFor(nil)
	write([]byte("lobewright: 2\n"))
	time.Sleep(3 * watchEvery)
	if now, err := os.ReadFile(manifest); err != nil || !bytes.Equal(now, first) {
		t.Error("a wrong spec changed the pack")
	}
	write(bytes.Replace(data, []byte("revision: A"), []byte("revision: B"), 1))
	waitFor(first)
	stop()
	if status := <-done; status != statusDone {
		t.Errorf("exit status %d, messages %s", status, messages.String())
	}
	if !bytes.Contains(messages.Bytes(), []byte("cam.yaml:1:13")) {
		t.Errorf("the fault was not reported: %s", messages.String())
	}
}
