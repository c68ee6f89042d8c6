package main

import (
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"github.com/urfave/cli/v2"

	"lobewright/export/pack"
	"lobewright/export/sheet"
	"lobewright/synth/spec"
)

func releaseCommand() *cli.Command {
	return &cli.Command{
		Name:      "release",
		Usage:     "read a spec, prove every file of its release pack, and place the pack whole",
		UsageText: "lobewright release SPEC... [-o DIR] [--dxf 2000|r12] [--sheet A4|A3|Letter] [--watch]\n\nExamples:\n   lobewright release samples/stick-lift.yaml\n   lobewright release samples/stick-lift.yaml samples/box-pusher.yaml -o out",
		Flags: append([]cli.Flag{
			&cli.StringFlag{Name: "o", Value: "release", Usage: "folder that receives one folder a part"},
			&cli.StringFlag{Name: "dxf", Value: "2000", Usage: "DXF version: 2000 or r12"},
			&cli.BoolFlag{Name: "json", Usage: "print the report of each spec as JSON"},
			&cli.BoolFlag{Name: "watch", Usage: "release again whenever a spec changes, until interrupted"},
			tablesFlag(),
		}, drawingFlags()...),
		Action: func(c *cli.Context) error {
			once := func() error {
				return eachSpec(c, func(w printer, s *spec.Spec) (sheet.Outcome, error) { return release(c, w, s) })
			}
			if c.Bool("watch") && c.NArg() > 0 {
				return watch(c, once)
			}
			return once()
		},
	}
}

func release(c *cli.Context, w printer, s *spec.Spec) (sheet.Outcome, error) {
	p, err := prove(c, w, s)
	if err != nil {
		return sheet.Outcome{}, err
	}
	folder := filepath.Join(c.String("o"), s.Part)
	o := sheet.Judged(p.Report, "RELEASED", "REFUSED")
	if !p.Report.Released {
		fmt.Fprintf(w.messages, "%s: refused; nothing was written%s\n", s.File, older(folder))
		return o, failure{status: statusGate}
	}
	if err := p.Place(c.String("o")); err != nil {
		return sheet.Outcome{}, failure{statusOutput, fmt.Errorf("%s: cannot write the pack: %w", s.File, err)}
	}
	if !c.Bool("json") {
		fmt.Fprintf(w.out, "released %s: %d files, each read back or hashed in manifest.json\n", folder, len(p.Files))
	}
	return o, nil
}

func older(folder string) string {
	if _, err := os.Stat(folder); err == nil {
		return "; the older pack in " + folder + " is left in place"
	}
	return ""
}

// prove runs the job in memory and prints what it found.
func prove(c *cli.Context, w printer, s *spec.Spec) (*pack.Pack, error) {
	o, err := packOptions(c)
	if err != nil {
		return nil, err
	}
	p, err := pack.Make(s, o)
	if err != nil {
		return nil, failure{statusInput, err}
	}
	if c.Bool("json") {
		data, err := p.Report.JSON()
		if err != nil {
			return nil, failure{statusOutput, err}
		}
		_, err = w.out.Write(data)
		return p, err
	}
	fmt.Fprint(w.out, sheet.Text(p.Report, w.color))
	return p, nil
}

// packOptions are the flags that change a pack.
func packOptions(c *cli.Context) (pack.Options, error) {
	o := pack.Options{Tool: "lobewright " + version, DXF: "2000", Draft: c.Command.Name == "check", Sheet: c.String("sheet"), ToolPaths: c.Bool("tool-paths")}
	if c.Command.Name == "release" {
		o.DXF = c.String("dxf")
	}
	if err := oneOf(c, "dxf", o.DXF, "2000", "r12"); err != nil {
		return o, err
	}
	if o.Sheet == "" {
		return o, nil
	}
	return o, oneOf(c, "sheet", o.Sheet, "A4", "A3", "Letter")
}

// oneOf refuses a flag's value that is none of the words.
func oneOf(c *cli.Context, flag, value string, words ...string) error {
	if slices.Contains(words, value) {
		return nil
	}
	return failure{statusInput, fmt.Errorf("lobewright %s: found --%s %q; allowed: %s%s", c.Command.Name, flag, value, strings.Join(words, ", "), nearest(value, words))}
}

// drawingFlags are those of the commands that draw.
func drawingFlags() []cli.Flag {
	return []cli.Flag{
		&cli.StringFlag{Name: "sheet", Usage: "sheet of the drawing: A4, A3 or Letter (default: what units and size ask for)"},
		&cli.BoolFlag{Name: "tool-paths", Usage: "show the tools' center paths on the drawing"},
	}
}
