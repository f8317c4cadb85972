package entangle

import (
	"math/cmplx"
	"slices"
	"testing"

	"ketloom/basis"
	"ketloom/lanczos/dense"
)

// This file computes density operators by their definition, in the whole space of
// occupation lists, with creators and annihilators as they stand in the textbook.
// It shares nothing with the package but the order of modes.

// modal is a vector over lists of levels of modes, first mode fastest.
type modal struct {
	levels    []int
	fermionic []bool
	psi       []complex128
}

func modalOf(s State) modal {
	space := s.basis.Space()
	v := modal{}
	size := 1
	for m := range space.Modes() {
		v.levels = append(v.levels, space.Mode(m).Levels)
		v.fermionic = append(v.fermionic, space.Mode(m).Fermionic)
		size *= space.Mode(m).Levels
	}
	v.psi = make([]complex128, size)
	for at := range v.psi {
		var c basis.Configuration
		for m, level := range v.list(at) {
			c |= basis.Configuration(level) << space.Mode(m).Shift
		}
		if i, factor, ok := s.basis.Component(c); ok {
			v.psi[at] = factor * s.amplitude(i)
		}
	}
	return v
}

func (v modal) list(at int) []int {
	list := make([]int, len(v.levels))
	for m, n := range v.levels {
		list[m] = at % n
		at /= n
	}
	return list
}

func (v modal) index(list []int) int {
	at := 0
	for m := len(list) - 1; m >= 0; m-- {
		at = at*v.levels[m] + list[m]
	}
	return at
}

// step applies |to⟩⟨from| of a mode to a vector. Operators that change the number
// of fermions carry the sign (-1)^(fermions below) of Jordan and Wigner (Z. Phys.
// 47, 631, 1928).
func (v modal) step(psi []complex128, mode, to, from int) []complex128 {
	out := make([]complex128, len(psi))
	for at, z := range psi {
		list := v.list(at)
		if z == 0 || list[mode] != from {
			continue
		}
		if v.fermionic[mode] && to != from {
			for m := range mode {
				if v.fermionic[m] && list[m] == 1 {
					z = -z
				}
			}
		}
		list[mode] = to
		out[v.index(list)] += z
	}
	return out
}

// densityOf returns ρ[x][y] = ⟨ |y⟩⟨x| ⟩ of the listed modes: the operator that
// carries configuration x of the part to y, built of one-mode operators. Fermions
// are annihilated from the last to the first and created in the reverse order, as
// (c†_1 c†_2 …)|0⟩⟨0|(… c_2 c_1) asks; the modes without fermions follow.
func densityOf(states []modal, part []int) (rho []complex128, n int) {
	shape := states[0]
	n = 1
	for _, m := range part {
		n *= shape.levels[m]
	}
	levelsOf := func(x int) []int {
		list := make([]int, len(part))
		for i, m := range part {
			list[i] = x % shape.levels[m]
			x /= shape.levels[m]
		}
		return list
	}
	rho = make([]complex128, n*n)
	for _, v := range states {
		for x := range n {
			for y := range n {
				phi := v.psi
				from, to := levelsOf(x), levelsOf(y)
				for i := range part { // annihilate, first mode first
					phi = v.step(phi, part[i], bottom(shape, part[i], from[i]), from[i])
				}
				for i := len(part) - 1; i >= 0; i-- {
					phi = v.step(phi, part[i], to[i], bottom(shape, part[i], from[i]))
				}
				for at, z := range phi {
					rho[x*n+y] += cmplx.Conj(v.psi[at]) * z / complex(float64(len(states)), 0)
				}
			}
		}
	}
	return rho, n
}

// bottom is where a mode waits between annihilation and creation.
func bottom(v modal, mode, from int) int {
	if v.fermionic[mode] {
		return 0
	}
	return from
}

// modesOf lists the modes of some sites, ascending.
func modesOf(space *basis.Space, sites []int) []int {
	var list []int
	for m := range space.Modes() {
		if slices.Contains(sites, space.Mode(m).Site) {
			list = append(list, m)
		}
	}
	return list
}

// spectrumOf returns the eigenvalues above 1e-20… of rounding, descending.
func spectrumOf(t testing.TB, rho []complex128, n int) []float64 {
	t.Helper()
	// A matrix of low rank: shifted by one, so that rounding is uniform.
	shifted := slices.Clone(rho)
	for i := range n {
		shifted[i*n+i] += 1
	}
	values, _, err := dense.EigenComplex(shifted, n, false)
	if err != nil {
		t.Fatal(err)
	}
	slices.Reverse(values)
	for i := range values {
		values[i]--
	}
	return values
}

// padded adds zeros.
func padded(list []float64, n int) []float64 {
	for len(list) < n {
		list = append(list, 0)
	}
	return list
}

var bruteSpaces = []struct {
	name  string
	sites []basis.Site
}{
	{"spins 1/2", repeated(7, basis.SpinHalf())},
	{"spins 1 and 3/2", []basis.Site{basis.Spin(2), basis.Spin(3), basis.Spin(2), basis.Spin(2)}},
	{"bosons", []basis.Site{basis.Boson(2), basis.HardCoreBoson(), basis.Boson(3), basis.Boson(2)}},
	{"fermions", repeated(7, basis.Fermion())},
	{"electrons", repeated(4, basis.Electron())},
	{"mixed", []basis.Site{basis.Electron(), basis.SpinHalf(), basis.Fermion(), basis.Boson(2), basis.Electron(), basis.Fermion()}},
}

func TestSpaceCutByDefinition(t *testing.T) {
	r := rng(1)
	for _, c := range bruteSpaces {
		space := makeSpace(t, c.sites...)
		sectors := []basis.Sector{{}}
		for _, q := range []basis.Charge{space.ParticleNumber(), space.TwiceSz()} {
			value := q.Of(space, middle(space))
			sectors = append(sectors, basis.Sector{Charges: []basis.ChargeValue{q.Is(value)}})
		}
		for i, sector := range sectors {
			b := makeBasis(t, space, sector)
			other := b
			if i == 1 && c.name != "spins 1/2" && c.name != "spins 1 and 3/2" {
				q := space.ParticleNumber()
				other = makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{q.Is(sector.Charges[0].Value - 1)}})
			}
			one := randomState(t, r, b)
			mixture := []State{one, randomState(t, r, other), randomState(t, r, b)}
			for _, states := range [][]State{{one}, mixture} {
				sites := r.Perm(len(c.sites))[:1+r.IntN(3)]
				for dimension(space, sites) > 24 { // the definition is slow
					sites = sites[1:]
				}
				var vectors []modal
				for _, s := range states {
					vectors = append(vectors, modalOf(s))
				}
				rho, n := densityOf(vectors, modesOf(space, sites))
				cut := spaceCut(t, states, sites...)
				nearAll(t, c.name, padded(weights(cut), n), spectrumOf(t, rho, n), 1e-13)
			}
		}
	}
}

// dimension of a part.
func dimension(space *basis.Space, sites []int) int {
	n := 1
	for _, site := range sites {
		n *= space.Site(site).Levels
	}
	return n
}

// middle is a product state with about half of everything.
func middle(space *basis.Space) basis.Configuration {
	levels := make([]int, space.Sites())
	for i := range levels {
		levels[i] = (i % 2) * (space.Site(i).Levels - 1)
		if space.Site(i).Kind == basis.KindElectron {
			levels[i] = 1 + i/2%2
		}
	}
	c, err := space.Configuration(levels)
	if err != nil {
		panic(err)
	}
	return c
}
