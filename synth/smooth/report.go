package smooth

import "math"

// Report is what is to be said of a curve and its table, in numbers.
type Report struct {
	Residual []float64 // of every row of the table: its lift less the curve's, length
	RMS      float64   // root mean square of the residuals, length
	Moved    Moved     // the row with the largest residual
	Pieces   int       // of the curve
	Dwells   int       // pieces on which the lift is constant

	Scatter float64 // standard deviation of the rows about their neighbors, length
	Place   float64 // the last place the lifts are written to, length; 0 when that is below all noise
	Floor   Floor   // what of the acceleration the rows do not show

	Open   Gap  // the step between rows in which they leave the lift most open
	Coarse bool // Open.Lift is more than the smoothing: the table does not say what the lift is between its rows
	Widest Gap  // the widest step between rows
}

// Moved is a row and how far it is from the curve.
type Moved struct {
	Row      int     // place in the table, from 0
	Line     int     // of the file, 0 when not known
	Angle    float64 // degrees, as the table has it
	Residual float64 // length
}

// report compares a curve with its table; of is the curve's knots.
func (f *fitter) report(t Table, c Curve, of ring) Report {
	r := Report{Residual: make([]float64, len(t.Angle)), Pieces: len(c.Pieces), Scatter: f.scatter, Place: f.place}
	for _, p := range c.Pieces {
		if len(p.Poly) == 1 {
			r.Dwells++
		}
	}
	for i, a := range t.Angle {
		lift, _, _, _ := c.At(a)
		r.Residual[i] = t.Lift[i] - lift
		r.RMS += r.Residual[i] * r.Residual[i]
		if math.Abs(r.Residual[i]) > math.Abs(r.Moved.Residual) || i == 0 {
			r.Moved = Moved{Row: i, Angle: a, Residual: r.Residual[i]}
		}
	}
	r.RMS = math.Sqrt(r.RMS / float64(len(t.Angle)))
	if t.Line != nil {
		r.Moved.Line = t.Line[r.Moved.Row]
	}
	r.Open, r.Widest = f.gaps()
	r.Coarse = r.Open.Lift > f.limit()
	if len(of.at) > 0 {
		r.Floor = f.floor(of)
	}
	return r
}
