package lattice

import (
	"fmt"
	"math"
	"sort"
)

// LargestShell is the farthest neighbour shell that can be asked for.
const LargestShell = 100

// mostDisplacements bounds the search for shells.
const mostDisplacements = 1 << 21

// displacement leads from one orbital of a cell to another orbital, of the
// cell that is cells away. Of a displacement and its opposite only one is
// listed: from the lower orbital, or upwards (towards growing y, then x)
// between equal orbitals.
type displacement struct {
	from, to int
	cells    [2]int
	vector   [2]float64
	distance float64
}

// Distances returns the distances of the first count neighbour shells of the
// infinite lattice, ascending.
func (l Lattice) Distances(count int) ([]float64, error) {
	if err := l.Check(); err != nil {
		return nil, err
	}
	shells, err := l.shells(count)
	if err != nil {
		return nil, err
	}
	distances := make([]float64, len(shells))
	for i, s := range shells {
		distances[i] = s[0].distance
	}
	return distances, nil
}

// shells returns the displacements of the first count shells.
func (l Lattice) shells(count int) ([][]displacement, error) {
	if count < 1 || count > LargestShell {
		return nil, fmt.Errorf("lattice: neighbour shell %d; shells 1 … %d are possible, 1 being the nearest neighbours", count, LargestShell)
	}
	for reach := 2; l.boxSize(reach) <= mostDisplacements; reach *= 2 {
		shells := groupByDistance(l.displacements(reach), l.radius(reach))
		if len(shells) >= count {
			return shells[:count], nil
		}
	}
	return nil, fmt.Errorf("lattice: neighbour shell %d of %q lies too many cells away; choose a nearer shell, or lattice vectors that are shorter or less skew", count, l.Name)
}

// boxSize is the number of displacements up to reach cells away.
func (l Lattice) boxSize(reach int) int {
	side := 2*reach + 1
	if l.Dimension == 1 {
		return side * len(l.Sites) * len(l.Sites)
	}
	return side * side * len(l.Sites) * len(l.Sites)
}

// radius is a distance up to which no displacement leads more than reach
// cells away.
func (l Lattice) radius(reach int) float64 {
	spread := 0.0
	for _, p := range l.Sites {
		for _, q := range l.Sites {
			spread = max(spread, length(minus(p, q)))
		}
	}
	height := length(l.A1)
	if l.Dimension == 2 {
		height = math.Abs(cross(l.A1, l.A2)) / max(length(l.A1), length(l.A2))
	}
	return float64(reach+1)*height - spread
}

// displacements lists those that lead up to reach cells away along a1 and a2,
// ordered by (from, to, y, x).
func (l Lattice) displacements(reach int) []displacement {
	reachY := reach
	if l.Dimension == 1 {
		reachY = 0
	}
	var list []displacement
	for from := range l.Sites {
		for to := from; to < len(l.Sites); to++ {
			for y := -reachY; y <= reachY; y++ {
				for x := -reach; x <= reach; x++ {
					if from == to && (y < 0 || y == 0 && x <= 0) {
						continue
					}
					v := plus(minus(l.Sites[to], l.Sites[from]), l.point(float64(x), float64(y)))
					list = append(list, displacement{from, to, [2]int{x, y}, v, length(v)})
				}
			}
		}
	}
	return list
}

// groupByDistance sorts displacements into shells up to the given radius.
func groupByDistance(list []displacement, radius float64) [][]displacement {
	sort.SliceStable(list, func(i, j int) bool { return list[i].distance < list[j].distance })
	var shells [][]displacement
	start := 0.0
	for _, d := range list {
		if d.distance > radius*(1-1e-9) {
			break
		}
		if len(shells) == 0 || d.distance > start*(1+1e-9) {
			shells, start = append(shells, nil), d.distance
		}
		shells[len(shells)-1] = append(shells[len(shells)-1], d)
	}
	for _, s := range shells {
		sort.SliceStable(s, func(i, j int) bool { return s[i].before(s[j]) })
	}
	return shells
}

// before orders displacements by (from, to, y, x).
func (d displacement) before(e displacement) bool {
	switch {
	case d.from != e.from:
		return d.from < e.from
	case d.to != e.to:
		return d.to < e.to
	case d.cells[1] != e.cells[1]:
		return d.cells[1] < e.cells[1]
	}
	return d.cells[0] < e.cells[0]
}
