package sheet

import (
	"math"

	"lobewright/synth/gate"
)

func ptr[T any](v T) *T { return &v }

// sampleReport is an invented release: rise 14 mm, base radius 45 mm, roller 22 mm.
func sampleReport() Report {
	f := &Follower{Lift: 0.00212, Velocity: 1.93, VelocityStep: 0.0121, Acceleration: 893.2, AccelerationShare: 0.0767}
	d := Deviation{Bound: 0.00193, Outside: 0.00181, Inside: -0.00178, CamAngle: ptr(104.25)}
	return Report{
		Tool: "lobewright 0.1.0", Part: "stick-lift", Title: "Chalk stick lift", Revision: "A", Units: "mm", Released: true,
		SpecSHA256: "5f2d8e0c1b7a49e6d3c2b1a0f9e8d7c6b5a493827160514233241506978869fa",
		Camshaft:   Camshaft{180, "clockwise"},
		Facts: []Fact{{"Cam", "plate, base radius 45 mm, thickness 12 mm"}, {"Follower", "translating roller, diameter 22 mm, offset 5 mm to the left (+Y)"},
			{"Bore", "20 mm H7, keyway 6 by 2.8 mm at 0°"}, {"Material", "16MnCr5, 58+4 HRC"}},
		Events: []Event{{0, 60, "dwell"}, {60, 150, "rise 14 mm, modified-sine"}, {150, 190, "dwell"}, {190, 310, "fall 14 mm, polynomial-3-4-5"}, {310, 360, "dwell"}},
		Gates: Gates([]gate.Gate{
			{ID: "pressure-angle", Value: 27.913, Limit: 30, Unit: "deg", CamAngle: 104.2, Polar: 112.31, Pass: true, Text: "largest where the follower moves"},
			{ID: "undercut", Value: 24.31, Limit: 0, Unit: "mm", AtLeast: true, CamAngle: 131.2, Polar: 140, Pass: true, Text: "least convex radius of the contour"},
			{ID: "wall.bore-hole-1", Value: 13, Limit: 5, Unit: "mm", AtLeast: true, CamAngle: math.NaN(), Polar: 200, Pass: true, Text: "material between bore and hole 1"},
			{ID: "datum", Value: math.NaN(), Limit: math.NaN(), CamAngle: math.NaN(), Polar: math.NaN(), Pass: true, Text: "keyway at 0°"},
			{ID: "blocks.1-mill", Value: 312, Limit: 4000, CamAngle: math.NaN(), Polar: math.NaN(), Pass: true},
			{ID: "budget", Value: 0.00631, Limit: 0.01, Unit: "mm", CamAngle: math.NaN(), Polar: math.NaN(), Pass: true},
		}),
		Findings: Findings([]gate.Finding{{ID: "acceleration-jump", CamAngle: 60, Text: "the acceleration jumps by 3120 mm/s² where the rise begins; the follower " +
			"answers with vibration that no contour accuracy removes"}}),
		Contour: Contour{Length: 321.4567, Area: 8123.4, LeastConvexRadius: ptr(24.31), Junctions: []float64{0, 60, 150, 190, 310}},
		Motion:  Motion{PeakVelocity: 295.7, PeakAcceleration: 11639, PeakJerk: 1.452e6},
		Paths: []Path{{File: "stick-lift.dxf", Curve: "contour", Lines: 2, Arcs: 46, Theory: 41.2, SegmentsFloor: ptr(38), Deviation: d, Follower: f},
			{File: "stick-lift.dxf", Curve: "pitch-curve", Lines: 0, Arcs: 46, Theory: 41.2, Deviation: d, Follower: f}},
		Operations: []Operation{
			{File: "stick-lift.1-mill.nc", Process: "mill", Axes: "xy", Blocks: 312, Lines: 40, Arcs: 246, Bytes: 9876, PathLength: 1812.4, Seconds: 372,
				ArcMismatch: 0.0011, Deviation: d, Follower: f,
				Setup:   []Fact{{"Tool", "T3, end mill, diameter 16 mm"}, {"Zero", "X0 Y0 camshaft axis, Z0 marked face"}, {"Turning", "3000 rpm M3, feed 300 mm/min"}},
				Offsets: []Register{{"D3", 0, "trim: + moves the tool away from the contour, - into it"}},
				Passes: []Pass{{1, 0.4, 8.4, "G41 D3", 2, 46, nil, ptr(41.2), ptr(d)}, {2, 0.1, 8.1, "G41 D3", 2, 46, nil, nil, nil},
					{3, 0, 8, "G41 D3", 2, 46, ptr(38), ptr(41.2), ptr(d)}}},
			{File: "stick-lift.2-wire.nc", Process: "wire", Axes: "xy", Blocks: 210, Lines: 12, Arcs: 144, Bytes: 12345, PathLength: 1322, Seconds: 4012,
				ArcMismatch: 0.0009, Deviation: d, NotFinished: true,
				Offsets: []Register{{"D1", -0.002, "trim"}, {"D2", 0.145, "wire center to contour"}}},
		},
		Budget: Budget{Shares: []Share{{"chord", 0.002, "fixed", "blocks", 0.00212, 893.2, 0.0767}, {"grid", 0.0005, "fixed", "blocks", 0.0005, 21.1, 0.0018},
			{"positioning", 0.003, "variable", "turn", 0.0031, 2.31, 0.0002}},
			WorstCase: 0.0091, RSS: 0.0042, FixedPlusRSS: 0.00631, Combine: "fixed+rss", Limit: 0.01},
		Tolerance: Tolerance{Profile: 0.02, Chord: 0.002},
		Notes:     []string{"Break edges 0.2 mm."},
		Cautions:  []string{"A control does what the program says and rarely detects a mistake.", "Rotating cams and followers are nip and shear points: guard them."},
		Files:     []string{"stick-lift.dxf", "stick-lift.svg", "stick-lift.report.html"},
		FileHashes: []FileHash{{"stick-lift.dxf", "aa2d8e0c1b7a49e6d3c2b1a0f9e8d7c6b5a493827160514233241506978869fa"},
			{"stick-lift.svg", "bb2d8e0c1b7a49e6d3c2b1a0f9e8d7c6b5a493827160514233241506978869fa"}},
	}
}

// refusedReport is the same part with two gates failing.
func refusedReport() Report {
	r := sampleReport()
	r.Released = false
	r.Gates[0].Value, r.Gates[0].Pass = ptr(34.62), false
	r.Gates[0].Text = "the follower would jam in its guide; enlarge the base radius, give the rise more angle, or offset the follower " +
		"towards the side that the rise pushes to"
	r.Gates[5].Value, r.Gates[5].Pass = ptr(0.0112), false
	return r
}

// hostile is text that breaks out of whatever is not escaped.
const hostile = "<script>alert(\"x\")</script> & 'quoted' ]]> --> \x1b[31m\x00 \u202Eevil ✓ 粉筆"

// box is a small figure with everything that refers to ids.
const boxSVG = `<?xml version="1.0"?>
<!-- a figure -->
<svg xmlns="http://www.w3.org/2000/svg" xmlns:xlink="http://www.w3.org/1999/xlink" width="20mm" height="10mm" viewBox="0 0 20 10" role="img" aria-labelledby="title desc">
<title id="title">A box</title><desc id="desc">of id=&#34;title&#34; and url(#clip)</desc>
<defs><clipPath id="clip"><rect width="9" height="9"/></clipPath></defs>
<g id="cam" clip-path="url(#clip)"><rect width="10" height="10" fill="none" stroke="#111111"/></g>
<use xlink:href="#cam"/>
</svg>
`
