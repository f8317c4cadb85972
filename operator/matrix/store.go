package matrix

import (
	"context"
	"fmt"
	"math"
	"sync"
	"sync/atomic"
	"time"
)

// mostCodes is the largest number of distinct values that two bytes code.
const mostCodes = 1 << 16

// blockRows is the number of rows that one goroutine takes at a time, in
// building and in products.
const blockRows = 256

// store is the stored form: elements of row i stand from start[i] to
// start[i+1].
type store struct {
	real    bool
	start   []int64
	columns []uint32
	wide    []uint64 // columns beyond 2^32 states, instead of columns

	// One of these holds the values of the elements.
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

// segment is a block of rows before it is joined to the others. Its values are
// numbers in the table of the coder, or plain where the coder gave up.
type segment struct {
	lengths  []int32
	columns  []uint64
	coder    *coder
	codes    []uint32
	values   []complex128
	diagonal []complex128
}

// coder numbers the distinct values that one goroutine meets.
type coder struct {
	number map[[2]uint64]uint32 // by the bits of the value; nil once it gave up
	table  []complex128
	global []int32 // the code of the store, -1 until there is one
}

// mostLocal is the number of distinct values at which a coder gives up.
const mostLocal = 4 * mostCodes

// code returns the number of a value; ok is false if the coder gave up.
func (k *coder) code(v complex128) (n uint32, ok bool) {
	if k.number == nil {
		return 0, false
	}
	key := [2]uint64{math.Float64bits(real(v)), math.Float64bits(imag(v))}
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

// fill computes all rows in parallel and packs them in order.
func fill(ctx context.Context, r *rows, p Plan, o Options) (*store, error) {
	blocks := (p.Rows + blockRows - 1) / blockRows
	s := &store{real: p.Real, start: make([]int64, p.Rows+1)}
	pack := newPacker(s, p, r.to == r.from)
	report := newReporter(o.Progress, int64(p.Rows))
	// Blocks are computed in groups, so that what waits to be packed stays small.
	group := 8 * o.Workers
	segments := make([]segment, group)
	work := make([]builder, o.Workers)
	for w := range work {
		work[w].coder = &coder{}
		if p.Values <= mostCodes {
			work[w].coder.number = map[[2]uint64]uint32{}
		}
	}
	for first := 0; first < blocks; first += group {
		last := min(first+group, blocks)
		var next atomic.Int64
		var wg sync.WaitGroup
		for w := range work {
			wg.Go(func() {
				for {
					b := first + int(next.Add(1)) - 1
					if b >= last || ctx.Err() != nil {
						return
					}
					segments[b-first].compute(r, b*blockRows, min((b+1)*blockRows, p.Rows), &work[w])
				}
			})
		}
		wg.Wait()
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		for b := first; b < last; b++ {
			pack.add(b*blockRows, &segments[b-first])
		}
		if s.bytes() > o.Memory && o.Form != Stored {
			return nil, fmt.Errorf("matrix: the stored form passes the limit of %d MiB, though the plan said %d MiB; ask for the form on the fly", o.Memory>>20, p.StoredBytes>>20)
		}
		report(int64(min(last*blockRows, p.Rows)))
	}
	pack.finish()
	return s, nil
}

func newReporter(hook func(string, int64, int64, float64), total int64) func(done int64) {
	begun, last := time.Now(), time.Time{}
	return func(done int64) {
		now := time.Now()
		if hook == nil || done < total && now.Sub(last) < 100*time.Millisecond {
			return
		}
		last = now
		hook("build matrix", done, total, float64(done)/max(now.Sub(begun).Seconds(), 1e-9))
	}
}

// builder is the working memory of one goroutine that builds.
type builder struct {
	scratch scratch
	coder   *coder
}

func (g *segment) compute(r *rows, first, last int, w *builder) {
	g.lengths, g.columns, g.codes, g.values, g.diagonal = g.lengths[:0], g.columns[:0], g.codes[:0], g.values[:0], g.diagonal[:0]
	g.coder = w.coder
	for i := first; i < last; i++ {
		elements, diagonal := r.row(i, &w.scratch)
		g.lengths = append(g.lengths, int32(len(elements)))
		g.diagonal = append(g.diagonal, diagonal)
		for _, e := range elements {
			g.columns = append(g.columns, uint64(e.column))
			g.put(e.value)
		}
	}
}

// put appends a value. Where the coder gives up, what the segment has so far is
// written out.
func (g *segment) put(v complex128) {
	if g.coder != nil {
		if n, ok := g.coder.code(v); ok {
			g.codes = append(g.codes, n)
			return
		}
		for _, n := range g.codes {
			g.values = append(g.values, g.coder.table[n])
		}
		g.codes, g.coder = g.codes[:0], nil
	}
	g.values = append(g.values, v)
}

// packer appends segments to a store and codes their values. It starts with
// codes of two bytes, narrows them to one at the end where that is enough, and
// changes over to plain values when the codes run out.
type packer struct {
	s      *store
	square bool
	code   map[[2]uint64]uint16 // by the bits of the value
	wide   bool
}

func newPacker(s *store, p Plan, square bool) *packer {
	k := &packer{s: s, square: square, wide: int64(p.Columns) > 1<<32}
	reserve := p.Elements + p.Elements/16
	if k.wide {
		s.wide = make([]uint64, 0, reserve)
	} else {
		s.columns = make([]uint32, 0, reserve)
	}
	if p.Values <= mostCodes {
		k.code = map[[2]uint64]uint16{}
		s.codes = make([]uint16, 0, reserve)
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
	if k.wide {
		s.wide = append(s.wide, g.columns...)
	} else {
		for _, column := range g.columns {
			s.columns = append(s.columns, uint32(column))
		}
	}
	for _, n := range g.codes {
		k.recode(g.coder, n)
	}
	for _, v := range g.values {
		k.put(v)
	}
}

// recode stores a value of a coder's table.
func (k *packer) recode(c *coder, n uint32) {
	if k.code != nil && c.global[n] >= 0 {
		k.s.codes = append(k.s.codes, uint16(c.global[n]))
		return
	}
	k.put(c.table[n])
	if k.code != nil {
		c.global[n] = int32(k.s.codes[len(k.s.codes)-1])
	}
}

// put stores one value.
func (k *packer) put(v complex128) {
	s := k.s
	if k.code != nil {
		key := [2]uint64{math.Float64bits(real(v)), math.Float64bits(imag(v))}
		code, known := k.code[key]
		if known {
			s.codes = append(s.codes, code)
			return
		}
		if len(k.code) < mostCodes {
			code = uint16(len(k.code))
			k.code[key] = code
			s.tabulate(v)
			s.codes = append(s.codes, code)
			return
		}
		k.abandonCodes()
	}
	if s.real {
		s.realValues = append(s.realValues, real(v))
	} else {
		s.values = append(s.values, v)
	}
}

func (s *store) tabulate(v complex128) {
	if s.real {
		s.realTable = append(s.realTable, real(v))
	} else {
		s.table = append(s.table, v)
	}
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

// finish narrows the codes to one byte where there are at most 256 values.
func (k *packer) finish() {
	s := k.s
	if k.code == nil || len(k.code) > 1<<8 {
		return
	}
	s.narrow = make([]uint8, len(s.codes))
	for i, code := range s.codes {
		s.narrow[i] = uint8(code)
	}
	s.codes = nil
}

// bytes returns the memory that the store takes.
func (s *store) bytes() int64 {
	return int64(cap(s.start))*8 + int64(cap(s.columns))*4 + int64(cap(s.wide))*8 +
		int64(cap(s.narrow)) + int64(cap(s.codes))*2 +
		int64(cap(s.realValues)+cap(s.realTable)+cap(s.realDiagonal))*8 +
		int64(cap(s.values)+cap(s.table)+cap(s.diagonal))*16
}
