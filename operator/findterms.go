package operator

import (
	"encoding/binary"

	"ketloom/basis"
	"ketloom/basis/group"
)

// colouredTerms are the canonical terms of an operator with the colours of
// their coefficients, to be looked up.
type colouredTerms struct {
	space    *basis.Space
	terms    []Term
	colour   []int // of the coefficient
	opposite []int // of minus the coefficient
	place    map[string]int
	touching [][]int // terms that act on each site
}

// colourTerms colours the terms of operators in canonical form on one space.
func colourTerms(space *basis.Space, list []Operator) ([]*colouredTerms, error) {
	var numbers []complex128
	for _, a := range list {
		for _, t := range a.terms {
			numbers = append(numbers, t.Coefficient, -t.Coefficient)
		}
	}
	p, err := newPalette(numbers)
	if err != nil {
		return nil, err
	}
	var all []*colouredTerms
	for _, a := range list {
		c := &colouredTerms{space: space, terms: a.terms, place: make(map[string]int, len(a.terms)), touching: make([][]int, space.Sites())}
		for i, t := range a.terms {
			c.colour = append(c.colour, p.of(t.Coefficient))
			c.opposite = append(c.opposite, p.of(-t.Coefficient))
			c.place[string(appendKey(nil, t.Factors))] = i
			for _, f := range t.Factors {
				site := space.Mode(f.Mode).Site
				if list := c.touching[site]; len(list) == 0 || list[len(list)-1] != i {
					c.touching[site] = append(list, i)
				}
			}
		}
		all = append(all, c)
	}
	return all, nil
}

func appendKey(key []byte, factors []Factor) []byte {
	for _, f := range factors {
		key = append(key, byte(f.Symbol))
		key = binary.LittleEndian.AppendUint16(key, uint16(f.Mode))
		key = binary.LittleEndian.AppendUint16(key, uint16(f.To))
		key = binary.LittleEndian.AppendUint16(key, uint16(f.From))
	}
	return key
}

// sentTo reports whether the permutation of sites sends every term of c to one
// of d with the same coefficient, the sign of reordering fermions included.
func (c *colouredTerms) sentTo(d *colouredTerms, p group.Permutation) bool {
	if len(c.terms) != len(d.terms) {
		return false
	}
	for i := range c.terms {
		if !c.termSentTo(d, p, i) {
			return false
		}
	}
	return true
}

func (c *colouredTerms) termSentTo(d *colouredTerms, p group.Permutation, i int) bool {
	factors := make([]Factor, len(c.terms[i].Factors))
	for j, f := range c.terms[i].Factors {
		mode := c.space.Mode(f.Mode)
		f.Mode = c.space.ModeOf(p[mode.Site], mode.Component)
		factors[j] = f
	}
	sorted, negative := canonicalOrder(c.space, factors)
	at, known := d.place[string(appendKey(make([]byte, 0, 64), sorted))]
	if !known {
		return false
	}
	if negative {
		return c.opposite[i] == d.colour[at]
	}
	return c.colour[i] == d.colour[at]
}

// exchangeable reports whether the terms stay the same when two sites of one
// kind change places.
func (c *colouredTerms) exchangeable(u, v int) bool {
	p := exchange(len(c.touching), u, v)
	for _, site := range []int{u, v} {
		for _, i := range c.touching[site] {
			if !c.termSentTo(c, p, i) {
				return false
			}
		}
	}
	return true
}

func exchange(n, u, v int) group.Permutation {
	p := group.Identity(n)
	p[u], p[v] = v, u
	return p
}
