//go:build peers

package main

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
)

// built builds the program and returns it beside two specs of one part, whose revisions are
// A and B.
func built(t *testing.T) (program, older, newer string) {
	t.Helper()
	dir := t.TempDir()
	program = filepath.Join(dir, "lobewright")
	if out, err := exec.Command("go", "build", "-o", program, ".").CombinedOutput(); err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	older = filepath.Join(dir, "a.yaml")
	newer = filepath.Join(dir, "b.yaml")
	data, err := os.ReadFile(liftSpec)
	if err != nil {
		t.Fatal(err)
	}
	next := bytes.Replace(data, []byte("\nrevision: A"), []byte("\nrevision: B"), 1)
	if bytes.Equal(next, data) {
		t.Fatal("the sample's revision is not A")
	}
	for name, data := range map[string][]byte{older: data, newer: next} {
		if err := os.WriteFile(name, data, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	return program, older, newer
}

// released runs a release that must be good.
func released(t *testing.T, program, spec, dir string) {
	t.Helper()
	if out, err := exec.Command(program, "release", spec, "-o", dir).CombinedOutput(); err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
}

// revision returns the revision of the pack in a folder, every file of which must have the
// hash of its manifest; "" when there is no pack.
func revision(t *testing.T, folder string) string {
	t.Helper()
	list, err := os.ReadDir(folder)
	if errors.Is(err, os.ErrNotExist) {
		return ""
	}
	if err != nil {
		t.Fatal(err)
	}
	var manifest struct {
		Files []struct{ Name, SHA256 string }
	}
	data, err := os.ReadFile(filepath.Join(folder, "manifest.json"))
	if err == nil {
		err = json.Unmarshal(data, &manifest)
	}
	if err != nil || len(list) != len(manifest.Files)+1 {
		t.Errorf("%d files, %d of the manifest, %v", len(list), len(manifest.Files), err)
	}
	found := ""
	for _, f := range manifest.Files {
		data, err := os.ReadFile(filepath.Join(folder, f.Name))
		if sum := sha256.Sum256(data); err != nil || hex.EncodeToString(sum[:]) != f.SHA256 {
			t.Errorf("%s is not the one of the manifest: %v", f.Name, err)
		}
		if strings.HasSuffix(f.Name, ".report.json") {
			var report struct{ Revision string }
			if err := json.Unmarshal(data, &report); err != nil {
				t.Error(err)
			}
			found = report.Revision
		}
	}
	return found
}

// strace kills a release at its first, second, ... call of every system call that touches
// files (each counted by thread): the older pack or the newer is in place, whole, and the
// next run leaves nothing beside it.
func TestPeerKilledAtEverySystemCall(t *testing.T) {
	program, older, newer := built(t)
	out := t.TempDir()
	folder := filepath.Join(out, "stick-lift")
	kills, after := 0, map[string]int{}
	for _, call := range []string{"mkdirat", "openat", "newfstatat", "flock", "getdents64", "fchmodat", "write", "fsync", "close", "renameat2", "unlinkat"} {
		for n := 1; ; n++ {
			released(t, program, older, out)
			cmd := exec.Command("strace", "-f", "-qq", "-o", filepath.Join(t.TempDir(), "trace"), "-e", "trace="+call,
				"-e", fmt.Sprintf("inject=%s:signal=KILL:when=%d", call, n), program, "release", newer, "-o", out)
			messages, err := cmd.CombinedOutput()
			var exit *exec.ExitError
			if err == nil {
				break // there is no call number n
			}
			if status, ok := func() (syscall.WaitStatus, bool) {
				if !errors.As(err, &exit) {
					return 0, false
				}
				s, ok := exit.Sys().(syscall.WaitStatus)
				return s, ok
			}(); !ok || !status.Signaled() || status.Signal() != syscall.SIGKILL {
				t.Fatalf("strace (Debian package strace) is needed: %v\n%s", err, messages)
			}
			kills++
			got := revision(t, folder)
			after[got]++
			if got != "A" && got != "B" {
				t.Errorf("killed at %s %d: revision %q in place", call, n, got)
			}
			released(t, program, newer, out)
			if list, err := os.ReadDir(out); err != nil || len(list) != 1 || revision(t, folder) != "B" {
				t.Errorf("killed at %s %d: the next run leaves %v, %v", call, n, list, err)
			}
		}
	}
	if kills < 40 || after["A"] < 20 || after["B"] < 1 {
		t.Fatalf("only %d kills: %v", kills, after)
	}
	t.Logf("strace: killed at %d system calls; %d times the older pack was in place, %d times the newer", kills, after["A"], after["B"])
}

// A file system of few blocks (tmpfs, mounted here, which takes root) that is too small for
// a pack, for the older one and a newer one beside it, or large enough; and then read-only.
func TestPeerFullAndReadOnlyDisk(t *testing.T) {
	program, older, newer := built(t)
	once := t.TempDir()
	released(t, program, older, once)
	list, err := os.ReadDir(filepath.Join(once, "stick-lift"))
	if err != nil {
		t.Fatal(err)
	}
	size := 0 // of the pack in KiB, by blocks of 4
	for _, e := range list {
		info, err := e.Info()
		if err != nil {
			t.Fatal(err)
		}
		size += 4 * int((info.Size()+4095)/4096)
	}
	empty, full, placed := 0, 0, 0
	for _, packs := range []float64{0.02, 0.1, 0.3, 0.6, 0.9, 1.1, 1.3, 1.6, 1.9, 2.2, 4} {
		kib, dir := int(packs*float64(size)), t.TempDir()
		if err := syscall.Mount("tmpfs", dir, "tmpfs", 0, fmt.Sprintf("size=%dk", kib)); err != nil {
			t.Fatalf("a tmpfs must be mounted, which takes root: %v", err)
		}
		defer syscall.Unmount(dir, syscall.MNT_DETACH)
		had := ""
		if exec.Command(program, "release", older, "-o", dir).Run() == nil {
			had = "A"
		}
		messages, err := exec.Command(program, "release", newer, "-o", dir).CombinedOutput()
		if err != nil {
			if had == "" {
				empty++
			} else {
				full++
			}
			if !strings.Contains(string(messages), "no space left on device") || exitStatus(err) != statusOutput {
				t.Errorf("%d KiB: %v\n%s", kib, err, messages)
			}
		} else {
			placed++
			had = "B"
		}
		check := func(when string) {
			if got := revision(t, filepath.Join(dir, "stick-lift")); got != had {
				t.Errorf("%d KiB, %s: %q in place, want %q", kib, when, got, had)
			}
			if list, err := os.ReadDir(dir); err != nil || len(list) > 1 {
				t.Errorf("%d KiB, %s: left %v, %v", kib, when, list, err)
			}
		}
		check("full")
		if err := syscall.Mount("", dir, "", syscall.MS_REMOUNT|syscall.MS_RDONLY, ""); err != nil {
			t.Fatal(err)
		}
		messages, err = exec.Command(program, "release", older, "-o", dir).CombinedOutput()
		if exitStatus(err) != statusOutput || !strings.Contains(string(messages), "read-only file system") {
			t.Errorf("read-only: %v\n%s", err, messages)
		}
		check("read-only")
	}
	if empty < 3 || full < 2 || placed < 2 {
		t.Errorf("%d sizes too small for a pack, %d for another, %d large enough", empty, full, placed)
	}
	t.Logf("tmpfs: %d sizes too small for a pack, %d for a newer one beside it, %d large enough; all then read-only", empty, full, placed)
}

// Processes that release one part at once.
func TestPeerReleasesAtOnce(t *testing.T) {
	program, older, newer := built(t)
	out := t.TempDir()
	var running []*exec.Cmd
	const processes = 6
	for i := range processes {
		cmd := exec.Command(program, "release", []string{older, newer}[i%2], "-o", out)
		if err := cmd.Start(); err != nil {
			t.Fatal(err)
		}
		running = append(running, cmd)
	}
	for _, cmd := range running {
		if err := cmd.Wait(); err != nil {
			t.Error(err)
		}
	}
	got := revision(t, filepath.Join(out, "stick-lift"))
	if list, err := os.ReadDir(out); err != nil || len(list) != 1 || got != "A" && got != "B" {
		t.Errorf("revision %q, %v, %v", got, list, err)
	}
	t.Logf("%d processes released one part at once", processes)
}

func exitStatus(err error) int {
	var exit *exec.ExitError
	if errors.As(err, &exit) {
		return exit.ExitCode()
	}
	return 0
}
