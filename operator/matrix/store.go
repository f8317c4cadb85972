package matrix

// blockRows is the number of rows that one goroutine takes at a time, in
// building and in products.
const blockRows = 256

// store is the stored form: elements of row i stand from start[i] to
// start[i+1], without the norms (see weights).
type store struct {
	real    bool
	start   []int64
	columns []uint32
	wide    []uint64 // columns beyond 2^32 states, instead of columns

	// One of these holds the values of the elements. A uniform store has one
	// value for all, and a column as often as the terms of the operator reach it.
	uniform    bool
	value      complex128
	narrow     []uint8
	codes      []uint16
	realValues []float64
	values     []complex128
	// Tables of the codes.
	realTable []float64
	table     []complex128

	realDiagonal []float64
	diagonal     []complex128
}

// at returns element n of the store.
func (s *store) at(n int64) complex128 {
	switch {
	case s.uniform:
		return s.value
	case s.real && s.narrow != nil:
		return complex(s.realTable[s.narrow[n]], 0)
	case s.real && s.codes != nil:
		return complex(s.realTable[s.codes[n]], 0)
	case s.real:
		return complex(s.realValues[n], 0)
	case s.narrow != nil:
		return s.table[s.narrow[n]]
	case s.codes != nil:
		return s.table[s.codes[n]]
	}
	return s.values[n]
}

// column returns the column of element n.
func (s *store) column(n int64) uint64 {
	if s.wide != nil {
		return s.wide[n]
	}
	return uint64(s.columns[n])
}

// elements returns the number of elements off the diagonal.
func (s *store) elements() int64 { return int64(len(s.columns) + len(s.wide)) }

// distinct returns the number of distinct values that are kept in a table.
func (s *store) distinct() int {
	if s.uniform {
		return 1
	}
	return len(s.realTable) + len(s.table)
}

// bytes returns the memory that the store takes.
func (s *store) bytes() int64 {
	return int64(cap(s.start))*8 + int64(cap(s.columns))*4 + int64(cap(s.wide))*8 +
		int64(cap(s.narrow)) + int64(cap(s.codes))*2 +
		int64(cap(s.realValues)+cap(s.realTable)+cap(s.realDiagonal))*8 +
		int64(cap(s.values)+cap(s.table)+cap(s.diagonal))*16
}
