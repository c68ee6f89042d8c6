package main

import (
	"crypto/sha256"
	"errors"
	"fmt"
	"time"

	"github.com/urfave/cli/v2"

	"lobewright/synth"
	"lobewright/synth/spec"
)

// watchEvery is how often the specs are looked at.
const watchEvery = 200 * time.Millisecond

// watch does a job now and again whenever the bytes of a spec, or of a file it names,
// change, until the context ends. A spec that is refused or wrong is waited on like any other.
func watch(c *cli.Context, job func() error) error {
	files := c.Args().Slice()
	seen := ""
	tick := time.NewTicker(watchEvery)
	defer tick.Stop()
	for {
		if now := fingerprint(files, c.String("tables")); now != seen {
			seen = now
			err := job()
			var f failure
			if err != nil && !errors.As(err, &f) {
				return err
			}
			if f.err != nil {
				fmt.Fprintln(c.App.ErrWriter, f.err)
			}
			fmt.Fprintln(c.App.ErrWriter, "watching; interrupt to end")
		}
		select {
		case <-c.Context.Done():
			return nil
		case <-tick.C:
		}
	}
}

// fingerprint changes when the bytes of a spec or of a file it names change, or when
// one comes or goes.
func fingerprint(files []string, tables string) string {
	h := sha256.New()
	add := func(data []byte, err error) {
		fmt.Fprintf(h, "%d %v\n", len(data), err != nil)
		h.Write(data)
	}
	for _, f := range files {
		data, err := readFile(f)
		add(data, err)
		s, err := spec.Read(f, data, synth.Vocabulary())
		if err == nil && s.Control.File != "" {
			add(readTable(f, s.Control.File, tables))
		}
		if err == nil && s.Motion.Table != nil {
			add(readTable(f, s.Motion.Table.File, tables))
		}
	}
	return string(h.Sum(nil))
}
