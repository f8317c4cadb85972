package model

import (
	"fmt"
	"math/cmplx"

	"ketloom/basis"
	"ketloom/operator"
)

// ProjectOptions steer [TightBinding.Projected]; nil means all defaults.
type ProjectOptions struct {
	// Band is the band that is kept. Default: 0, the lowest.
	Band int
	// Twist is the boundary twist in turns along a1 and a2: the momenta are
	// 2π(n+Twist)/L. Default: none.
	Twist [2]float64
	// Dispersion keeps the band energies. Default: the band is flattened to
	// energy zero.
	Dispersion bool
}

// Projection is an interaction projected to one band on a torus: spinless
// fermions in the Bloch states of the band.
type Projection struct {
	L1, L2   int
	Space    *basis.Space      // L1·L2 fermion modes, orbital j = n2 + L2·n1
	Operator operator.Operator // in canonical form, exactly Hermitian
	States   []BandState       // the Bloch state of each orbital, with its energy
	Number   basis.Charge      // particle number
	KX, KY   basis.Charge      // total momentum index: Σ n1 mod L1, named kx, and Σ n2 mod L2, named ky
}

// negligible is the size of a coefficient, relative to the largest, below
// which it is left out.
const negligible = 1e-14

// Projected returns the interactions of the model projected to one band on the
// torus of l1×l2 cells, for spinless fermions:
//
//	H = Σ A_{pq,st} γ†_p γ†_q γ_t γ_s,  over p < q, s < t with equal total momentum,
//	A_{pq,st} = (l1·l2)^(-1) Σ_v V_v Y_v(p,q)* Y_v(s,t),
//	Y_v(i,j) = u_a(i) u_b(j) e^(ik_j·R) - (i ↔ j),  v: V·n_{a,r} n_{b,r+R},
//
// where u(j) is the Bloch state of orbital j = n2 + l2·n1 at the momentum k_j =
// 2π((n1+θ1)/l1, (n2+θ2)/l2), with the phase that [BandState] fixes. Each
// process between two pairs is one term; terms below 10⁻¹⁴ of the largest are
// left out. With Dispersion, Σ_j E_j n_j is added.
//
// The order of the orbitals is the one in which the configurations of the
// generalised exclusion principle (at most one particle in three consecutive
// orbitals, say) predict the total momenta of the ground states of a fractional
// Chern insulator (Regnault and Bernevig, Phys. Rev. X 1, 021014, 2011).
//
// Errors: an impossible model, fewer than 2 or more than 64 orbitals, a band
// that touches another one at one of the momenta, a displacement that joins a
// site of the torus to itself, a twist that is no number.
func (m TightBinding) Projected(l1, l2 int, opts *ProjectOptions) (*Projection, error) {
	var o ProjectOptions
	if opts != nil {
		o = *opts
	}
	if l1 < 1 || l2 < 1 || l1 > basis.MostBits || l2 > basis.MostBits/l1 || l1*l2 < 2 {
		return nil, fmt.Errorf("model: a band projected on %d×%d momenta; 2 … %d orbitals are possible", l1, l2, basis.MostBits)
	}
	grid, err := m.grid(o.Band, l1, l2, o.Twist)
	if err != nil {
		return nil, err
	}
	if _, err := m.checkSeparate(grid, o.Band); err != nil {
		return nil, err
	}
	for i, v := range m.Interactions {
		if v.From == v.To && v.Cells[0]%l1 == 0 && v.Cells[1]%l2 == 0 {
			return nil, fmt.Errorf("model: interaction %d of %q joins orbital %d to itself on a torus of %d×%d cells; use a larger torus", i, m.Name, v.From, l1, l2)
		}
	}
	p := &Projection{L1: l1, L2: l2}
	if p.Space, err = basis.Uniform(l1*l2, basis.Fermion()); err != nil {
		return nil, err
	}
	kx, ky := make([]int, l1*l2), make([]int, l1*l2)
	for j, states := range grid {
		p.States = append(p.States, states[o.Band])
		kx[j], ky[j] = j/l2, j%l2
	}
	p.Number, p.KX, p.KY = p.Space.ParticleNumber(), p.Space.Weighted("kx", l1, kx), p.Space.Weighted("ky", l2, ky)
	terms := p.interaction(m.Interactions, o.Twist)
	if o.Dispersion {
		for j, s := range p.States {
			terms = append(terms, operator.On(p.Space).Number(j).Scale(complex(s.Energy, 0)))
		}
	}
	p.Operator, err = done(p.Space, terms)
	p.Operator = p.Operator.NormalOrdered()
	return p, err
}

// Orbital returns the orbital of momentum index (n1, n2), any integers.
func (p *Projection) Orbital(n1, n2 int) int {
	return modulo(n2, p.L2) + p.L2*modulo(n1, p.L1)
}

func modulo(a, n int) int { return (a%n + n) % n }

// Sector returns the sector of a number of particles and a total momentum
// index (n1, n2), any integers.
func (p *Projection) Sector(particles, n1, n2 int) basis.Sector {
	return basis.Sector{Charges: []basis.ChargeValue{
		p.Number.Is(particles), p.KX.Is(modulo(n1, p.L1)), p.KY.Is(modulo(n2, p.L2)),
	}}
}

// pair is two orbitals i < j with their antisymmetric amplitude Y_v on each
// interaction v.
type pair struct {
	i, j      int
	amplitude []complex128
}

// interaction returns the terms of the projected interactions.
func (p *Projection) interaction(list []Interaction, twist [2]float64) []operator.Operator {
	type process struct {
		to, from pair
		value    complex128
	}
	var processes []process
	largest := 0.0
	for _, pairs := range p.pairs(list, twist) {
		for x, to := range pairs {
			for _, from := range pairs[x:] {
				value := complex128(0)
				for v, term := range list {
					value += complex(term.Strength, 0) * cmplx.Conj(to.amplitude[v]) * from.amplitude[v]
				}
				value /= complex(float64(p.L1*p.L2), 0)
				largest = max(largest, cmplx.Abs(value))
				processes = append(processes, process{to, from, value})
			}
		}
	}
	o := operator.On(p.Space)
	var terms []operator.Operator
	for _, q := range processes {
		if cmplx.Abs(q.value) <= negligible*largest {
			continue
		}
		if q.to.i == q.from.i {
			terms = append(terms, o.Number(q.to.i).Times(o.Number(q.to.j)).Scale(complex(real(q.value), 0)))
			continue
		}
		term := o.Create(q.to.i).Times(o.Create(q.to.j)).Times(o.Annihilate(q.from.j)).Times(o.Annihilate(q.from.i)).Scale(q.value)
		terms = append(terms, term, term.Adjoint())
	}
	return terms
}

// pairs returns the pairs of orbitals by total momentum.
func (p *Projection) pairs(list []Interaction, twist [2]float64) [][]pair {
	groups := make([][]pair, p.L1*p.L2)
	for i := range p.States {
		for j := i + 1; j < len(p.States); j++ {
			total := p.Orbital(i/p.L2+j/p.L2, i%p.L2+j%p.L2)
			q := pair{i, j, make([]complex128, len(list))}
			for v, term := range list {
				q.amplitude[v] = p.pairAmplitude(term, i, j, twist) - p.pairAmplitude(term, j, i, twist)
			}
			groups[total] = append(groups[total], q)
		}
	}
	return groups
}

// pairAmplitude returns u_a(i) u_b(j) e^(ik_j·R).
func (p *Projection) pairAmplitude(v Interaction, i, j int, twist [2]float64) complex128 {
	k1 := (float64(j/p.L2) + twist[0]) / float64(p.L1)
	k2 := (float64(j%p.L2) + twist[1]) / float64(p.L2)
	return p.States[i].Amplitudes[v.From] * p.States[j].Amplitudes[v.To] * turn(k1*float64(v.Cells[0])+k2*float64(v.Cells[1]))
}
