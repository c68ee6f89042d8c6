// Package plane holds the small value types every room shares: points,
// vectors, angles, lengths, circles, and what a curve says of itself. It
// computes nothing about cams.
package plane

import "math"

// Length is a length in the units of the spec (mm or inch).
type Length float64

// Angle is an angle in radians.
type Angle float64

// Degrees returns the angle of d degrees.
func Degrees(d float64) Angle { return Angle(d * math.Pi / 180) }

// Deg returns the angle in degrees.
func (a Angle) Deg() float64 { return float64(a) * 180 / math.Pi }

// Point is a position in the cam frame, in the units of the spec.
type Point struct{ X, Y float64 }

// Vector is a difference of points, or a direction.
type Vector struct{ X, Y float64 }

// Polar returns the point at radius r and polar angle a.
func Polar(r float64, a Angle) Point {
	s, c := math.Sincos(float64(a))
	return Point{r * c, r * s}
}

// Unit returns the unit vector of polar angle a.
func Unit(a Angle) Vector {
	s, c := math.Sincos(float64(a))
	return Vector{c, s}
}

func (p Point) Add(v Vector) Point { return Point{p.X + v.X, p.Y + v.Y} }
func (p Point) Sub(q Point) Vector { return Vector{p.X - q.X, p.Y - q.Y} }

// Dist returns the distance from p to q.
func (p Point) Dist(q Point) float64 { return math.Hypot(p.X-q.X, p.Y-q.Y) }

// Radius returns the distance from the camshaft axis.
func (p Point) Radius() float64 { return math.Hypot(p.X, p.Y) }

// PolarAngle returns the polar angle in degrees, 0 <= a < 360.
func (p Point) PolarAngle() float64 { return Wrap360(math.Atan2(p.Y, p.X) * 180 / math.Pi) }

func (v Vector) Add(w Vector) Vector    { return Vector{v.X + w.X, v.Y + w.Y} }
func (v Vector) Sub(w Vector) Vector    { return Vector{v.X - w.X, v.Y - w.Y} }
func (v Vector) Scale(f float64) Vector { return Vector{v.X * f, v.Y * f} }
func (v Vector) Neg() Vector            { return Vector{-v.X, -v.Y} }
func (v Vector) Dot(w Vector) float64   { return v.X*w.X + v.Y*w.Y }
func (v Vector) Cross(w Vector) float64 { return v.X*w.Y - v.Y*w.X }
func (v Vector) Norm() float64          { return math.Hypot(v.X, v.Y) }
func (v Vector) Unit() Vector           { return v.Scale(1 / v.Norm()) }
func (v Vector) Left() Vector           { return Vector{-v.Y, v.X} } // turned by +90 degrees
func (v Vector) Angle() Angle           { return Angle(math.Atan2(v.Y, v.X)) }
func (v Vector) Turn(a Angle) Vector {
	s, c := math.Sincos(float64(a))
	return Vector{c*v.X - s*v.Y, s*v.X + c*v.Y}
}

// Circle is a full circle.
type Circle struct {
	Center Point
	Radius float64
}

// Wrap360 brings an angle in degrees into 0 <= a < 360.
func Wrap360(a float64) float64 {
	a = math.Mod(a, 360)
	if a < 0 {
		a += 360
	}
	if a >= 360 {
		a = 0
	}
	return a
}

// Frame is what a curve says of itself at one parameter.
type Frame struct {
	P  Point
	T  Vector  // unit tangent, in the direction of growing parameter
	K  float64 // curvature, positive when the curve turns left, 1/length
	DK float64 // derivative of K by arc length, 1/length²
}

// Piece is a stretch of a curve on which it is analytic. Pieces of a curve
// follow each other: the next From is this To. The parameter of a cam's curves is
// the cam angle in degrees.
type Piece struct {
	From, To float64
	Circle   *Circle    // set when the piece is an arc of this circle exactly
	Straight bool       // the piece is a straight line exactly
	Jump     [3]float64 // steps at From: of the tangent's angle (rad), of K, of DK
}
