package pack

import (
	"fmt"
	"math"

	"lobewright/export/svg"
	"lobewright/synth/follower"
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// linkageAtRest returns the lines of the follower's arm, from the pivot on, and of its face at lift 0, cam frame; none for a
// follower that is a center on a line.
func (j *job) linkageAtRest() (arm, face [][2]plane.Point) {
	rest := j.cam.AtRest()
	pivot := plane.Point{X: j.spec.Follower.PivotDistance}
	switch f := j.cam.Follower().(type) {
	case follower.TranslatingFlat:
		half := plane.Vector{Y: f.FaceWidth / 2}
		face = [][2]plane.Point{{rest.Add(half), rest.Add(half.Neg())}}
	case follower.SwingingRoller:
		arm = [][2]plane.Point{{pivot, rest}}
	case follower.SwingingFlat:
		normal := plane.Vector(rest).Unit() // at lift 0 the face is tangent to the base circle
		foot := pivot.Add(normal.Scale(-f.FaceOffset))
		along := rest.Sub(foot).Unit()
		from, to := foot.Add(along.Scale(f.From)), foot.Add(along.Scale(f.To))
		arm, face = [][2]plane.Point{{pivot, foot}, {foot, from}}, [][2]plane.Point{{from, to}}
	}
	return arm, face
}

// linkageData is what the drawing shows of it: the arm as one line from the pivot.
func (j *job) linkageData() *svg.Linkage {
	if path, text := j.headAtRest(); path != nil {
		return &svg.Linkage{Outline: path, FaceText: text}
	}
	arm, face := j.linkageAtRest()
	if len(arm)+len(face) == 0 || j.drum() {
		return nil
	}
	f := j.spec.Follower
	l := &svg.Linkage{Pivots: j.cam.Swings(), Pivot: plane.Point{X: f.PivotDistance},
		PivotText: fmt.Sprintf("PIVOT, %.6g FROM THE AXIS", f.PivotDistance)}
	sense := "LEADING"
	if j.trails() {
		sense = "TRAILING"
	}
	if len(arm) > 0 {
		l.Arm = [2]plane.Point{l.Pivot, arm[len(arm)-1][1]}
		l.ArmText = fmt.Sprintf("ARM %.6g, %s", f.ArmLength, sense)
	}
	if len(face) > 0 {
		l.Face = face[0]
		l.FaceText = fmt.Sprintf("FACE %.6g WIDE AT LIFT 0", f.FaceWidth)
	}
	if f.Kind == "swinging-flat" {
		l.ArmText = "ARM, " + sense
		l.FaceText = fmt.Sprintf("FACE AT LIFT 0, %.6g FROM THE PIVOT", f.FaceOffset)
	}
	return l
}

// headAtRest is what touches the cam at lift 0 where that is no roller and no line, and what it is called:
// a mushroom's face within its head, a knife's edge with a piece of its flanks. Else nothing.
func (j *job) headAtRest() (chain.Path, string) {
	f, at := j.spec.Follower, j.cam.AtRest()
	switch f.Kind {
	case "translating-mushroom":
		half := f.HeadDiameter / 2
		back := math.Sqrt(math.Max(0, f.FaceRadius*f.FaceRadius-half*half))
		low, high := at.Add(plane.Vector{X: -back, Y: -half}), at.Add(plane.Vector{X: -back, Y: half})
		return chain.Path{{Kind: chain.Arc, From: low, To: high, Center: at}}, fmt.Sprintf("FACE R%.6g, HEAD Ø%.6g, AT LIFT 0", f.FaceRadius, f.HeadDiameter)
	case "translating-knife":
		long := j.spec.Cam.BaseRadius / 5
		low, high := at.Add(plane.Vector{X: long, Y: -long / 3}), at.Add(plane.Vector{X: long, Y: long / 3})
		return chain.Path{{Kind: chain.Line, From: low, To: at}, {Kind: chain.Line, From: at, To: high}}, "KNIFE EDGE AT LIFT 0"
	}
	return nil, ""
}

// trails reports whether a swinging follower's arm trails: at lift 0 the cam's surface runs from the pivot towards
// the contact and pulls the arm. A leading arm is pushed. (Common practice, no source.)
func (j *job) trails() bool {
	rest := j.cam.AtRest()
	run := plane.Vector(rest).Left() // counterclockwise
	if j.spec.Camshaft.Clockwise {
		run = run.Neg()
	}
	return run.Dot(rest.Sub(plane.Point{X: j.spec.Follower.PivotDistance})) > 0
}
