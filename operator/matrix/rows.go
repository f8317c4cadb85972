package matrix

import (
	"math"
	"slices"

	"ketloom/basis"
)

// rows computes the rows of the matrix of an operator O between two bases:
//
//	⟨i~|O|j~⟩ = (⟨j~|O†|i~⟩)*,
//
// so that row i is what O† makes of state i of the target basis, expressed in
// the source basis. For an O that carries the source sector into the target
// sector it is (amplitude · χ(h)*ε)* (N_j/N_i)^½.
type rows struct {
	to, from *basis.Basis
	diagonal []kernel // of O†, those that leave a configuration as it is
	moving   []bundle // of O†, the others
	kernels  int
	phases   []complex128
	unfold   bool // target without symmetry, source with one
}

// element is a matrix element in a row.
type element struct {
	column int
	value  complex128
}

// scratch is the working memory of one goroutine.
type scratch struct {
	made   []element // as the kernels make them
	order  []uint64  // column and place of each, to be sorted
	merged []element
}

// placeBits are the bits of an order key that hold the place in the row, the
// bits above hold the column.
const placeBits = 24

// row returns the elements of row i in ascending column order, each column
// once, with the diagonal apart where both bases are the same. The slice is
// valid until the next call with the same scratch.
func (r *rows) row(i int, s *scratch) (elements []element, diagonal complex128) {
	c := uint64(r.to.At(i))
	s.made = s.made[:0]
	var here complex128
	for k := range r.diagonal {
		if d := &r.diagonal[k]; c&d.mask == d.value {
			here += d.amplitude(c)
		}
	}
	switch {
	case here == 0:
	case r.to == r.from:
		s.made = append(s.made, element{i, complex(real(here), -imag(here))})
	default:
		r.add(s, i, c, here)
	}
	for k := range r.moving {
		b := &r.moving[k]
		if c&b.value != b.value {
			continue
		}
		for n := range b.kernels {
			if m := &b.kernels[n]; c&m.mask == m.value {
				r.add(s, i, c^m.flip, m.amplitude(c))
			}
		}
	}
	s.merge()
	if r.to != r.from {
		return s.merged, 0
	}
	if at, ok := slices.BinarySearchFunc(s.merged, i, func(e element, i int) int { return e.column - i }); ok {
		diagonal = s.merged[at].value
		s.merged = slices.Delete(s.merged, at, at+1)
	}
	return s.merged, diagonal
}

// add puts the amplitude of O† on c into the row.
func (r *rows) add(s *scratch, i int, c uint64, amplitude complex128) {
	j, phase, ok := r.from.Locate(basis.Configuration(c))
	if !ok {
		return
	}
	value := amplitude * r.phases[phase]
	a, b := r.from.Stabiliser(j), r.to.Stabiliser(i)
	switch {
	case r.unfold: // ⟨j~|c⟩ of an orbit with |G|/|G_j| members
		value *= complex(math.Sqrt(float64(a)/float64(r.from.GroupOrder())), 0)
	case a != b:
		value *= complex(math.Sqrt(float64(a)/float64(b)), 0)
	}
	s.made = append(s.made, element{j, complex(real(value), -imag(value))})
}

// merge sorts the elements by column and adds up those of the same column, in
// the order in which they were made. Zeros are dropped.
func (s *scratch) merge() {
	s.order = s.order[:0]
	for place, e := range s.made {
		s.order = append(s.order, uint64(e.column)<<placeBits|uint64(place))
	}
	slices.Sort(s.order)
	s.merged = s.merged[:0]
	for _, key := range s.order {
		e := s.made[key&(1<<placeBits-1)]
		if n := len(s.merged); n > 0 && s.merged[n-1].column == e.column {
			s.merged[n-1].value += e.value
			continue
		}
		s.merged = append(s.merged, e)
	}
	s.merged = slices.DeleteFunc(s.merged, func(e element) bool { return e.value == 0 })
}
