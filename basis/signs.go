package basis

import (
	"fmt"

	"ketloom/basis/group"
)

// resolveSigns puts the signs by which products of symmetries differ from their
// compositions into the characters, which it changes and returns.
func resolveSigns(space *Space, generators []group.Eigenvalue, elements []group.Element, movers []*Mover, chi []uint32, u *units) ([]uint32, error) {
	plain := natural(space)
	t := newImages(plain, plain, 0, movers, u)
	place := map[string]int{}
	for g, e := range elements {
		place[e.Action.Key()] = g
	}
	sign := make([]int, len(elements)) // 0: not known yet
	sign[0] = 1
	half, whole := u.half(), u.denominator
	for done, queue := 0, []int{0}; done < len(queue); done++ {
		g := queue[done]
		for i, e := range generators {
			a := place[e.Generator.Key()]
			h := place[e.Generator.Compose(elements[g].Action).Key()]
			// Both ways to the same product state; what differs is the sign.
			twice := t.phase(g, 0, half) + t.phase(a, t.image(g, 0), half)
			once := t.phase(h, 0, half)
			value := sign[g]
			if twice%whole != once%whole {
				value = -value
			}
			if sign[h] != 0 && sign[h] != value {
				return nil, fmt.Errorf("basis: the symmetries exchange occupied and empty fermion modes so that generator %d closes only up to a sign; give it the phase of a quarter turn on one level of one site more, or drop it", i)
			}
			if sign[h] == 0 {
				sign[h] = value
				queue = append(queue, h)
			}
		}
	}
	for h, v := range sign {
		if v < 0 {
			chi[h] = (chi[h] + half) % whole
		}
	}
	return chi, nil
}
