package matrix

import (
	"slices"

	"ketloom/basis"
)

// rows computes the rows of the matrix of an operator O between two bases:
//
//	⟨i~|O|j~⟩ = (⟨j~|O†|i~⟩)*,
//
// so that row i is what O† makes of state i of the target basis, expressed in
// the source basis. For an O that carries the source sector into the target
// sector it is (amplitude · χ(h)*ε)* (N_j/N_i)^½. The norms are left to the
// vectors (see weights): what a row holds is (amplitude · χ(h)*ε)*.
type rows struct {
	to, from *basis.Basis
	diagonal []kernel // of O†, those that leave a configuration as it is
	swaps    []exchange
	moving   []bundle // of O†, the others
	hops     *basis.Hops
	still    int // the hop that flips nothing
	kernels  int
	phases   []complex128
	weights  weights
	merge    bool // elements of the same column are added up; set by the plan
}

// scratch is the working memory of one goroutine, and the row that it computed.
type scratch struct {
	columns []int        // of the row; shared with one of the lists below
	values  []complex128 // without the norms

	own   []int // room for columns and values that are not those of the batch
	pure  []complex128
	batch basis.Batch
	which []int        // hops that the configuration allows
	made  []complex128 // amplitude of each
	order []uint64     // column and place of each, to be sorted
}

// placeBits are the bits of an order key that hold the place in the row, the
// bits above hold the column.
const placeBits = 24

// row puts the elements of row i off the diagonal into the scratch: as the terms
// make them, or merged, that is, in ascending column order and each column once.
// It returns the diagonal where both bases are the same; unmerged, the
// diagonal element may have further parts among the others.
func (r *rows) row(i int, s *scratch) (diagonal complex128) {
	diagonal = r.raw(i, s)
	switch {
	case r.merge:
		diagonal += s.merge(i, r.to == r.from)
		s.columns, s.values = s.own, s.pure
	case slices.Contains(s.batch.States, -1):
		s.drop()
		s.columns, s.values = s.own, s.pure
	default:
		s.columns, s.values = s.batch.States, s.made
	}
	return diagonal
}

// drop leaves out what is in no state.
func (s *scratch) drop() {
	s.own, s.pure = s.own[:0], s.pure[:0]
	for n, column := range s.batch.States {
		if column >= 0 {
			s.own, s.pure = append(s.own, column), append(s.pure, s.made[n])
		}
	}
}

// raw fills the scratch with the elements of row i as the kernels make them:
// places in batch.States (-1 for none), amplitudes in made. It returns what
// leaves the configuration as it is, where both bases are the same.
func (r *rows) raw(i int, s *scratch) (diagonal complex128) {
	c := uint64(r.to.At(i))
	which, made := s.which[:0], s.made[:0]
	var here complex128
	for k := range r.diagonal {
		if d := &r.diagonal[k]; c&d.mask == d.value {
			here += d.amplitude(c)
		}
	}
	for k := range r.swaps {
		if x := &r.swaps[k]; c&x.mask == x.value || c&x.mask == x.other {
			which, made = append(which, x.hop), append(made, x.amplitude(c))
		}
	}
	for k := range r.moving {
		b := &r.moving[k]
		if c&b.value != b.value {
			continue
		}
		for n := range b.kernels {
			if m := &b.kernels[n]; c&m.mask == m.value {
				which, made = append(which, b.hops[n]), append(made, m.amplitude(c))
			}
		}
	}
	if here != 0 && r.to != r.from {
		which, made = append(which, r.still), append(made, here)
		here = 0
	}
	s.which, s.made = which, made
	r.hops.LocateAll(basis.Configuration(c), which, &s.batch)
	trivial := len(r.phases) == 1
	for n, amplitude := range made {
		if !trivial {
			amplitude = times(amplitude, r.phases[s.batch.Phases[n]])
		}
		made[n] = complex(real(amplitude), -imag(amplitude))
	}
	return complex(real(here), -imag(here))
}

// merge sorts the elements by column and adds up those of the same column, in
// the order in which they were made. Zeros are dropped. What falls on the
// diagonal of a square matrix is returned instead.
func (s *scratch) merge(i int, square bool) (diagonal complex128) {
	s.order, s.own, s.pure = s.order[:0], s.own[:0], s.pure[:0]
	for place, column := range s.batch.States {
		if column >= 0 {
			s.order = append(s.order, uint64(column)<<placeBits|uint64(place))
		}
	}
	slices.Sort(s.order)
	for n := 0; n < len(s.order); {
		column, value := int(s.order[n]>>placeBits), complex128(0)
		for ; n < len(s.order) && int(s.order[n]>>placeBits) == column; n++ {
			value += s.made[s.order[n]&(1<<placeBits-1)]
		}
		switch {
		case value == 0:
		case square && column == i:
			diagonal = value
		default:
			s.own, s.pure = append(s.own, column), append(s.pure, value)
		}
	}
	return diagonal
}
