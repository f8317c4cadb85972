package model

import (
	"context"
	"fmt"
	"math"
	"math/big"
	"math/cmplx"
	"slices"
	"testing"

	"ketloom/basis"
	"ketloom/lanczos"
	"ketloom/lanczos/entangle"
	"ketloom/operator"
	"ketloom/operator/matrix"
)

// sphere is the lowest Landau level on a sphere around a monopole of 2Q flux quanta
// (Haldane, Phys. Rev. Lett. 51, 605, 1983): orbital k = 0 … 2Q has L_z = k - Q.
type sphere struct {
	twoQ  int
	space *basis.Space
	index basis.Charge // Σ k
}

func onSphere(t *testing.T, twoQ int) sphere {
	t.Helper()
	space := built[*basis.Space](t)(basis.Uniform(twoQ+1, basis.Fermion()))
	weights := make([]int, twoQ+1)
	for k := range weights {
		weights[k] = k
	}
	return sphere{twoQ, space, space.Weighted("index", 0, weights)}
}

// sector returns that of n fermions with twice the given L_z.
func (s sphere) sector(n, twoLz int) basis.Sector {
	return charges(s.space.ParticleNumber().Is(n), s.index.Is((n*s.twoQ+twoLz)/2))
}

// coupling returns the Clebsch-Gordan coefficient ⟨Q k1-Q, Q k2-Q | L, k1+k2-2Q⟩ by the
// formula of Racah (Phys. Rev. 62, 438, 1942), exact up to the last square root.
func (s sphere) coupling(k1, k2, l int) float64 {
	m := k1 + k2 - s.twoQ
	if l < m || l < -m {
		return 0
	}
	factorial := func(n int) *big.Int { return new(big.Int).MulRange(1, int64(n)) }
	product := func(list ...int) *big.Int {
		p := big.NewInt(1)
		for _, n := range list {
			p.Mul(p, factorial(n))
		}
		return p
	}
	sum := new(big.Rat)
	for i := 0; i <= s.twoQ-l; i++ {
		list := []int{i, s.twoQ - l - i, s.twoQ - k1 - i, k2 - i, l - s.twoQ + k1 + i, l - k2 + i}
		if min(list[2], list[3], list[4], list[5]) < 0 {
			continue
		}
		term := new(big.Rat).SetFrac(big.NewInt(int64(1-2*(i%2))), product(list...))
		sum.Add(sum, term)
	}
	square := new(big.Rat).SetFrac(product(l, l, s.twoQ-l, l+m, l-m, k1, s.twoQ-k1, k2, s.twoQ-k2), factorial(s.twoQ+l+1))
	square.Mul(square, big.NewRat(int64(2*l+1), 1))
	square.Mul(square, sum).Mul(square, sum)
	magnitude, _ := square.Float64()
	return math.Copysign(math.Sqrt(magnitude), float64(sum.Sign()))
}

// interaction returns Σ_pairs Σ_L V_L P(L), with P(L) the projector of a pair to total
// angular momentum L; fermions use L = 2Q-1, 2Q-3, …
func (s sphere) interaction(v []float64) operator.Operator {
	o := operator.On(s.space)
	type pair struct{ a, b int }
	byIndex := map[int][]pair{}
	amplitude := map[pair][]float64{}
	for a := range s.twoQ {
		for b := a + 1; b <= s.twoQ; b++ {
			p := pair{a, b}
			byIndex[a+b] = append(byIndex[a+b], p)
			amplitude[p] = make([]float64, len(v))
			for l := s.twoQ - 1; l >= 0; l -= 2 {
				amplitude[p][l] = math.Sqrt2 * s.coupling(a, b, l)
			}
		}
	}
	var terms []operator.Operator
	for sum := range 2*s.twoQ + 1 {
		for _, p := range byIndex[sum] {
			for _, q := range byIndex[sum] {
				element := 0.0
				for l := range v {
					element += v[l] * amplitude[p][l] * amplitude[q][l]
				}
				terms = append(terms, o.Create(p.a).Times(o.Create(p.b)).Times(o.Annihilate(q.b)).Times(o.Annihilate(q.a)).Scale(complex(element, 0)))
			}
		}
	}
	return operator.Sum(terms).NormalOrdered()
}

// shortRange is V = 1 at relative angular momentum 1 and 0 elsewhere.
func (s sphere) shortRange() []float64 {
	v := make([]float64, s.twoQ+1)
	v[s.twoQ-1] = 1
	return v
}

// coulomb returns the pseudopotentials of e²/εr with the chord r, in units of e²/εR
// (Fano, Ortolani and Colombo, Phys. Rev. B 34, 2670, 1986):
//
//	V_L = 2 C(4Q-2L, 2Q-L) C(4Q+2L+2, 2Q+L+1) / C(4Q+2, 2Q+1)²
func (s sphere) coulomb() []float64 {
	choose := func(n, k int) *big.Int { return new(big.Int).Binomial(int64(n), int64(k)) }
	whole := choose(2*s.twoQ+2, s.twoQ+1)
	v := make([]float64, s.twoQ+1)
	for l := range v {
		up := new(big.Int).Mul(choose(2*(s.twoQ-l), s.twoQ-l), choose(2*(s.twoQ+l+1), s.twoQ+l+1))
		v[l], _ = new(big.Rat).SetFrac(up.Lsh(up, 1), new(big.Int).Mul(whole, whole)).Float64()
	}
	return v
}

// raise is L⁺ = Σ_k [(2Q-k)(k+1)]^(1/2) c†_{k+1} c_k.
func (s sphere) raise() operator.Operator {
	o := operator.On(s.space)
	var terms []operator.Operator
	for k := range s.twoQ {
		terms = append(terms, o.Create(k+1).Times(o.Annihilate(k)).Scale(complex(math.Sqrt(float64((s.twoQ-k)*(k+1))), 0)))
	}
	return operator.Sum(terms)
}

// orbitalLevels are the lowest levels of a sector with their vectors.
type orbitalLevels struct {
	basis    *basis.Basis
	energies []float64
	vectors  [][]complex128
}

func solve(t *testing.T, h operator.Operator, sector basis.Sector, k int) orbitalLevels {
	t.Helper()
	ctx := context.Background()
	b := built[*basis.Basis](t)(basis.New(ctx, h.Space(), sector, nil))
	m := built[*matrix.Matrix](t)(matrix.New(ctx, h, b, nil))
	r := built[*lanczos.Result](t)(lanczos.Lowest(ctx, m, min(k, b.Len()), &lanczos.Options{Tolerance: 1e-12}))
	levels := orbitalLevels{basis: b}
	for i, v := range r.Vectors {
		levels.energies = append(levels.energies, r.Levels[i].Energy)
		levels.vectors = append(levels.vectors, v.AsComplex())
	}
	return levels
}

// image returns a·ψ in the same sector.
func (l orbitalLevels) image(t *testing.T, a operator.Operator, i int) []complex128 {
	t.Helper()
	m := built[*matrix.Matrix](t)(matrix.New(context.Background(), a, l.basis, nil))
	dst := make([]complex128, l.basis.Len())
	m.ApplyComplex(dst, l.vectors[i])
	return dst
}

// angularMomentum returns L of level i at L_z = 0, from L²ψ = L(L+1)ψ with L² = L⁻L⁺.
func (s sphere) angularMomentum(t *testing.T, l orbitalLevels, i int) float64 {
	t.Helper()
	psi := l.vectors[i]
	image := l.image(t, s.raise().Adjoint().Times(s.raise()).NormalOrdered(), i)
	square := real(overlap(psi, image))
	for j := range image {
		if cmplx.Abs(image[j]-complex(square, 0)*psi[j]) > 1e-6 {
			t.Errorf("level %d is no eigenstate of L²", i)
			break
		}
	}
	return (math.Sqrt(1+4*square) - 1) / 2
}

// levelsWithL compares energies and angular momenta. Beyond the ground state the records
// name a level of some L only, so that each is looked for among all found.
func (s sphere) levelsWithL(t *testing.T, r record, l orbitalLevels, scale float64, want []struct{ E, L float64 }) {
	t.Helper()
	for i, w := range want {
		level := slices.IndexFunc(l.energies, func(e float64) bool { return math.Abs(e*scale-w.E) <= r.Tolerance })
		if level < 0 || i == 0 && level != 0 {
			t.Errorf("%s: no level %.12f in its place among %v", r.ID, w.E, l.energies)
			continue
		}
		if got := s.angularMomentum(t, l, level); math.Abs(got-w.L) > 1e-7 {
			t.Errorf("%s: level %.12f has L = %v, want %v", r.ID, w.E, got, w.L)
		}
	}
}

func TestPseudopotentialsOfTheChord(t *testing.T) {
	want, r := value[[]float64](t, "G1-coulomb-pseudopotentials-2Q=15")
	s := onSphere(t, 15)
	v := s.coulomb()
	expect(t, r, "V_L", v, want)
	// The average over all pairs of orbitals is 1/R.
	mean := 0.0
	for l, x := range v {
		mean += float64(2*l+1) * x / (16 * 16)
	}
	expect(t, r, "average", []float64{mean}, []float64{1})
}

func TestShortRangeInteractionOnTheSphere(t *testing.T) {
	for n := 4; n <= 7; n++ {
		want, r := value[[]struct{ E, L float64 }](t, fmt.Sprintf("G2-V1-sphere-N%d", n))
		s := onSphere(t, 3*(n-1))
		levels := solve(t, s.interaction(s.shortRange()), s.sector(n, 0), 12)
		s.levelsWithL(t, r, levels, 1, want)
	}
}

// The states of zero energy with one and two fluxes more: C(N+n, n) in all, by L_z.
func TestQuasiholesOnTheSphere(t *testing.T) {
	for _, c := range []struct{ n, holes int }{{3, 1}, {3, 2}, {4, 1}, {5, 2}, {6, 1}, {7, 1}} {
		type counts struct {
			Total int
			By2Lz map[string]int `json:"by_2Lz"`
		}
		want, r := value[counts](t, fmt.Sprintf("G2-V1-zero-modes-N%d-qh%d", c.n, c.holes))
		s := onSphere(t, 3*(c.n-1)+c.holes)
		h := s.interaction(s.shortRange())
		total := 0
		// Multiplets of L reach down from L_z = L, so that none begins above the first
		// L_z without a state of zero energy.
		for twoLz := c.n * s.twoQ % 2; ; twoLz += 2 {
			zero := 0
			for _, e := range lowest(t, h, s.sector(c.n, twoLz), 4) {
				if math.Abs(e) < 1e-9 {
					zero++
				}
			}
			if zero != want.By2Lz[fmt.Sprintf("2Lz=%d", twoLz)] {
				t.Errorf("%s: %d states at 2Lz = %d", r.ID, zero, twoLz)
			}
			if zero == 0 {
				break
			}
			total += zero
			if twoLz > 0 {
				total += zero
			}
		}
		if total != want.Total {
			t.Errorf("%s: %d states, want %d", r.ID, total, want.Total)
		}
	}
}

func TestDimensionsOnTheSphere(t *testing.T) {
	for _, c := range []struct{ n, twoQ int }{{4, 9}, {5, 12}, {6, 15}, {8, 21}} {
		want, r := value[[]int](t, fmt.Sprintf("G3-dims-N%d-2Q%d", c.n, c.twoQ))
		s := onSphere(t, c.twoQ)
		for i, w := range want {
			b := built[*basis.Basis](t)(basis.New(context.Background(), s.space, s.sector(c.n, c.n*c.twoQ%2+2*i), nil))
			if b.Len() != w {
				t.Errorf("%s: %d states at L_z number %d, want %d", r.ID, b.Len(), i, w)
			}
		}
	}
}

func TestCoulombInteractionOnTheSphere(t *testing.T) {
	for _, n := range []int{3, 5, 6, 7} {
		type ground struct {
			Energy    float64                  `json:"E_ee"`
			InRadius  float64                  `json:"E_ee_in_e2_over_R"`
			Electron  float64                  `json:"per_electron_with_background"`
			Corrected float64                  `json:"density_corrected"`
			Levels    []struct{ E, L float64 } `json:"levels_e2_over_l"`
		}
		want, r := value[ground](t, fmt.Sprintf("G4-coulomb-sphere-N%d", n))
		s := onSphere(t, 3*(n-1))
		levels := solve(t, s.interaction(s.coulomb()), s.sector(n, 0), 12)
		radius := math.Sqrt(float64(s.twoQ) / 2) // in magnetic lengths
		e := levels.energies[0] / radius
		electron := (e - float64(n*n)/(2*radius)) / float64(n)
		corrected := electron * math.Sqrt(float64(s.twoQ)/float64(3*n))
		expect(t, r, "energies", []float64{e, levels.energies[0], electron, corrected}, []float64{want.Energy, want.InRadius, want.Electron, want.Corrected})
		s.levelsWithL(t, r, levels, 1/radius, want.Levels)
	}
}

// The state of Laughlin (Phys. Rev. Lett. 50, 1395, 1983) as the zero mode of the
// short-range interaction, in the Coulomb interaction.
func TestLaughlinStateOnTheSphere(t *testing.T) {
	for _, n := range []int{4, 5, 6} {
		type comparison struct {
			Overlap  float64
			Energy   float64 `json:"E_laughlin"`
			Electron float64 `json:"per_electron"`
		}
		want, r := value[comparison](t, fmt.Sprintf("G7-laughlin-sphere-N%d", n))
		s := onSphere(t, 3*(n-1))
		laughlin := solve(t, s.interaction(s.shortRange()), s.sector(n, 0), 1)
		h := s.interaction(s.coulomb())
		coulomb := solve(t, h, s.sector(n, 0), 1)
		radius := math.Sqrt(float64(s.twoQ) / 2)
		e := real(overlap(laughlin.vectors[0], laughlin.image(t, h, 0))) / radius
		got := []float64{cmplx.Abs(overlap(laughlin.vectors[0], coulomb.vectors[0])), e, (e - float64(n*n)/(2*radius)) / float64(n)}
		expect(t, r, "overlap, energy, per electron", got, []float64{want.Overlap, want.Energy, want.Electron})
	}
}

// The orbital cut of the state of Laughlin (Li and Haldane, Phys. Rev. Lett. 101,
// 010504, 2008): southern half of the sphere, half of the particles.
func TestOrbitalCutOfTheLaughlinState(t *testing.T) {
	const n = 8
	type block struct {
		IndexSum, Count int
		Xi              []float64
	}
	want, r := value[[]block](t, "G5-OES-laughlin-N8")
	s := onSphere(t, 3*(n-1))
	laughlin := solve(t, s.interaction(s.shortRange()), s.sector(n, 0), 1)
	state := built[entangle.State](t)(entangle.ComplexState(laughlin.basis, laughlin.vectors[0]))
	south := []int{0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10}
	cut := built[*entangle.Spectrum](t)(entangle.SpaceCut(context.Background(), []entangle.State{state}, south, &entangle.Options{Error: 1e-9}))
	number, index := charge(t, cut, s.space.ParticleNumber().Name), charge(t, cut, s.index.Name)
	levels := map[int][]float64{}
	for _, b := range cut.Blocks {
		if b.Charges[number] != n/2 {
			continue
		}
		for _, w := range b.Weights {
			if w > b.Floor {
				levels[b.Charges[index]] = append(levels[b.Charges[index]], -math.Log(w))
			}
		}
	}
	largest := want[0].IndexSum
	for i, count := range r.Data.Counts {
		if got := len(levels[largest-i]); got != count {
			t.Errorf("index sum %d: %d levels, want %d", largest-i, got, count)
		}
	}
	if len(levels) != len(r.Data.Counts) {
		t.Errorf("levels at %d index sums, want %d", len(levels), len(r.Data.Counts))
	}
	for _, b := range want {
		expect(t, r, fmt.Sprintf("index sum %d", b.IndexSum), levels[b.IndexSum], b.Xi)
	}
}

// charge returns the place of a charge in the labels of a cut.
func charge(t *testing.T, cut *entangle.Spectrum, name string) int {
	t.Helper()
	for i, n := range cut.Names {
		if n == name {
			return i
		}
	}
	t.Fatalf("no charge %q among %q", name, cut.Names)
	return 0
}
