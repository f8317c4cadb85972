package matrix

import "math"

// mostCodes is the largest number of distinct values that two bytes code,
// mostNarrow that of one byte.
const (
	mostCodes  = 1 << 16
	mostNarrow = 1 << 8
)

// coder numbers the distinct values that one goroutine meets.
type coder struct {
	number map[[2]uint64]uint32 // by the bits of the value; nil once it gave up
	table  []complex128
	global []int32 // the code of the store, -1 until there is one
}

// mostLocal is the number of distinct values at which a coder gives up.
const mostLocal = 4 * mostCodes

func newCoder(p Plan) *coder {
	if p.uniform || p.Values > mostCodes {
		return &coder{}
	}
	return &coder{number: map[[2]uint64]uint32{}}
}

// code returns the number of a value; ok is false if the coder gave up.
func (k *coder) code(v complex128) (n uint32, ok bool) {
	if k.number == nil {
		return 0, false
	}
	key := bitsOf(v)
	n, known := k.number[key]
	if known {
		return n, true
	}
	if len(k.table) == mostLocal {
		k.number = nil
		return 0, false
	}
	n = uint32(len(k.table))
	k.number[key] = n
	k.table = append(k.table, v)
	k.global = append(k.global, -1)
	return n, true
}

func bitsOf(v complex128) [2]uint64 {
	return [2]uint64{math.Float64bits(real(v)), math.Float64bits(imag(v))}
}

// packer appends segments to a store and codes their values. It starts with
// the codes that the plan expects to suffice, widens them where they do not, and
// changes over to plain values when those of two bytes run out.
type packer struct {
	s       *store
	square  bool
	wide    bool
	code    map[[2]uint64]uint16 // by the bits of the value; nil without codes
	reserve int64
}

func newPacker(s *store, p Plan, square bool) *packer {
	k := &packer{s: s, square: square, wide: int64(p.Columns) > 1<<32, reserve: p.Elements + p.Elements/64}
	if k.wide {
		s.wide = make([]uint64, 0, k.reserve)
	} else {
		s.columns = make([]uint32, 0, k.reserve)
	}
	switch {
	case p.uniform:
	case p.Values <= mostNarrow:
		k.code = map[[2]uint64]uint16{}
		s.narrow = make([]uint8, 0, k.reserve)
	case p.Values <= mostCodes:
		k.code = map[[2]uint64]uint16{}
		s.codes = make([]uint16, 0, k.reserve)
	}
	if square && p.Real {
		s.realDiagonal = make([]float64, 0, p.Rows)
	} else if square {
		s.diagonal = make([]complex128, 0, p.Rows)
	}
	return k
}

func (k *packer) add(first int, g *segment) {
	s := k.s
	at := s.start[first]
	for i, length := range g.lengths {
		at += int64(length)
		s.start[first+i+1] = at
		switch {
		case !k.square:
		case s.real:
			s.realDiagonal = append(s.realDiagonal, real(g.diagonal[i]))
		default:
			s.diagonal = append(s.diagonal, g.diagonal[i])
		}
	}
	s.columns = append(s.columns, g.columns...)
	s.wide = append(s.wide, g.wide...)
	for _, n := range g.codes {
		k.recode(g.coder, n)
	}
	for _, v := range g.values {
		k.put(v)
	}
}

// recode stores a value of a coder's table.
func (k *packer) recode(c *coder, n uint32) {
	if k.code == nil || c.global[n] < 0 {
		code := k.put(c.table[n])
		if k.code != nil {
			c.global[n] = int32(code)
		}
		return
	}
	k.push(uint16(c.global[n]))
}

// push stores a code that the table has.
func (k *packer) push(code uint16) {
	if k.s.narrow != nil {
		k.s.narrow = append(k.s.narrow, uint8(code))
		return
	}
	k.s.codes = append(k.s.codes, code)
}

// put stores one value and returns its code, where there are codes.
func (k *packer) put(v complex128) uint16 {
	s := k.s
	if k.code != nil {
		key := bitsOf(v)
		code, known := k.code[key]
		if known {
			k.push(code)
			return code
		}
		if len(k.code) < mostCodes {
			if len(k.code) == mostNarrow && s.narrow != nil {
				k.widenCodes()
			}
			code = uint16(len(k.code))
			k.code[key] = code
			s.tabulate(v)
			k.push(code)
			return code
		}
		k.abandonCodes()
	}
	if s.real {
		s.realValues = append(s.realValues, real(v))
	} else {
		s.values = append(s.values, v)
	}
	return 0
}

func (s *store) tabulate(v complex128) {
	if s.real {
		s.realTable = append(s.realTable, real(v))
	} else {
		s.table = append(s.table, v)
	}
}

// widenCodes goes over from one byte to two.
func (k *packer) widenCodes() {
	s := k.s
	s.codes = make([]uint16, len(s.narrow), k.reserve)
	for i, code := range s.narrow {
		s.codes[i] = uint16(code)
	}
	s.narrow = nil
}

// abandonCodes writes the values out in full.
func (k *packer) abandonCodes() {
	s := k.s
	for _, code := range s.codes {
		if s.real {
			s.realValues = append(s.realValues, s.realTable[code])
		} else {
			s.values = append(s.values, s.table[code])
		}
	}
	s.codes, s.realTable, s.table, k.code = nil, nil, nil, nil
}
