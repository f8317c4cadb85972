package lattice

import "fmt"

// Bond joins two sites. From and To are all that a bond list of one's own
// needs; the other fields are filled by [Cluster.Bonds].
type Bond struct {
	From, To     int
	Shell        int        // neighbour shell, 1 = nearest; 0 if chosen by its displacement
	Displacement [2]float64 // Cartesian, from From to To along this bond
	Cells        [2]int     // cell displacement before folding
	Wrap         [2]int     // how often the bond crosses period 1 and 2, in their positive direction
}

// Bonds returns the bonds of a neighbour shell (1 = nearest neighbours), each
// geometric bond once: ordered by From, and for each From by (orbital of To,
// y, x) of the cell displacement. A bond starts at the lower orbital; between
// equal orbitals it leads towards growing y, or growing x at equal y.
//
// Two bonds may join the same two sites by different displacements of the same
// length; see [Simple].
//
// Errors: a shell below 1 or above LargestShell; on a periodic cluster, a
// displacement that joins a site to itself or has a shorter image (the shell
// reaches beyond half of the cluster); on an open cluster, a shell without
// bonds.
func (c *Cluster) Bonds(shell int) ([]Bond, error) {
	shells, err := c.lattice.shells(shell)
	if err != nil {
		return nil, err
	}
	steps := shells[shell-1]
	for _, d := range steps {
		if near := c.shortest(d.vector); near < d.distance*(1-1e-9) {
			what := fmt.Sprintf("joins sites that are only %.4g apart", near)
			if near < 1e-9*d.distance {
				what = "joins a site to itself"
			}
			return nil, fmt.Errorf("lattice: neighbour shell %d (distance %.4g) reaches too far on this cluster (%v): the cell displacement (%d,%d) %s; use a larger cluster, a nearer shell or an open boundary",
				shell, d.distance, c, d.cells[0], d.cells[1], what)
		}
	}
	var bonds []Bond
	for site := range c.Sites() {
		cell, orbital := c.CellOf(site)
		for _, d := range steps {
			if d.from != orbital {
				continue
			}
			number, wrap, ok := c.cellAt([2]int{cell[0] + d.cells[0], cell[1] + d.cells[1]})
			if ok {
				bonds = append(bonds, Bond{site, number*c.Orbitals() + d.to, shell, d.vector, d.cells, wrap})
			}
		}
	}
	if len(bonds) == 0 {
		return nil, fmt.Errorf("lattice: no two sites of this cluster (%v) are neighbours of shell %d (distance %.4g); use a larger cluster or a nearer shell", c, shell, steps[0].distance)
	}
	return bonds, nil
}

// BondTo returns the bond that leads from a site to an orbital of the cell that
// lies cells away (in a1, a2), with Shell 0. ok is false where there is no such
// site, and where the bond would join the site to itself.
func (c *Cluster) BondTo(site int, cells [2]int, orbital int) (bond Bond, ok bool) {
	const far = 1 << 30
	if site < 0 || site >= c.Sites() || orbital < 0 || orbital >= c.Orbitals() ||
		cells[0] > far || cells[0] < -far || cells[1] > far || cells[1] < -far {
		return Bond{}, false
	}
	cell, from := c.CellOf(site)
	number, wrap, ok := c.cellAt([2]int{cell[0] + cells[0], cell[1] + cells[1]})
	to := number*c.Orbitals() + orbital
	if !ok || to == site {
		return Bond{}, false
	}
	offset := minus(c.lattice.Sites[orbital], c.lattice.Sites[from])
	vector := plus(offset, c.lattice.point(float64(cells[0]), float64(cells[1])))
	return Bond{From: site, To: to, Displacement: vector, Cells: cells, Wrap: wrap}, true
}

// Simple returns the bonds without those that join two sites which an earlier
// bond joins already, in either direction: at most one bond for each pair of
// sites. The phase that a twist gives to a merged bond is that of the first.
func Simple(bonds []Bond) []Bond {
	seen := map[[2]int]bool{}
	var simple []Bond
	for _, b := range bonds {
		pair := [2]int{min(b.From, b.To), max(b.From, b.To)}
		if !seen[pair] {
			seen[pair] = true
			simple = append(simple, b)
		}
	}
	return simple
}

// Distance returns the distance of two sites, the shortest of their images on
// a periodic cluster. Both must lie in 0 … Sites()-1.
func (c *Cluster) Distance(i, j int) float64 {
	return c.shortest(minus(c.Position(j), c.Position(i)))
}
