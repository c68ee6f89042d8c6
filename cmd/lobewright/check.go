package main

import (
	"fmt"

	"github.com/urfave/cli/v2"

	"lobewright/export/sheet"
	"lobewright/synth/spec"
)

func checkCommand() *cli.Command {
	return &cli.Command{
		Name:      "check",
		Usage:     "show every gate of a spec; write nothing, or with -o what people look at",
		UsageText: "lobewright check SPEC... [-o DIR]\n\nExamples:\n   lobewright check samples/stick-lift.yaml\n   lobewright check samples/refused-steep.yaml -o draft",
		Flags: append([]cli.Flag{
			&cli.StringFlag{Name: "o", Usage: "folder that receives drawing, charts and sheet, marked NOT RELEASED"},
			&cli.BoolFlag{Name: "json", Usage: "print the report of each spec as JSON"},
			tablesFlag(),
		}, drawingFlags()...),
		Action: func(c *cli.Context) error {
			return eachSpec(c, func(w printer, s *spec.Spec) (sheet.Outcome, error) { return check(c, w, s) })
		},
	}
}

func check(c *cli.Context, w printer, s *spec.Spec) (sheet.Outcome, error) {
	p, err := prove(c, w, s)
	if err != nil {
		return sheet.Outcome{}, err
	}
	o := sheet.Judged(p.Report, "pass", "FAIL")
	if dir := c.String("o"); dir != "" {
		if err := p.PlaceDraft(dir); err != nil {
			return o, failure{statusOutput, fmt.Errorf("%s: cannot write the draft: %w", s.File, err)}
		}
	}
	if !p.Passed {
		return o, failure{status: statusGate}
	}
	return o, nil
}
