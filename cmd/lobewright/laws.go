package main

import (
	"encoding/json"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"github.com/urfave/cli/v2"

	"lobewright/synth/motion"
)

// lawRow is one law with its peak factors; nil is infinite.
type lawRow struct {
	Law          string   `json:"law"`
	With         string   `json:"with,omitempty"` // the key that makes it a half law
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

func newLawRow(name, with string, l motion.Law) lawRow {
	finite := func(x float64) *float64 {
		if math.IsInf(x, 0) {
			return nil
		}
		return &x
	}
	p := l.Peaks()
	return lawRow{name, with, p.Velocity, finite(p.Acceleration), finite(p.Jerk), finite(p.Torque)}
}

// lawRows are the whole laws, then the half laws from rest to speed; those back
// mirror them.
func lawRows() ([]lawRow, error) {
	var rows []lawRow
	for _, n := range motion.Names() {
		l, err := motion.Named(n, motion.DefaultConstantShare)
		if err != nil {
			return nil, err
		}
		rows = append(rows, newLawRow(n, "", l))
	}
	for _, n := range motion.HalfNames() {
		l, err := motion.FromRest(n)
		if err != nil {
			return nil, err
		}
		rows = append(rows, newLawRow(n, "to_velocity", l))
	}
	return rows, nil
}

func printLaws(c *cli.Context, rows []lawRow) {
	const digits = 12 // significant
	number := func(x float64) string { return strconv.FormatFloat(x, 'g', digits, 64) }
	show := func(x *float64) string {
		if x == nil {
			return "infinite"
		}
		return number(*x)
	}
	w := c.App.Writer
	fmt.Fprintf(w, "%-28s %13s %13s %13s %13s\n", "law", "velocity", "acceleration", "jerk", "torque")
	for _, r := range rows {
		name := r.Law
		if r.With != "" {
			name += ", " + r.With
		}
		fmt.Fprintf(w, "%-28s %13s %13s %13s %13s\n", name, number(r.Velocity), show(r.Acceleration), show(r.Jerk), show(r.Torque))
	}
	fmt.Fprintln(w, "\nFor a rise h over an angle B in radians at w rad/s: velocity x h w/B,")
	fmt.Fprintln(w, "acceleration x h w²/B², jerk x h w³/B³, inertia torque (velocity times")
	fmt.Fprintln(w, "acceleration) x h² w³/B³. modified-constant-velocity is shown with")
	fmt.Fprintln(w, "constant_share 0.5; trigonometric (sine, constant, cosine) takes its own.")
	fmt.Fprintln(w, "\ninflection: p keeps the peak velocity; before it the acceleration is 1/2p times,")
	fmt.Fprintln(w, "the jerk 1/4p² times that above, after it with 1-p for p. It is taken by all laws but")
	fmt.Fprintln(w, strings.Join(withoutInflection(), " and ")+". With to_velocity or from_velocity a law is")
	fmt.Fprintln(w, "run by half, from rest to speed or back; any velocities are met by law: polynomial.")
}

func withoutInflection() []string {
	return slices.DeleteFunc(motion.Names(), func(name string) bool { return slices.Contains(motion.SymmetricNames(), name) })
}
