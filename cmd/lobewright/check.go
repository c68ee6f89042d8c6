package main

import (
	"fmt"

	"github.com/urfave/cli/v2"

	"lobewright/synth/spec"
)

func checkCommand() *cli.Command {
	return &cli.Command{
		Name:      "check",
		Usage:     "show every gate of a spec; write nothing, or with -o what people look at",
		UsageText: "lobewright check SPEC... [-o DIR]\n\nExamples:\n   lobewright check samples/stick-lift.yaml\n   lobewright check samples/refused-steep.yaml -o draft",
		Flags: []cli.Flag{
			&cli.StringFlag{Name: "o", Usage: "folder that receives drawing, charts and sheet, marked NOT RELEASED"},
			&cli.BoolFlag{Name: "json", Usage: "print the report of each spec as JSON"},
		},
		Action: func(c *cli.Context) error {
			return eachSpec(c, func(s *spec.Spec) error { return check(c, s) })
		},
	}
}

func check(c *cli.Context, s *spec.Spec) error {
	p, err := prove(c, s)
	if err != nil {
		return err
	}
	if dir := c.String("o"); dir != "" {
		if err := p.PlaceDraft(dir); err != nil {
			return failure{statusOutput, fmt.Errorf("%s: cannot write the draft: %w", s.File, err)}
		}
	}
	if !p.Passed {
		return failure{status: statusGate}
	}
	return nil
}
