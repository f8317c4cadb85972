package lattice

import "fmt"

// Drawing is a picture of a cluster as plain data, in Cartesian coordinates.
type Drawing struct {
	Positions [][2]float64 // by site
	Orbitals  []int        // by site, for its colour
	Segments  []Segment    // one a bond
	Outline   [][2]float64 // corners of the parallelogram of the periods; two points in one dimension
}

// Segment is a bond as a straight line. One that crosses a periodic boundary
// starts at its From site and ends outside, where an image of its To site is.
type Segment struct {
	Start, End [2]float64
	Shell      int
	Crosses    bool
}

// Draw returns the picture of the cluster with the given bonds, made by
// [Cluster.Bonds] of this cluster. A bond from a site that the cluster does not
// have is an error.
func (c *Cluster) Draw(bonds []Bond) (Drawing, error) {
	d := Drawing{Positions: make([][2]float64, c.Sites()), Orbitals: make([]int, c.Sites())}
	for i := range d.Positions {
		d.Positions[i] = c.Position(i)
		_, d.Orbitals[i] = c.CellOf(i)
	}
	for _, b := range bonds {
		if b.From < 0 || b.From >= c.Sites() {
			return Drawing{}, fmt.Errorf("lattice: a bond from site %d; the cluster has the sites 0 … %d", b.From, c.Sites()-1)
		}
		start := c.Position(b.From)
		d.Segments = append(d.Segments, Segment{start, plus(start, b.Displacement), b.Shell, b.Wrap != [2]int{}})
	}
	d.Outline = [][2]float64{{0, 0}, c.period(0)}
	if c.lattice.Dimension == 2 {
		d.Outline = append(d.Outline, plus(c.period(0), c.period(1)), c.period(1))
	}
	return d, nil
}
