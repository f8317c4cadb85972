package entangle

import (
	"context"
	"fmt"
	"math"

	"ketloom/basis"
)

// ParticleCut returns the spectrum of the reduced density operator of some of
// the particles, of one state of N identical particles or of the equal mixture of
// several (Sterdyniak, Regnault and Bernevig, Phys. Rev. Lett. 106, 100405,
// 2011). It is ρ_A = M M†, trace one, with
//
//	fermions:  M_ab = ±ψ(a∪b) C(N,part)^(-1/2), a and b without common mode and ±
//	           the sign of bringing the creators of a to the front;
//	bosons:    M_ab = ψ(a+b) [Π_i C(a_i+b_i, a_i) / C(N,part)]^(1/2).
//
// Electrons are fermions with two modes a site. Blocks are labelled by the
// charges of the part other than the particle number, of those charges that the
// sectors of all states fix, such as the momenta that orbitals carry.
//
// Errors: as of [SpaceCut]; spin sites; bosons together with fermions; a number
// of particles that is not definite or differs between the states; a part that
// is not between 1 and N-1.
//
// Cost: C(N, part) entries for each product state, 40 bytes each, then a singular
// value decomposition of each block.
func ParticleCut(ctx context.Context, states []State, part int, opts *Options) (*Spectrum, error) {
	space, charges, err := common(states)
	if err != nil {
		return nil, err
	}
	if err := oneStatistics(space); err != nil {
		return nil, err
	}
	total := particles(space, states[0].basis.At(0))
	if part < 1 || part >= total {
		return nil, fmt.Errorf("entangle: a part of %d out of %d particles; 1 … %d are possible", part, total, total-1)
	}
	o := opts.withDefaults()
	cut := cutter{space: space, part: part, total: total, limit: o.Memory / 40, ctx: ctx}
	cut.scale = 1 / math.Sqrt(float64(len(states))*binomial(total, part))
	for n, s := range states {
		cut.state = int32(n)
		if err := s.each(cut.split); err != nil {
			return nil, err
		}
	}
	charges = withoutNumber(space, charges)
	return spectrum(ctx, cut.entries, names(charges), chargedParticles(space, charges), o)
}

// oneStatistics reports why the sites of a space do not hold identical
// particles.
func oneStatistics(space *basis.Space) error {
	bosons, fermions := false, false
	for i := range space.Sites() {
		switch space.Site(i).Kind {
		case basis.KindSpin:
			return fmt.Errorf("entangle: a particle cut with the spin site %d; spins are not particles, use hard-core bosons", i)
		case basis.KindBoson:
			bosons = true
		default:
			fermions = true
		}
	}
	if bosons && fermions {
		return fmt.Errorf("entangle: a particle cut of bosons together with fermions; the particles must be of one kind")
	}
	return nil
}

// particles counts the particles of a configuration.
func particles(space *basis.Space, c basis.Configuration) int {
	n := 0
	for m := range space.Modes() {
		n += space.Mode(m).Level(c)
	}
	return n
}

// withoutNumber drops charges that are the particle number.
func withoutNumber(space *basis.Space, charges []basis.Charge) []basis.Charge {
	number := fmt.Sprint(space.ParticleNumber().Weights)
	var rest []basis.Charge
	for _, q := range charges {
		if q.Modulus != 0 || fmt.Sprint(q.Weights) != number {
			rest = append(rest, q)
		}
	}
	return rest
}

// chargedParticles returns the charges of a configuration of the part's
// particles; what empty sites carry counts nothing.
func chargedParticles(space *basis.Space, charges []basis.Charge) func(row uint64) []int {
	weights := make([][][]int, len(charges))
	for i, q := range charges {
		weights[i], _ = q.ModeWeights(space)
	}
	return func(row uint64) []int {
		q := make([]int, len(charges))
		for i, charge := range charges {
			for m := range space.Modes() {
				q[i] += weights[i][m][space.Mode(m).Level(basis.Configuration(row))]
			}
			if charge.Modulus > 0 {
				q[i] = (q[i]%charge.Modulus + charge.Modulus) % charge.Modulus
			}
		}
		return q
	}
}

// cutter collects the entries of a particle cut.
type cutter struct {
	ctx         context.Context
	space       *basis.Space
	part, total int
	scale       float64
	state       int32
	limit       int64
	entries     []entry
	looked      int
}

// split adds an entry for each way to take the part's particles out of c.
func (k *cutter) split(c basis.Configuration, amplitude complex128) error {
	if k.looked++; k.looked%1024 == 0 && k.ctx.Err() != nil {
		return k.ctx.Err()
	}
	if amplitude == 0 {
		return nil
	}
	if n := particles(k.space, c); n != k.total {
		return fmt.Errorf("entangle: a particle cut of states with %d and with %d particles; fix one number", k.total, n)
	}
	if int64(len(k.entries)) > k.limit {
		return fmt.Errorf("entangle: the particle cut needs more than %d entries; cut off fewer particles, or raise Options.Memory", k.limit)
	}
	k.choose(uint64(c), 0, k.part, 0, 1, amplitude)
	return nil
}

// choose takes `left` particles out of the modes from m on; a is what was taken
// from the modes below, ways the product of the binomials there.
func (k *cutter) choose(c uint64, m, left int, a uint64, ways float64, amplitude complex128) {
	if left == 0 {
		k.put(c, a, ways, amplitude)
		return
	}
	if m == k.space.Modes() {
		return
	}
	mode := k.space.Mode(m)
	here := mode.Level(basis.Configuration(c))
	for take := 0; take <= min(here, left); take++ {
		k.choose(c, m+1, left-take, a|uint64(take)<<mode.Shift, ways*binomial(here, take), amplitude)
	}
}

func (k *cutter) put(c, a uint64, ways float64, amplitude complex128) {
	b := c - a // field by field, since no mode of a exceeds that of c
	if overtaken(uint64(k.space.FermionBits()), a, b) {
		amplitude = -amplitude
	}
	k.entries = append(k.entries, entry{a, b, k.state, amplitude * complex(k.scale*math.Sqrt(ways), 0)})
}

// binomial returns n choose k.
func binomial(n, k int) float64 {
	value := 1.0
	for i := range k {
		value = value * float64(n-i) / float64(i+1)
	}
	return math.Round(value)
}
