package entangle

import (
	"fmt"
	"math"

	"ketloom/basis"
)

// State is a vector of amplitudes in a basis, normalised to one. Make one with
// [ComplexState] or [RealState].
type State struct {
	basis *basis.Basis
	psi   []complex128
}

// NormTolerance is how far the norm of a state may be from one.
const NormTolerance = 1e-6

// ComplexState returns the state Σ_i psi[i]|i~⟩ in the basis, divided by its
// norm. The amplitudes are copied. Errors: no basis, a wrong length, amplitudes
// that are not finite, a norm further than NormTolerance from one.
func ComplexState(b *basis.Basis, psi []complex128) (State, error) {
	if b == nil {
		return State{}, fmt.Errorf("entangle: a state without a basis")
	}
	if len(psi) != b.Len() {
		return State{}, fmt.Errorf("entangle: %d amplitudes in a basis of %d states; give one a state", len(psi), b.Len())
	}
	norm := 0.0
	for _, z := range psi {
		norm += real(z)*real(z) + imag(z)*imag(z)
	}
	norm = math.Sqrt(norm)
	if !(math.Abs(norm-1) <= NormTolerance) {
		return State{}, fmt.Errorf("entangle: a state of norm %v; normalise it to one", norm)
	}
	s := State{b, make([]complex128, len(psi))}
	for i, z := range psi {
		s.psi[i] = z / complex(norm, 0)
	}
	return s, nil
}

// RealState returns the state with real amplitudes; see [ComplexState].
func RealState(b *basis.Basis, psi []float64) (State, error) {
	z := make([]complex128, len(psi))
	for i, x := range psi {
		z[i] = complex(x, 0)
	}
	return ComplexState(b, z)
}

// Basis returns the basis of the state.
func (s State) Basis() *basis.Basis { return s.basis }

// each calls visit with every product state of s and its amplitude, in a fixed
// order, until visit returns an error.
func (s State) each(visit func(c basis.Configuration, amplitude complex128) error) error {
	var orbit []basis.Component
	for i, z := range s.psi {
		orbit = s.basis.Orbit(i, orbit[:0])
		for _, k := range orbit {
			if err := visit(k.Configuration, k.Factor*z); err != nil {
				return err
			}
		}
	}
	return nil
}

// common checks that the states can be mixed and returns their space and the
// charges that the sectors of all of them fix.
func common(states []State) (*basis.Space, []basis.Charge, error) {
	if len(states) == 0 {
		return nil, nil, fmt.Errorf("entangle: no state; give one, or several for their equal mixture")
	}
	for i, s := range states {
		if s.basis == nil {
			return nil, nil, fmt.Errorf("entangle: state %d is empty; make states with ComplexState or RealState", i)
		}
	}
	space := states[0].basis.Space()
	var charges []basis.Charge
	for _, q := range states[0].basis.Sector().Charges {
		charges = append(charges, q.Charge)
	}
	for i, s := range states[1:] {
		if !space.Equal(s.basis.Space()) {
			return nil, nil, fmt.Errorf("entangle: states 0 and %d belong to different spaces; only states of one space can be mixed", i+1)
		}
		charges = shared(charges, s.basis.Sector().Charges)
	}
	return space, charges, nil
}

// shared returns the charges that are also in the list of values.
func shared(charges []basis.Charge, values []basis.ChargeValue) []basis.Charge {
	var both []basis.Charge
	for _, q := range charges {
		for _, v := range values {
			if q.Modulus == v.Charge.Modulus && fmt.Sprint(q.Weights) == fmt.Sprint(v.Charge.Weights) {
				both = append(both, q)
				break
			}
		}
	}
	return both
}
