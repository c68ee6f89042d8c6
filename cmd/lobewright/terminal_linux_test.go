package main

import (
	"fmt"
	"io"
	"os"
	"regexp"
	"strings"
	"testing"
	"time"
	"unicode/utf8"

	"golang.org/x/sys/unix"
)

// onTerminal runs the program with both outputs on a pseudo terminal and returns what the
// terminal was sent.
func onTerminal(t *testing.T, words ...string) string {
	t.Helper()
	master, err := os.OpenFile("/dev/ptmx", os.O_RDWR|unix.O_NOCTTY, 0)
	if err != nil {
		t.Fatal(err)
	}
	defer master.Close()
	if err := unix.IoctlSetPointerInt(int(master.Fd()), unix.TIOCSPTLCK, 0); err != nil {
		t.Fatal(err)
	}
	number, err := unix.IoctlGetInt(int(master.Fd()), unix.TIOCGPTN)
	if err != nil {
		t.Fatal(err)
	}
	slave, err := os.OpenFile(fmt.Sprintf("/dev/pts/%d", number), os.O_RDWR|unix.O_NOCTTY, 0)
	if err != nil {
		t.Fatal(err)
	}
	sent := make(chan string)
	go func() {
		data, _ := io.ReadAll(master) // ends with an error when the other end closes
		sent <- string(data)
	}()
	run(append([]string{"lobewright"}, words...), slave, slave)
	slave.Close()
	select {
	case s := <-sent:
		return strings.ReplaceAll(s, "\r\n", "\n")
	case <-time.After(time.Minute):
		t.Fatal("the terminal does not end")
		return ""
	}
}

// On a terminal verdicts are in color and in words, a line says how far several specs are and is
// cleared, and no line is wider than 80 columns. NO_COLOR and a dumb terminal take the color away
// and leave the words.
func TestTerminal(t *testing.T) {
	words := []string{"check", "../../samples/tray-shake.yaml", "../../samples/tally-pin.yaml", "../../samples/refused-steep.yaml"}
	codes := regexp.MustCompile(`\x1b\[[0-9;]*m`)
	for _, c := range []struct {
		term, noColor   string
		color, progress bool
	}{{"xterm", "", true, true}, {"xterm", "1", false, true}, {"dumb", "", false, false}} {
		t.Setenv("TERM", c.term)
		t.Setenv("NO_COLOR", c.noColor)
		got := onTerminal(t, words...)
		if codes.MatchString(got) != c.color {
			t.Errorf("%+v: color %v", c, !c.color)
		}
		for _, n := range []string{"0 of 3", "2 of 3"} {
			if strings.Contains(got, "\r"+n+" specs done ") != c.progress {
				t.Errorf("%+v: %q shown: %v", c, n, !c.progress)
			}
		}
		text := regexp.MustCompile(`\r[^\r\n]*\r\x1b\[K`).ReplaceAllString(codes.ReplaceAllString(got, ""), "")
		if strings.ContainsAny(text, "\r\x1b") {
			t.Errorf("%+v: the progress line is not cleared: %q", c, text)
		}
		for _, line := range strings.Split(text, "\n") {
			if n := utf8.RuneCountInString(line); n > 80 {
				t.Errorf("%+v: %d columns: %s", c, n, line)
			}
		}
		for _, want := range []string{"tally-pin                   pass", "refused-steep               FAIL", "2 of 3 specs pass"} {
			if !strings.Contains(text, want) {
				t.Errorf("%+v: the table lacks %q", c, want)
			}
		}
	}
}
