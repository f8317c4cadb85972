package group

import "fmt"

// LargestOrder is the largest number of elements that [Generate] forms.
const LargestOrder = 1 << 16

// Eigenvalue names a sector: in it the generator acts as the number
// exp(2πi·Turn). A momentum k is the eigenvalue exp(-ik·a) of the translation
// by a, so Turn = -k·a/2π.
type Eigenvalue struct {
	Generator Action `json:"generator"`
	Turn      Turn   `json:"turn"`
}

// Element is a group element g with its character χ(g) = exp(2πi·Turn).
type Element struct {
	Action Action
	Turn   Turn
}

// Generate returns the group that the generators span, the identity first and
// the rest in a fixed order, each element with the character that follows from
// the eigenvalues of the generators. No generators give the group {1} on
// no sites.
//
// Errors: a generator that is not an action, generators on different numbers
// of sites, a group of more than LargestOrder elements, and eigenvalues that
// are not a representation, that is, two products of generators that are the
// same element but have different eigenvalues (such as an eigenvalue of a
// translation whose L-th power is not one on a ring of L sites).
//
// Cost: order × generators compositions.
func Generate(gens []Eigenvalue) ([]Element, error) {
	if len(gens) == 0 {
		return []Element{{Action: Action{Sites: Permutation{}}, Turn: Turn{0, 1}}}, nil
	}
	n := len(gens[0].Generator.Sites)
	for i, g := range gens {
		if err := g.Generator.Check(); err != nil {
			return nil, fmt.Errorf("group: generator %d is not a symmetry: %w", i, err)
		}
		if err := g.Turn.Check(); err != nil {
			return nil, fmt.Errorf("group: eigenvalue of generator %d: %w", i, err)
		}
		if len(g.Generator.Sites) != n {
			return nil, fmt.Errorf("group: generator %d acts on %d sites but generator 0 on %d; give all on the same sites", i, len(g.Generator.Sites), n)
		}
	}
	elements := []Element{{Action: Translate(Identity(n)), Turn: Turn{0, 1}}}
	place := map[string]int{elements[0].Action.Key(): 0}
	for next := 0; next < len(elements); next++ {
		for i, g := range gens {
			product := Element{g.Generator.Compose(elements[next].Action), g.Turn.Add(elements[next].Turn)}
			key := product.Action.Key()
			at, known := place[key]
			if !known {
				if len(elements) == LargestOrder {
					return nil, fmt.Errorf("group: the generators span more than %d elements; check that they are the symmetries you mean", LargestOrder)
				}
				place[key] = len(elements)
				elements = append(elements, product)
				continue
			}
			if !elements[at].Turn.Equal(product.Turn) {
				return nil, fmt.Errorf("group: the eigenvalues are not a representation: multiplying by generator %d gives the same symmetry with the eigenvalues exp(2πi·%v) and exp(2πi·%v); a generator with gⁿ = 1 needs an eigenvalue whose n-th power is one (order of generator %d: %s)",
					i, elements[at].Turn, product.Turn, i, orderText(g.Generator))
			}
		}
	}
	return elements, nil
}

func orderText(a Action) string {
	n, err := a.Order()
	if err != nil {
		return "too large"
	}
	return fmt.Sprint(n)
}
