package svg

import (
	"fmt"

	"lobewright/synth/plane"
)

// linkage draws arm, face and pivot at lift 0.
func (g *drawing) linkage() {
	l := g.d.Linkage
	if l == nil {
		return
	}
	g.c.doing("follower's arm and face")
	bar := func(ends [2]plane.Point, p pen) {
		if ends[0] != ends[1] {
			g.stroke(g.v.at(ends[0]), g.v.at(ends[1]), p)
		}
	}
	bar(l.Arm, pen{width: 0.35, color: blue})
	bar(l.Face, pen{width: 0.7, color: blue})
	g.c.path(g.v.track(l.Outline, false), pen{width: 0.7, color: blue})
	g.mark(points(l.Outline), g.l.stroke)
	if l.Pivots {
		g.c.doing("pivot")
		const r = 1.2 // mm on the sheet
		g.c.circle(g.v.at(l.Pivot), r, pen{width: 0.35, color: blue, fill: "#ffffff"})
		ring(g.v.at(l.Pivot), r, g.l.edge)
		g.cross(l.Pivot, 2.4)
	}
}

// linkageCallouts name pivot, arm and face.
func (g *drawing) linkageCallouts() []callout {
	l := g.d.Linkage
	if l == nil {
		return nil
	}
	along := func(ends [2]plane.Point, u float64) plane.Point {
		return ends[0].Add(ends[1].Sub(ends[0]).Scale(u))
	}
	var cs []callout
	if l.Pivots {
		cs = append(cs, callout{lines: []string{l.PivotText}, at: l.Pivot, round: 1.2 / g.v.k, away: -60})
	}
	if l.Arm[0] != l.Arm[1] {
		cs = append(cs, callout{lines: []string{l.ArmText}, at: along(l.Arm, 0.4), away: 45})
	}
	if l.Face[0] != l.Face[1] {
		cs = append(cs, callout{lines: []string{l.FaceText}, at: along(l.Face, 0.85), away: 45})
	}
	if n := len(l.Outline); n > 0 {
		cs = append(cs, callout{lines: []string{l.FaceText}, at: l.Outline[n-1].To, away: 45})
	}
	return cs
}

// toolPaths draws the paths of the tools' centers, each in dashes of its own.
func (g *drawing) toolPaths() {
	for i, path := range g.d.ToolPaths {
		g.c.doing(fmt.Sprintf("tool path %d", i+1))
		g.c.path(g.v.track(path, true), pen{width: 0.25, dash: fmt.Sprintf("%d 1", 3+2*i), color: gray})
		g.mark(points(path), g.l.stroke)
	}
}

// toolCallouts name the tool paths.
func (g *drawing) toolCallouts() []callout {
	var cs []callout
	for i, path := range g.d.ToolPaths {
		a := 300 + 18*float64(i)
		cs = append(cs, callout{lines: []string{fmt.Sprintf("TOOL PATH %d", i+1)}, at: nearestPolar(points(path), a), away: a})
	}
	return cs
}
