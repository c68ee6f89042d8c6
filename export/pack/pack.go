// Package pack runs the whole job: a spec in, a release pack out whose every
// DXF and NC file has been parsed back from its bytes and proven against the exact
// curve before it may be placed.
package pack

import (
	"math"

	"lobewright/export/sheet"
	"lobewright/synth"
	"lobewright/synth/gate"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
	"lobewright/tolerance"
	"lobewright/tolerance/follow"
)

// Options are what the command line adds to the spec.
type Options struct {
	Tool  string // "lobewright x.y.z", as written into the pack
	DXF   string // "2000" or "r12"
	Sheet string // of the drawing: "A4", "A3" or "Letter"; empty takes what the units and the size ask for

	ToolPaths bool // the drawing shows the tools' center paths

	Draft bool // a check: figures and sheet are marked NOT RELEASED whatever the gates say

	// tamper changes a file's bytes between writing and reading back; tests use it
	// to show that a damaged file is refused.
	tamper func(name string, data []byte) []byte
}

// File is one file of a pack.
type File struct {
	Name string
	Data []byte
}

// Pack is a finished job in memory. Nothing is on disk until Place or PlaceDraft.
type Pack struct {
	Part   string
	Passed bool // every gate passed
	Report sheet.Report
	Files  []File // all of a release but the manifest, in order of the report
	draft  []File // what people may look at when it is not released
}

// job is the work in progress; each step adds to it.
type job struct {
	spec     *spec.Spec
	cam      *synth.Cam
	opt      Options
	chord    float64
	rough    rough // where the follower feels the path too much, and shorter blocks are taken
	gates    []gate.Gate
	findings []gate.Finding
	outline  *outline
	programs []program
	unknown  []gate.Finding // paths the follower cannot be run over
	follows  map[string]run // what the follower does, by file and curve
	budget   tolerance.Budget
	felt     follow.Error // by the follower on the written paths: the largest of each error
	fits     fits
}

// Make runs the job. An error means that the spec cannot be built at all; a
// failing gate is not an error.
func Make(s *spec.Spec, o Options) (*Pack, error) {
	p, _, err := work(s, o)
	return p, err
}

func work(s *spec.Spec, o Options) (*Pack, *job, error) {
	cam, err := synth.Build(s)
	if err != nil {
		return nil, nil, err
	}
	j := &job{spec: s, cam: cam, opt: o, gates: cam.Gates(), findings: cam.Findings()}
	j.allocate()
	if j.cuttable() {
		j.writeSmoothEnough()
	}
	p, err := j.finish()
	return p, j, err
}

// writeSmoothEnough writes everything, and again with shorter blocks where the follower feels
// them as long as its limits (tolerance.acceleration, tolerance.velocity_step) ask for it and that helps.
func (j *job) writeSmoothEnough() {
	before := len(j.gates)
	var first, worst follow.Error
	blocks := 0
	for {
		j.gates, j.outline, j.programs, j.fits = j.gates[:before], nil, nil, fits{}
		programs := j.startPrograms()
		err := j.writeOutline()
		tried := programs()
		if err != nil {
			j.gates = append(j.gates, gate.Gate{ID: "outline", Limit: 1, AtLeast: true, CamAngle: math.NaN(), Polar: math.NaN(), Text: err.Error()})
			return
		}
		j.addPrograms(tried)
		worst = j.runFollower()
		if blocks == 0 {
			blocks, first = len(j.outline.paths[0].path), worst
		}
		if !j.refine(worst) {
			break
		}
	}
	j.felt = worst
	j.tellRefined(blocks, first, worst)
	j.findings = append(j.findings, j.unknown...)
	j.followerGates(worst)
	j.drawToolPaths()
}

// cuttable reports whether there is a contour to write: an undercut one is not
// the envelope of the roller.
func (j *job) cuttable() bool {
	for _, g := range j.gates {
		if (g.ID == "undercut" || g.ID == "undercut-outer") && !g.Pass {
			return false
		}
	}
	return true
}

// gridShare is the part of one count that putting a chain on its grid may add to its
// deviation, set aside before fitting.
const gridShare = 0.2

// attempts are the shares of the remaining tolerance a path is fitted to, in turn,
// until the certificate of what was read back is within the chord.
func attempts() []float64 { return []float64{0.99, 0.85, 0.7, 0.5, 0.35} }

// fitTo returns the tolerance of one attempt for a grid, 0 when the grid eats it up.
func (j *job) fitTo(share float64, decimals int) float64 {
	return math.Max(0, share*(j.chord-gridShare*math.Pow10(-decimals)))
}

func (j *job) polar(t float64) float64 {
	if b, ok := j.cam.Barrel(); ok {
		return plane.Wrap360(b.Sense() * t)
	}
	zone, at := j.cam.Cycle().Zone(t)
	return j.cam.Contour().At(zone, at).P.PolarAngle()
}

// deviationGate holds a certified bound against the chord tolerance.
func (j *job) deviationGate(of, what string, bound, at float64) gate.Gate {
	return gate.Gate{
		ID: "deviation", Of: of, Value: bound, Limit: j.chord, Unit: j.spec.Units.Short(),
		CamAngle: plane.Wrap360(at), Polar: j.polar(at), Pass: bound <= j.chord,
		Text: "certified deviation of " + what + ", parsed back from its bytes; allow a larger chord or give control.decimals one more digit",
	}
}
