// Command lobewright turns a cam's motion specification into parts: the exact
// contour, the DXF, the drawing, the NC programs, the inspection table and the
// release sheet, each read back and proven before it is placed.
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"

	"github.com/urfave/cli/v2"
)

// version is the product's version, as printed and as written into every pack.
const version = "0.1.0"

// Exit status, as the contract with users has it.
const (
	statusDone   = 0
	statusGate   = 1 // the spec is sound but a gate fails
	statusInput  = 2 // the command line, the spec or another input file is wrong
	statusOutput = 3 // the output could not be written
)

// failure carries an exit status. An err of nil means everything has been said.
type failure struct {
	status int
	err    error
}

func (f failure) Error() string {
	if f.err == nil {
		return ""
	}
	return f.err.Error()
}

func (f failure) Unwrap() error { return f.err }

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	defer stop()
	os.Exit(runContext(ctx, os.Args, os.Stdout, os.Stderr))
}

// run is runContext without an end from outside.
func run(args []string, stdout, stderr io.Writer) int {
	return runContext(context.Background(), args, stdout, stderr)
}

// runContext is the program without the process: messages to stderr, results to
// stdout, the exit status returned. It is the one place where errors are printed.
// The end of ctx ends a watch.
func runContext(ctx context.Context, args []string, stdout, stderr io.Writer) int {
	app := application(stdout, stderr)
	args, err := reorder(app, args)
	if err == nil {
		err = app.RunContext(ctx, args)
	}
	if err == nil {
		return statusDone
	}
	var f failure
	if !errors.As(err, &f) {
		f = failure{statusInput, err}
	}
	if f.err != nil {
		fmt.Fprintln(stderr, f.err)
	}
	return f.status
}

func application(stdout, stderr io.Writer) *cli.App {
	app := &cli.App{
		Name:            "lobewright",
		Usage:           "from a cam's motion specification to parts that prove themselves",
		Version:         version,
		HideHelpCommand: true,
		Writer:          stdout,
		ErrWriter:       stderr,
		ExitErrHandler:  func(*cli.Context, error) {},
		Commands:        []*cli.Command{releaseCommand(), checkCommand(), sizeCommand(), proveoutCommand(), lawsCommand(), evidenceCommand(), newCommand(), schemaCommand(), completionCommand()},
		Action: func(c *cli.Context) error {
			if c.NArg() == 0 {
				return cli.ShowAppHelp(c)
			}
			return failure{statusInput, unknownCommand(c.App, c.Args().First())}
		},
	}
	app.OnUsageError = usageError
	for _, c := range app.Commands {
		c.OnUsageError = usageError
		c.HideHelpCommand = true
	}
	return app
}

func usageError(c *cli.Context, err error, _ bool) error {
	return failure{statusInput, fmt.Errorf("lobewright %s: %w; see lobewright %s --help", c.Command.Name, err, c.Command.Name)}
}

func unknownCommand(app *cli.App, name string) error {
	var names []string
	for _, c := range app.Commands {
		names = append(names, c.Name)
	}
	return fmt.Errorf("lobewright: found command %q; allowed: %s%s", name, list(names), nearest(name, names))
}
