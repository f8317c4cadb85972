package lattice

import "math"

// shortest returns the length of the shortest vector that is equivalent to v
// on the cluster.
func (c *Cluster) shortest(v [2]float64) float64 {
	switch {
	case c.periodic[0] && c.periodic[1]:
		p, q := reduced(c.period(0), c.period(1))
		det := cross(p, q)
		x, y := math.Round(cross(v, q)/det), math.Round(cross(p, v)/det)
		best := math.Inf(1)
		for dx := -1.0; dx <= 1; dx++ {
			for dy := -1.0; dy <= 1; dy++ {
				best = min(best, length(minus(v, plus(scale(x+dx, p), scale(y+dy, q)))))
			}
		}
		return best
	case c.periodic[0]:
		p := c.period(0)
		return length(minus(v, scale(math.Round(dot(v, p)/dot(p, p)), p)))
	}
	return length(v)
}

func scale(x float64, a [2]float64) [2]float64 { return [2]float64{x * a[0], x * a[1]} }

// reduced returns the shortest basis of the lattice that p and q span, by the
// algorithm of Lagrange and Gauss.
func reduced(p, q [2]float64) ([2]float64, [2]float64) {
	if length(p) > length(q) {
		p, q = q, p
	}
	for {
		q = minus(q, scale(math.Round(dot(p, q)/dot(p, p)), p))
		if length(q) >= length(p)*(1-1e-12) {
			return p, q
		}
		p, q = q, p
	}
}
