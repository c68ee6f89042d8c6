package main

import (
	"fmt"

	"github.com/urfave/cli/v2"

	"lobewright/synth"
	"lobewright/synth/spec"
)

func schemaCommand() *cli.Command {
	return &cli.Command{
		Name:      "schema",
		Usage:     "print the JSON Schema of the spec, for editors",
		UsageText: "lobewright schema\n\nExamples:\n   lobewright schema > cam.schema.json\n   lobewright schema | head",
		Action: func(c *cli.Context) error {
			if c.NArg() > 0 {
				return failure{statusInput, fmt.Errorf("lobewright schema: found %q; allowed: no arguments", c.Args().First())}
			}
			_, err := c.App.Writer.Write(spec.Schema(synth.Vocabulary()))
			return err
		},
	}
}
