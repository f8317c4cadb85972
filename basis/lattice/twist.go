package lattice

import "math"

// Gauge says where a boundary twist sits.
type Gauge int

const (
	// Uniform spreads the twist: every bond has a phase in proportion to its
	// displacement along the period. Translations stay symmetries.
	Uniform Gauge = iota
	// Boundary puts the twist on the bonds that cross a period; all other
	// phases are one, and a twist of half a turn keeps everything real.
	Boundary
)

// BondPhase returns the phase that a twist gives to the hop from b.From to
// b.To, the factor of c†_To c_From (the hop back has the conjugate):
//
//	Uniform:  exp(-2πi (twist[0]·x1 + twist[1]·x2)),  b.Displacement = x1·T1 + x2·T2
//	Boundary: exp(-2πi (twist[0]·b.Wrap[0] + twist[1]·b.Wrap[1]))
//
// The twist is in turns through the two periods, 0.5 being antiperiodic. The
// phases around any closed loop are equal in both gauges, exp(-2πi·twist[j])
// for a loop once along period j, so that the momenta of one particle become
// 2π(n+twist)/L. Multiples of an eighth of a turn are exact. The twist along
// an open direction has no effect. The bond must be made by [Cluster.Bonds]
// or [Cluster.BondTo]: one without a displacement, and any other gauge, give a
// phase that is not a number, which an operator refuses.
func (c *Cluster) BondPhase(b Bond, twist [2]float64, gauge Gauge) complex128 {
	var share [2]float64
	switch {
	case b.Displacement == [2]float64{}:
		return complex(math.NaN(), math.NaN())
	case gauge == Uniform:
		share[0], share[1] = c.shares(b.Displacement)
	case gauge == Boundary:
		share[0], share[1] = float64(b.Wrap[0]), float64(b.Wrap[1])
	default:
		return complex(math.NaN(), math.NaN())
	}
	turns := 0.0
	for d := range share {
		if c.periodic[d] {
			turns += twist[d] * share[d]
		}
	}
	return phase(-turns)
}

// shares returns x1, x2 with v = x1·T1 + x2·T2.
func (c *Cluster) shares(v [2]float64) (x1, x2 float64) {
	x, y := c.lattice.fractions(v)
	p := c.periods
	det := float64(p.det)
	return (x*float64(p.t2[1]) - y*float64(p.t2[0])) / det, (float64(p.t1[0])*y - float64(p.t1[1])*x) / det
}

// phase returns exp(2πi·turns), exact where turns is a multiple of 1/8.
func phase(turns float64) complex128 {
	turns -= math.Round(turns)
	eighths := math.Round(8 * turns)
	rest := turns - eighths/8
	s, c := math.Sincos(2 * math.Pi * rest)
	z := complex(c, s)
	switch modulo(int(eighths), 8) {
	case 1:
		return z * complex(math.Sqrt2/2, math.Sqrt2/2)
	case 2:
		return complex(-s, c)
	case 3:
		return z * complex(-math.Sqrt2/2, math.Sqrt2/2)
	case 4:
		return complex(-c, -s)
	case 5:
		return z * complex(-math.Sqrt2/2, -math.Sqrt2/2)
	case 6:
		return complex(s, -c)
	case 7:
		return z * complex(math.Sqrt2/2, -math.Sqrt2/2)
	}
	return z
}
