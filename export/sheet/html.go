package sheet

import (
	"bytes"
	_ "embed"
	"fmt"
	"html/template"
	"slices"
	"strconv"
)

//go:embed sheet.tmpl.html
var page string

//go:embed turn.tmpl.html
var turnPart string

// view is what the template sees.
type view struct {
	Report
	DrawingFigure, MotionFigure, DeviationFigure template.HTML
	Moving                                       *turnView // nil without a moving figure
}

// HTML returns the release sheet: one self-contained page without network or fonts of
// its own; its one script turns the moving figure, and without scripts the page is whole as it stands. It is marked NOT RELEASED unless the report is released. The error
// names a number that is not finite or a figure that is not a plain drawing.
func HTML(r Report, figures Figures) ([]byte, error) {
	if err := r.check(); err != nil {
		return nil, err
	}
	v := view{Report: r}
	for _, f := range []struct {
		prefix string
		svg    []byte
		to     *template.HTML
	}{{"drawing", figures.Drawing, &v.DrawingFigure}, {"motion", figures.Motion, &v.MotionFigure}, {"error", figures.Deviation, &v.DeviationFigure}} {
		var err error
		if *f.to, err = inline(f.prefix, f.svg); err != nil {
			return nil, err
		}
	}
	var err error
	if v.Moving, err = figures.Turn.look(); err != nil {
		return nil, err
	}
	t, err := template.New("sheet").Funcs(functions(r)).Parse(turnPart + page)
	if err != nil {
		return nil, fmt.Errorf("sheet: %w", err)
	}
	var b bytes.Buffer
	if err := t.Execute(&b, v); err != nil {
		return nil, fmt.Errorf("sheet: %w", err)
	}
	return b.Bytes(), nil
}

// functions are the template's ways of printing.
func functions(r Report) template.FuncMap {
	return template.FuncMap{
		"verdict":  r.verdict,
		"unit":     r.short,
		"liftunit": r.liftUnit,
		"failed":   r.failed,
		"plain":    plain,
		"value":    func(v float64) string { return sig(v, valueFigures) },
		"maybe":    func(v *float64) string { return maybe(v, valueFigures) },
		"error":    func(v float64) string { return sig(v, errorFigures) },
		"signed":   func(v float64) string { return signed(v, errorFigures) },
		"offset":   func(v float64) string { return offset(v, r.Units) },
		"large":    func(v float64) string { return sig(v, largeFigures) },
		"angle":    angle,
		"degrees":  func(v float64) string { return sig(v, valueFigures) },
		"percent":  percent,
		"duration": duration,
		"size":     size,
		"bound":    func(g Gate) string { return map[string]string{">=": "≥", "<=": "≤"}[g.bound()] },
		"count":    count,
		"half":     func(v float64) float64 { return v / 2 },
		"minus":    func(v float64) float64 { return 0 - v },
		"sum":      func(a, b int) int { return a + b },
		"failing":  r.failing,
		"hash":     r.hash,
		"gated":    func(kind string) bool { return kind == r.Budget.Combine },
		"followed": r.followed,
		"micro":    func(v float64) string { return micro(v, r.Units) },
		"every":    func(p Probe) int { return (p.Rows + len(p.Shown) - 1) / len(p.Shown) },
		"blocks":   blocks,
		"fail":     func(v, limit float64) bool { return v > limit },
	}
}

// count prints a whole number that may not exist.
func count(n *int) string {
	if n == nil {
		return "-"
	}
	return strconv.Itoa(*n)
}

// offset prints a register value the way a setter enters it: signed, with the
// decimals a control shows.
func offset(v float64, units string) string {
	decimals := 3
	if units == "inch" {
		decimals = 4
	}
	s := strconv.FormatFloat(v+0, 'f', decimals, 64)
	if v >= 0 {
		return "+" + s
	}
	return s
}

// micro prints a length of the probe's table: a tenth of a micrometer, or ten millionths of an inch.
func micro(v float64, units string) string {
	decimals := 4
	if units == "inch" {
		decimals = 5
	}
	return strconv.FormatFloat(v+0, 'f', decimals, 64)
}

// blocks parts the rows of the probe's table so that each block stays on a printed page.
func blocks(rows []ProbeRow) [][]ProbeRow {
	const most = 30
	return slices.Collect(slices.Chunk(rows, most))
}

// failing are the gates that refuse.
func (r Report) failing() []Gate {
	return slices.DeleteFunc(slices.Clone(r.Gates), func(g Gate) bool { return g.Pass })
}

// hash is the SHA-256 of a file, empty when it is not known here.
func (r Report) hash(name string) string {
	for _, f := range r.FileHashes {
		if f.Name == name {
			return f.SHA256
		}
	}
	return ""
}

// ran is a row of the table of what the follower would do.
type ran struct {
	Name string
	Follower
}

// hasPath reports whether the written path of a file stands among the paths.
func (r Report) hasPath(file string) bool {
	return slices.ContainsFunc(r.Paths, func(p Path) bool { return p.File == file })
}

// followed lists every path a follower runs on.
func (r Report) followed() []ran {
	var rows []ran
	for _, p := range r.Paths {
		if p.Follower != nil {
			rows = append(rows, ran{p.File + ", " + p.Curve, *p.Follower})
		}
	}
	for _, o := range r.Operations {
		if o.Follower != nil && !r.hasPath(o.File) {
			rows = append(rows, ran{o.File, *o.Follower})
		}
	}
	return rows
}
