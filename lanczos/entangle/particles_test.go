package entangle

import (
	"context"
	"math"
	"math/cmplx"
	"strings"
	"testing"

	"ketloom/basis"
)

// annihilate applies the annihilator of a mode, with √n for bosons and the sign
// of Jordan and Wigner for fermions.
func (v modal) annihilate(psi []complex128, mode int) []complex128 {
	out := make([]complex128, len(psi))
	for level := 1; level < v.levels[mode]; level++ {
		root := complex(math.Sqrt(float64(level)), 0)
		for at, z := range v.step(psi, mode, level-1, level) {
			out[at] += root * z
		}
	}
	return out
}

// particleDensityOf returns ρ[a][b] = ⟨ψ|A†_b A_a|ψ⟩ / C(N,part) with A_a =
// Π_i a_i^(n_i) / (n_i!)^(1/2) over all ways to put the part into the modes.
func particleDensityOf(states []modal, part, total int) (rho []complex128, n int) {
	shape := states[0]
	var ways [][]int
	for at := range shape.psi {
		if list := shape.list(at); sum(list) == part {
			ways = append(ways, list)
		}
	}
	n = len(ways)
	rho = make([]complex128, n*n)
	norm := binomial(total, part) * float64(len(states))
	for _, v := range states {
		images := make([][]complex128, n)
		for i, list := range ways {
			images[i] = v.psi
			scale := 1.0
			for mode, count := range list {
				for k := range count {
					images[i] = v.annihilate(images[i], mode)
					scale /= math.Sqrt(float64(k + 1))
				}
			}
			for at := range images[i] {
				images[i][at] *= complex(scale, 0)
			}
		}
		for i := range n {
			for j := range n {
				for at, z := range images[i] {
					rho[i*n+j] += z * cmplx.Conj(images[j][at]) / complex(norm, 0)
				}
			}
		}
	}
	return rho, n
}

func TestParticleCutByDefinition(t *testing.T) {
	r := rng(2)
	for _, c := range []struct {
		name   string
		sites  []basis.Site
		number int
	}{
		{"fermions", repeated(7, basis.Fermion()), 4},
		{"electrons", repeated(4, basis.Electron()), 4},
		{"electrons and fermions", []basis.Site{basis.Electron(), basis.Fermion(), basis.Electron(), basis.Fermion()}, 3},
		{"hard-core bosons", repeated(7, basis.HardCoreBoson()), 4},
		{"bosons", []basis.Site{basis.Boson(4), basis.Boson(4), basis.Boson(4), basis.Boson(4)}, 4},
		{"bosons with cutoffs", []basis.Site{basis.Boson(2), basis.Boson(3), basis.HardCoreBoson(), basis.Boson(2)}, 4},
	} {
		space := makeSpace(t, c.sites...)
		// orbitals carry a momentum modulo 3; half of the states have another one
		weights3 := make([]int, len(c.sites))
		for i := range weights3 {
			weights3[i] = i
		}
		momentum := space.Weighted("momentum", 3, weights3)
		number := space.ParticleNumber().Is(c.number)
		for _, charges := range [][]basis.ChargeValue{{number}, {number, momentum.Is(1)}} {
			b := makeBasis(t, space, basis.Sector{Charges: charges})
			other := b
			if len(charges) == 2 {
				other = makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{number, momentum.Is(2)}})
			}
			one := randomState(t, r, b)
			for _, states := range [][]State{{one}, {one, randomState(t, r, other)}} {
				var vectors []modal
				for _, s := range states {
					vectors = append(vectors, modalOf(s))
				}
				for part := 1; part <= c.number; part++ {
					rho, n := particleDensityOf(vectors, part, c.number)
					cut := particleCut(t, states, part)
					near(t, "trace", cut.Trace(), 1, 1e-13)
					nearAll(t, c.name, padded(weights(cut), n), spectrumOf(t, rho, n), 1e-13)
					if len(charges) == 2 && part < c.number && len(cut.Blocks) < 2 {
						t.Errorf("%s: momenta of the part resolve nothing", c.name)
					}
				}
			}
		}
	}
}

// Closed formula: a Slater determinant has C(N,n) equal weights for n particles
// out of N; a condensate of bosons has one.
func TestParticleCutOfProducts(t *testing.T) {
	for _, c := range []struct{ orbitals, number, part, levels int }{
		{8, 5, 2, 10}, {9, 6, 3, 20}, // 0.1 each, entropy 2.302585092994; 0.05 each, 2.995732273554
		{6, 6, 6, 1}, {12, 7, 1, 7},
	} {
		space := makeSpace(t, repeated(c.orbitals, basis.Fermion())...)
		b := makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(c.number)}})
		psi := slater(t, b, rng(3))
		cut := particleCut(t, []State{makeState(t, b, psi)}, c.part)
		levels := cut.Levels()
		if len(levels) != c.levels {
			t.Fatalf("%+v: %d levels", c, len(levels))
		}
		for _, l := range levels {
			near(t, "level", l.Xi, math.Log(float64(c.levels)), 1e-12)
		}
		near(t, "entropy", cut.Entropy(), math.Log(float64(c.levels)), 1e-12)
	}
	// (a†_0 + a†_1 + a†_2)^4 |0⟩: amplitudes (4!/Π n_i!)^(1/2) / 3²
	space := makeSpace(t, repeated(3, basis.Boson(4))...)
	b := makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(4)}})
	psi := make([]complex128, b.Len())
	for i := range psi {
		ways := 24.0
		for _, n := range space.Levels(b.At(i)) {
			ways /= math.Gamma(float64(n) + 1)
		}
		psi[i] = complex(math.Sqrt(ways)/9, 0)
	}
	nearAll(t, "condensate", weights(particleCut(t, []State{makeState(t, b, psi)}, 2))[:1], []float64{1}, 1e-13)
}

// Closed formula: natural occupations of a determinant are 1 and 0, and of the
// mixture of two product states the mean of both.
func TestNaturalOccupations(t *testing.T) {
	space := makeSpace(t, repeated(5, basis.Fermion())...)
	b := makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(2)}})
	occupations, err := NaturalOccupations(context.Background(), []State{makeState(t, b, slater(t, b, rng(5)))}, nil)
	if err != nil {
		t.Fatal(err)
	}
	nearAll(t, "determinant", occupations, []float64{1, 1, 0, 0, 0}, 1e-13)
	mixture := []State{
		stateOf(t, b, [][]int{{1, 1, 0, 0, 0}}, []complex128{1}),
		stateOf(t, b, [][]int{{1, 0, 1, 0, 0}}, []complex128{1}),
	}
	if occupations, err = NaturalOccupations(context.Background(), mixture, nil); err != nil {
		t.Fatal(err)
	}
	nearAll(t, "mixture", occupations, []float64{1, 0.5, 0.5, 0, 0}, 1e-13)
}

// The cuts of n and of N-n particles of one state have the same weights.
func TestParticleCutOfTheRest(t *testing.T) {
	r := rng(4)
	for _, site := range []basis.Site{basis.Fermion(), basis.HardCoreBoson(), basis.Boson(3)} {
		space := makeSpace(t, repeated(6, site)...)
		b := makeBasis(t, space, basis.Sector{Charges: []basis.ChargeValue{space.ParticleNumber().Is(4)}})
		s := []State{randomState(t, r, b)}
		nearAll(t, site.String(), weights(particleCut(t, s, 1)), weights(particleCut(t, s, 3)), 1e-13)
	}
}

func TestParticleCutRefuses(t *testing.T) {
	ctx := context.Background()
	fermions := makeSpace(t, repeated(4, basis.Fermion())...)
	b2 := makeBasis(t, fermions, basis.Sector{Charges: []basis.ChargeValue{fermions.ParticleNumber().Is(2)}})
	b3 := makeBasis(t, fermions, basis.Sector{Charges: []basis.ChargeValue{fermions.ParticleNumber().Is(3)}})
	all := makeBasis(t, fermions, basis.Sector{})
	spins := makeBasis(t, makeSpace(t, repeated(4, basis.SpinHalf())...), basis.Sector{})
	both := makeBasis(t, makeSpace(t, basis.Fermion(), basis.HardCoreBoson()), basis.Sector{})
	r := rng(6)
	for _, c := range []struct {
		states []State
		part   int
		says   string
	}{
		{[]State{randomState(t, r, b2)}, 3, "a part of 3 out of 2"},
		{[]State{randomState(t, r, b2)}, 0, "a part of 0 out of 2"},
		{[]State{randomState(t, r, b2)}, -1, "a part of -1 out of 2"},
		{[]State{randomState(t, r, b2), randomState(t, r, b3)}, 1, "with 2 and with 3 particles"},
		{[]State{randomState(t, r, all)}, 1, "fix one particle number"},
		{[]State{randomState(t, r, spins)}, 1, "spin site 0"},
		{[]State{randomState(t, r, both)}, 1, "bosons together with fermions"},
		{nil, 1, "no state"},
		{[]State{{}}, 1, "is empty"},
	} {
		_, err := ParticleCut(ctx, c.states, c.part, nil)
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("error %v, want one that says %q", err, c.says)
		}
	}
	// a definite number is enough, in whatever basis
	s := unfolded(t, randomState(t, r, b2), false)
	near(t, "trace", particleCut(t, []State{s}, 1).Trace(), 1, 1e-13)
}
