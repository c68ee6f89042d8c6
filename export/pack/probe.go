package pack

import (
	"errors"
	"fmt"
	"math"
	"sort"

	"lobewright/export/sheet"
	"lobewright/export/table"
	"lobewright/synth"
	"lobewright/synth/gate"
	"lobewright/synth/plane"
)

// The probe table. The cam lies on a rotary table, the probe's ball or roller rests on it and moves on a
// ray through the axis. Its center is on the parallel of the contour at the probe's radius;
// the rows are at equal table angles, so for each the point of the parallel on a given polar
// angle is sought. (Rows at equal cam angles, which come easily, would set the table to an odd
// angle each.) The table turns as the camshaft does: with a translating roller in line with
// the axis, of the probe's diameter, table angle and cam angle are the same, and the reading is the prime radius and the
// lift. The limits are the same points on the parallels at half the profile zone to either side.

// rayStep is the step of cam angle at which a parallel's polar angles are sampled, degrees.
const rayStep = 0.25

// rays finds the points of a parallel by polar angle.
type rays struct {
	at    func(camAngle float64) plane.Point
	polar []float64 // at every rayStep of cam angle from 0 to 360, degrees, without jumps; rises or falls all along
}

// newRays fails for a curve that a ray from the axis meets more than once.
func (j *job) newRays(c *synth.Curve) (*rays, error) {
	r := &rays{at: func(camAngle float64) plane.Point {
		zone, t := j.cam.Cycle().Zone(camAngle)
		return c.At(zone, t).P
	}}
	sense := 0.0
	for k := range int(360/rayStep) + 1 {
		a := r.at(float64(k) * rayStep).PolarAngle()
		if k == 0 {
			r.polar = append(r.polar, a)
			continue
		}
		last := r.polar[k-1]
		turned := plane.Wrap360(a-last+180) - 180
		if k == 1 {
			sense = turned
		}
		if turned*sense <= 0 {
			return nil, fmt.Errorf("a ray from the camshaft axis meets the probe's path more than once near cam angle %.4g°", float64(k)*rayStep)
		}
		r.polar = append(r.polar, last+turned)
	}
	return r, nil
}

// radius is the distance from the axis of the point at a polar angle, degrees.
func (r *rays) radius(polar float64) float64 {
	first, last := r.polar[0], r.polar[len(r.polar)-1]
	sense := 1.0
	if last < first {
		sense = -1
	}
	goal := first + sense*plane.Wrap360(sense*(polar-first))
	k := sort.Search(len(r.polar)-2, func(k int) bool { return sense*(r.polar[k+1]-goal) >= 0 })
	off := func(camAngle float64) float64 {
		return sense * (plane.Wrap360(r.at(camAngle).PolarAngle()-goal+180) - 180)
	}
	lo, hi := float64(k)*rayStep, float64(k+1)*rayStep
	for range 60 { // halves 0.25 degrees down to the rounding of cam angles
		if mid := (lo + hi) / 2; off(mid) < 0 {
			lo = mid
		} else {
			hi = mid
		}
	}
	return r.at((lo + hi) / 2).Radius()
}

// probe makes the rows of the probe table; none without a probe. A probe that cannot touch
// everywhere makes no table but a finding.
func (j *job) probe() []table.ProbeRow {
	i := j.spec.Inspection
	if i == nil || i.ProbeDiameter == 0 || !j.cuttable() {
		return nil
	}
	rows, err := j.probeRows(i.Step, i.ProbeDiameter/2)
	if err != nil {
		j.findings = append(j.findings, gate.Finding{ID: "no-probe-table", CamAngle: math.NaN(),
			Text: fmt.Sprintf("there is no table for a probe of diameter %g %s: %v", i.ProbeDiameter, j.spec.Units.Short(), err)})
		return nil
	}
	return rows
}

func (j *job) probeRows(step, radius float64) ([]table.ProbeRow, error) {
	if j.drum() {
		return nil, errors.New("a barrel is not measured on a ray through its axis")
	}
	half := j.spec.Tolerance.Profile / 2
	if hollow := j.cam.Contour().Radii().Concave; radius+half >= hollow {
		return nil, fmt.Errorf("the contour is hollow with a radius of %.6g; take a smaller probe", hollow)
	}
	wall := func(parallel func(outside float64) *synth.Curve, at float64) ([3]*rays, error) {
		var all [3]*rays
		var err error
		for k, d := range []float64{0, -half, half} {
			if all[k], err = j.newRays(parallel(at + d)); err != nil {
				return all, err
			}
		}
		return all, nil
	}
	inner, err := wall(j.cam.Parallel, radius)
	if err != nil {
		return nil, err
	}
	var outer [3]*rays
	if j.cam.Grooved() {
		if hollow := j.cam.OuterWall().Radii().Convex; radius+half >= hollow {
			return nil, fmt.Errorf("the outer wall is hollow with a radius of %.6g; take a smaller probe", hollow)
		}
		if outer, err = wall(j.cam.FromPitch, j.cam.GrooveWidth()/2-radius); err != nil {
			return nil, err
		}
	}
	n := int(math.Round(360 / step))
	rows := make([]table.ProbeRow, n)
	for k := range rows {
		at := 360 * float64(k) / float64(n)
		polar := at
		if !j.spec.Camshaft.Clockwise {
			polar = plane.Wrap360(-at)
		}
		on := func(r [3]*rays) table.ProbeWall {
			return table.ProbeWall{Radius: r[0].radius(polar), Lower: r[1].radius(polar), Upper: r[2].radius(polar)}
		}
		rows[k] = table.ProbeRow{TableAngle: at, PolarAngle: polar, ProbeWall: on(inner)}
		if outer[0] != nil {
			w := on(outer)
			rows[k].Outer = &w
		}
	}
	for k := range rows {
		next := rows[(k+1)%n]
		rows[k].Difference = next.Radius - rows[k].Radius
		if rows[k].Outer != nil {
			rows[k].Outer.Difference = next.Outer.Radius - rows[k].Outer.Radius
		}
	}
	return rows, nil
}

// mostSheetRows is how many rows the sheet shows; a finer table is shown in part, and whole in its file.
const mostSheetRows = 360

// probeFacts is the table as the sheet shows it.
func (j *job) probeFacts(rows []table.ProbeRow) *sheet.Probe {
	if len(rows) == 0 {
		return nil
	}
	i := j.spec.Inspection
	p := &sheet.Probe{File: j.spec.Part + ".probe.csv", Diameter: i.ProbeDiameter, Step: i.Step, Sense: j.rotation(), Rows: len(rows)}
	every := (len(rows) + mostSheetRows - 1) / mostSheetRows
	for k := 0; k < len(rows); k += every {
		r := rows[k]
		row := sheet.ProbeRow{TableAngle: r.TableAngle, Radius: r.Radius, Lower: r.Lower, Upper: r.Upper, Difference: rows[k].Difference}
		if o := r.Outer; o != nil {
			row.Outer = &sheet.ProbeRow{TableAngle: r.TableAngle, Radius: o.Radius, Lower: o.Lower, Upper: o.Upper, Difference: o.Difference}
		}
		p.Shown = append(p.Shown, row)
	}
	return p
}
