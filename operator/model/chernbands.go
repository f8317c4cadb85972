package model

import (
	"math"

	"ketloom/basis/lattice"
)

// Amplitudes at which the lower checkerboard band is nearly flat, in units of
// t1.
const (
	// SunSecond and SunThird are the second- and third-neighbour amplitudes of
	// Sun, Gu, Katsura and Das Sarma (Phys. Rev. Lett. 106, 236803, 2011), the
	// latter from memory, with the sign that makes the lower band flat.
	SunSecond = 1 / (2 + math.Sqrt2)
	SunThird  = 1 / (2 + 2*math.Sqrt2)
	// NeupertSecond is the second-neighbour amplitude of Neupert, Santos, Chamon
	// and Mudry (Phys. Rev. Lett. 106, 236804, 2011).
	NeupertSecond = math.Sqrt2 / 2
)

// Checkerboard returns the two-band model on the checkerboard lattice of Sun,
// Gu, Katsura and Das Sarma (Phys. Rev. Lett. 106, 236803, 2011) and Neupert,
// Santos, Chamon and Mudry (Phys. Rev. Lett. 106, 236804, 2011),
//
//	h(k) = 4·t3 cos kx cos ky + [[z, g], [g*, -z]]
//	g = t1 [e^(-iπ/4)(1 + e^(i(ky-kx))) + e^(iπ/4)(e^(-ikx) + e^(iky))]
//	z = 2·t2 (cos kx - cos ky)
//
// with k in the periodic gauge. The t3 term changes the energies but not the
// states. The lower band has the Chern number -1 at t2 > 0, by the orientation
// of [TightBinding.Chern]. Neighbouring sites repel with strength v: A(r) and B(r+d) with d =
// (0,0), (-1,0), (0,1), (-1,1).
func Checkerboard(t1, t2, t3, v float64) TightBinding {
	m := TightBinding{Name: "checkerboard", Lattice: lattice.Checkerboard()}
	chiral := complex(math.Sqrt2/2, -math.Sqrt2/2)
	for _, n := range []struct {
		d     [2]int
		phase complex128
	}{
		{[2]int{0, 0}, chiral}, {[2]int{-1, 1}, chiral},
		{[2]int{-1, 0}, conj(chiral)}, {[2]int{0, 1}, conj(chiral)},
	} {
		m.Hoppings = append(m.Hoppings, Hopping{1, 0, [2]int{-n.d[0], -n.d[1]}, complex(t1, 0) * n.phase})
		m.Interactions = append(m.Interactions, Interaction{0, 1, n.d, v})
	}
	for orbital, sign := range []float64{1, -1} {
		m.Hoppings = append(m.Hoppings,
			Hopping{orbital, orbital, [2]int{1, 0}, complex(sign*t2, 0)},
			Hopping{orbital, orbital, [2]int{0, 1}, complex(-sign*t2, 0)})
		if t3 != 0 {
			m.Hoppings = append(m.Hoppings,
				Hopping{orbital, orbital, [2]int{1, 1}, complex(t3, 0)},
				Hopping{orbital, orbital, [2]int{1, -1}, complex(t3, 0)})
		}
	}
	return m
}

func conj(z complex128) complex128 { return complex(real(z), -imag(z)) }

// Haldane returns the honeycomb model of Haldane (Phys. Rev. Lett. 61, 2015,
// 1988),
//
//	h_AB = t1 (1 + e^(-ik1) + e^(-ik2))
//	h_AA, h_BB = 2·t2 cos φ [cos k1 + cos k2 + cos(k1-k2)]
//	             ± (mass - 2·t2 sin φ [sin k1 - sin k2 - sin(k1-k2)])
//
// with k1 = k·a1, k2 = k·a2 in the periodic gauge and φ in radians. At
// |mass| < 3√3 |t2 sin φ| the lower band has the Chern number sgn(t2 sin φ).
// Neighbouring sites repel with strength v.
func Haldane(t1, t2, phi, mass, v float64) TightBinding {
	m := TightBinding{Name: "Haldane honeycomb", Lattice: lattice.Honeycomb()}
	for _, d := range [][2]int{{0, 0}, {-1, 0}, {0, -1}} {
		m.Hoppings = append(m.Hoppings, Hopping{1, 0, [2]int{-d[0], -d[1]}, complex(t1, 0)})
		m.Interactions = append(m.Interactions, Interaction{0, 1, d, v})
	}
	for orbital, sign := range []float64{1, -1} {
		m.Hoppings = append(m.Hoppings, Hopping{orbital, orbital, [2]int{}, complex(sign*mass, 0)})
		s, c := math.Sincos(sign * phi)
		for _, d := range [][2]int{{-1, 0}, {0, 1}, {1, -1}} {
			m.Hoppings = append(m.Hoppings, Hopping{orbital, orbital, d, complex(t2*c, t2*s)})
		}
	}
	return m
}
