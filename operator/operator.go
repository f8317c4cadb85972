package operator

import (
	"errors"
	"fmt"
	"math/cmplx"

	"ketloom/basis"
)

// Operator is a sum of products of elementary operators on a space. It is a
// value: no method changes its receiver or its arguments. The zero Operator
// belongs to no space and is the neutral element of Plus.
type Operator struct {
	space *basis.Space
	terms []Term
	err   error
}

func failed(space *basis.Space, err error) Operator { return Operator{space: space, err: err} }

// Err returns the first error that was made in building the operator, or nil.
func (a Operator) Err() error { return a.err }

// Space returns the space that the operator acts on.
func (a Operator) Space() *basis.Space { return a.space }

// Len returns the number of terms.
func (a Operator) Len() int { return len(a.terms) }

// At returns term i; its factors must not be changed.
func (a Operator) At(i int) Term { return a.terms[i] }

// join returns the space that two operators share, or the error of one of them.
func join(a, b Operator) (*basis.Space, error) {
	switch {
	case a.err != nil:
		return a.space, a.err
	case b.err != nil:
		return b.space, b.err
	case a.space == nil:
		return b.space, nil
	case b.space == nil || a.space.Equal(b.space):
		return a.space, nil
	}
	return a.space, errors.New("operator: operators on different spaces; make both on the same space")
}

// Plus returns a + b.
func (a Operator) Plus(b Operator) Operator {
	space, err := join(a, b)
	if err != nil {
		return failed(space, err)
	}
	terms := make([]Term, 0, len(a.terms)+len(b.terms))
	return Operator{space: space, terms: append(append(terms, a.terms...), b.terms...)}
}

// Minus returns a - b.
func (a Operator) Minus(b Operator) Operator { return a.Plus(b.Scale(-1)) }

// Sum returns the sum of the operators, in order.
func Sum(list []Operator) Operator {
	var sum Operator
	for _, b := range list {
		space, err := join(sum, b)
		if err != nil {
			return failed(space, err)
		}
		sum.space = space
		sum.terms = append(sum.terms, b.terms...)
	}
	return sum
}

// Scale returns z·a. A z that is not finite gives an operator with an error.
func (a Operator) Scale(z complex128) Operator {
	if a.err != nil {
		return a
	}
	if cmplx.IsNaN(z) || cmplx.IsInf(z) {
		return failed(a.space, fmt.Errorf("operator: the coefficient %v; coefficients must be finite", z))
	}
	terms := make([]Term, len(a.terms))
	for i, t := range a.terms {
		terms[i] = Term{z * t.Coefficient, t.Factors}
	}
	return Operator{space: a.space, terms: terms}
}

// mostTerms bounds the number of terms that a product may have.
const mostTerms = 1 << 24

// Times returns the product a·b, in which b acts first. Products can be of any
// length.
func (a Operator) Times(b Operator) Operator {
	space, err := join(a, b)
	if err != nil {
		return failed(space, err)
	}
	if len(a.terms)*len(b.terms) > mostTerms {
		return failed(space, fmt.Errorf("operator: a product of %d and %d terms; bring the factors into normal order first, or multiply smaller sums", len(a.terms), len(b.terms)))
	}
	terms := make([]Term, 0, len(a.terms)*len(b.terms))
	for _, s := range a.terms {
		for _, t := range b.terms {
			factors := make([]Factor, 0, len(s.Factors)+len(t.Factors))
			terms = append(terms, Term{s.Coefficient * t.Coefficient, append(append(factors, s.Factors...), t.Factors...)})
		}
	}
	return Operator{space: space, terms: terms}
}

// Adjoint returns a†.
func (a Operator) Adjoint() Operator {
	if a.err != nil {
		return a
	}
	terms := make([]Term, len(a.terms))
	for i, t := range a.terms {
		factors := make([]Factor, len(t.Factors))
		for j, f := range t.Factors {
			factors[len(factors)-1-j] = f.adjoint()
		}
		terms[i] = Term{cmplx.Conj(t.Coefficient), factors}
	}
	return Operator{space: a.space, terms: terms}
}

// Commutator returns [a, b] = ab - ba in canonical form.
func Commutator(a, b Operator) Operator { return a.Times(b).Minus(b.Times(a)).NormalOrdered() }

// Anticommutator returns {a, b} = ab + ba in canonical form.
func Anticommutator(a, b Operator) Operator { return a.Times(b).Plus(b.Times(a)).NormalOrdered() }
