package operator

import (
	"math/cmplx"
	"sort"

	"ketloom/basis"
)

// zeroBelow is the part of the sum of magnitudes below which a coefficient
// counts as zero: 2^-46.
const zeroBelow = 1.0 / (1 << 46)

// NormalOrdered returns the canonical form of a (see the package comment):
// equal operators give equal lists of terms, up to rounding of coefficients.
// Terms come with fewer factors first, then by modes.
//
// Cost: proportional to the number of terms, times 2^m for a term with m modes
// that carry a diagonal product with a constant part, such as n b b†.
func (a Operator) NormalOrdered() Operator {
	if a.err != nil || len(a.terms) == 0 {
		return a
	}
	c := collector{space: a.space, place: map[string]int{}}
	for _, t := range a.terms {
		c.add(t)
	}
	return Operator{space: a.space, terms: c.sorted()}
}

// collector adds up canonical products.
type collector struct {
	space      *basis.Space
	place      map[string]int
	terms      []Term
	keys       []string
	magnitudes []float64 // sum of the magnitudes added to each coefficient
}

// add reduces a product to canonical ones and adds these.
func (c *collector) add(t Term) {
	locals, modes, negative := c.byMode(t.Factors)
	coefficient := t.Coefficient
	if negative {
		coefficient = -coefficient
	}
	c.distribute(coefficient, locals, modes, nil)
}

// byMode multiplies the factors of each mode together, modes ascending, and
// returns the sign of bringing fermionic factors there.
func (c *collector) byMode(factors []Factor) (locals []local, modes []int, negative bool) {
	order := make([]int, len(factors))
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(x, y int) bool { return factors[order[x]].Mode < factors[order[y]].Mode })
	for x, i := range order {
		if factors[i].odd(c.space) {
			for _, j := range order[:x] {
				if j > i && factors[j].odd(c.space) {
					negative = !negative
				}
			}
		}
		m := factors[i].matrix(c.space)
		if n := len(modes); n > 0 && modes[n-1] == factors[i].Mode {
			locals[n-1] = locals[n-1].times(m)
			continue
		}
		locals, modes = append(locals, m), append(modes, factors[i].Mode)
	}
	return locals, modes, negative
}

// distribute multiplies out the canonical pieces of the modes.
func (c *collector) distribute(coefficient complex128, locals []local, modes []int, chosen []Factor) {
	if len(modes) == 0 {
		c.put(coefficient, chosen)
		return
	}
	for _, p := range locals[0].expand(c.space, modes[0]) {
		next := chosen
		if p.factor.Symbol != 0 {
			next = append(chosen[:len(chosen):len(chosen)], p.factor)
		}
		c.distribute(coefficient*p.coefficient, locals[1:], modes[1:], next)
	}
}

// put adds a product with at most one factor a mode, modes ascending.
func (c *collector) put(coefficient complex128, factors []Factor) {
	sorted, negative := canonicalOrder(c.space, factors)
	if negative {
		coefficient = -coefficient
	}
	key := keyOf(sorted)
	at, known := c.place[key]
	if !known {
		at = len(c.terms)
		c.place[key] = at
		c.terms = append(c.terms, Term{Factors: sorted})
		c.keys = append(c.keys, key)
		c.magnitudes = append(c.magnitudes, 0)
	}
	c.terms[at].Coefficient += coefficient
	c.magnitudes[at] += cmplx.Abs(coefficient)
}

// canonicalOrder sorts factors on different modes into the order of the
// package comment and returns the fermionic sign of doing so.
func canonicalOrder(space *basis.Space, factors []Factor) (sorted []Factor, negative bool) {
	sorted = append([]Factor(nil), factors...)
	for i := 1; i < len(sorted); i++ { // insertion sort: every exchange counts
		for j := i; j > 0 && before(sorted[j], sorted[j-1]); j-- {
			if sorted[j].odd(space) && sorted[j-1].odd(space) {
				negative = !negative
			}
			sorted[j], sorted[j-1] = sorted[j-1], sorted[j]
		}
	}
	return sorted, negative
}

func before(f, g Factor) bool {
	if rank(f.Symbol) != rank(g.Symbol) {
		return rank(f.Symbol) < rank(g.Symbol)
	}
	if f.Symbol == Lower {
		return f.Mode > g.Mode
	}
	return f.Mode < g.Mode
}

// rank orders symbols; both diagonal ones stand together.
func rank(s Symbol) Symbol {
	if s == SpinZ {
		return Number
	}
	return s
}

func keyOf(factors []Factor) string {
	key := make([]byte, 0, 4*len(factors))
	for _, f := range factors {
		key = append(key, byte(f.Symbol), byte(f.Mode), byte(f.To), byte(f.From))
	}
	return string(key)
}

// sorted returns the terms that are not zero, in canonical order.
func (c *collector) sorted() []Term {
	var keep []int
	for i, t := range c.terms {
		if cmplx.Abs(t.Coefficient) > zeroBelow*c.magnitudes[i] {
			keep = append(keep, i)
		}
	}
	sort.Slice(keep, func(x, y int) bool {
		a, b := c.keys[keep[x]], c.keys[keep[y]]
		if len(a) != len(b) {
			return len(a) < len(b)
		}
		return a < b
	})
	terms := make([]Term, len(keep))
	for n, i := range keep {
		terms[n] = c.terms[i]
	}
	return terms
}

// IsZero reports whether the canonical form has no term. An operator with an
// error is not zero.
func (a Operator) IsZero() bool {
	return a.err == nil && a.NormalOrdered().Len() == 0
}

// Equal reports whether a and b are the same operator.
func (a Operator) Equal(b Operator) bool { return a.Minus(b).IsZero() }

// IsHermitian reports whether a = a†.
func (a Operator) IsHermitian() bool { return a.Equal(a.Adjoint()) }

// Real reports whether every matrix element of a between product states is
// real: all coefficients of the canonical form are.
func (a Operator) Real() bool {
	for _, t := range a.NormalOrdered().terms {
		if imag(t.Coefficient) != 0 {
			return false
		}
	}
	return a.err == nil
}
