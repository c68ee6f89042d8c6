package main

import (
	"fmt"

	"github.com/urfave/cli/v2"

	"lobewright/synth/spec"
)

func newCommand() *cli.Command {
	return &cli.Command{
		Name:      "new",
		Usage:     "print a commented starter spec that releases as it stands",
		UsageText: "lobewright new [KIND]\n\nExamples:\n   lobewright new > my-cam.yaml\n   lobewright new barrel",
		Action: func(c *cli.Context) error {
			if c.NArg() > 1 {
				return failure{statusInput, fmt.Errorf("lobewright new: found %d arguments; allowed: one kind at most", c.NArg())}
			}
			text, err := spec.Starter(c.Args().First())
			if err != nil {
				return failure{statusInput, fmt.Errorf("lobewright new: %w", err)}
			}
			_, err = fmt.Fprint(c.App.Writer, text)
			return err
		},
	}
}
