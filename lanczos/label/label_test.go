package label

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"testing"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/basis/lattice"
	"ketloom/lanczos/dense"
	"ketloom/operator"
	"ketloom/operator/matrix"
	"ketloom/operator/model"
)

func must[T any](t *testing.T) func(T, error) T {
	t.Helper()
	return func(x T, err error) T {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return x
	}
}

// solved diagonalises a sector whole: energies and vectors, one after the other.
func solved(t *testing.T, h operator.Operator, b *basis.Basis) ([]float64, [][]complex128) {
	t.Helper()
	m := must[*matrix.Matrix](t)(matrix.New(context.Background(), h, b, nil))
	energies, flat, err := dense.EigenComplex(m.Dense(), b.Len(), true)
	if err != nil {
		t.Fatal(err)
	}
	var vectors [][]complex128
	for i := range b.Len() {
		vectors = append(vectors, flat[i*b.Len():(i+1)*b.Len()])
	}
	return energies, vectors
}

// ring returns the Heisenberg ring of n spins 1/2 and its charge sector.
func ring(t *testing.T, n, twoSz int) (*lattice.Cluster, operator.Operator, *basis.Basis) {
	t.Helper()
	c := must[*lattice.Cluster](t)(lattice.Ring(n))
	space := must[*basis.Space](t)(basis.Uniform(n, basis.SpinHalf()))
	h := must[operator.Operator](t)(model.Heisenberg(space, c, []float64{1}))
	b := must[*basis.Basis](t)(basis.New(context.Background(), space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(twoSz)}}, nil))
	return c, h, b
}

// The traces of a symmetry in all multiplets add up to the number of configurations
// that it keeps, nothing leaks, and spins come with 2S+1 members over all S_z.
func TestMultipletsOfARing(t *testing.T) {
	const n = 8
	c, h, b := ring(t, n, 0)
	energies, vectors := solved(t, h, b)
	multiplets := must[[][2]int](t)(Multiplets(energies, 1e-8))
	shift := c.Translations()[0]
	reflection := must[group.Action](t)(c.Reflection(c.Position(0), [2]float64{0, 1}))
	inversion := group.Relabel(n, []int{1, 0})
	var sums [3]complex128
	spins := map[int]int{}
	for _, r := range multiplets {
		set := vectors[r[0] : r[1]+1]
		for i, g := range []group.Action{shift, reflection, inversion} {
			z := must[Representation](t)(Character(b, set, g))
			if math.Abs(z.Leak) > 1e-10 {
				t.Errorf("levels %v leak %v", r, z.Leak)
			}
			sums[i] += z.Trace
		}
		s := must[Spins](t)(Spin(context.Background(), b, set, nil))
		if s.Spread > 1e-9 {
			t.Errorf("levels %v: spread %v", r, s.Spread)
		}
		for _, twice := range s.Twice {
			spins[twice]++
		}
	}
	for i, want := range []float64{kept(b, shift), kept(b, reflection), kept(b, inversion)} {
		if cmplx.Abs(sums[i]-complex(want, 0)) > 1e-9 {
			t.Errorf("symmetry %d: traces add up to %v, want %v", i, sums[i], want)
		}
	}
	// Multiplets of n spins 1/2 with total spin S: C(n, n/2-S) - C(n, n/2-S-1).
	for twice, want := range map[int]int{0: 14, 2: 28, 4: 20, 6: 7, 8: 1} {
		if spins[twice] != want {
			t.Errorf("%d multiplets with 2S = %d, want %d", spins[twice], twice, want)
		}
	}
}

func kept(b *basis.Basis, g group.Action) float64 {
	t, _ := b.Space().Transform(g)
	count := 0.0
	for i := range b.Len() {
		if c, _ := t.Image(b.At(i)); c == b.At(i) {
			count++
		}
	}
	return count
}

// The ground state of the ring of 8 has momentum 0 and S = 0, that of 6 momentum π: the
// sign rule of W. Marshall, Proc. R. Soc. A 232, 48 (1955).
func TestMomentumOfGroundStates(t *testing.T) {
	for n, want := range map[int]complex128{6: -1, 8: 1} {
		c, h, b := ring(t, n, 0)
		_, vectors := solved(t, h, b)
		z := must[Representation](t)(Character(b, vectors[:1], c.Translations()[0]))
		if cmplx.Abs(z.Trace-want) > 1e-10 {
			t.Errorf("ring of %d: a shift gives %v, want %v", n, z.Trace, want)
		}
		if s := must[Spins](t)(Spin(context.Background(), b, vectors[:1], nil)); s.Text() != "S=0" {
			t.Errorf("ring of %d: %s, want S=0", n, s.Text())
		}
	}
}

// In a momentum sector the character of the translation is exp(-ik), and a reflection
// that turns k round leads out. Fermions and twisted momenta too.
func TestCharactersWithinMomentumSectors(t *testing.T) {
	const n = 6
	c := must[*lattice.Cluster](t)(lattice.Ring(n))
	reflection := must[group.Action](t)(c.Reflection(c.Position(0), [2]float64{0, 1}))
	for _, site := range []basis.Site{basis.SpinHalf(), basis.Fermion()} {
		space := must[*basis.Space](t)(basis.Uniform(n, site))
		o := operator.On(space)
		h := o.Zero()
		for i := range n {
			if site == basis.Fermion() {
				h = h.Plus(o.Create(i).Times(o.Annihilate((i + 1) % n))).Plus(o.Create((i + 1) % n).Times(o.Annihilate(i))).Plus(o.Number(i).Times(o.Number((i + 1) % n)))
			} else {
				h = h.Plus(o.Dot(i, (i+1)%n))
			}
		}
		for k := range n {
			b := must[*basis.Basis](t)(basis.New(context.Background(), space, basis.Sector{Symmetries: c.Sector(c.Momentum(k, 0))}, nil))
			energies, vectors := solved(t, h, b)
			set := must[[][2]int](t)(Multiplets(energies, 1e-9))[0]
			z := must[Representation](t)(Character(b, vectors[set[0]:set[1]+1], c.Translations()[0]))
			want := cmplx.Exp(complex(0, -2*math.Pi*float64(k)/n)) * complex(float64(set[1]-set[0]+1), 0)
			if cmplx.Abs(z.Trace-want) > 1e-9 {
				t.Errorf("%v at k = %d: a shift gives %v, want %v", site, k, z.Trace, want)
			}
			_, err := Character(b, vectors[:1], reflection)
			if leads := k != 0 && k != n/2; leads != errors.Is(err, ErrOutside) {
				t.Errorf("%v at k = %d: the reflection: %v", site, k, err)
			}
		}
	}
}

// One of two degenerate vectors is carried away by half: the shift of the ring of five
// turns the twofold ground level by ±2π/5 (or ±4π/5), and a mixture of both leaks.
func TestHalvesOfMultipletsAreSeen(t *testing.T) {
	c, h, b := ring(t, 5, 1)
	energies, vectors := solved(t, h, b)
	set := must[[][2]int](t)(Multiplets(energies, 1e-9))[0]
	if set != [2]int{0, 1} {
		t.Fatalf("the ground level of five spins is %v, want twofold", set)
	}
	shift := c.Translations()[0]
	whole := must[Representation](t)(Character(b, vectors[:2], shift))
	// A real vector of the level holds both momenta alike.
	mixed := make([]complex128, b.Len())
	norm := 0.0
	for i := range mixed {
		mixed[i] = complex(real(vectors[0][i]), 0)
		norm += real(mixed[i]) * real(mixed[i])
	}
	for i := range mixed {
		mixed[i] /= complex(math.Sqrt(norm), 0)
	}
	half := must[Representation](t)(Character(b, [][]complex128{mixed}, shift))
	if math.Abs(whole.Leak) > 1e-10 || half.Leak < 0.05 {
		t.Errorf("the whole multiplet leaks %v, a part of it %v", whole.Leak, half.Leak)
	}
}

func TestSpinsOfElectronsAndErrors(t *testing.T) {
	ctx := context.Background()
	space := must[*basis.Space](t)(basis.Uniform(2, basis.Electron()))
	c := must[*lattice.Cluster](t)(lattice.Open(lattice.Chain(), 2, 1))
	h := must[operator.Operator](t)(model.Hubbard(space, c, []float64{1}, 4, nil))
	b := must[*basis.Basis](t)(basis.New(ctx, space, basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(2), space.TwiceSz().Is(0)}}, nil))
	energies, vectors := solved(t, h, b)
	// Two sites at half filling: (U ∓ (U²+16t²)^½)/2 and U with S = 0, 0 with S = 1
	// (closed formula).
	for i, want := range []struct {
		e    float64
		spin string
	}{{2 - math.Sqrt(8), "S=0"}, {0, "S=1"}, {4, "S=0"}, {2 + math.Sqrt(8), "S=0"}} {
		s := must[Spins](t)(Spin(ctx, b, vectors[i:i+1], nil))
		if math.Abs(energies[i]-want.e) > 1e-12 || s.Text() != want.spin {
			t.Errorf("level %d: %v with %s, want %v with %s", i, energies[i], s.Text(), want.e, want.spin)
		}
	}
	mixed := []complex128{0.6, 0.8, 0, 0}
	if s, err := Spin(ctx, b, [][]complex128{mixed}, nil); err == nil && s.Spread < 1e-3 {
		t.Errorf("a mixture passes as %v", s)
	}
	if _, err := Spin(ctx, b, nil, nil); err == nil {
		t.Error("no vectors pass")
	}
	if _, err := Character(b, [][]complex128{{1}}, group.Translate(group.Permutation{1, 0})); err == nil {
		t.Error("a short vector passes")
	}
	if _, err := Multiplets([]float64{1, 0}, 0); err == nil {
		t.Error("energies that descend pass")
	}
	if _, err := Multiplets([]float64{0}, math.NaN()); err == nil {
		t.Error("a tolerance that is no number passes")
	}
}

func Example() {
	ctx := context.Background()
	c, _ := lattice.Ring(4)
	space, _ := basis.Uniform(4, basis.SpinHalf())
	h, _ := model.Heisenberg(space, c, []float64{1})
	b, _ := basis.New(ctx, space, basis.Sector{Charges: []basis.ChargeValue{space.TwiceSz().Is(0)}}, nil)
	m, _ := matrix.New(ctx, h, b, nil)
	energies, flat, _ := dense.EigenComplex(m.Dense(), b.Len(), true)
	sets, _ := Multiplets(energies, 1e-9)
	for _, set := range sets {
		var vectors [][]complex128
		for i := set[0]; i <= set[1]; i++ {
			vectors = append(vectors, flat[i*b.Len():(i+1)*b.Len()])
		}
		shift, _ := Character(b, vectors, c.Translations()[0])
		spin, _ := Spin(ctx, b, vectors, nil)
		fmt.Printf("%5.2f  shift %5.2f  %s\n", math.Round(100*energies[set[0]])/100+0, real(shift.Trace), spin.Text())
	}
	// Output:
	// -2.00  shift  1.00  S=0
	// -1.00  shift -1.00  S=1
	//  0.00  shift -1.00  S=0,1
	//  1.00  shift  1.00  S=2
}
