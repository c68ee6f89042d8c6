package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"

	"github.com/urfave/cli/v2"

	"lobewright/export/pack"
	"lobewright/export/sheet"
	"lobewright/synth"
	"lobewright/synth/spec"
)

func releaseCommand() *cli.Command {
	return &cli.Command{
		Name:      "release",
		Usage:     "read a spec, prove every file of its release pack, and place the pack whole",
		UsageText: "lobewright release SPEC... [-o DIR] [--watch]\n\nExamples:\n   lobewright release samples/stick-lift.yaml\n   lobewright release samples/stick-lift.yaml samples/box-pusher.yaml -o out",
		Flags: []cli.Flag{
			&cli.StringFlag{Name: "o", Value: "release", Usage: "folder that receives one folder a part"},
			&cli.StringFlag{Name: "dxf", Value: "2000", Usage: "DXF version: 2000 or r12"},
			&cli.BoolFlag{Name: "json", Usage: "print the report of each spec as JSON"},
			&cli.BoolFlag{Name: "watch", Usage: "release again whenever a spec changes, until interrupted"},
		},
		Action: func(c *cli.Context) error {
			once := func() error { return eachSpec(c, func(s *spec.Spec) error { return release(c, s) }) }
			if c.Bool("watch") && c.NArg() > 0 {
				return watch(c, once)
			}
			return once()
		},
	}
}

// eachSpec runs the job on every spec named; each stands for itself and the exit
// status is the highest.
func eachSpec(c *cli.Context, job func(*spec.Spec) error) error {
	if c.NArg() == 0 {
		return failure{statusInput, fmt.Errorf("lobewright %s: found no spec; name at least one YAML file, for example samples/stick-lift.yaml", c.Command.Name)}
	}
	worst := failure{}
	for _, file := range c.Args().Slice() {
		err := func() error {
			s, err := readSpec(file)
			if err != nil {
				return failure{statusInput, err}
			}
			return job(s)
		}()
		var f failure
		if errors.As(err, &f) {
			if f.err != nil {
				fmt.Fprintln(c.App.ErrWriter, f.err)
			}
			worst.status = max(worst.status, f.status)
		} else if err != nil {
			return err
		}
	}
	if worst.status > 0 {
		return worst
	}
	return nil
}

// fileLimit is the largest file read, bytes: a spec's own limit is lower, a table's as
// high.
const fileLimit = 4 << 20

func readSpec(file string) (*spec.Spec, error) {
	data, err := readFile(file)
	if err != nil {
		return nil, fmt.Errorf("cannot read the spec: %w", err)
	}
	s, err := spec.Read(file, data, synth.Vocabulary())
	if err != nil {
		return nil, err
	}
	return s.Load(data, func(name string) ([]byte, error) { return readFile(beside(file, name)) })
}

// beside is the path of a file that a spec names from its own folder.
func beside(spec, name string) string {
	if filepath.IsAbs(name) {
		return name
	}
	return filepath.Join(filepath.Dir(spec), filepath.FromSlash(name))
}

// readFile reads a file, and no more of it than one byte above the limit.
func readFile(name string) ([]byte, error) {
	f, err := os.Open(name)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	return io.ReadAll(io.LimitReader(f, fileLimit+1))
}

func release(c *cli.Context, s *spec.Spec) error {
	p, err := prove(c, s)
	if err != nil {
		return err
	}
	folder := filepath.Join(c.String("o"), s.Part)
	if !p.Report.Released {
		fmt.Fprintf(c.App.ErrWriter, "%s: refused; nothing was written%s\n", s.File, older(folder))
		return failure{status: statusGate}
	}
	if err := p.Place(c.String("o")); err != nil {
		return failure{statusOutput, fmt.Errorf("%s: cannot write the pack: %w", s.File, err)}
	}
	if !c.Bool("json") {
		fmt.Fprintf(c.App.Writer, "released %s: %d files, each read back or hashed in manifest.json\n", folder, len(p.Files))
	}
	return nil
}

func older(folder string) string {
	if _, err := os.Stat(folder); err == nil {
		return "; the older pack in " + folder + " is left in place"
	}
	return ""
}

// prove runs the job in memory and prints what it found.
func prove(c *cli.Context, s *spec.Spec) (*pack.Pack, error) {
	o := pack.Options{Tool: "lobewright " + version, DXF: "2000", Draft: c.Command.Name == "check"}
	if c.Command.Name == "release" {
		o.DXF = c.String("dxf")
	}
	if o.DXF != "2000" && o.DXF != "r12" {
		return nil, failure{statusInput, fmt.Errorf("lobewright release: found --dxf %q; allowed: 2000, r12%s", o.DXF, nearest(o.DXF, []string{"2000", "r12"}))}
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
		_, err = c.App.Writer.Write(data)
		return p, err
	}
	fmt.Fprint(c.App.Writer, sheet.Text(p.Report, colored(c.App.Writer)))
	return p, nil
}

// colored reports whether the writer is a terminal that wants color.
func colored(w io.Writer) bool {
	f, ok := w.(*os.File)
	if !ok || os.Getenv("NO_COLOR") != "" {
		return false
	}
	info, err := f.Stat()
	return err == nil && info.Mode()&os.ModeCharDevice != 0
}
