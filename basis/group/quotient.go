package group

import (
	"fmt"
	"sort"
)

// mostSubgroups bounds the search for subgroups of a quotient.
const mostSubgroups = 1 << 13

// quotient is the group of the cosets of a normal subgroup in a larger one.
type quotient struct {
	first   []int   // an element of each coset; coset 0 is the normal subgroup
	number  []int   // the coset of each element, -1 outside
	product [][]int // of cosets
	inverse []int
}

// quotient returns the cosets of n in the little group.
func (n *normal) quotient(little []int) *quotient {
	q := &quotient{}
	q.first, q.number = n.cosets(little)
	for _, x := range q.first {
		row := make([]int, len(q.first))
		for j, y := range q.first {
			row[j] = q.number[n.group.Product(x, y)]
		}
		q.product = append(q.product, row)
	}
	q.inverse = make([]int, len(q.first))
	for i, row := range q.product {
		for j, at := range row {
			if at == 0 {
				q.inverse[i] = j
			}
		}
	}
	return q
}

// set is a subgroup of a quotient by the membership of its cosets.
type set []bool

func (s set) members() []int {
	var list []int
	for i, in := range s {
		if in {
			list = append(list, i)
		}
	}
	return list
}

func (s set) key() string {
	bytes := make([]byte, (len(s)+7)/8)
	for i, in := range s {
		if in {
			bytes[i/8] |= 1 << (i % 8)
		}
	}
	return string(bytes)
}

// closure returns the subgroup that the given cosets generate.
func (q *quotient) closure(generators []int) set {
	in := make(set, len(q.first))
	in[0] = true
	list := []int{0}
	for next := 0; next < len(list); next++ {
		for _, s := range generators {
			if at := q.product[s][list[next]]; !in[at] {
				in[at] = true
				list = append(list, at)
			}
		}
	}
	return in
}

// subgroups returns one subgroup of each class of conjugate ones, the largest
// first: from the trivial one by adding one coset after the other.
func (q *quotient) subgroups() ([]set, error) {
	trivial := q.closure(nil)
	list, known := []set{trivial}, map[string]bool{trivial.key(): true}
	spans := [][]int{nil}
	for next := 0; next < len(list); next++ {
		for x := range q.first {
			if list[next][x] {
				continue
			}
			span := append(append([]int(nil), spans[next]...), x)
			larger := q.closure(span)
			if key := larger.key(); !known[key] {
				if len(list) == mostSubgroups {
					return nil, fmt.Errorf("group: a quotient of order %d has more than %d classes of subgroups; give generators of a larger abelian normal subgroup", len(q.first), mostSubgroups)
				}
				q.markConjugates(larger, known)
				list, spans = append(list, larger), append(spans, span)
			}
		}
	}
	sort.SliceStable(list, func(i, j int) bool { return len(list[i].members()) > len(list[j].members()) })
	return list, nil
}

func (q *quotient) markConjugates(s set, known map[string]bool) {
	members := s.members()
	for x := range q.first {
		image := make(set, len(s))
		for _, y := range members {
			image[q.product[q.product[x][y]][q.inverse[x]]] = true
		}
		known[image.key()] = true
	}
}

// generating returns few cosets that generate a subgroup.
func (q *quotient) generating(s set) []int {
	members := s.members()
	var chosen []int
	for reached := 1; reached < len(members); {
		best, most := 0, reached
		for _, x := range members {
			if n := len(q.closure(append(append([]int(nil), chosen...), x)).members()); n > most {
				best, most = x, n
			}
			if most == len(members) {
				break
			}
		}
		chosen, reached = append(chosen, best), most
	}
	return chosen
}
