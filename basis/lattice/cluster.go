package lattice

import "fmt"

// MostSites is the largest number of sites of a cluster.
const MostSites = 1 << 16

// Cluster is a finite piece of a lattice with periodic or open boundaries. It
// does not change after it is made and may be shared.
type Cluster struct {
	lattice  Lattice
	periodic [2]bool // along T1, T2
	periods  periods
	homes    [][2]int // by cell number: the cell in the parallelogram
}

// New returns the periodic cluster whose cells are identified modulo the
// period vectors t1 and t2, in units of a1 and a2. They may be tilted, and
// either orientation will do; the number of cells is |t1×t2|. For a lattice
// of dimension 1, t1 = (n, 0) with n > 0 and t2 = (0, 0).
//
// Errors: an impossible lattice, period vectors that vanish or are parallel,
// more than MostSites sites.
func New(l Lattice, t1, t2 [2]int) (*Cluster, error) {
	if err := l.Check(); err != nil {
		return nil, err
	}
	if l.Dimension == 1 {
		if t1[0] < 1 || t1[1] != 0 || t2 != [2]int{0, 0} && t2 != [2]int{0, 1} {
			return nil, fmt.Errorf("lattice: the periods %v and %v for %q, which has one dimension; give (n, 0) with n > 0 and (0, 0)", t1, t2, l.Name)
		}
		return build(l, t1, [2]int{0, 1}, [2]bool{true, false})
	}
	return build(l, t1, t2, [2]bool{true, true})
}

// Torus returns the periodic cluster of l1×l2 cells: the cell (x, y) has the
// number x + l1·y. For a lattice of dimension 1, l2 = 1.
func Torus(l Lattice, l1, l2 int) (*Cluster, error) {
	if err := checkLengths(l, l1, l2); err != nil {
		return nil, err
	}
	return New(l, [2]int{l1, 0}, [2]int{0, l2})
}

// Ring returns the periodic chain of n sites, site i at the place i.
func Ring(n int) (*Cluster, error) { return Torus(Chain(), n, 1) }

// Cylinder returns l1×l2 cells, periodic along a1 and open along a2, numbered
// as on the torus.
func Cylinder(l Lattice, l1, l2 int) (*Cluster, error) {
	if err := checkLengths(l, l1, l2); err != nil {
		return nil, err
	}
	return build(l, [2]int{l1, 0}, [2]int{0, l2}, [2]bool{true, false})
}

// Open returns l1×l2 cells with open boundaries, numbered as on the torus. All
// sites of each cell are present. For a lattice of dimension 1, l2 = 1.
func Open(l Lattice, l1, l2 int) (*Cluster, error) {
	if err := checkLengths(l, l1, l2); err != nil {
		return nil, err
	}
	return build(l, [2]int{l1, 0}, [2]int{0, l2}, [2]bool{false, false})
}

func checkLengths(l Lattice, l1, l2 int) error {
	if err := l.Check(); err != nil {
		return err
	}
	if l1 < 1 || l2 < 1 {
		return fmt.Errorf("lattice: %q with %d×%d cells; give lengths of at least 1", l.Name, l1, l2)
	}
	if l.Dimension == 1 && l2 != 1 {
		return fmt.Errorf("lattice: %q with %d×%d cells; a lattice of one dimension has l2 = 1", l.Name, l1, l2)
	}
	return nil
}

func build(l Lattice, t1, t2 [2]int, periodic [2]bool) (*Cluster, error) {
	p, err := newPeriods(t1, t2)
	if err != nil {
		return nil, err
	}
	cells := p.m * p.h
	if cells > MostSites/len(l.Sites) {
		return nil, fmt.Errorf("lattice: %d cells of %d sites; a cluster has at most %d sites", cells, len(l.Sites), MostSites)
	}
	l.Sites = append([][2]float64(nil), l.Sites...)
	c := &Cluster{lattice: l, periodic: periodic, periods: p, homes: make([][2]int, cells)}
	for i := range c.homes {
		c.homes[i] = p.home([2]int{i % p.m, i / p.m})
	}
	return c, nil
}

// Lattice returns the lattice that the cluster is a piece of.
func (c *Cluster) Lattice() Lattice {
	l := c.lattice
	l.Sites = append([][2]float64(nil), l.Sites...)
	return l
}

// Sites returns the number of sites.
func (c *Cluster) Sites() int { return len(c.homes) * len(c.lattice.Sites) }

// Cells returns the number of cells.
func (c *Cluster) Cells() int { return len(c.homes) }

// Orbitals returns the number of sites in a cell.
func (c *Cluster) Orbitals() int { return len(c.lattice.Sites) }

// Periods returns the period vectors in units of a1 and a2; along an open
// direction the length of the cluster.
func (c *Cluster) Periods() (t1, t2 [2]int) { return c.periods.t1, c.periods.t2 }

// Periodic reports whether the cluster is periodic along its first and its
// second period vector.
func (c *Cluster) Periodic() (first, second bool) { return c.periodic[0], c.periodic[1] }

// String describes the cluster in one line.
func (c *Cluster) String() string {
	boundary := map[[2]bool]string{{true, true}: "periodic", {true, false}: "periodic along a1, open along a2", {false, false}: "open"}[c.periodic]
	if c.lattice.Dimension == 1 {
		boundary = map[bool]string{true: "periodic", false: "open"}[c.periodic[0]]
		return fmt.Sprintf("%s, %d sites, length %d, %s", c.lattice.Name, c.Sites(), c.periods.t1[0], boundary)
	}
	return fmt.Sprintf("%s, %d sites, T1 = (%d,%d), T2 = (%d,%d), %s", c.lattice.Name, c.Sites(),
		c.periods.t1[0], c.periods.t1[1], c.periods.t2[0], c.periods.t2[1], boundary)
}

// cellAt returns the number of a cell and how often it lies beyond each
// period; ok is false beyond an open boundary.
func (c *Cluster) cellAt(cell [2]int) (number int, wrap [2]int, ok bool) {
	if c.lattice.Dimension == 1 && cell[1] != 0 {
		return 0, wrap, false
	}
	w1, w2 := c.periods.turns(cell)
	if w1 != 0 && !c.periodic[0] || w2 != 0 && !c.periodic[1] {
		return 0, wrap, false
	}
	return c.periods.number(cell), [2]int{w1, w2}, true
}

// SiteAt returns the site of an orbital in a cell, any cell of the infinite
// lattice on a periodic cluster. It returns -1 beyond an open boundary, for an
// orbital that the cell does not have, and for a cell with a coordinate beyond
// ±2³⁰.
func (c *Cluster) SiteAt(cell [2]int, orbital int) int {
	const far = 1 << 30
	if orbital < 0 || orbital >= c.Orbitals() || cell[0] > far || cell[0] < -far || cell[1] > far || cell[1] < -far {
		return -1
	}
	number, _, ok := c.cellAt(cell)
	if !ok {
		return -1
	}
	return number*c.Orbitals() + orbital
}

// CellOf returns the cell of a site, that in the parallelogram of the periods,
// and its orbital. The site must lie in 0 … Sites()-1.
func (c *Cluster) CellOf(site int) (cell [2]int, orbital int) {
	return c.homes[site/c.Orbitals()], site % c.Orbitals()
}

// Position returns the Cartesian position of a site, the one in the cell that
// CellOf returns. The site must lie in 0 … Sites()-1.
func (c *Cluster) Position(site int) [2]float64 {
	cell, orbital := c.CellOf(site)
	return plus(c.lattice.point(float64(cell[0]), float64(cell[1])), c.lattice.Sites[orbital])
}

// period returns the Cartesian period vector of direction d = 0, 1.
func (c *Cluster) period(d int) [2]float64 {
	t := [2][2]int{c.periods.t1, c.periods.t2}[d]
	return c.lattice.point(float64(t[0]), float64(t[1]))
}
