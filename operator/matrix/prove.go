package matrix

import (
	"errors"
	"fmt"

	"ketloom/basis"
	"ketloom/basis/group"
	"ketloom/operator"
)

// prove reports why op does not keep the sector of the basis.
func prove(op operator.Operator, b *basis.Basis) error {
	if err := usable(op, b); err != nil {
		return err
	}
	for _, q := range b.Sector().Charges {
		if err := op.Conserves(q.Charge); err != nil {
			return fmt.Errorf("matrix: the operator leads out of the sector: %w", err)
		}
	}
	for i, e := range b.Sector().Symmetries {
		if err := op.Commutes(e.Generator); err != nil {
			return fmt.Errorf("matrix: the operator does not commute with generator %d of the sector: %w", i, err)
		}
	}
	return nil
}

func usable(op operator.Operator, b *basis.Basis) error {
	if b == nil {
		return errors.New("matrix: no basis; make one with basis.New")
	}
	if err := op.Err(); err != nil {
		return err
	}
	if op.Space() != nil && !op.Space().Equal(b.Space()) {
		return errors.New("matrix: operator and basis belong to different spaces; make both on the same space")
	}
	return nil
}

// between returns the part of op that leads from one sector into the other:
// the one that changes every charge by the difference of its values, and that
// the common group multiplies by χ_to χ_from*.
func between(op operator.Operator, from, to *basis.Basis) (operator.Operator, error) {
	if err := errors.Join(usable(op, from), usable(op, to)); err != nil {
		return op, err
	}
	if !from.Space().Equal(to.Space()) {
		return op, errors.New("matrix: the two bases belong to different spaces")
	}
	for _, q := range to.Sector().Charges {
		for _, p := range from.Sector().Charges {
			if sameCharge(p.Charge, q.Charge) {
				op = op.Changing(q.Charge, q.Value-p.Value)
			}
		}
	}
	if from.GroupOrder() == 1 || to.GroupOrder() == 1 {
		return op, op.Err()
	}
	elements, err := ratio(from.Sector().Symmetries, to.Sector().Symmetries)
	if err != nil {
		return op, err
	}
	op = op.Covariant(elements)
	return op, op.Err()
}

func sameCharge(p, q basis.Charge) bool {
	return p.Modulus == q.Modulus && fmt.Sprint(p.Weights) == fmt.Sprint(q.Weights)
}

// ratio returns the group of two sectors with the characters χ_to χ_from*.
func ratio(from, to []group.Eigenvalue) ([]group.Element, error) {
	different := errors.New("matrix: the two sectors have different symmetry generators; build both bases from the same generators in the same order, or one of them without symmetries")
	if len(from) != len(to) {
		return nil, different
	}
	quotient := make([]group.Eigenvalue, len(to))
	for i := range to {
		if !to[i].Generator.Equal(from[i].Generator) {
			return nil, different
		}
		quotient[i] = group.Eigenvalue{Generator: to[i].Generator, Turn: to[i].Turn.Add(from[i].Turn.Neg())}
	}
	return group.Generate(quotient)
}
