package partial

import "math"

// stretch is an interval of the mesh, between two of its points; a rigid cell is
// one stretch.
type stretch struct {
	from, to float64 // degrees
	cell     int
	rigid    bool
}

func (s stretch) width() float64 { return s.to - s.from }

// mesh cuts free cells into stretches. Stretch i goes from point i to point i+1,
// the last to the first.
type mesh struct {
	line      *timeline
	stretches []stretch
	node      []int // index of the node at the start of each stretch, or -1
}

// newMesh cuts the free cells into about count stretches, of each cell at least
// least.
func newMesh(t *timeline, count, least int) *mesh {
	free := 0.0
	for _, c := range t.cells {
		if !c.rigid {
			free += c.to - c.from
		}
	}
	m := &mesh{line: t}
	for i, c := range t.cells {
		n := 1
		if !c.rigid {
			n = max(least, int(math.Ceil(float64(count)*(c.to-c.from)/free)))
		}
		at := c.from
		for k := range n {
			to := c.from + (c.to-c.from)*float64(k+1)/float64(n)
			if k == n-1 {
				to = c.to
			}
			m.stretches = append(m.stretches, stretch{at, to, i, c.rigid})
			m.node = append(m.node, -1)
			at = to
		}
		m.node[len(m.node)-n] = i
	}
	return m
}

// next returns the index of the point after point i.
func (m *mesh) next(i int) int { return (i + 1) % len(m.stretches) }

// cellOf returns the cell a stretch lies in.
func (m *mesh) cellOf(i int) cell { return m.line.cells[m.stretches[i].cell] }
