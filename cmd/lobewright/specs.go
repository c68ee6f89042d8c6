package main

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"runtime"

	"github.com/urfave/cli/v2"

	"lobewright/export/sheet"
	"lobewright/synth/spec"
)

// printer is where the job on one spec writes.
type printer struct {
	out, messages io.Writer
	color         bool // the results go to a terminal that wants color
}

// done is one spec after its job: what it wrote, and how it ended.
type done struct {
	index         int
	out, messages bytes.Buffer
	outcome       sheet.Outcome
	err           error
}

// eachSpec runs the job on every spec named, as many at once as there are processors. Each
// stands for itself; the results come in the order of the specs, several end in a table, and
// the exit status is the highest.
func eachSpec(c *cli.Context, job func(printer, *spec.Spec) (sheet.Outcome, error)) error {
	files := c.Args().Slice()
	if len(files) == 0 {
		return failure{statusInput, fmt.Errorf("lobewright %s: found no spec; name at least one YAML file, for example samples/stick-lift.yaml", c.Command.Name)}
	}
	ended := make(chan *done)
	slots := make(chan struct{}, runtime.GOMAXPROCS(0))
	makers := map[string]string{} // part to the first spec that makes it
	color := colored(c.App.Writer)
	for i, file := range files {
		s, err := readSpec(c, file)
		if err == nil && c.String("o") != "" {
			if first, twice := makers[s.Part]; twice {
				err = fmt.Errorf("%s: found the part %s, which %s makes too; allowed: one spec a part in a folder", file, s.Part, first)
			}
			makers[s.Part] = file
		}
		go func() {
			slots <- struct{}{}
			d := &done{index: i, err: err}
			if err != nil {
				d.err = failure{statusInput, err}
			} else {
				d.outcome, d.err = job(printer{&d.out, &d.messages, color}, s)
			}
			<-slots
			ended <- d
		}()
	}
	return report(c, files, ended, color)
}

// report prints what was done in the order of the specs, as soon as it can.
func report(c *cli.Context, files []string, ended <-chan *done, color bool) error {
	progress := len(files) > 1 && terminal(c.App.ErrWriter)
	show := func(n int) {
		if progress {
			fmt.Fprintf(c.App.ErrWriter, "\r%d of %d specs done ", n, len(files))
		}
	}
	clear := func() {
		if progress {
			fmt.Fprint(c.App.ErrWriter, "\r\x1b[K")
		}
	}
	worst := failure{}
	var other error
	all, next := make([]*done, len(files)), 0
	var outcomes []sheet.Outcome
	show(0)
	for n := range files {
		d := <-ended
		all[d.index] = d
		clear()
		for ; next < len(files) && all[next] != nil; next++ {
			d := all[next]
			c.App.Writer.Write(d.out.Bytes())
			c.App.ErrWriter.Write(d.messages.Bytes())
			var f failure
			if errors.As(d.err, &f) {
				if f.err != nil {
					fmt.Fprintln(c.App.ErrWriter, f.err)
				}
				worst.status = max(worst.status, f.status)
			} else if d.err != nil && other == nil {
				other = d.err
			}
			if d.outcome.Part == "" {
				word := map[int]string{statusInput: "FAULTY", statusOutput: "NOT WRITTEN"}[f.status]
				d.outcome = sheet.Outcome{Part: filepath.Base(files[next]), Verdict: word, Note: "see its message"}
			}
			outcomes = append(outcomes, d.outcome)
		}
		if n+1 < len(files) {
			show(n + 1)
		}
	}
	if len(files) > 1 && !c.Bool("json") {
		fmt.Fprint(c.App.Writer, sheet.Table(outcomes, color))
	}
	if other != nil {
		return other
	}
	if worst.status > 0 {
		return worst
	}
	return nil
}

// terminal reports whether the writer is a terminal.
func terminal(w io.Writer) bool {
	f, ok := w.(*os.File)
	if !ok || os.Getenv("TERM") == "dumb" {
		return false
	}
	info, err := f.Stat()
	return err == nil && info.Mode()&os.ModeCharDevice != 0 && !sameFile(info, os.DevNull)
}

// sameFile reports whether a file is the one of that name: the null device is a character
// device too.
func sameFile(info os.FileInfo, name string) bool {
	other, err := os.Stat(name)
	return err == nil && os.SameFile(info, other)
}

// colored reports whether the writer is a terminal that wants color (https://no-color.org: a
// variable NO_COLOR that is not empty asks for none).
func colored(w io.Writer) bool { return os.Getenv("NO_COLOR") == "" && terminal(w) }
