package main

import (
	"encoding/json"
	"fmt"

	"github.com/urfave/cli/v2"

	"lobewright/synth"
	"lobewright/synth/spec"
)

func sizeCommand() *cli.Command {
	return &cli.Command{
		Name:      "size",
		Usage:     "find the smallest base radius that meets the limits; change nothing",
		UsageText: "lobewright size SPEC [--json]\n\nExamples:\n   lobewright size samples/box-pusher.yaml\n   lobewright size samples/box-pusher.yaml --json",
		Flags:     []cli.Flag{&cli.BoolFlag{Name: "json", Usage: "print JSON"}},
		Action: func(c *cli.Context) error {
			if c.NArg() != 1 {
				return failure{statusInput, fmt.Errorf("lobewright size: found %d arguments; allowed: one spec", c.NArg())}
			}
			s, err := readSpec(c.Args().First())
			if err != nil {
				return failure{statusInput, err}
			}
			z, err := synth.Size(s)
			if err != nil {
				return failure{statusInput, err}
			}
			if c.Bool("json") {
				e := json.NewEncoder(c.App.Writer)
				e.SetIndent("", "  ")
				return e.Encode(sizeFacts(s, z))
			}
			printSize(c, s, z)
			return nil
		},
	}
}

// sizeJSON is what --json prints.
type sizeJSON struct {
	Part       string        `json:"part"`
	Units      string        `json:"units"`
	BaseRadius float64       `json:"base_radius"`
	Binds      string        `json:"binds"`
	Excluded   float64       `json:"excluded_up_to"` // every smaller base radius down to "smallest_sensible" is proven to fail
	Floor      float64       `json:"smallest_sensible"`
	Limits     []sizeLimitJS `json:"limits"`
	Rows       []sizeRowJS   `json:"trade_off"`
}

type sizeLimitJS struct {
	ID       string  `json:"id"`
	Least    float64 `json:"least_base_radius"`
	CamAngle float64 `json:"cam_angle"`
}

type sizeRowJS struct {
	BaseRadius    float64 `json:"base_radius"`
	PressureAngle float64 `json:"pressure_angle"`
	ConvexRadius  float64 `json:"least_convex_radius"`
	Pass          bool    `json:"pass"`
}

func sizeFacts(s *spec.Spec, z synth.Sizing) sizeJSON {
	out := sizeJSON{Part: s.Part, Units: string(s.Units), BaseRadius: z.BaseRadius, Binds: z.Binds, Excluded: z.Excluded, Floor: z.Floor}
	for _, l := range z.Limits {
		out.Limits = append(out.Limits, sizeLimitJS(l))
	}
	for _, r := range z.Rows {
		out.Rows = append(out.Rows, sizeRowJS(r))
	}
	return out
}

func printSize(c *cli.Context, s *spec.Spec, z synth.Sizing) {
	w, u := c.App.Writer, s.Units.Short()
	fmt.Fprintf(w, "%s: smallest base radius %.6g %s (the spec has %g); %s binds\n", s.Part, z.BaseRadius, u, s.Cam.BaseRadius, z.Binds)
	fmt.Fprintf(w, "every base radius from %.6g to %.6g %s is proven to fail\n\n", z.Floor, z.Excluded, u)
	fmt.Fprintf(w, "%-24s %14s %12s\n", "limit", "asks for", "cam angle")
	for _, l := range z.Limits {
		fmt.Fprintf(w, "%-24s %11.6g %-2s %11.2f°\n", l.ID, l.Least, u, l.CamAngle)
	}
	fmt.Fprintf(w, "\n%14s %16s %22s\n", "base radius", "pressure angle", "least convex radius")
	for _, r := range z.Rows {
		verdict := "fails"
		if r.Pass {
			verdict = "meets the limits"
		}
		fmt.Fprintf(w, "%11.6g %-2s %15.2f° %19.5g %-2s  %s\n", r.BaseRadius, u, r.PressureAngle, r.ConvexRadius, u, verdict)
	}
	fmt.Fprintln(w, "\nWalls, blank and stress are not limits of this search; run check on the size you choose.")
}
