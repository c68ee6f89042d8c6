package main

import (
	"crypto/sha256"
	"errors"
	"fmt"
	"os"
	"time"

	"github.com/urfave/cli/v2"
)

// watchEvery is how often the specs are looked at.
const watchEvery = 200 * time.Millisecond

// watch does a job now and again whenever the bytes of a spec change, until the
// context ends. A spec that is refused or wrong is waited on like any other.
func watch(c *cli.Context, job func() error) error {
	files := c.Args().Slice()
	seen := ""
	tick := time.NewTicker(watchEvery)
	defer tick.Stop()
	for {
		if now := fingerprint(files); now != seen {
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

// fingerprint changes when the bytes of a file change, or when it comes or goes.
func fingerprint(files []string) string {
	h := sha256.New()
	for _, f := range files {
		data, err := os.ReadFile(f)
		fmt.Fprintf(h, "%d %v\n", len(data), err != nil)
		h.Write(data)
	}
	return string(h.Sum(nil))
}
