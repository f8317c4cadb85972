package entangle

import (
	"context"
	"fmt"
	"math"
	"slices"

	"ketloom/basis"
)

// ParticleCut returns the spectrum of the reduced density operator of part out
// of N identical particles, of one state or of the equal mixture of several
// (Sterdyniak, Regnault and Bernevig, Phys. Rev. Lett. 106, 100405, 2011). It is
// ρ_A = M M†, of trace one, with
//
//	fermions:  M_ab = ±ψ(a∪b) C(N,part)^(-1/2), a and b without common mode and ±
//	           the sign of bringing the creators of a to the front;
//	bosons:    M_ab = ψ(a+b) [Π_i C(a_i+b_i, a_i) / C(N,part)]^(1/2).
//
// Electrons are fermions with two modes a site. For a mixture the columns of the
// states stand side by side, each with the weight n^(-1/2).
//
// Blocks are labelled by the charges of the part's particles, what empty sites
// carry left out: of the charges that the sectors of all states fix, such as the
// momenta that orbitals carry, and of 2Sz where it is conserved; the particle
// number itself is no label, nor is a charge that is not a sum over particles,
// such as the number of boson sites that are occupied twice.
//
// Errors: as of [SpaceCut]; spin sites; bosons together with fermions; a number
// of particles that is not definite or differs between the states; a part that
// is not between 1 and N, or that can be taken in more ways C(N,part) than float64
// holds.
//
// Cost: as of [SpaceCut], with C(N,part) amplitudes for each product state.
func ParticleCut(ctx context.Context, states []State, part int, opts *Options) (*Spectrum, error) {
	space, err := common(states)
	if err != nil {
		return nil, err
	}
	if err := oneStatistics(space); err != nil {
		return nil, err
	}
	options, err := opts.withDefaults()
	if err != nil {
		return nil, err
	}
	total, err := definiteNumber(states)
	if err != nil {
		return nil, err
	}
	if part < 1 || part > total {
		return nil, fmt.Errorf("entangle: a part of %d out of %d particles; 1 … %d are possible", part, total, total)
	}
	ways := binomial(total, part)
	if math.IsInf(ways, 1) {
		return nil, fmt.Errorf("entangle: a part of %d out of %d particles can be taken in more than 1.8e308 ways; take a smaller part", part, total)
	}
	k := &cut{states: states, space: space, number: total, ways: ways, options: options}
	number := space.ParticleNumber()
	for _, q := range fixedCharges(states) {
		if !sameCharge(q, number) && perParticle(space, q) {
			k.fixed = append(k.fixed, q)
		}
	}
	k.maybe = unfixed(space, append(k.fixed[:len(k.fixed):len(k.fixed)], number))
	k.split = newTaker(space, part, total).split
	return k.spectrum(ctx)
}

// NaturalOccupations returns the eigenvalues of the one-body density matrix
// ⟨c†_i c_j⟩ over all modes, descending, their sum being the number of particles
// (Löwdin, Phys. Rev. 97, 1474, 1955). For a mixture the matrix is the mean.
// Electron sites count two modes. Errors: as of [ParticleCut].
func NaturalOccupations(ctx context.Context, states []State, opts *Options) ([]float64, error) {
	s, err := ParticleCut(ctx, states, 1, opts)
	if err != nil {
		return nil, err
	}
	space := states[0].basis.Space()
	number, err := definiteNumber(states)
	if err != nil {
		return nil, err
	}
	var list []float64
	for _, l := range s.all() {
		list = append(list, float64(number)*l.Weight)
	}
	for len(list) < space.Modes() {
		list = append(list, 0)
	}
	return list, nil
}

// perParticle reports whether a charge is a sum over particles, so that the
// charges of part and rest add up to that of the whole.
func perParticle(space *basis.Space, q basis.Charge) bool {
	weights, _ := q.ModeWeights(space)
	for _, w := range weights {
		for level, value := range w {
			excess := value - level*w[1]
			if q.Modulus > 0 {
				excess %= q.Modulus
			}
			if excess != 0 {
				return false
			}
		}
	}
	return true
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

// definiteNumber returns the number of particles of all states, by their
// representatives; the other configurations of their orbits are seen later.
func definiteNumber(states []State) (int, error) {
	number := -1
	for _, s := range states {
		space := s.basis.Space()
		for i := range s.basis.Len() {
			if s.amplitude(i) == 0 {
				continue
			}
			n := particles(space, s.basis.At(i))
			if number >= 0 && n != number {
				return 0, errNumber(number, n)
			}
			number = n
			if s.fixesNumber() {
				break
			}
		}
	}
	return number, nil
}

// fixesNumber reports whether the sector of s fixes the particle number.
func (s State) fixesNumber() bool {
	number := s.basis.Space().ParticleNumber()
	return slices.ContainsFunc(s.basis.Sector().Charges, func(q basis.ChargeValue) bool { return sameCharge(q.Charge, number) })
}

func errNumber(a, b int) error {
	return fmt.Errorf("entangle: a particle cut of states with %d and with %d particles; fix one particle number in the sectors of all states", a, b)
}

// particles counts the particles of a configuration.
func particles(space *basis.Space, c basis.Configuration) int {
	n := 0
	for m := range space.Modes() {
		n += space.Mode(m).Level(c)
	}
	return n
}

// taker takes particles out of product states in every possible way.
type taker struct {
	modes []basis.Mode
	part  int
	scale float64 // C(N,part)^(-1/2)
	roots [][]float64
}

func newTaker(space *basis.Space, part, total int) *taker {
	t := &taker{part: part, scale: 1 / math.Sqrt(binomial(total, part))}
	highest := 1
	for m := range space.Modes() {
		mode := space.Mode(m)
		t.modes = append(t.modes, mode)
		highest = max(highest, mode.Levels-1)
	}
	for n := range highest + 1 {
		row := make([]float64, n+1)
		for k := range row {
			row[k] = math.Sqrt(binomial(n, k))
		}
		t.roots = append(t.roots, row)
	}
	return t
}

// heap is the particles in one mode.
type heap struct {
	shift, level int
	fermionic    bool
	above        int // particles in the modes above
}

func (t *taker) split(c uint64, emit func(part, rest uint64, factor float64) bool) {
	var heaps [basis.MostBits]heap
	n, above := basis.MostBits, 0
	for i := len(t.modes) - 1; i >= 0; i-- {
		mode := t.modes[i]
		if level := mode.Level(basis.Configuration(c)); level > 0 {
			n--
			heaps[n] = heap{mode.Shift, level, mode.Fermionic, above}
			above += level
		}
	}
	t.take(c, heaps[n:], t.part, 0, 0, t.scale, emit)
}

// take takes left particles out of the heaps; a is what was taken below, skipped
// the number of fermions left there. It stops and returns false when emit does.
func (t *taker) take(c uint64, heaps []heap, left int, a uint64, skipped int, factor float64, emit func(part, rest uint64, factor float64) bool) bool {
	if left == 0 {
		return emit(a, c-a, factor) // field by field, since no mode of a exceeds that of c
	}
	h := heaps[0]
	for n := max(0, left-h.above); n <= min(h.level, left); n++ {
		f, over := factor*t.roots[h.level][n], skipped
		if h.fermionic {
			over += h.level - n
			if n == 1 && skipped&1 == 1 {
				f = -f
			}
		}
		if !t.take(c, heaps[1:], left-n, a|uint64(n)<<h.shift, over, f, emit) {
			return false
		}
	}
	return true
}

// binomial returns n choose k, exact below 2^53.
func binomial(n, k int) float64 {
	value := 1.0
	for i := range k {
		value = math.Round(value * float64(n-i) / float64(i+1))
	}
	return value
}
