package entangle

import (
	"fmt"
	"math"

	"ketloom/basis"
)

// State is a vector of amplitudes in a basis, normalised to one. Make one with
// [ComplexState] or [RealState].
type State struct {
	basis      *basis.Basis
	real       []float64 // exactly one of both is set
	complex    []complex128
	scale      float64 // brings the norm to one
	realValued bool    // all amplitudes on product states are real
}

// NormTolerance is how far the norm of a state may be from one.
const NormTolerance = 1e-6

// ComplexState returns the state Σ_i psi[i]|i~⟩ in the basis, divided by its
// norm. The slice is kept, not copied: it must not change while the state is in
// use. Errors: no basis, a wrong length, amplitudes that are not finite, a norm
// further than NormTolerance from one.
func ComplexState(b *basis.Basis, psi []complex128) (State, error) {
	if err := checkLength(b, len(psi)); err != nil {
		return State{}, err
	}
	sum, realValued := 0.0, b.Real()
	for _, z := range psi {
		sum += real(z)*real(z) + imag(z)*imag(z)
		realValued = realValued && imag(z) == 0
	}
	norm, err := checkNorm(sum)
	if err != nil {
		return State{}, err
	}
	return State{basis: b, complex: psi, scale: 1 / norm, realValued: realValued}, nil
}

// RealState returns the state with real amplitudes; see [ComplexState].
func RealState(b *basis.Basis, psi []float64) (State, error) {
	if err := checkLength(b, len(psi)); err != nil {
		return State{}, err
	}
	sum := 0.0
	for _, x := range psi {
		sum += x * x
	}
	norm, err := checkNorm(sum)
	if err != nil {
		return State{}, err
	}
	return State{basis: b, real: psi, scale: 1 / norm, realValued: b.Real()}, nil
}

func checkLength(b *basis.Basis, n int) error {
	if b == nil {
		return fmt.Errorf("entangle: a state without a basis; pass the basis that its amplitudes belong to")
	}
	if n != b.Len() {
		return fmt.Errorf("entangle: %d amplitudes in a basis of %d states; give one a state", n, b.Len())
	}
	return nil
}

func checkNorm(square float64) (float64, error) {
	norm := math.Sqrt(square)
	if !(math.Abs(norm-1) <= NormTolerance) {
		return 1, fmt.Errorf("entangle: a state of norm %v; expected 1 within %v, normalise it", norm, NormTolerance)
	}
	return norm, nil
}

// Basis returns the basis of the state.
func (s State) Basis() *basis.Basis { return s.basis }

func (s State) amplitude(i int) complex128 {
	if s.real != nil {
		return complex(s.real[i]*s.scale, 0)
	}
	return s.complex[i] * complex(s.scale, 0)
}

// each calls visit with every product state of the basis states from … to-1 and
// its amplitude, where that is not zero, in a fixed order. Every product state is
// visited once, by the basis state that it belongs to.
func (s State) each(from, to int, visit func(c uint64, amplitude complex128)) {
	var orbit []basis.Component
	for i := from; i < to; i++ {
		z := s.amplitude(i)
		if z == 0 {
			continue
		}
		orbit = s.basis.Orbit(i, orbit[:0])
		for _, k := range orbit {
			visit(uint64(k.Configuration), k.Factor*z)
		}
	}
}

// common checks that the states can be mixed and returns their space.
func common(states []State) (*basis.Space, error) {
	if len(states) == 0 {
		return nil, fmt.Errorf("entangle: no state; give one, or several for their equal mixture")
	}
	for i, s := range states {
		if s.basis == nil {
			return nil, fmt.Errorf("entangle: state %d is empty; make states with ComplexState or RealState", i)
		}
		if !states[0].basis.Space().Equal(s.basis.Space()) {
			return nil, fmt.Errorf("entangle: states 0 and %d belong to different spaces; only states of one space can be mixed", i)
		}
	}
	return states[0].basis.Space(), nil
}
