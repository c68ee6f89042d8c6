package pack

import (
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// ncMove is a feed move read by nothing but this file.
type ncMove struct {
	path chain.Element
	z    float64
}

var ncWord = regexp.MustCompile(`([A-Z])(-?[0-9.]+)`)

// ncMoves reads the feed moves of a program with incremental centers, and counts its blocks.
func ncMoves(data []byte) (moves []ncMove, blocks int) {
	var x, y, z float64
	g := 0
	for _, line := range strings.Split(string(data), "\n") {
		line, _, _ = strings.Cut(line, "(")
		words := ncWord.FindAllStringSubmatch(line, -1)
		if len(words) == 0 {
			continue
		}
		blocks++
		nx, ny, i, j, motion := x, y, 0.0, 0.0, false
		for _, w := range words {
			v, _ := strconv.ParseFloat(w[2], 64)
			switch w[1] {
			case "G":
				if v <= 3 {
					g = int(v)
				}
			case "X":
				nx, motion = v, true
			case "Y":
				ny, motion = v, true
			case "Z":
				z, motion = v, true
			case "I":
				i = v
			case "J":
				j = v
			}
		}
		e := chain.Element{Kind: chain.Line, From: plane.Point{X: x, Y: y}, To: plane.Point{X: nx, Y: ny}}
		if g >= 2 {
			e.Kind, e.Center, e.CCW = chain.Arc, plane.Point{X: x + i, Y: y + j}, g == 3
		}
		if motion && g >= 1 {
			moves = append(moves, ncMove{e, z})
		}
		x, y = nx, ny
	}
	return moves, blocks
}

// fromTheFile works a gate's value out from the bytes of the program, with sampling instead
// of proof. It returns the value and how far the gate's may be from it.
func fromTheFile(t *testing.T, id string, j *job) (value, slack float64) {
	t.Helper()
	p := j.programs[0]
	moves, blocks := ncMoves(p.data)
	switch id {
	case "block-count":
		return float64(blocks), 0
	case "arc-mismatch":
		for _, m := range moves {
			if m.path.Kind == chain.Arc {
				value = math.Max(value, math.Abs(m.path.From.Dist(m.path.Center)-m.path.To.Dist(m.path.Center)))
			}
		}
		return value, 1e-9
	case "deviation":
		// The bound holds for every way a control may resolve an arc whose end radii
		// differ; sampling follows one of them.
		return farthest(p.finish.exact, p.finish.path), 0.02*j.chord + 2*p.result.ArcMismatch
	case "clearance":
		var contour []plane.Point
		for deg := 0.0; deg < 360; deg += 0.5 {
			zone, at := j.cam.Cycle().Zone(deg)
			contour = append(contour, j.cam.Contour().At(zone, at).P)
		}
		value = math.Inf(1)
		for _, m := range moves {
			for k := range 201 {
				if m.z < 0 {
					q := m.path.PointAt(float64(k) / 200)
					for _, c := range contour {
						value = math.Min(value, c.Dist(q))
					}
				}
			}
		}
		return value, 0.02
	}
	t.Fatalf("no figure for %s", id)
	return 0, 0
}
