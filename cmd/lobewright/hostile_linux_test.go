package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"
)

// hostile is a run of the program on input made to hurt it.
type hostile struct {
	name    string
	files   map[string]string // written into the folder it runs in
	make    func() error      // files too large to hold in memory
	command []string          // of lobewright
	status  int
	want    string // in its messages
}

// sound returns a sound spec with one thing put in place of another.
func sound(t *testing.T, old, new string) string {
	t.Helper()
	data, err := os.ReadFile(liftSpec)
	if err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(string(data), old) {
		t.Fatalf("%q is not in the sample", old)
	}
	return strings.Replace(string(data), old, new, 1)
}

// sparse makes a file of one line of zero bytes that takes no room on the disk.
func sparse(name string, size int64) func() error {
	return func() error {
		if err := os.WriteFile(name, nil, 0o644); err != nil {
			return err
		}
		return os.Truncate(name, size)
	}
}

// A process given hostile input ends by itself with a message, and within 2 s of processor
// time and 1 GiB of memory; it leaves no file.
func TestHostileInputs(t *testing.T) {
	const gib = 1 << 30
	root, err := filepath.Abs("../../testdata")
	if err != nil {
		t.Fatal(err)
	}
	wheel, press := filepath.Join(root, "program/cam.yaml"), sound(t, "motion:\n  events:", "motion:\n  table: {file: lift.csv, smoothing: 0.01}\nnotes:\n  -")
	press = press[:strings.Index(press, "notes:")] + press[strings.Index(press, "follower:"):]
	bomb := "a: &a [x,x,x,x,x,x,x,x,x]\n"
	for c := 'b'; c <= 'i'; c++ {
		bomb += fmt.Sprintf("%c: &%c [*%c,*%c,*%c,*%c,*%c,*%c,*%c,*%c,*%c]\n", c, c, c-1, c-1, c-1, c-1, c-1, c-1, c-1, c-1, c-1)
	}
	release := []string{"release", "x.yaml"}
	proveout := []string{"proveout", wheel, "x.nc"}
	program := func(lines string, n int, end string) map[string]string {
		return map[string]string{"x.nc": "%\nO1\nG21 G90\nG1 X61 Y0 F100\n" + strings.Repeat(lines, n) + end}
	}
	head, _, _ := strings.Cut(sound(t, "motion:", "motion:"), "    - ")
	events := func(n int) func() error {
		return func() error {
			f, err := os.Create("x.yaml")
			if err != nil {
				return err
			}
			line := []byte(strings.Repeat("    - {dwell: 1}\n", 1000))
			_, err = f.WriteString(head)
			for range n / 1000 {
				if err == nil {
					_, err = f.Write(line)
				}
			}
			return errors.Join(err, f.Close())
		}
	}
	cases := []hostile{
		{name: "brackets", files: map[string]string{"x.yaml": strings.Repeat("[", 1_000_000)}, want: "x.yaml:1:1: found no valid YAML: exceeded max depth"},
		{name: "maps in maps", files: map[string]string{"x.yaml": strings.Repeat("{a: ", 250_000)}, want: "exceeded max depth"},
		{name: "lists in lists", files: map[string]string{"x.yaml": strings.Repeat("- ", 500_000)}, want: "exceeded max depth"},
		{name: "indentation", files: map[string]string{"x.yaml": func() string {
			var b strings.Builder
			for i := range 1000 {
				b.WriteString(strings.Repeat(" ", i) + "a:\n")
			}
			return b.String()
		}()}, want: "nested more than 16 deep"},
		{name: "alias bomb", files: map[string]string{"x.yaml": bomb}, want: "x.yaml:1:4: found "},
		{name: "anchors", files: map[string]string{"x.yaml": strings.Repeat("a: &a 1\n", 120_000)}, want: "x.yaml:1:4: found "},
		{name: "keys", files: map[string]string{"x.yaml": func() string {
			var b strings.Builder
			for i := range 80_000 {
				fmt.Fprintf(&b, "key%d: 1\n", i)
			}
			return b.String()
		}()}, want: "more faults, not listed"},
		{name: "a long word", files: map[string]string{"x.yaml": strings.Repeat("x", 1_000_000)}, want: "x.yaml:1:1: found "},
		{name: "a long quote", files: map[string]string{"x.yaml": `part: "` + strings.Repeat("x", 1_000_000)}, want: "x.yaml:1:"},
		{name: "a spec of 1 GiB in a line", make: sparse("x.yaml", gib), want: "x.yaml:1:1: found a file of more than 1048576 bytes"},
		{name: "a spec without end", command: []string{"release", "/dev/zero"}, want: "/dev/zero:1:1: found a file of more than 1048576 bytes"},
		{name: "ten million events", make: events(10_000_000), want: "x.yaml:1:1: found a file of more than 1048576 bytes"},
		{name: "fifty thousand events", make: events(50_000), want: "1 to 1000 of them"},
		{name: "a lift of 1e308", files: map[string]string{"x.yaml": sound(t, "rise: 14", "rise: 1e308")}, want: "found 1e308; allowed: a length from"},
		{name: "a lift of 1e-308", files: map[string]string{"x.yaml": sound(t, "rise: 14", "rise: 1e-308")}, want: "allowed: a length from"},
		{name: "a radius of 1e308", files: map[string]string{"x.yaml": sound(t, "base_radius: 45", "base_radius: 1e308")}, want: "found 1e308; allowed: a length from"},
		{name: "part in another folder", files: map[string]string{"x.yaml": sound(t, "part: stick-lift", "part: ../../stick-lift")}, want: `found "../../stick-lift"; allowed: letters, digits`},
		{name: "part with a slash", files: map[string]string{"x.yaml": sound(t, "part: stick-lift", "part: stick/lift")}, want: "allowed: letters, digits"},
		{name: "part with a backslash", files: map[string]string{"x.yaml": sound(t, "part: stick-lift", `part: stick\lift`)}, want: "allowed: letters, digits"},
		{name: "part of two dots", files: map[string]string{"x.yaml": sound(t, "part: stick-lift", `part: ".."`)}, want: "allowed: letters, digits"},
		{name: "part with a control character", files: map[string]string{"x.yaml": sound(t, "part: stick-lift", `part: "stick\x1b[2Jlift"`)}, want: "x.yaml:3:7: part: found the character U+001B in text"},
		{name: "part with a line end", files: map[string]string{"x.yaml": sound(t, "part: stick-lift", `part: "stick\nlift"`)}, want: "x.yaml:3:7: part: found text of several lines"},
		{name: "a table of 1 GiB in a line", files: map[string]string{"x.yaml": press}, make: sparse("lift.csv", gib), want: "a file of more than 4194304 bytes"},
		{name: "a table of line ends", files: map[string]string{"x.yaml": press, "lift.csv": strings.Repeat("\n", 4<<20)}, want: "lift.csv:1:1: found an empty line"},
		{name: "a table of commas", files: map[string]string{"x.yaml": press, "lift.csv": strings.Repeat(",", 4<<20)}, want: "lift.csv:1:1: found a line of more than 4096 bytes"},
		{name: "a table of many rows", files: map[string]string{"x.yaml": press, "lift.csv": "a,b\n" + strings.Repeat("0,0\n", 1_000_000)}, want: "lift.csv:3:1: found "},
		{name: "a table that is a pipe", files: map[string]string{"x.yaml": press}, make: func() error { return syscall.Mkfifo("lift.csv", 0o644) }, want: "it is no plain file"},
		{name: "a table that is a folder", files: map[string]string{"x.yaml": press}, make: func() error { return os.Mkdir("lift.csv", 0o755) }, want: "it is no plain file"},
		{name: "a program of 1 GiB in a line", make: sparse("x.nc", gib), command: proveout, want: "x.nc:1:1: found more than 67108864 bytes"},
		{name: "a program without end", command: []string{"proveout", wheel, "/dev/zero"}, want: "/dev/zero:1:1: found more than 67108864 bytes"},
		{name: "a program of comments", files: program("()\n", 20_000_000, "M30\n%\n"), command: proveout, want: "x.nc:200001:1: found one line more"},
		{name: "a program of line ends", files: program("\n", 60_000_000, "M30\n%\n"), command: proveout, want: "x.nc:200001:1: found one line more"},
		{name: "a program of circles", files: program("G3 X-61 Y0 I-61 J0\nG3 X61 Y0 I61 J0\n", 30_000, "M30\n%\n"), command: proveout, status: statusGate},
		{name: "a program of points", files: program("X61\n", 190_000, "M30\n%\n"), command: proveout, status: statusGate},
		{name: "far coordinates", files: program("G3 X-9000000 Y9000000 I-9000000 J-9000000\nG1 X9000000 Y-9000000\n", 100, "M30\n%\n"), command: proveout, status: statusGate},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) { c.run(t, release) })
	}
}

func (c hostile) run(t *testing.T, release []string) {
	dir := t.TempDir()
	t.Chdir(dir)
	for name, text := range c.files {
		if err := os.WriteFile(name, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	if c.make != nil {
		if err := c.make(); err != nil {
			t.Fatal(err)
		}
	}
	before, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	command, status := c.command, c.status
	if command == nil {
		command = release
	}
	if status == 0 {
		status = statusInput
	}
	ctx, cancel := context.WithTimeout(t.Context(), time.Minute) // a run that hangs must not hang the tests
	defer cancel()
	cmd := exec.CommandContext(ctx, "lobewright", command...)
	var messages bytes.Buffer
	cmd.Stderr = &messages
	err = cmd.Run()
	var exit *exec.ExitError
	if !errors.As(err, &exit) || exit.ExitCode() != status || !strings.Contains(messages.String(), c.want) {
		t.Errorf("%v, want status %d; messages: %.300s", err, status, messages.String())
	}
	if strings.Contains(messages.String(), "goroutine ") || strings.ContainsAny(messages.String(), "\x1b\x00") {
		t.Errorf("messages: %.300q", messages.String())
	}
	const mostKiB = 1 << 20 // 1 GiB
	used, ok := cmd.ProcessState.SysUsage().(*syscall.Rusage)
	if !ok || used.Maxrss > mostKiB {
		t.Errorf("%d KiB of memory", used.Maxrss)
	}
	// A wheel that is off its hinges, not a stopwatch: alone each takes less than 2 s, and a busy machine doubles that.
	if cpu := cmd.ProcessState.UserTime() + cmd.ProcessState.SystemTime(); cpu > 6*time.Second {
		t.Errorf("%v of processor time", cpu)
	}
	if after, err := os.ReadDir(dir); err != nil || len(after) != len(before) {
		t.Errorf("the folder holds %v, %v", after, err)
	}
}
