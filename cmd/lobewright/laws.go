package main

import (
	"encoding/json"
	"fmt"
	"math"

	"github.com/urfave/cli/v2"

	"lobewright/synth/motion"
)

// lawRow is one law with its peak factors; nil is infinite.
type lawRow struct {
	Law          string   `json:"law"`
	Velocity     float64  `json:"peak_velocity_factor"`
	Acceleration *float64 `json:"peak_acceleration_factor"`
	Jerk         *float64 `json:"peak_jerk_factor"`
	Torque       *float64 `json:"peak_inertia_torque_factor"`
}

func lawsCommand() *cli.Command {
	return &cli.Command{
		Name:      "laws",
		Usage:     "print the motion laws with their peak factors",
		UsageText: "lobewright laws [--json]\n\nExamples:\n   lobewright laws\n   lobewright laws --json",
		Flags:     []cli.Flag{&cli.BoolFlag{Name: "json", Usage: "print JSON"}},
		Action: func(c *cli.Context) error {
			if c.NArg() > 0 {
				return failure{statusInput, fmt.Errorf("lobewright laws: found %q; allowed: no arguments", c.Args().First())}
			}
			rows, err := lawRows()
			if err != nil {
				return err
			}
			if c.Bool("json") {
				e := json.NewEncoder(c.App.Writer)
				e.SetIndent("", "  ")
				return e.Encode(rows)
			}
			printLaws(c, rows)
			return nil
		},
	}
}

func lawRows() ([]lawRow, error) {
	finite := func(x float64) *float64 {
		if math.IsInf(x, 0) {
			return nil
		}
		return &x
	}
	var rows []lawRow
	for _, n := range motion.Names() {
		l, err := motion.Named(n, motion.DefaultConstantShare)
		if err != nil {
			return nil, err
		}
		p := l.Peaks()
		rows = append(rows, lawRow{n, p.Velocity, finite(p.Acceleration), finite(p.Jerk), finite(p.Torque)})
	}
	return rows, nil
}

func printLaws(c *cli.Context, rows []lawRow) {
	show := func(x *float64) string {
		if x == nil {
			return "infinite"
		}
		return fmt.Sprintf("%.6f", *x)
	}
	w := c.App.Writer
	fmt.Fprintf(w, "%-28s %10s %12s %12s %12s\n", "law", "velocity", "acceleration", "jerk", "torque")
	for _, r := range rows {
		fmt.Fprintf(w, "%-28s %10.6f %12s %12s %12s\n", r.Law, r.Velocity, show(r.Acceleration), show(r.Jerk), show(r.Torque))
	}
	fmt.Fprintln(w, "\nFor a rise h over an angle B in radians at w rad/s: velocity x h w/B,")
	fmt.Fprintln(w, "acceleration x h w²/B², jerk x h w³/B³, inertia torque (velocity times")
	fmt.Fprintln(w, "acceleration) x h² w³/B³. modified-constant-velocity is shown with")
	fmt.Fprintln(w, "constant_share 0.5; trigonometric (sine, constant, cosine) takes its own.")
}
