package main

import (
	"fmt"

	"github.com/urfave/cli/v2"

	"lobewright/synth/evidence"
	"lobewright/synth/motion"
)

func evidenceCommand() *cli.Command {
	return &cli.Command{
		Name:      "evidence",
		Usage:     "print the table of checks against published values, computed now",
		UsageText: "lobewright evidence\n\nExamples:\n   lobewright evidence\n   lobewright evidence | grep FAIL",
		Action: func(c *cli.Context) error {
			if c.NArg() > 0 {
				return failure{statusInput, fmt.Errorf("lobewright evidence: found %q; allowed: no arguments", c.Args().First())}
			}
			rows, err := evidence.Rows(func(name string) (motion.Law, error) { return motion.Named(name, motion.DefaultConstantShare) })
			if err != nil {
				return err
			}
			return printEvidence(c, rows)
		},
	}
}

// printEvidence prints the rows by source and fails when one does not pass.
func printEvidence(c *cli.Context, rows []evidence.Row) error {
	w := c.App.Writer
	source, passed := "", 0
	for _, r := range rows {
		if r.Source != source {
			source = r.Source
			fmt.Fprintf(w, "\n%s (%s)\n", source, r.Status)
			fmt.Fprintf(w, "  %-56s %16s %18s %10s\n", "", "published", "ours", "difference")
		}
		verdict := "FAIL"
		if r.Pass() {
			verdict = "pass"
			passed++
		}
		fmt.Fprintf(w, "  %-56s %16s %18.12g %10.2g  %s\n", r.What, r.Published, r.Ours, r.Difference(), verdict)
	}
	fmt.Fprintf(w, "\n%d of %d rows pass\n", passed, len(rows))
	if passed < len(rows) {
		return failure{status: statusGate}
	}
	return nil
}
