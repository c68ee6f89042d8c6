package pack

import (
	"encoding/csv"
	"math"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"

	"lobewright/synth"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
)

// changed makes a sample with some of its text replaced.
func changed(t *testing.T, name string, old ...string) *Pack {
	t.Helper()
	data, err := os.ReadFile(samplesFolder + "/" + name + ".yaml")
	if err != nil {
		t.Fatal(err)
	}
	text := string(data)
	for i := 0; i < len(old); i += 2 {
		if !strings.Contains(text, old[i]) {
			t.Fatalf("%s does not hold %q", name, old[i])
		}
		text = strings.Replace(text, old[i], old[i+1], 1)
	}
	s, err := spec.Read(name+".yaml", []byte(text), synth.Vocabulary())
	if err != nil {
		t.Fatal(err)
	}
	p, err := Make(s, options())
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// probeTable reads the probe table of a pack: its header, and its figures; an empty field is NaN.
func probeTable(t *testing.T, p *Pack) (header []string, rows [][]float64) {
	t.Helper()
	i := slices.IndexFunc(p.Files, func(f File) bool { return f.Name == p.Part+".probe.csv" })
	if i < 0 {
		t.Fatalf("no probe table; findings %v", p.Report.Findings)
	}
	all, err := csv.NewReader(strings.NewReader(string(p.Files[i].Data))).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, r := range all[1:] {
		var row []float64
		for _, s := range r {
			v := math.NaN()
			if s != "" {
				if v, err = strconv.ParseFloat(s, 64); err != nil {
					t.Fatal(err)
				}
			}
			row = append(row, v)
		}
		rows = append(rows, row)
	}
	return all[0], rows
}

// With a probe of the roller's diameter and no offset the probe is the roller: it reads the prime radius and
// the lift, at a cam angle that is the table angle. The limits are the same with the roller's rise or fall
// by half the zone along the normal, which is that much over the cosine of the pressure angle to the first order.
func TestProbeReadsTheLift(t *testing.T) {
	for _, c := range []struct {
		rotation string
		sense    float64
	}{{"clockwise", 1}, {"counterclockwise", -1}} {
		p := changed(t, "stick-lift", "rotation: clockwise", "rotation: "+c.rotation, ", offset: 5", "", "step: 1, probe_diameter: 10", "step: 0.5, probe_diameter: 22")
		header, rows := probeTable(t, p)
		if want := "table_angle_" + c.rotation + ",polar_angle,probe_radius,lower_limit,upper_limit,first_difference,reading,reading_difference"; strings.Join(header, ",") != want {
			t.Errorf("header %v", header)
		}
		if len(rows) != 720 {
			t.Fatalf("%d rows", len(rows))
		}
		for i, r := range rows {
			at := 0.5 * float64(i)
			want := 45 + 11 + rise345and(at)
			if r[0] != at || math.Abs(plane.Wrap360(r[1]-c.sense*at+180)-180) > 1e-9 || math.Abs(r[2]-want) > 1e-6 {
				t.Fatalf("%s, row %d: %v, want radius %.6f", c.rotation, i, r, want)
			}
			next := rows[(i+1)%len(rows)][2]
			if math.Abs(r[5]-(next-r[2])) > 1.5e-6 || !math.IsNaN(r[6]) || !math.IsNaN(r[7]) {
				t.Errorf("row %d: %v, the next radius is %v", i, r, next)
			}
			if low, high := r[2]-r[3], r[4]-r[2]; low < 0.0099 || high < 0.0099 || low > 0.0106 || high > 0.0106 {
				t.Errorf("row %d: limits %v and %v about %v", i, r[3], r[4], r[2])
			}
		}
	}
}

// rise345and is the lift of the sample: modified sine of 14 over 90° from 60°, and 3-4-5 of 14 over 120° from 190°.
// Modified sine: R. L. Norton, Cam Design and Manufacturing Handbook, 2002, table 3-2, with its exact
// constants (cited from memory).
func rise345and(deg float64) float64 {
	switch {
	case deg <= 60 || deg >= 310:
		return 0
	case deg < 150:
		u := (deg - 60) / 90
		y := math.Pi*u - math.Sin(4*math.Pi*u)/4
		switch {
		case u > 7.0/8:
			y += 4
		case u > 1.0/8:
			y = 2 + math.Pi*u - 9.0/4*math.Sin((4*math.Pi*u+math.Pi)/3)
		}
		return 14 * y / (4 + math.Pi)
	case deg <= 190:
		return 14
	}
	u := 1 - (deg-190)/120
	return 14 * u * u * u * (10 - 15*u + 6*u*u)
}

// In a groove the probe touches one wall and then the other: between the two centers lies the groove's width less
// the probe's diameter, and a little more on a slope.
func TestProbeInAGroove(t *testing.T) {
	header, rows := probeTable(t, changed(t, "carton-shift", "step: 0.5, probe_diameter: 12", "step: 2, probe_diameter: 8"))
	if len(rows) != 180 || len(header) != 14 || header[8] != "outer_probe_radius" {
		t.Fatalf("%d rows, header %v", len(rows), header)
	}
	const play = 16.04 - 8
	for _, r := range rows {
		if gap := r[8] - r[2]; gap < play-2e-6 || gap > 1.2*play || r[3] >= r[2] || r[9] >= r[8] {
			t.Errorf("row %v: the two centers are %v apart", r, gap)
		}
	}
	if r := rows[0]; math.Abs(r[2]-(40-0.02+4)) > 2e-6 || math.Abs(r[8]-(56+0.02-4)) > 2e-6 {
		t.Errorf("in the dwell the inner wall is at 39.98 and the outer at 56.02; row %v", r)
	}
}

// A probe that does not reach into a hollow makes no table, and the report says why.
func TestProbeTooLarge(t *testing.T) {
	p := changed(t, "refused-steep", "over: 28", "over: 40", "dwell: 122", "dwell: 110", "pressure_angle: 30", "pressure_angle: 60", "tolerance: {", "inspection: {probe_diameter: 90}\ntolerance: {")
	hollow := p.Report.Contour.LeastConcaveRadius
	if hollow == nil || *hollow > 45 {
		t.Fatalf("hollow %v; the test needs a hollow contour", hollow)
	}
	if p.Report.Probe != nil || slices.ContainsFunc(p.Files, func(f File) bool { return strings.HasSuffix(f.Name, "probe.csv") }) {
		t.Error("a table that cannot be measured was written")
	}
	found := false
	for _, f := range p.Report.Findings {
		found = found || f.ID == "no-probe-table" && strings.Contains(f.Text, "hollow")
	}
	if !found {
		t.Errorf("findings %v", p.Report.Findings)
	}
}
