package group

import "fmt"

// Linear is a one-dimensional representation of a subgroup: the element
// Elements[i] is the number exp(2πi·Turns[i]). The identity comes first.
type Linear struct {
	Elements []int
	Turns    []Turn
}

// Real reports whether all numbers are +1 or -1.
func (l Linear) Real() bool {
	for _, t := range l.Turns {
		if !t.IsReal() {
			return false
		}
	}
	return true
}

// LinearCharacters returns all one-dimensional representations of the subgroup
// that the given elements generate, in a fixed order, the trivial one first:
// as many as the subgroup has elements modulo commutators.
//
// Every product of a generator and an element is a relation between the turns
// of the generators, linear with integer coefficients modulo one; the Hermite
// normal form of all relations is solved exactly.
func (g *Group) LinearCharacters(generators []int) ([]Linear, error) {
	if err := g.checkElements(generators); err != nil {
		return nil, err
	}
	p := g.present(generators)
	if p.order() > LargestOrder {
		return nil, fmt.Errorf("group: a subgroup has more than %d linear characters", LargestOrder)
	}
	var list []Linear
	for _, turns := range p.solutions(0, nil) {
		list = append(list, p.linear(turns))
	}
	return list, nil
}

// presentation is a subgroup as generators and the abelian part of all
// relations between them.
type presentation struct {
	elements []int // breadth first, the identity first
	letter   []int // elements[i] is generator letter[i] times elements[parent[i]]
	parent   []int
	rows     [][]int64 // upper triangular: Σ_j rows[c][j]·turn_j is an integer
}

// present lists the subgroup and its relations.
func (g *Group) present(generators []int) presentation {
	r := len(generators)
	p := presentation{elements: []int{0}, letter: []int{-1}, parent: []int{-1}, rows: make([][]int64, r)}
	place := make([]int, len(g.elements))
	for i := range place {
		place[i] = -1
	}
	place[0] = 0
	exponents := [][]int64{make([]int64, r)}
	for next := 0; next < len(p.elements); next++ {
		for j, s := range generators {
			word := append([]int64(nil), exponents[next]...)
			word[j]++
			at := g.Product(s, p.elements[next])
			if place[at] < 0 {
				place[at] = len(p.elements)
				p.elements = append(p.elements, at)
				p.letter, p.parent = append(p.letter, j), append(p.parent, next)
				exponents = append(exponents, word)
				continue
			}
			for k, e := range exponents[place[at]] {
				word[k] -= e
			}
			p.relate(word)
		}
	}
	return p
}

// relate adds a relation to the normal form.
func (p presentation) relate(row []int64) {
	for c := range row {
		if row[c] == 0 {
			continue
		}
		if p.rows[c] == nil {
			p.rows[c] = append([]int64(nil), row...)
			if row[c] < 0 {
				subtract(p.rows[c], row, 2)
			}
			p.reduce()
			return
		}
		changed := false
		for row[c] != 0 {
			subtract(p.rows[c], row, p.rows[c][c]/row[c])
			for k := range row {
				row[k], p.rows[c][k] = p.rows[c][k], row[k]
			}
			changed = true
		}
		if changed && p.rows[c][c] < 0 {
			for k := range p.rows[c] {
				p.rows[c][k] = -p.rows[c][k]
			}
		}
		for k := c + 1; k < len(row); k++ {
			if p.rows[k] != nil {
				subtract(row, p.rows[k], row[k]/p.rows[k][k])
			}
		}
	}
	p.reduce()
}

// reduce keeps the entries to the right of the diagonal below it.
func (p presentation) reduce() {
	for c := len(p.rows) - 1; c >= 0; c-- {
		for k := c + 1; k < len(p.rows) && p.rows[c] != nil; k++ {
			if p.rows[k] != nil {
				subtract(p.rows[c], p.rows[k], p.rows[c][k]/p.rows[k][k])
			}
		}
	}
}

func subtract(row, other []int64, times int64) {
	if times == 0 {
		return
	}
	for k := range row {
		row[k] -= times * other[k]
	}
}

// order is the number of linear characters.
func (p presentation) order() int64 {
	n := int64(1)
	for c, row := range p.rows {
		n *= row[c]
	}
	return n
}

// solutions returns the turns of the generators for all linear characters that
// give the last generators, from number free on, the fixed turns.
func (p presentation) solutions(free int, fixed []Turn) [][]Turn {
	r := len(p.rows)
	list := [][]Turn{make([]Turn, r)}
	for c := r - 1; c >= 0; c-- {
		var longer [][]Turn
		diagonal := p.rows[c][c]
		for _, turns := range list {
			rest := Turn{0, 1}
			for k := c + 1; k < r; k++ {
				rest = rest.Add(turns[k].Times(p.rows[c][k]))
			}
			rest = rest.Neg()
			if fixed != nil && c >= free {
				if t := fixed[c-free]; t.Times(diagonal).Equal(rest) {
					turns[c] = t.normal()
					longer = append(longer, turns)
				}
				continue
			}
			for m := range diagonal {
				next := append([]Turn(nil), turns...)
				next[c] = NewTurn(rest.Num+m*rest.Den, rest.Den*diagonal)
				longer = append(longer, next)
			}
		}
		list = longer
	}
	return list
}

// linear returns the character with the given turns of the generators.
func (p presentation) linear(turns []Turn) Linear {
	l := Linear{Elements: p.elements, Turns: make([]Turn, len(p.elements))}
	l.Turns[0] = Turn{0, 1}
	for i := 1; i < len(l.Turns); i++ {
		l.Turns[i] = turns[p.letter[i]].Add(l.Turns[p.parent[i]])
	}
	return l
}
