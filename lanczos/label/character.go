package label

import (
	"errors"
	"fmt"

	"ketloom/basis"
	"ketloom/basis/group"
)

// ErrOutside is wrapped where a symmetry leads out of the sector of the basis, such
// as a rotation that carries a momentum to another one.
var ErrOutside = errors.New("the symmetry leads out of the sector")

// Representation is what a symmetry does within a set of states.
type Representation struct {
	// Matrix holds D_mn = ⟨m|g|n⟩, row after row.
	Matrix []complex128
	// Trace is the character Σ_m D_mm.
	Trace complex128
	// Leak is 1 - Σ|D_mn|²/d: 0 where the set is carried into itself, 1 where it is
	// carried away. Rounding leaves about 1e-15.
	Leak float64
}

// Character returns what g does within the span of orthonormal vectors over a basis.
// Give all states of a degenerate set: only its whole span is carried into itself by
// a symmetry of the Hamiltonian.
//
// Errors: vectors of another length, an action that does not belong to the space,
// [ErrOutside].
//
// Cost: one image and one look-up a state and vector.
func Character(b *basis.Basis, vectors [][]complex128, g group.Action) (Representation, error) {
	if err := check(b, vectors); err != nil {
		return Representation{}, err
	}
	if err := keepsSector(b, g); err != nil {
		return Representation{}, err
	}
	back, err := b.Space().Transform(g.Inverse())
	if err != nil {
		return Representation{}, err
	}
	forth, err := b.Space().Transform(g)
	if err != nil {
		return Representation{}, err
	}
	d := len(vectors)
	r := Representation{Matrix: make([]complex128, d*d)}
	moved := make([]complex128, b.Len())
	for n, v := range vectors {
		transform(moved, b, v, forth, back)
		for m, u := range vectors {
			r.Matrix[m*d+n] = overlap(u, moved)
		}
	}
	kept := 0.0
	for i, z := range r.Matrix {
		kept += real(z)*real(z) + imag(z)*imag(z)
		if i%(d+1) == 0 {
			r.Trace += z
		}
	}
	r.Leak = 1 - kept/float64(d)
	return r, nil
}

// keepsSector reports whether g carries each generator of the sector to an element of
// its group with the same eigenvalue, and the charges to themselves.
func keepsSector(b *basis.Basis, g group.Action) error {
	sector := b.Sector()
	for _, q := range sector.Charges {
		one := basis.Sector{Charges: []basis.ChargeValue{q}, Symmetries: []group.Eigenvalue{{Generator: g}}}
		if err := one.Check(b.Space()); err != nil {
			return fmt.Errorf("label: %w: %w", ErrOutside, err)
		}
	}
	elements, err := group.Generate(sector.Symmetries)
	if err != nil {
		return err
	}
	turns := map[string]group.Turn{}
	for _, e := range elements {
		turns[e.Action.Key()] = e.Turn
	}
	for i, e := range sector.Symmetries {
		conjugate := g.Compose(e.Generator).Compose(g.Inverse())
		turn, known := turns[conjugate.Key()]
		if !known || !turn.Equal(e.Turn) {
			return fmt.Errorf("label: %w: it carries generator %d to another eigenvalue, or out of the group; take a symmetry that keeps the sector", ErrOutside, i)
		}
	}
	return nil
}

// transform writes g·v: the amplitude on the representative r is that of v on g⁻¹r
// times the factor of g.
func transform(dst []complex128, b *basis.Basis, v []complex128, forth, back *basis.Transform) {
	for i := range dst {
		r := b.At(i)
		c, _ := back.Image(r)
		j, factor, ok := b.Component(c)
		if !ok {
			dst[i] = 0
			continue
		}
		_, own, _ := b.Component(r)
		_, phase := forth.Image(c)
		dst[i] = phase * factor * v[j] / own
	}
}

func check(b *basis.Basis, vectors [][]complex128) error {
	if b == nil {
		return errors.New("label: no basis")
	}
	if len(vectors) == 0 {
		return errors.New("label: no vectors; give those of the level, all of a degenerate one")
	}
	for n, v := range vectors {
		if len(v) != b.Len() {
			return fmt.Errorf("label: vector %d has %d amplitudes, the basis %d states; give vectors over this basis", n, len(v), b.Len())
		}
	}
	return nil
}

func overlap(a, b []complex128) complex128 {
	var re, im float64
	for i, x := range a {
		y := b[i]
		re += real(x)*real(y) + imag(x)*imag(y)
		im += real(x)*imag(y) - imag(x)*real(y)
	}
	return complex(re, im)
}
