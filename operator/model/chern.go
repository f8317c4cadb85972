package model

import (
	"fmt"
	"math"
	"math/cmplx"
)

// Dispersion describes a band on a grid of momenta.
type Dispersion struct {
	Lowest, Highest float64 // band energies
	GapBelow        float64 // lowest energy of this band minus the highest of the one below; +Inf if there is none
	GapAbove        float64 // lowest energy of the band above minus the highest of this one; +Inf if there is none
}

// Width returns Highest - Lowest.
func (d Dispersion) Width() float64 { return d.Highest - d.Lowest }

// Flatness returns the smaller gap divided by the width, negative where bands
// overlap.
func (d Dispersion) Flatness() float64 { return min(d.GapBelow, d.GapAbove) / d.Width() }

// Dispersion returns the extremal energies and the indirect gaps of a band
// (0 = lowest) on the momenta k = 2π(n1/l1, n2/l2). On a lattice of one
// dimension l2 = 1.
func (m TightBinding) Dispersion(band, l1, l2 int) (Dispersion, error) {
	grid, err := m.grid(band, l1, l2, [2]float64{})
	if err != nil {
		return Dispersion{}, err
	}
	d := Dispersion{math.Inf(1), math.Inf(-1), math.Inf(1), math.Inf(1)}
	below, above := math.Inf(-1), math.Inf(1)
	for _, states := range grid {
		d.Lowest, d.Highest = min(d.Lowest, states[band].Energy), max(d.Highest, states[band].Energy)
		if band > 0 {
			below = max(below, states[band-1].Energy)
		}
		if band+1 < len(states) {
			above = min(above, states[band+1].Energy)
		}
	}
	d.GapBelow, d.GapAbove = d.Lowest-below, above-d.Highest
	return d, nil
}

// mostMomenta bounds the grids of momenta.
const mostMomenta = 1 << 20

// grid returns the bands at k = 2π((n1+θ1)/l1, (n2+θ2)/l2), at n2 + l2·n1.
func (m TightBinding) grid(band, l1, l2 int, twist [2]float64) ([][]BandState, error) {
	if err := m.Check(); err != nil {
		return nil, err
	}
	if band < 0 || band >= m.Orbitals() {
		return nil, fmt.Errorf("model: band %d of %q, which has the bands 0 … %d", band, m.Name, m.Orbitals()-1)
	}
	if l1 < 1 || l2 < 1 || l1 > mostMomenta || l2 > mostMomenta/l1 {
		return nil, fmt.Errorf("model: a grid of %d×%d momenta; lengths of at least 1 and up to %d momenta are possible", l1, l2, mostMomenta)
	}
	if m.Lattice.Dimension == 1 && l2 != 1 {
		return nil, fmt.Errorf("model: a grid of %d×%d momenta for %q, which has one dimension; give l2 = 1", l1, l2, m.Name)
	}
	for _, t := range twist {
		if !(math.Abs(t) <= 1e6) {
			return nil, fmt.Errorf("model: a twist of %v turns; give a number such as 0.5", t)
		}
	}
	states := make([][]BandState, l1*l2)
	for n1 := range l1 {
		for n2 := range l2 {
			states[n2+l2*n1] = m.bands((float64(n1)+twist[0])/float64(l1), (float64(n2)+twist[1])/float64(l2))
		}
	}
	return states, nil
}

// checkSeparate refuses a band that touches a neighbour on the grid, and
// returns its smallest distance from them.
func (m TightBinding) checkSeparate(grid [][]BandState, band int) (float64, error) {
	gap, size := math.Inf(1), 0.0
	for _, states := range grid {
		for b, s := range states {
			size = max(size, math.Abs(s.Energy))
			if b == band-1 || b == band+1 {
				gap = min(gap, math.Abs(s.Energy-states[band].Energy))
			}
		}
	}
	if gap <= 1e-9*size {
		return gap, fmt.Errorf("model: band %d of %q touches another one, so that its states are not defined; choose other parameters, grid or twist", band, m.Name)
	}
	return gap, nil
}

// Topology is a Chern number with what it rests on.
type Topology struct {
	Chern       int
	Grid        [2]int  // momenta along each direction, after refinement
	Gap         float64 // smallest distance to the neighbouring bands at equal momentum, on the grid
	LargestFlux float64 // largest Berry flux through a plaquette of the grid, in turns
}

// mostFlux is the flux through a plaquette, in turns, above which a grid is
// refined: the method needs less than half a turn.
const mostFlux = 0.3

// mostRefined bounds the momenta of a refined grid.
const mostRefined = 1 << 18

// Chern returns the Chern number of a band (0 = lowest) on a grid of l1×l2
// momenta, by the link variables of Fukui, Hatsugai and Suzuki (J. Phys. Soc.
// Jpn. 74, 1674, 2005),
//
//	U_d(k) = ⟨u(k)|u(k+d)⟩,   C = (1/2π) Σ_k arg U_1(k) U_2(k+1) U_1(k+2)* U_2(k)*,
//
// which is an integer by construction and does not depend on phases of the
// states. With this orientation the lower band of the model of Haldane with
// t2·sin φ > 0 and M = 0 has C = +1. A grid that is too coarse can give a wrong
// integer: while more than 0.3 turns of flux pass through one plaquette, both
// lengths are doubled.
//
// Errors: a lattice of one dimension, a band that touches another one, a grid
// beyond 2¹⁸ momenta that is still too coarse (the band all but touches
// another).
func (m TightBinding) Chern(band, l1, l2 int) (Topology, error) {
	if m.Lattice.Dimension == 1 {
		return Topology{}, fmt.Errorf("model: the Chern number of %q, which has one dimension; two are needed", m.Name)
	}
	for {
		result, err := m.chernOn(band, l1, l2)
		if err != nil || result.LargestFlux <= mostFlux {
			return result, err
		}
		if l1 > mostRefined/4/l2 {
			return Topology{}, fmt.Errorf("model: %.2f turns of flux pass through one plaquette of a grid of %d×%d momenta in band %d of %q; the band all but touches another one, so choose other parameters", result.LargestFlux, l1, l2, band, m.Name)
		}
		l1, l2 = 2*l1, 2*l2
	}
}

// chernOn returns what one grid gives, trusted or not.
func (m TightBinding) chernOn(band, l1, l2 int) (Topology, error) {
	grid, err := m.grid(band, l1, l2, [2]float64{})
	if err != nil {
		return Topology{}, err
	}
	gap, err := m.checkSeparate(grid, band)
	if err != nil {
		return Topology{}, err
	}
	at := func(n1, n2 int) []complex128 { return grid[n2%l2+l2*(n1%l1)][band].Amplitudes }
	result := Topology{Grid: [2]int{l1, l2}, Gap: gap}
	total := 0.0
	for n1 := range l1 {
		for n2 := range l2 {
			loop := overlap(at(n1, n2), at(n1+1, n2)) * overlap(at(n1+1, n2), at(n1+1, n2+1)) *
				overlap(at(n1+1, n2+1), at(n1, n2+1)) * overlap(at(n1, n2+1), at(n1, n2))
			flux := cmplx.Phase(loop) / (2 * math.Pi)
			if !(cmplx.Abs(loop) > 1e-6) {
				flux = 0.5 // orthogonal neighbours: no phase is defined
			}
			result.LargestFlux = max(result.LargestFlux, math.Abs(flux))
			total += flux
		}
	}
	result.Chern = int(math.Round(total))
	return result, nil
}

// overlap returns ⟨u|v⟩.
func overlap(u, v []complex128) complex128 {
	sum := complex128(0)
	for i, z := range u {
		sum += cmplx.Conj(z) * v[i]
	}
	return sum
}
