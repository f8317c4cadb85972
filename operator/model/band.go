package model

import (
	"fmt"
	"math"
	"math/cmplx"

	"ketloom/basis/lattice"
)

// MostRange bounds the cell displacements of hoppings and interactions.
const MostRange = 1 << 10

// Hopping is the term t·c†_{To, r+R} c_{From, r} + h.c., summed over all cells
// r, with t the Amplitude and R = Cells[0]·a1 + Cells[1]·a2. From = To with
// R = 0 is an on-site energy: its amplitude is real and counts once.
type Hopping struct {
	From, To  int
	Cells     [2]int
	Amplitude complex128
}

// Interaction is the density-density term V·n_{From, r} n_{To, r+R}, summed
// over all cells r, with V the Strength.
type Interaction struct {
	From, To int
	Cells    [2]int
	Strength float64
}

// TightBinding is a model of bands with density-density interactions: the
// sites of a cell of the Lattice are its orbitals. Each hopping is listed once,
// its Hermitian conjugate is understood; each interaction is listed once.
// Entries that are listed twice add up.
type TightBinding struct {
	Name         string
	Lattice      lattice.Lattice
	Hoppings     []Hopping
	Interactions []Interaction
}

// Orbitals returns the number of orbitals in a cell.
func (m TightBinding) Orbitals() int { return len(m.Lattice.Sites) }

// Check reports why m is not a model: an impossible lattice, an orbital that
// the cell does not have, a displacement along the second direction in one
// dimension or beyond MostRange, an amplitude that is not finite, a complex
// on-site energy, an interaction of an orbital with itself.
func (m TightBinding) Check() error {
	if err := m.Lattice.Check(); err != nil {
		return fmt.Errorf("model: %q: %w", m.Name, err)
	}
	for i, h := range m.Hoppings {
		if err := m.checkLink(h.From, h.To, h.Cells); err != nil {
			return fmt.Errorf("model: hopping %d of %q %w", i, m.Name, err)
		}
		if size := cmplx.Abs(h.Amplitude); !(size <= 1e100) {
			return fmt.Errorf("model: hopping %d of %q has the amplitude %v; give a finite number", i, m.Name, h.Amplitude)
		}
		if h.onSite() && imag(h.Amplitude) != 0 {
			return fmt.Errorf("model: hopping %d of %q is the on-site energy %v of orbital %d; give a real number", i, m.Name, h.Amplitude, h.From)
		}
	}
	for i, v := range m.Interactions {
		if err := m.checkLink(v.From, v.To, v.Cells); err != nil {
			return fmt.Errorf("model: interaction %d of %q %w", i, m.Name, err)
		}
		if !(math.Abs(v.Strength) <= 1e100) {
			return fmt.Errorf("model: interaction %d of %q has the strength %v; give a finite number", i, m.Name, v.Strength)
		}
		if v.From == v.To && v.Cells == [2]int{} {
			return fmt.Errorf("model: interaction %d of %q joins orbital %d to itself; give an on-site energy as a hopping instead", i, m.Name, v.From)
		}
	}
	return nil
}

func (m TightBinding) checkLink(from, to int, cells [2]int) error {
	if from < 0 || from >= m.Orbitals() || to < 0 || to >= m.Orbitals() {
		return fmt.Errorf("leads from orbital %d to orbital %d; the cell has the orbitals 0 … %d", from, to, m.Orbitals()-1)
	}
	if max(cells[0], cells[1]) > MostRange || min(cells[0], cells[1]) < -MostRange {
		return fmt.Errorf("leads %v cells away; up to %d are possible", cells, MostRange)
	}
	if m.Lattice.Dimension == 1 && cells[1] != 0 {
		return fmt.Errorf("leads %v cells away; on a lattice of one dimension give (x, 0)", cells)
	}
	return nil
}

func (h Hopping) onSite() bool { return h.From == h.To && h.Cells == [2]int{} }

// Bloch returns the Bloch Hamiltonian in the periodic gauge, which knows cells
// but not the places of orbitals in them,
//
//	h_{ab}(k) = Σ t·exp(-ik·R) over the hoppings from b to a, and conjugates,
//
// such that the state c†_{a,k} = N^(-1/2) Σ_r exp(ik·r) c†_{a,r} is carried
// along and T_a acts on it as exp(-ik·a). The momentum is given in turns,
// k1 = k·a1/2π and k2 = k·a2/2π. The matrix is row-major, orbitals × orbitals,
// exactly Hermitian and exactly periodic in whole turns up to rounding of k.
// The model must have passed [TightBinding.Check].
func (m TightBinding) Bloch(k1, k2 float64) []complex128 {
	n := m.Orbitals()
	h := make([]complex128, n*n)
	for _, t := range m.Hoppings {
		if t.onSite() {
			h[t.From*n+t.From] += t.Amplitude
			continue
		}
		z := t.Amplitude * turn(-(k1*float64(t.Cells[0]) + k2*float64(t.Cells[1])))
		h[t.To*n+t.From] += z
		h[t.From*n+t.To] += cmplx.Conj(z)
	}
	return h
}

// turn returns exp(2πix).
func turn(x float64) complex128 {
	s, c := math.Sincos(2 * math.Pi * (x - math.Round(x)))
	return complex(c, s)
}

// BandState is an eigenstate of the Bloch Hamiltonian: Σ_a Amplitudes[a]
// c†_{a,k}|0⟩, normalised to one. Its phase is fixed: the component of largest
// modulus is real and positive, the one of the lowest orbital where several
// agree to one part in 10⁹.
type BandState struct {
	Energy     float64
	Amplitudes []complex128
}

// Bands returns the eigenstates of the Bloch Hamiltonian at a momentum given
// in turns along a1 and a2, in ascending order of energy, one an orbital.
// Within a degenerate level the states are orthonormal but arbitrary.
func (m TightBinding) Bands(k1, k2 float64) ([]BandState, error) {
	if err := m.Check(); err != nil {
		return nil, err
	}
	if !(math.Abs(k1) < 1e9 && math.Abs(k2) < 1e9) {
		return nil, fmt.Errorf("model: the momentum (%v, %v); give turns, such as 0.25", k1, k2)
	}
	return m.bands(k1, k2), nil
}

func (m TightBinding) bands(k1, k2 float64) []BandState {
	values, vectors := eigenHermitian(m.Bloch(k1, k2), m.Orbitals())
	states := make([]BandState, len(values))
	for i := range states {
		fixPhase(vectors[i])
		states[i] = BandState{values[i], vectors[i]}
	}
	return states
}

// fixPhase makes the component of largest modulus real and positive.
func fixPhase(v []complex128) {
	largest := 0.0
	for _, z := range v {
		largest = max(largest, cmplx.Abs(z))
	}
	for i, z := range v {
		if size := cmplx.Abs(z); size >= largest*(1-1e-9) {
			factor := cmplx.Conj(z) / complex(size, 0)
			for j := range v {
				v[j] *= factor
			}
			v[i] = complex(size, 0)
			return
		}
	}
}
