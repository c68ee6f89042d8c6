package main

import (
	"fmt"
	"math"
	"os"

	"github.com/urfave/cli/v2"

	"lobewright/export/pack"
)

// programLimit is the largest NC program read, bytes.
const programLimit = 64 << 20

func proveoutCommand() *cli.Command {
	return &cli.Command{
		Name:      "proveout",
		Usage:     "say what an NC program, ours or one edited by hand, would cut",
		UsageText: "lobewright proveout SPEC PROGRAM.nc\n\nExamples:\n   lobewright proveout samples/stick-lift.yaml release/stick-lift/stick-lift.1-mill.nc\n   lobewright proveout samples/stick-lift.yaml release/stick-lift/stick-lift.1-mill.nc --operation 1 --tool-diameter 15.98",
		Flags: []cli.Flag{
			&cli.IntFlag{Name: "operation", Usage: "operation of the spec, from 1 (default: the program's O number)"},
			&cli.Float64Flag{Name: "tool-diameter", Usage: "diameter of the cutter in the machine, in the spec's units (default: the spec's)"},
			&cli.BoolFlag{Name: "json", Usage: "print JSON"},
			tablesFlag(),
		},
		Action: proveout,
	}
}

func proveout(c *cli.Context) error {
	if c.NArg() != 2 {
		return failure{statusInput, fmt.Errorf("lobewright proveout: found %d arguments; allowed: a spec and a program", c.NArg())}
	}
	d := c.Float64("tool-diameter")
	if c.IsSet("tool-diameter") && !(d > 0 && !math.IsInf(d, 0)) {
		return failure{statusInput, fmt.Errorf("lobewright proveout: found --tool-diameter %v; allowed: a length above 0", d)}
	}
	s, err := readSpec(c, c.Args().Get(0))
	if err != nil {
		return failure{statusInput, err}
	}
	file := c.Args().Get(1)
	data, err := readProgram(file)
	if err != nil {
		return failure{statusInput, err}
	}
	p, err := pack.ProveOut(s, file, data, c.Int("operation"), d, "lobewright "+version)
	if err != nil {
		return failure{statusInput, err}
	}
	if c.Bool("json") {
		out, err := p.JSON()
		if err != nil {
			return failure{statusOutput, err}
		}
		if _, err := c.App.Writer.Write(out); err != nil {
			return failure{statusOutput, err}
		}
	} else {
		fmt.Fprint(c.App.Writer, p.Text(colored(c.App.Writer)))
	}
	if !p.Proven {
		return failure{status: statusGate}
	}
	return nil
}

func readProgram(file string) ([]byte, error) {
	f, err := os.Open(file)
	if err != nil {
		return nil, fmt.Errorf("cannot read the program: %w", err)
	}
	defer f.Close()
	data, err := readAtMost(f, programLimit)
	if err != nil {
		return nil, fmt.Errorf("cannot read the program: %w", err)
	}
	return data, nil
}
