package group

import "fmt"

// Permutation sends site i to site p[i].
type Permutation []int

// Identity returns the permutation of n sites that moves none.
func Identity(n int) Permutation {
	p := make(Permutation, n)
	for i := range p {
		p[i] = i
	}
	return p
}

// Check reports the first reason for which p is not a permutation of
// 0 … len(p)-1.
func (p Permutation) Check() error {
	source := make([]int, len(p))
	for i := range source {
		source[i] = -1
	}
	for i, to := range p {
		if to < 0 || to >= len(p) {
			return fmt.Errorf("group: not a permutation: site %d is sent to %d, outside 0 … %d", i, to, len(p)-1)
		}
		if source[to] >= 0 {
			return fmt.Errorf("group: not a permutation: sites %d and %d are both sent to %d", source[to], i, to)
		}
		source[to] = i
	}
	return nil
}

// Compose returns p∘q, which applies q first: (p∘q)(i) = p[q[i]]. Both must
// act on the same number of sites.
func (p Permutation) Compose(q Permutation) Permutation {
	if len(p) != len(q) {
		panic("group: permutations of different lengths composed")
	}
	r := make(Permutation, len(p))
	for i := range r {
		r[i] = p[q[i]]
	}
	return r
}

// Inverse returns the permutation that undoes p.
func (p Permutation) Inverse() Permutation {
	r := make(Permutation, len(p))
	for i, to := range p {
		r[to] = i
	}
	return r
}

// Order returns the smallest n > 0 with pⁿ = 1: the least common multiple of
// the lengths of the cycles.
func (p Permutation) Order() int {
	order := int64(1)
	seen := make([]bool, len(p))
	for i := range p {
		length := int64(0)
		for j := i; !seen[j]; j = p[j] {
			seen[j] = true
			length++
		}
		if length > 0 {
			order = order / gcd(order, length) * length
		}
	}
	return int(order)
}

// Equal reports whether p and q are the same permutation.
func (p Permutation) Equal(q Permutation) bool {
	if len(p) != len(q) {
		return false
	}
	for i := range p {
		if p[i] != q[i] {
			return false
		}
	}
	return true
}

// IsIdentity reports whether p moves no site.
func (p Permutation) IsIdentity() bool {
	for i := range p {
		if p[i] != i {
			return false
		}
	}
	return true
}
