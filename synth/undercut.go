// What an undercut cam would do.
//
// The problem: where the pitch curve turns more sharply than the roller (or the contour
// would have a negative radius under a flat face), the contour of the formulas loops. The
// tool that follows it cuts the loop away, and what is left has a corner further in: the
// follower runs over the corner and stays low. "Undercut" says none of this.
//
// The method: a point of the formulas' contour is there on the part when no position of
// the follower's own surface lies over it: the distance to every point of the pitch curve
// is at least the roller's radius (under a face: the point lies under every position of
// the face). Where that ends is found by bisection, and those corners with the points that
// are left are the trimmed contour. At each cam angle the follower then rests on the point
// that lifts it most; a point is an arc of radius 0, so the linkage on an arc gives that
// lift for every kind (synth/follower).
//
// Price: some hundred thousand distances, only for a cam that is refused anyway.

package synth

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// Shortfall is what an undercut cam would do to the follower.
type Shortfall struct {
	Depth    float64 // largest lift that is missing, length or degrees
	At       float64 // cam angle of it, degrees
	From, To float64 // the cam angles between which lift is missing, degrees, From < To
	Trimmed  []plane.Point
}

const (
	trimSteps  = 1440 // points of the contour looked at
	baseSteps  = 7200 // points of the base curve each is held against
	trimSlack  = 1e-9 // of the prime radius: what counts as over a point
	trimHalves = 40   // bisections of a corner's angle
	reachTurn  = 60.0 // degrees of cam angle that a corner can lift the follower over
)

// trimmer holds the base curve's samples.
type trimmer struct {
	c       *Cam
	contour *Curve
	points  []plane.Point  // of the base curve: centers, or contour points under a face
	normals []plane.Vector // under a face
	dist    []float64      // of the face's line
}

// Shortfall computes what is left of an undercut contour and what the follower would
// then do; ok is false when nothing is cut away.
func (c *Cam) Shortfall() (s Shortfall, ok bool) {
	t := &trimmer{c: c, contour: c.Contour()}
	t.sample()
	there := make([]bool, trimSteps)
	whole := true
	for i := range there {
		there[i] = t.there(float64(i) * 360 / trimSteps)
		whole = whole && there[i]
	}
	if whole {
		return s, false
	}
	for i := range there {
		next := (i + 1) % trimSteps
		a, b := float64(i)*360/trimSteps, float64(i+1)*360/trimSteps
		if there[i] {
			s.Trimmed = append(s.Trimmed, t.at(a))
		}
		if there[i] != there[next] {
			s.Trimmed = append(s.Trimmed, t.at(t.corner(a, b, there[i])))
		}
	}
	t.missing(&s, there)
	return s, s.Depth > 0
}

func (t *trimmer) sample() {
	base := t.c.Pitch()
	f, face := t.c.face()
	for i := range baseSteps {
		zone, at := t.c.cycle.Zone(float64(i) * 360 / baseSteps)
		t.points = append(t.points, base.At(zone, at).P)
		if face {
			p, phi := f.SupportF(taylor.FVar(at), t.c.liftF(zone, at))
			t.normals, t.dist = append(t.normals, plane.Unit(plane.Angle(phi.C[0]))), append(t.dist, p.C[0])
		}
	}
}

func (t *trimmer) at(deg float64) plane.Point {
	zone, at := t.c.cycle.Zone(deg)
	return t.contour.At(zone, at).P
}

// there reports whether the contour's point at a cam angle is left on the part.
func (t *trimmer) there(deg float64) bool {
	p, slack := t.at(deg), trimSlack*t.c.Prime()
	for i := range t.normals {
		if plane.Vector(p).Dot(t.normals[i]) > t.dist[i]+slack {
			return false
		}
	}
	if t.normals != nil {
		return true
	}
	r := t.c.inset()
	// Between samples the pitch curve comes nearer by the sagitta of half a step.
	slack += r * math.Pow(math.Pi/baseSteps, 2)
	for _, q := range t.points {
		if p.Dist(q) < r-slack {
			return false
		}
	}
	return true
}

// corner finds where the contour ends between two cam angles.
func (t *trimmer) corner(a, b float64, thereAtA bool) float64 {
	for range trimHalves {
		if mid := (a + b) / 2; t.there(mid) == thereAtA {
			a = mid
		} else {
			b = mid
		}
	}
	if thereAtA {
		return a
	}
	return b
}

// missing finds the lift that is missing: at every cam angle whose own contact is gone the
// follower rests on what is left near it.
func (t *trimmer) missing(s *Shortfall, there []bool) {
	start := 0 // where nothing is missing
	for start < trimSteps-1 && (!there[start] || !there[start+1]) {
		start++
	}
	const fine = 5 // steps of the missing lift in one of the contour's
	for k := range trimSteps {
		i := (start + k) % trimSteps
		if there[i] && there[(i+1)%trimSteps] {
			continue
		}
		for m := range fine {
			t.look(s, (float64(start+k)+float64(m)/fine)*360/trimSteps)
		}
	}
}

// look takes the missing lift at one cam angle, degrees; angles grow from call to call.
func (t *trimmer) look(s *Shortfall, deg float64) {
	if t.there(deg) {
		return
	}
	lift, ok := t.rests(deg, s.Trimmed)
	gone := t.c.LiftAt(deg).S - lift
	if !ok || gone <= 1e-6*t.c.cycle.MaxLift() {
		return
	}
	if s.Depth == 0 {
		s.From = deg
	}
	s.To = deg
	if gone > s.Depth {
		s.Depth, s.At = gone, deg
	}
}

// rests returns the lift of the follower on the trimmed contour.
func (t *trimmer) rests(deg float64, trimmed []plane.Point) (lift float64, ok bool) {
	f := t.c.follower
	near, r, sense := t.at(deg), t.c.inset(), f.Sense()
	reach := t.c.Prime() * reachTurn * math.Pi / 180
	lift = math.Inf(-1)
	for _, q := range trimmed {
		if q.Dist(near) > reach {
			continue
		}
		arc := plane.Frame{P: q, T: plane.Vector{Y: sense}, K: math.Inf(int(sense))}
		if r > 0 {
			arc.P, arc.K = q.Add(plane.Vector{X: r}), sense/r
		}
		if on, fine := f.OnArc(deg, arc); fine && on.Lift > lift {
			lift, ok = on.Lift, true
		}
	}
	return lift, ok
}

// stays says what an undercut cam would do to the follower.
func (c *Cam) stays() string {
	s, ok := c.Shortfall()
	if !ok {
		return ""
	}
	return fmt.Sprintf(": the follower would stay %.3g %s low at %.4g°, and low from %.4g° to %.4g°", s.Depth, c.LiftUnit(), camAngle(s.At), camAngle(s.From), camAngle(s.To))
}
