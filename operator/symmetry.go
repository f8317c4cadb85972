package operator

import (
	"errors"
	"fmt"
	"math/cmplx"

	"ketloom/basis"
	"ketloom/basis/group"
)

// ErrNotSymmetric is wrapped by the errors of [Operator.Commutes] and
// [Operator.Conserves].
var ErrNotSymmetric = errors.New("the operator does not have the symmetry")

// Transformed returns U a U† in canonical form, for the monomial action U.
func (a Operator) Transformed(u group.Action) Operator {
	if a.err != nil {
		return a
	}
	if a.space == nil {
		return a
	}
	mover, err := a.space.Resolve(u)
	if err != nil {
		return failed(a.space, err)
	}
	return a.moved(mover).NormalOrdered()
}

// moved replaces every factor by its image.
func (a Operator) moved(mover *basis.Mover) Operator {
	var images []Operator
	for _, t := range a.NormalOrdered().terms {
		image := Operator{space: a.space, terms: []Term{{Coefficient: t.Coefficient}}}
		for _, f := range t.Factors {
			image = image.Times(Operator{space: a.space, terms: factorImage(mover, f)})
		}
		images = append(images, image)
	}
	moved := Sum(images)
	moved.space = a.space
	return moved
}

// factorImage returns U f U† of a canonical factor.
func factorImage(mover *basis.Mover, f Factor) []Term {
	to := mover.To[f.Mode]
	levels := mover.Levels[f.Mode]
	flipped := levels[0] == 1 && len(levels) == 2
	switch f.Symbol {
	case Raise, Lower:
		phase := phaseBetween(mover, f.Mode, 1, 0)
		symbol := Raise
		if f.Symbol == Lower {
			phase = phase.Neg()
			symbol = Lower
		}
		if flipped {
			symbol = Raise + Lower - symbol
		}
		return []Term{{phase.Complex(), []Factor{{Mode: to, Symbol: symbol}}}}
	case SpinZ:
		sign := complex128(1)
		if flipped {
			sign = -1
		}
		return []Term{{sign, []Factor{{Mode: to, Symbol: SpinZ}}}}
	case Number:
		if flipped {
			return []Term{{Coefficient: 1}, {-1, []Factor{{Mode: to, Symbol: Number}}}}
		}
		return []Term{{1, []Factor{{Mode: to, Symbol: Number}}}}
	}
	phase := phaseBetween(mover, f.Mode, f.To, f.From)
	return []Term{{phase.Complex(), []Factor{{Mode: to, Symbol: Transfer, To: levels[f.To], From: levels[f.From]}}}}
}

// phaseBetween is the phase of |to⟩⟨from|.
func phaseBetween(mover *basis.Mover, mode, to, from int) group.Turn {
	return mover.Phases[mode][to].Add(mover.Phases[mode][from].Neg())
}

// Commutes proves by the algebra that a commutes with the monomial action U:
// U a U† = a. It returns nil, or an error that names a term that breaks it,
// with its coefficients in a and in U a U†, and wraps [ErrNotSymmetric]; or the
// reason for which U is no symmetry of the space.
func (a Operator) Commutes(u group.Action) error {
	image := a.Transformed(u)
	if image.err != nil {
		return image.err
	}
	broken := image.Minus(a).NormalOrdered()
	if broken.Len() == 0 {
		return nil
	}
	worst := broken.terms[0]
	for _, t := range broken.terms {
		if cmplx.Abs(t.Coefficient) > cmplx.Abs(worst.Coefficient)*(1+1e-9) {
			worst = t
		}
	}
	before, after := a.NormalOrdered().coefficient(worst.Factors), image.coefficient(worst.Factors)
	return fmt.Errorf("operator: %w: the term %s has the coefficient %s, but %s after the symmetry is applied (%d terms differ)",
		ErrNotSymmetric, productOrOne(a.space, worst.Factors), plain(before), plain(after), broken.Len())
}

func productOrOne(space *basis.Space, factors []Factor) string {
	if len(factors) == 0 {
		return "1"
	}
	return productText(space, factors)
}

func plain(z complex128) string {
	if imag(z) == 0 {
		return fmt.Sprintf("%.10g", real(z))
	}
	return fmt.Sprintf("%.10g", z)
}

// coefficient returns the coefficient of a product in a canonical form.
func (a Operator) coefficient(factors []Factor) complex128 {
	key := keyOf(factors)
	for _, t := range a.terms {
		if keyOf(t.Factors) == key {
			return t.Coefficient
		}
	}
	return 0
}

// change returns by how much a canonical product changes the charge.
func change(weights [][]int, factors []Factor) int {
	sum := 0
	for _, f := range factors {
		w := weights[f.Mode]
		switch f.Symbol {
		case Raise:
			sum += w[1] - w[0]
		case Lower:
			sum -= w[1] - w[0]
		case Transfer:
			sum += w[f.To] - w[f.From]
		}
	}
	return sum
}

// Conserves proves by the algebra that a conserves a charge. It returns nil, or
// an error that names the first term that changes the charge and by how much,
// and wraps [ErrNotSymmetric].
func (a Operator) Conserves(q basis.Charge) error {
	if a.err != nil || a.space == nil {
		return a.err
	}
	if err := q.Check(a.space); err != nil {
		return err
	}
	weights, _ := q.ModeWeights(a.space)
	for _, t := range a.NormalOrdered().terms {
		if by := change(weights, t.Factors); by != 0 && (q.Modulus == 0 || by%q.Modulus != 0) {
			return fmt.Errorf("operator: %w: the term %s changes the charge %q by %+d", ErrNotSymmetric, termText(a.space, t), q.Name, by)
		}
	}
	return nil
}

// Changing returns the part of a that changes the charge by the given amount
// (modulo the charge's modulus), in canonical form. a is the sum of its parts
// over all amounts.
func (a Operator) Changing(q basis.Charge, by int) Operator {
	if a.err != nil || a.space == nil {
		return a
	}
	if err := q.Check(a.space); err != nil {
		return failed(a.space, err)
	}
	weights, _ := q.ModeWeights(a.space)
	var terms []Term
	for _, t := range a.NormalOrdered().terms {
		off := change(weights, t.Factors) - by
		if off == 0 || q.Modulus > 0 && off%q.Modulus == 0 {
			terms = append(terms, t)
		}
	}
	return Operator{space: a.space, terms: terms}
}

// Covariant returns the part of a that the group multiplies by a character,
//
//	a_μ = |G|⁻¹ Σ_g μ(g)* g a g†,   so that g a_μ g† = μ(g) a_μ,
//
// in canonical form; the characters are the Turns of the elements. It is the
// part of a that leads from a sector χ to the sector χμ.
//
// Cost: |G| transformations.
func (a Operator) Covariant(elements []group.Element) Operator {
	if a.err != nil || a.space == nil || len(elements) <= 1 {
		return a.NormalOrdered()
	}
	var images []Operator
	for _, e := range elements {
		image := a.Transformed(e.Action).Scale(e.Turn.Neg().Complex())
		if image.err != nil {
			return image
		}
		images = append(images, image)
	}
	return Sum(images).Scale(complex(1/float64(len(elements)), 0)).NormalOrdered()
}
