package main

import (
	"fmt"
	"slices"
	"strings"

	"github.com/urfave/cli/v2"
)

// reorder moves flags before the arguments of a command, so that they may stand
// on either side: the command-line library silently ignores a flag that follows
// an argument. "--" ends the flags. Unknown flags are refused here, with the
// nearest name.
func reorder(app *cli.App, args []string) ([]string, error) {
	if len(args) < 2 {
		return args, nil
	}
	i := slices.IndexFunc(app.Commands, func(c *cli.Command) bool { return c.HasName(args[1]) })
	if i < 0 {
		if name := args[1]; strings.HasPrefix(name, "-") && !slices.Contains([]string{"-h", "--help", "-v", "--version"}, name) {
			return nil, failure{statusInput, fmt.Errorf("lobewright: found flag %s; allowed here: --help, --version, or a command first%s", name, nearest(name, []string{"--help", "--version"}))}
		}
		return args, nil
	}
	cmd, flags, rest := app.Commands[i], []string{}, []string{}
	for k := 2; k < len(args); k++ {
		a := args[k]
		if a == "--" {
			rest = append(rest, args[k+1:]...)
			break
		}
		if !strings.HasPrefix(a, "-") || a == "-" {
			rest = append(rest, a)
			continue
		}
		takes, err := flagTakes(cmd, a)
		if err != nil {
			return nil, err
		}
		flags = append(flags, a)
		if takes && !strings.Contains(a, "=") {
			if k++; k == len(args) || strings.HasPrefix(args[k], "-") {
				return nil, failure{statusInput, fmt.Errorf("lobewright %s: flag %s needs a value after it", cmd.Name, a)}
			}
			flags = append(flags, args[k])
		}
	}
	return append(append(append(slices.Clone(args[:2]), flags...), "--"), rest...), nil
}

// flagTakes reports whether a flag of the command takes a value.
func flagTakes(cmd *cli.Command, arg string) (bool, error) {
	name, _, _ := strings.Cut(strings.TrimLeft(arg, "-"), "=")
	known := []string{"--help"}
	for _, f := range cmd.Flags {
		for _, n := range f.Names() {
			if n == name {
				_, isBool := f.(*cli.BoolFlag)
				return !isBool, nil
			}
			known = append(known, dashed(n))
		}
	}
	if name == "help" || name == "h" {
		return false, nil
	}
	return false, failure{statusInput, fmt.Errorf("lobewright %s: found flag %s; allowed: %s%s", cmd.Name, arg, list(known), nearest(dashed(name), known))}
}

func dashed(n string) string {
	if len(n) == 1 {
		return "-" + n
	}
	return "--" + n
}

// list prints names in order, with commas.
func list(names []string) string {
	names = slices.Clone(names)
	slices.Sort(names)
	return strings.Join(names, ", ")
}

// nearest returns "; did you mean X?" for a name at most two edits away.
func nearest(name string, names []string) string {
	best, least := "", 3
	for _, n := range names {
		if d := edits(name, n); d < least {
			best, least = n, d
		}
	}
	if best == "" {
		return ""
	}
	return fmt.Sprintf("; did you mean %s?", best)
}

// edits is the Levenshtein distance (V. I. Levenshtein, 1966).
func edits(a, b string) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range len(a) {
		diagonal := row[0]
		row[0] = i + 1
		for j := range len(b) {
			cost := diagonal
			if a[i] != b[j] {
				cost++
			}
			diagonal = row[j+1]
			row[j+1] = min(cost, row[j]+1, row[j+1]+1)
		}
	}
	return row[len(b)]
}
