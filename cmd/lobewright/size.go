package main

import (
	"encoding/json"
	"fmt"
	"math"

	"github.com/urfave/cli/v2"

	"lobewright/synth"
	"lobewright/synth/spec"
)

func sizeCommand() *cli.Command {
	return &cli.Command{
		Name:      "size",
		Usage:     "find the smallest base radius (and a free offset) that meets the limits; change nothing",
		UsageText: "lobewright size SPEC [--json] [--scale-linkage]\n\nExamples:\n   lobewright size samples/box-pusher.yaml\n   lobewright size samples/box-pusher.yaml --json",
		Flags: []cli.Flag{&cli.BoolFlag{Name: "json", Usage: "print JSON"},
			&cli.BoolFlag{Name: "scale-linkage", Usage: "let pivot_distance, arm_length and face of a swinging follower grow with the base radius"}, tablesFlag()},
		Action: func(c *cli.Context) error {
			if c.NArg() != 1 {
				return failure{statusInput, fmt.Errorf("lobewright size: found %d arguments; allowed: one spec", c.NArg())}
			}
			s, err := readSpec(c, c.Args().First())
			if err != nil {
				return failure{statusInput, err}
			}
			size := synth.Size
			if c.Bool("scale-linkage") {
				size = synth.SizeScaled
			}
			z, err := size(s)
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

// undecided is the share of the base radius that the proof may leave below the answer without
// a word.
const undecided = 2e-3

// sizeJSON is what --json prints.
type sizeJSON struct {
	Part       string        `json:"part"`
	Units      string        `json:"units"`
	BaseRadius float64       `json:"base_radius"`
	Binds      string        `json:"binds"`
	Excluded   float64       `json:"excluded_up_to"` // every smaller base radius down to "smallest_sensible" is proven to fail
	Floor      float64       `json:"smallest_sensible"`
	Limits     []sizeLimitJS `json:"limits"`
	Offset     *float64      `json:"best_offset,omitempty"` // only of a free offset; found by search
	Arm        *float64      `json:"arm_length,omitempty"`  // only with --scale-linkage
	Pivot      *float64      `json:"pivot_distance,omitempty"`
	Rows       []sizeRowJS   `json:"trade_off"`
}

type sizeLimitJS struct {
	ID       string  `json:"id"`
	Least    float64 `json:"least_base_radius"`
	CamAngle float64 `json:"cam_angle"`

	Margin *float64 `json:"margin"` // left at base_radius; null when nothing there needs the limit
	Unit   string   `json:"unit"`
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
		x := sizeLimitJS{ID: l.ID, Least: l.Least, CamAngle: l.CamAngle, Unit: l.Unit}
		if !math.IsInf(l.Margin, 0) {
			x.Margin = &l.Margin
		}
		out.Limits = append(out.Limits, x)
	}
	if z.OffsetFree {
		out.Offset = &z.BestOffset
	}
	if z.Scaled {
		out.Arm, out.Pivot = &z.ArmLength, &z.PivotDistance
	}
	for _, r := range z.Rows {
		out.Rows = append(out.Rows, sizeRowJS(r))
	}
	return out
}

func printSize(c *cli.Context, s *spec.Spec, z synth.Sizing) {
	w, u := c.App.Writer, s.Units.Short()
	fmt.Fprintf(w, "%s: smallest base radius %.6g %s (the spec has %g); %s binds\n", s.Part, z.BaseRadius, u, s.Cam.BaseRadius, z.Binds)
	if z.OffsetFree {
		fmt.Fprintf(w, "with follower.offset %g %s: of the offsets tried (a scan, then golden section between the best one's neighbors) it allows the smallest base radius\n", z.BestOffset, u)
	}
	if z.Scaled {
		fmt.Fprintf(w, "with pivot and arm in proportion: pivot_distance %.6g %s", z.PivotDistance, u)
		if z.ArmLength > 0 {
			fmt.Fprintf(w, ", arm_length %.6g %s", z.ArmLength, u)
		}
		fmt.Fprintln(w)
	}
	if z.Excluded > z.Floor {
		if z.Excluded < z.BaseRadius*(1-undecided) {
			fmt.Fprintf(w, "from %.6g %s to the answer the search found none that meets the limits, but not every radius is proven to fail\n", z.Excluded, u)
		}
		fmt.Fprintf(w, "every base radius from %.6g to %.6g %s is proven to fail\n\n", z.Floor, z.Excluded, u)
	} else {
		fmt.Fprintf(w, "below it no cam is looked for: it would leave no room for the bore, or the follower could not stand\n\n")
	}
	fmt.Fprintf(w, "%-24s %14s %12s   %s\n", "limit", "asks for", "cam angle", "left at the smallest")
	for _, l := range z.Limits {
		left := "nothing needs it"
		if !math.IsInf(l.Margin, 0) {
			left = fmt.Sprintf("%.4g %s", l.Margin, l.Unit)
		}
		fmt.Fprintf(w, "%-24s %11.6g %-2s %11.2f°   %s\n", l.ID, l.Least, u, l.CamAngle, left)
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
