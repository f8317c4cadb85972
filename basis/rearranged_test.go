package basis

import (
	"fmt"
	"math/cmplx"
	"testing"

	"ketloom/basis/group"
)

// Small sectors are compared as numbers; here they are rearranged by sublattice as
// large ones are, and pass the same tests.
func TestRearrangedWords(t *testing.T) {
	defer func(from uint64) { rearrangeFrom = from }(rearrangeFrom)
	rearrangeFrom = 0
	t.Run("momenta", TestMomentumSectorsOfEveryKindAddUp)
	t.Run("torus", TestTorusSectorsWithParticleNumber)
	t.Run("monomial", TestRandomMonomialSymmetries)
	t.Run("known", TestDimensionsOfKnownSectors)
	t.Run("inversion", TestSpinInversionOnTheSquare)
	t.Run("blockade", TestBlockadedConfigurations)
}

// Both arrangements list the same orbits, with the same stabilisers, and give each
// configuration the same factor but for that of the representative.
func TestBothArrangementsAgree(t *testing.T) {
	defer func(from uint64) { rearrangeFrom = from }(rearrangeFrom)
	arranged := 0
	for name, c := range squareSectors(t) {
		rearrangeFrom = 1 << 40
		plain := made(t, c.space, c.sector)
		rearrangeFrom = 0
		other := made(t, c.space, c.sector)
		if !other.sym.words.isNatural() {
			arranged++
		}
		if plain.Len() != other.Len() {
			t.Fatalf("%s: %d states, rearranged %d", name, plain.Len(), other.Len())
		}
		for i := range plain.Len() {
			r := plain.At(i)
			j, turn, ok := other.Component(r)
			if !ok || other.Stabiliser(j) != plain.Stabiliser(i) {
				t.Fatalf("%s: state %d is not found, or has another stabiliser", name, i)
			}
			for _, k := range plain.Orbit(i, nil) {
				at, factor, ok := other.Component(k.Configuration)
				// Both vectors are equal up to one phase, seen at the representative.
				want := turn / plainFactor(plain, i) * k.Factor
				if !ok || at != j || cmplx.Abs(factor-want) > 1e-12 {
					t.Fatalf("%s: %b has the factor %v in state %d, want %v in %d", name, k.Configuration, factor, at, want, j)
				}
			}
		}
		batch := &Batch{}
		for k := range Configuration(1) << (c.space.bits + 1) {
			batch.Configurations = append(batch.Configurations, k)
		}
		other.LocateAll(batch)
		for n, k := range batch.Configurations {
			i, phase, ok := other.Locate(k)
			if !ok {
				i, phase = -1, 0
			}
			if batch.States[n] != i || ok && batch.Phases[n] != phase {
				t.Fatalf("%s: %b is located at %d (%d), together with others at %d (%d)", name, k, i, phase, batch.States[n], batch.Phases[n])
			}
		}
	}
	if arranged < 4 {
		t.Errorf("%d sectors were rearranged; the test means nothing", arranged)
	}
}

// squareSectors are sectors of 12 sites on a 4×3 torus, and of 6 electron sites on a
// ring, with translations, a reflection and the exchange of the two levels or spins.
func squareSectors(t *testing.T) map[string]struct {
	space  *Space
	sector Sector
} {
	t.Helper()
	list := map[string]struct {
		space  *Space
		sector Sector
	}{}
	move := func(f func(x, y int) (int, int)) group.Action {
		p := make(group.Permutation, 12)
		for x := range 4 {
			for y := range 3 {
				u, v := f(x, y)
				p[x+4*y] = (u+8)%4 + 4*((v+6)%3)
			}
		}
		return group.Translate(p)
	}
	for kx := range 4 {
		gens := []group.Eigenvalue{
			{Generator: move(func(x, y int) (int, int) { return x + 1, y }), Turn: group.NewTurn(int64(kx), 4)},
			{Generator: move(func(x, y int) (int, int) { return x, y + 1 }), Turn: group.NewTurn(int64(kx), 3)},
		}
		for name, site := range map[string]Site{"spins": SpinHalf(), "fermions": Fermion()} {
			space, _ := Uniform(12, site)
			charge := space.ParticleNumber().Is(6)
			if name == "spins" {
				charge = space.TwiceSz().Is(0)
			}
			list[fmt.Sprint(name, kx)] = struct {
				space  *Space
				sector Sector
			}{space, Sector{Charges: []ChargeValue{charge}, Symmetries: gens}}
		}
		if kx%2 == 0 {
			space, _ := Uniform(12, SpinHalf())
			all := append(gens[:1:1], group.Eigenvalue{Generator: move(func(x, y int) (int, int) { return x, y + 1 })},
				group.Eigenvalue{Generator: move(func(x, y int) (int, int) { return -x, -y }), Turn: group.NewTurn(1, 2)},
				group.Eigenvalue{Generator: group.Relabel(12, []int{1, 0}), Turn: group.NewTurn(1, 2)})
			list[fmt.Sprint("inversion", kx)] = struct {
				space  *Space
				sector Sector
			}{space, Sector{Charges: []ChargeValue{space.TwiceSz().Is(0)}, Symmetries: all}}
		}
	}
	electrons, _ := Uniform(6, Electron())
	list["electrons"] = struct {
		space  *Space
		sector Sector
	}{electrons, Sector{
		Charges:    []ChargeValue{electrons.ParticleNumber().Is(6), electrons.TwiceSz().Is(0)},
		Symmetries: []group.Eigenvalue{{Generator: ringShift(6), Turn: group.NewTurn(1, 2)}, {Generator: group.Relabel(6, []int{0, 2, 1, 3})}},
	}}
	return list
}

func made(t *testing.T, space *Space, sector Sector) *Basis {
	t.Helper()
	b, err := New(background, space, sector, nil)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func plainFactor(b *Basis, i int) complex128 {
	_, factor, _ := b.Component(b.At(i))
	return factor
}
