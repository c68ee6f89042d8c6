package gcode_test

import (
	"math"
	"slices"
	"strings"
	"testing"

	"lobewright/gcode"
	"lobewright/gcode/read"
	"lobewright/gcode/write"
	"lobewright/tolerance/chain"
)

// ids returns the kinds of failures, each once.
func ids(fs []gcode.Failure) []string {
	var out []string
	for _, f := range fs {
		if !slices.Contains(out, f.ID) {
			out = append(out, f.ID)
		}
	}
	return out
}

func plainMill() job {
	j := job{part(eccentric), mill(eccentric), machine(), 0.002}
	j.op.Path, j.op.Stock, j.part.ClampRadius = eccentric.fitted(4), []float64{0.2, 0}, 10
	return j
}

func plainWire() job {
	j := job{part(eccentric), wire(eccentric), machine(), 0.002}
	j.op.Path = eccentric.fitted(4)
	return j
}

// What the operation asks for and the part does not allow.
func TestUnsoundOperations(t *testing.T) {
	for name, c := range map[string]struct {
		change func(*job)
		want   string
	}{
		"clamp in the way":        {func(j *job) { j.part.ClampRadius = 28.5 }, "clamp"},
		"control too exact":       {func(j *job) { j.m.ArcMismatch = 1e-5 }, "arc-mismatch"},
		"control too small":       {func(j *job) { j.m.MaxBlocks = 30 }, "block-count"},
		"grid too coarse for eps": {func(j *job) { j.eps = 2e-5 }, "deviation"},
		"tolerance missed":        {func(j *job) { j.op.Path = ellipseOn(j, 9) }, "deviation"},
	} {
		j := plainMill()
		c.change(&j)
		_, _, back := j.program(t)
		if got := ids(j.verify(t, back).Failures); !slices.Contains(got, c.want) {
			t.Errorf("%s: failures %v, want %q", name, got, c.want)
		}
	}
}

// ellipseOn puts the ellipse with n biarcs on the job.
func ellipseOn(j *job, n int) func(float64) (chain.Path, error) {
	j.part.Curve, j.part.CamClockwise = ellipse.parallel, true
	return ellipse.fitted(n)
}

// A neck narrower than the tool is found although every radius lets the tool through:
// the tool follows its own parallel curve exactly and gouges the other lip.
func TestNeck(t *testing.T) {
	small := keyholeJob(10, 45)
	_, _, back := small.program(t)
	if fs := small.verify(t, back).Failures; len(fs) > 0 {
		t.Errorf("a cutter of 10 in a neck of 12: %+v", fs[0])
	}
	large := keyholeJob(16, 45)
	_, _, back = large.program(t)
	r := large.verify(t, back)
	got := ids(r.Failures)
	if !slices.Equal(got, []string{"reach"}) {
		t.Errorf("a cutter of 16 in a neck of 12: failures %v, want reach alone", got)
	}
	// The center passes each lip at 8 from it, so at 24 - 6 - 8 - 6 = 4 from the other.
	least := math.Inf(1)
	for _, f := range r.Failures {
		least = math.Min(least, f.Value)
	}
	if math.Abs(least-4) > 0.003 {
		t.Errorf("least distance %g, want 4", least)
	}
}

// A lead that would cross the cam: the pass begins in the pocket.
func TestLeadThroughTheCam(t *testing.T) {
	j := keyholeJob(10, 190)
	_, _, back := j.program(t)
	if got := ids(j.verify(t, back).Failures); !slices.Contains(got, "clearance") {
		t.Errorf("failures %v, want clearance", got)
	}
}

// Programs spoiled by hand: each is refused for the reason.
func TestSpoiledPrograms(t *testing.T) {
	for name, c := range map[string]struct {
		job    job
		change func(*gcode.Program)
		want   string
	}{
		"a move of the cut left out":  {plainMill(), func(p *gcode.Program) { drop(p, cut(p, 2)) }, "deviation"},
		"wrong side":                  {controlled(plainMill()), func(p *gcode.Program) { turnOver(p) }, "words"},
		"wrong register":              {controlled(plainMill()), func(p *gcode.Program) { register(p, 4) }, "words"},
		"a cut left out":              {plainMill(), lastCut, "coverage"},
		"too deep":                    {plainMill(), func(p *gcode.Program) { p.Blocks[find(p, "z")].Z.V -= 1000 }, "depth"},
		"not deep enough":             {plainMill(), func(p *gcode.Program) { p.Blocks[find(p, "z")].Z.V += 1000 }, "depth"},
		"rapid through the blank":     {plainMill(), func(p *gcode.Program) { p.Blocks[cut(p, 0)-1].Motion = gcode.Rapid }, "blank"},
		"feed too high":               {plainMill(), func(p *gcode.Program) { p.Blocks[cut(p, 0)-1].F.V *= 10 }, "feed"},
		"plunge too fast":             {plainMill(), func(p *gcode.Program) { p.Blocks[find(p, "z")].F.V *= 10 }, "feed"},
		"plunge inside the part":      {plainMill(), func(p *gcode.Program) { inside(p) }, "clearance"},
		"spindle backwards":           {plainMill(), func(p *gcode.Program) { p.Blocks[find(p, "spindle")].M = []int{4} }, "words"},
		"no end":                      {plainMill(), func(p *gcode.Program) { p.Blocks[len(p.Blocks)-1].M = []int{2} }, "words"},
		"inches":                      {plainMill(), func(p *gcode.Program) { p.Inch = true; units(p, gcode.UnitInch) }, "words"},
		"no length compensation":      {plainMill(), func(p *gcode.Program) { p.Blocks[find(p, "length")].G = []gcode.Code{gcode.LengthOff}; noH(p) }, "words"},
		"no stop for the clamp":       {plainWire(), func(p *gcode.Program) { drop(p, stop(p, 1)) }, "order"},
		"no stop to thread":           {plainWire(), func(p *gcode.Program) { drop(p, stop(p, 0)) }, "order"},
		"clamped too early":           {plainWire(), func(p *gcode.Program) { early(p) }, "order"},
		"skim before rough":           {plainWire(), func(p *gcode.Program) { without(p, "PASS 1.", "PASS 2.") }, "order"},
		"tab not skimmed":             {plainWire(), func(p *gcode.Program) { without(p, "TAB PASS 3.", "SLOT CUT") }, "coverage"},
		"wire: rapid back to a start": {plainWire(), func(p *gcode.Program) { p.Blocks[stop(p, 1)+2].Motion = gcode.Rapid }, "blank"},
	} {
		p, _, _ := c.job.program(t)
		p.Blocks = slices.Clone(p.Blocks)
		c.change(&p)
		back, err := read.Parse(write.Program(p))
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if got := ids(c.job.verify(t, back).Failures); !slices.Contains(got, c.want) {
			t.Errorf("%s: failures %v, want %q", name, got, c.want)
		}
		good, _, _ := c.job.program(t)
		if gcode.Differs(good, back) == nil {
			t.Errorf("%s: Differs sees no difference", name)
		}
	}
}

func controlled(j job) job { j.op.Compensation = gcode.CompControl; return j }

func drop(p *gcode.Program, i int) { p.Blocks = slices.Delete(p.Blocks, i, i+1) }

// cut returns the index of the k-th arc of the program.
func cut(p *gcode.Program, k int) int {
	for i, b := range p.Blocks {
		if b.I.On {
			if k--; k < 0 {
				return i
			}
		}
	}
	return -1
}

// find returns the index of the first block of a kind.
func find(p *gcode.Program, kind string) int {
	return slices.IndexFunc(p.Blocks, func(b gcode.Block) bool {
		switch kind {
		case "z":
			return b.Z.On && b.Motion == gcode.Straight
		case "spindle":
			return slices.Contains(b.M, 3)
		}
		return b.H.On
	})
}

// stop returns the index of the k-th M00.
func stop(p *gcode.Program, k int) int {
	for i, b := range p.Blocks {
		if slices.Contains(b.M, 0) {
			if k--; k < 0 {
				return i
			}
		}
	}
	return -1
}

func turnOver(p *gcode.Program) {
	for i, b := range p.Blocks {
		if slices.Contains(b.G, gcode.CompLeft) {
			p.Blocks[i].G = []gcode.Code{gcode.CompRight}
		}
	}
}

func register(p *gcode.Program, d int) {
	for i, b := range p.Blocks {
		if b.D.On {
			p.Blocks[i].D.V = d
		}
	}
}

func units(p *gcode.Program, c gcode.Code) {
	for i, b := range p.Blocks {
		if slices.Contains(b.G, gcode.UnitMM) {
			p.Blocks[i].G = append([]gcode.Code{c}, b.G[1:]...)
		}
	}
}

func noH(p *gcode.Program) { p.Blocks[find(p, "length")].H.On = false }

// lastCut drops the last cut: from its rapid to the one up.
func lastCut(p *gcode.Program) {
	i := len(p.Blocks) - 1
	for !strings.HasPrefix(p.Blocks[i].Comment, "PASS") {
		i--
	}
	p.Blocks = append(p.Blocks[:i:i], p.Blocks[len(p.Blocks)-3:]...)
}

// inside puts the first plunge at a place between clamp and contour.
func inside(p *gcode.Program) {
	b := &p.Blocks[find(p, "z")-2]
	b.X.V, b.Y.V = -25_000, 0
}

// early moves the stop for the clamp before the last skim.
func early(p *gcode.Program) {
	b := p.Blocks[stop(p, 1)]
	drop(p, stop(p, 1))
	i := slices.IndexFunc(p.Blocks, func(b gcode.Block) bool { return strings.HasPrefix(b.Comment, "PASS 3.") })
	p.Blocks = slices.Insert(p.Blocks, i, b)
}

// without drops the blocks from one comment to before another.
func without(p *gcode.Program, from, to string) {
	at := func(s string) int {
		return slices.IndexFunc(p.Blocks, func(b gcode.Block) bool { return strings.HasPrefix(b.Comment, s) })
	}
	p.Blocks = slices.Delete(p.Blocks, at(from), at(to))
}

// What no program can be made of is refused with a reason.
func TestPlanRefuses(t *testing.T) {
	for name, c := range map[string]struct {
		job    job
		change func(*job)
		want   string
	}{
		"no curve":         {plainMill(), func(j *job) { j.part.Curve = nil }, "Part.Curve"},
		"no stock":         {plainMill(), func(j *job) { j.op.Stock = nil }, "no passes"},
		"negative stock":   {plainMill(), func(j *job) { j.op.Stock = []float64{-0.1} }, "stock of pass 1"},
		"no feed":          {plainMill(), func(j *job) { j.op.Feed = 0 }, "feed"},
		"unknown process":  {plainMill(), func(j *job) { j.op.Process = "saw" }, "mill, slot and wire"},
		"unknown sense":    {plainMill(), func(j *job) { j.op.Direction = "up" }, "climb and conventional"},
		"tab too narrow":   {plainWire(), func(j *job) { j.op.Tab.Width = 1 }, "too narrow"},
		"tab too wide":     {plainWire(), func(j *job) { j.op.Tab.Width = 140 }, "half the cam"},
		"hole in the part": {plainWire(), func(j *job) { j.op.StartHole.Radius = 20 }, "outside"},
	} {
		c.change(&c.job)
		_, err := gcode.Plan(c.job.part, c.job.op, c.job.m)
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: error %v, want one with %q", name, err, c.want)
		}
	}
}
