package basis

import "math"

// Component is a product state with its factor in a symmetrised state: a
// vector with the amplitudes ψ_i in the basis has the amplitude Factor·ψ_i on
// Configuration.
type Component struct {
	Configuration Configuration
	Factor        complex128
}

// Representative returns the smallest configuration of the orbit of c; without
// symmetries, c itself.
func (b *Basis) Representative(c Configuration) Configuration {
	if b.sym == nil {
		return c
	}
	r, _, ok := b.sym.smallest(uint64(c))
	if !ok {
		return c
	}
	return b.sym.configuration(r)
}

// Component returns the state that the product state c belongs to and its
// factor there,
//
//	⟨c|r~⟩ = (χ(h)* ε)* (|G_r|/|G|)^(1/2),   h|c⟩ = ε|r⟩,
//
// so that a vector ψ in the basis has the amplitude factor·ψ_i on c. ok is
// false where c is in none of the states.
func (b *Basis) Component(c Configuration) (i int, factor complex128, ok bool) {
	if b.sym == nil {
		i, ok = b.Index(c)
		return i, 1, ok
	}
	i, phase, ok := b.locate(c)
	if !ok {
		return 0, 0, false
	}
	z := b.sym.units.roots[phase]
	weight := math.Sqrt(float64(b.Stabiliser(i)) / float64(b.sym.order))
	return i, complex(real(z)*weight, -imag(z)*weight), true
}

// locate returns the state of c and χ(h)*·ε as a number of phase units.
func (b *Basis) locate(c Configuration) (i int, phase uint32, ok bool) {
	r, p, ok := b.sym.smallest(uint64(c))
	if !ok {
		return 0, 0, false
	}
	if i, ok = b.find(r); !ok {
		return 0, 0, false
	}
	return i, b.sym.phase(uint64(c), p), true
}

// Orbit appends to dst every product state of state i with its factor, the
// representative first, and returns the longer slice. The squares of the
// factors add up to one.
func (b *Basis) Orbit(i int, dst []Component) []Component {
	r := b.At(i)
	if b.sym == nil {
		return append(dst, Component{r, 1})
	}
	weight := math.Sqrt(float64(b.Stabiliser(i)) / float64(b.sym.order))
	first, repeats := len(dst), b.Stabiliser(i) > 1
	s := b.sym
	for j := range s.cosets {
		w := s.enter.image(j, uint64(r))
		for h := range s.kept {
			c := s.configuration(s.keep.image(h, w))
			if repeats && seen(dst[first:], c) {
				continue
			}
			z := s.units.roots[s.phase(uint64(r), path{j, h, 0})]
			dst = append(dst, Component{c, complex(real(z)*weight, imag(z)*weight)})
		}
	}
	return dst
}

func seen(list []Component, c Configuration) bool {
	for _, k := range list {
		if k.Configuration == c {
			return true
		}
	}
	return false
}

// Phases returns exp(2πi j/n) for the n phase units in which [Basis.Locate]
// counts; without symmetries that is {1}. The slice is shared.
func (b *Basis) Phases() []complex128 {
	if b.sym == nil {
		return []complex128{1}
	}
	return b.sym.units.roots
}

// Locate is what products are made of: it returns the state i that c belongs
// to and the number j of the phase χ(h)*·ε = Phases()[j], where h|c⟩ = ε|r⟩.
// A matrix element of an invariant operator with the amplitude a on c, taken
// from state n, is a·Phases()[j]·(Norm(i)/Norm(n))^(1/2).
func (b *Basis) Locate(c Configuration) (i int, phase uint32, ok bool) {
	if b.sym == nil {
		i, ok = b.Index(c)
		return i, 0, ok
	}
	return b.locate(c)
}
