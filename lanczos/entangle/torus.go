package entangle

import (
	"fmt"
	"math"
)

// OnTorus returns the number of admissible configurations of the particles by
// the momentum (kx, ky) of a lattice of lx × ly cells with one orbital a cell, as
// it is found in a band of Chern number one; lx·ly must be the number of
// orbitals. Sectors come with ky running fastest; empty ones are included.
//
// Orbital j = 0 … lx·ly-1 is a Landau orbital on the torus with one flux quantum
// a cell. Moving it by one cell along x multiplies it by exp(-2πi j/lx), along y
// carries it to j + lx. So kx = Σ j mod lx, and the configurations of one kx are
// permuted, with the sign of reordering fermions, by a cyclic shift S of order
// ly, which its eigenvalues exp(-2πi ky/ly) resolve:
//
//	n(kx, ky) = (1/ly) Σ_m cos(2π m ky/ly) Tr_kx S^m,
//
// the trace over configurations that repeat themselves after gcd(m·lx, lx·ly)
// orbitals (Haldane, Phys. Rev. Lett. 55, 2095, 1985, for translations of many
// particles; Bernevig and Regnault, Phys. Rev. B 85, 075128, 2012, for lattice
// bands). The rule must be that of a quantum Hall phase, such as 1 in 3 for
// fermions or 1 in 2 for bosons; 1 in 2 for fermions, say, belongs to no phase, and
// its counting prefers a direction of the torus. Giving each orbital a momentum of
// its own, as [Exclusion.BySector] does, yields the same totals but in general not
// the same sectors.
func (e Exclusion) OnTorus(particles, lx, ly int) ([]SectorCount, error) {
	if lx < 1 || ly < 1 || lx*ly != e.Orbitals {
		return nil, fmt.Errorf("entangle: %d × %d cells for %d orbitals; one orbital a cell is needed", lx, ly, e.Orbitals)
	}
	if err := e.check(particles, nil); err != nil {
		return nil, err
	}
	traces := make([][]float64, ly) // by m, then kx
	for m := range traces {
		var err error
		if traces[m], err = e.trace(particles, lx, m*lx); err != nil {
			return nil, err
		}
	}
	var counts []SectorCount
	for kx := range lx {
		for ky := range ly {
			total := 0.0
			for m := range ly {
				total += traces[m][kx] * math.Cos(2*math.Pi*float64(m*ky%ly)/float64(ly))
			}
			total /= float64(ly)
			whole := math.Round(total)
			if math.Abs(total-whole) > 1e-6 || whole < 0 {
				return nil, fmt.Errorf("entangle: %v configurations at (%d, %d); the counting does not come out whole", total, kx, ky)
			}
			counts = append(counts, SectorCount{Charges: []int{kx, ky}, Count: uint64(whole)})
		}
	}
	return counts, nil
}

// mostTraced is the largest number of configurations of one kx. The sums over all
// shifts, of MostOrbitals at most, then keep their rounding far below one.
const mostTraced = 1 << 50

// trace returns, by Σ j mod lx, the sum of the signs of the admissible
// configurations that a shift by s orbitals carries to themselves.
func (e Exclusion) trace(particles, lx, s int) ([]float64, error) {
	sums := make([]float64, lx)
	period := greatestDivisor(e.Orbitals, s)
	repeats := e.Orbitals / period
	if particles%repeats != 0 {
		return sums, nil
	}
	inPeriod := particles / repeats
	counts, err := e.periodic(period, inPeriod, lx)
	if err != nil {
		return nil, err
	}
	sign := 1.0
	if wrapped := inPeriod * (s / period); !e.Bosons && wrapped*(particles-wrapped)%2 == 1 {
		sign = -1
	}
	// Σ j over all repeats, from that over one period.
	offset := period * inPeriod * (repeats * (repeats - 1) / 2)
	for k, count := range counts {
		if count > mostTraced {
			return nil, fmt.Errorf("entangle: %d configurations with one kx; at most %d are resolved by ky, give fewer particles or orbitals", count, int64(mostTraced))
		}
		sums[(repeats*k+offset)%lx] += sign * float64(count)
	}
	return sums, nil
}

func greatestDivisor(a, b int) int {
	for b != 0 {
		a, b = b, a%b
	}
	return a
}

// periodic counts fillings of one period whose repetition obeys the rule, by
// Σ j mod lx. A range that is longer than the period holds it several times.
func (e Exclusion) periodic(period, particles, lx int) ([]uint64, error) {
	counts := make([]uint64, lx)
	short := Exclusion{Most: e.Most - e.Range/period*particles, Range: e.Range % period, Orbitals: period, Bosons: e.Bosons}
	values := make([]int, period)
	for j := range values {
		values[j] = j
	}
	switch {
	case short.Most < 0:
		return counts, nil
	case short.Range == 0: // the range is so many whole periods: no rule is left
		short.Most, short.Range = e.Most, 1
	case short.Most == 0: // nothing may sit anywhere
		if particles == 0 {
			counts[0] = 1
		}
		return counts, nil
	}
	found, err := short.BySector(particles, []OrbitalCharge{{Modulus: lx, Values: values}})
	for _, c := range found {
		counts[c.Charges[0]] += c.Count
	}
	return counts, err
}
