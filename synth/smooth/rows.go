package smooth

import (
	"math"
	"slices"
	"sort"
)

// rows are the table's rows in order of cam angle brought into 0..360.
type rows struct {
	at, lift []float64
	row      []int // place in the table
}

// cell is the rows between two candidate knots: from its own, a row, to the next.
type cell struct {
	first, count int // rows
	low, high    float64
	angle, lift  float64 // mean
	stretch              // from its knot to the next
	moments              // in its unit, each row weighing 1/count
}

// mostCells is how many cells a turn is divided into at most: a knot every half degree is closer than any table of
// lifts can place one.
const mostCells = 720

// fitter is what a fit works on. It is not changed once the dwells are found.
type fitter struct {
	rows
	cells     []cell
	allowed   float64 // the smoothing
	scatter   float64 // standard deviation of the rows about their neighbors
	place     float64 // the last place the lifts are written to
	noise     float64 // standard deviation of a row that the search for knots counts on
	low, high float64 // lift, of all rows
	dwells    []dwell
}

func newFitter(t Table, smoothing float64) *fitter {
	f := &fitter{rows: turned(t), allowed: smoothing}
	f.low, f.high = slices.Min(f.lift), slices.Max(f.lift)
	f.cells = f.divide()
	f.scatter, f.place = f.scattering(), f.lastPlace()
	f.noise = max(f.scatter, f.place/math.Sqrt(12), smoothing/noiseLeast)
	f.noise = min(f.noise, max(smoothing/noiseMost, rounding*f.size()))
	return f
}

// The search for knots counts on noise of at least one and at most the other part of the
// smoothing, so that it neither follows the curve to digits nobody asked for nor lets rows
// go farther than allowed.
const (
	noiseLeast = 10
	noiseMost  = 2
)

// size returns the largest absolute lift.
func (f *fitter) size() float64 { return max(-f.low, f.high) }

// rounding is how exactly a lift is met where the smoothing is 0, as a share of the lift.
const rounding = 1e-12

// finest is the steps in a degree that cam angles are rounded to, 1e-13 degree, so that
// a turn more or less, up to 1000 degrees either way, is exact and a knot is the same
// knot from both sides.
const finest = 1 << 43

// turned brings the rows into 0..360.
func turned(t Table) rows {
	n := len(t.Angle)
	r := rows{row: make([]int, n), at: make([]float64, n), lift: make([]float64, n)}
	reduced := make([]float64, n)
	for i, a := range t.Angle {
		a = math.Round((a-turn*math.Floor(a/turn))*finest) / finest
		if a < turn {
			reduced[i] = a
		}
		r.row[i] = i
	}
	slices.SortFunc(r.row, func(i, j int) int {
		if reduced[i] < reduced[j] {
			return -1
		}
		return 1
	})
	for k, i := range r.row {
		r.at[k], r.lift[k] = reduced[i], t.Lift[i]
	}
	return r
}

// angle returns the cam angle of row k for any k, going round.
func (r *rows) angle(k int) float64 {
	n := len(r.at)
	j := ((k % n) + n) % n
	return r.at[j] + turn*float64((k-j)/n)
}

// near returns the lift of a row at or beside a cam angle.
func (r *rows) near(deg float64) float64 {
	deg -= turn * math.Floor(deg/turn)
	k := sort.SearchFloat64s(r.at, deg)
	return r.lift[k%len(r.at)]
}

// divide makes every row a cell, or in a long table every stretch of half a degree that
// holds rows.
func (f *fitter) divide() []cell {
	n := len(f.at)
	number := func(k int) int {
		if n <= mostCells {
			return k
		}
		return int(f.at[k] / turn * mostCells)
	}
	var cells []cell
	for k := 0; k < n; {
		c := cell{first: k, low: f.lift[k], high: f.lift[k]}
		for k < n && number(k) == number(c.first) {
			c.low, c.high = math.Min(c.low, f.lift[k]), math.Max(c.high, f.lift[k])
			c.angle += f.at[k]
			c.lift += f.lift[k]
			c.count++
			k++
		}
		c.angle /= float64(c.count)
		c.lift /= float64(c.count)
		cells = append(cells, c)
	}
	for i := range cells {
		c := &cells[i]
		c.stretch = stretch{f.at[c.first], f.angle(c.first + c.count)}
		for k := c.first; k < c.first+c.count; k++ {
			c.add(c.unit(f.at[k]), 1/float64(c.count), f.lift[k]/float64(c.count))
		}
	}
	return cells
}

// scattering estimates the standard deviation of the rows' noise: how far each lies from the
// polynomial of degree 5 through its six neighbors, over what noise of 1 would make of it,
// the median over the rows that do not lie exactly on it. The ends of rises are too few to
// move a median. P. J. Rousseeuw and C. Croux, J. Amer. Stat. Assoc. 88 (1993) 1273-1283,
// for the median and its factor (cited from memory).
func (f *fitter) scattering() float64 {
	var sizes []float64
	for k := range f.at {
		off, gain := f.off(k)
		if off = math.Abs(off) / gain; off > rounding*f.size() {
			sizes = append(sizes, off)
		}
	}
	if len(sizes) == 0 {
		return 0
	}
	slices.Sort(sizes)
	const normal = 0.6745 // median of the absolute value of a normal variable
	return sizes[len(sizes)/2] / normal
}

// off returns how far row k lies from the polynomial through the three rows before and the
// three after, and the standard deviation of that if all seven had noise of deviation 1.
func (f *fitter) off(k int) (off, gain float64) {
	var x [7]float64
	n := len(f.at)
	for i := range x {
		x[i] = f.angle(k - 3 + i)
	}
	square := 1.0
	for i := range x {
		if i == 3 {
			continue
		}
		w := 1.0
		for j := range x {
			if j != i && j != 3 {
				w *= (x[3] - x[j]) / (x[i] - x[j])
			}
		}
		off -= w * (f.lift[((k-3+i)%n+n)%n] - f.lift[k]) // the weights add up to 1
		square += w * w
	}
	return off, math.Sqrt(square)
}

// lastPlace returns the last place the lifts are written to: the largest power of ten that
// all are multiples of, 0 when that is below a millionth of a millionth of the largest.
// Rounding to it is noise of a known size, also where the lift moves by less than that
// from row to row and looks like stairs.
func (f *fitter) lastPlace() float64 {
	largest := f.size()
	for places := 0; places <= 12; places++ {
		scale := math.Pow(10, float64(places))
		whole := true
		for _, y := range f.lift {
			if whole = math.Abs(y*scale-math.Round(y*scale)) <= 1e-9+1e-15*largest*scale; !whole {
				break
			}
		}
		if whole {
			return 1 / scale
		}
		if scale*largest > 1e12 {
			break
		}
	}
	return 0
}
