package basis

import (
	"fmt"

	"ketloom/basis/group"
)

// units counts phases in whole numbers of 1/denominator of a turn.
type units struct {
	denominator uint32
	roots       []complex128 // exp(2πi j/denominator)
}

// mostDenominator bounds the common denominator of all phases of a sector.
const mostDenominator = 1 << 20

// newUnits finds the common denominator of all phases; it is even where signs
// of fermions occur.
func newUnits(space *Space, elements []group.Element, movers []*Mover) (*units, error) {
	d := int64(1)
	if space.fermions != 0 {
		d = 2
	}
	include := func(t group.Turn) error {
		den := t.Add(group.Turn{}).Den
		d = d / greatestDivisor(d, den) * den
		if d > mostDenominator {
			return fmt.Errorf("basis: the phases of the symmetries have a common denominator above %d; use simpler fractions of a turn", mostDenominator)
		}
		return nil
	}
	for g, e := range elements {
		if err := include(e.Turn); err != nil {
			return nil, err
		}
		for _, list := range movers[g].Phases {
			for _, t := range list {
				if err := include(t); err != nil {
					return nil, err
				}
			}
		}
	}
	u := &units{denominator: uint32(d), roots: make([]complex128, d)}
	for j := range u.roots {
		u.roots[j] = group.NewTurn(int64(j), d).Complex()
	}
	return u, nil
}

func greatestDivisor(a, b int64) int64 {
	for b != 0 {
		a, b = b, a%b
	}
	return a
}

// of writes a phase as a number of units.
func (u *units) of(t group.Turn) uint32 {
	t = t.Add(group.Turn{}) // normalised
	return uint32(t.Num * (int64(u.denominator) / t.Den))
}

// half is half a turn; 0 where there are no signs.
func (u *units) half() uint32 { return u.denominator / 2 }
