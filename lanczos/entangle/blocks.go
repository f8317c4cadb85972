package entangle

import (
	"context"
	"fmt"
	"slices"
	"sync"
	"sync/atomic"
	"time"

	"ketloom/basis"
	"ketloom/lanczos/dense"
)

// entry is an amplitude of the matrix whose rows are states of the part and
// whose columns are states of the rest, one set of columns for each state that
// is mixed.
type entry struct {
	row, column uint64 // configurations of part and rest
	state       int32
	amplitude   complex128
}

// spectrum sorts entries into blocks by the charges of their rows and returns
// the squares of the singular values. Entries with equal places add up.
func spectrum(ctx context.Context, entries []entry, names []string, charges func(row uint64) []int, o Options) (*Spectrum, error) {
	blocks, bytes := divide(entries, charges)
	if bytes > o.Memory {
		return nil, fmt.Errorf("entangle: the blocks need %d MiB, more than the limit of %d MiB; cut off a smaller part, or raise Options.Memory", bytes>>20, o.Memory>>20)
	}
	s := &Spectrum{Names: names, Blocks: make([]Block, len(blocks))}
	errs := make([]error, len(blocks))
	var next, done atomic.Int64
	var wg sync.WaitGroup
	var mu sync.Mutex
	begun := time.Now()
	for range min(o.Workers, len(blocks)) {
		wg.Go(func() {
			for {
				i := int(next.Add(1)) - 1
				if i >= len(blocks) || ctx.Err() != nil {
					return
				}
				s.Blocks[i], errs[i] = blocks[i].solve()
				finished := done.Add(1)
				if o.Progress != nil {
					mu.Lock()
					o.Progress("density operator", finished, int64(len(blocks)), float64(finished)/max(time.Since(begun).Seconds(), 1e-9))
					mu.Unlock()
				}
			}
		})
	}
	wg.Wait()
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	for _, err := range errs {
		if err != nil {
			return nil, err
		}
	}
	return s, nil
}

// block is the matrix of one set of charges.
type block struct {
	charges []int
	rows    []uint64
	columns []column
	entries []entry
	real    bool
}

type column struct {
	rest  uint64
	state int32
}

// divide sorts the entries by block and numbers rows and columns of each, in
// ascending order.
func divide(entries []entry, charges func(row uint64) []int) (blocks []*block, bytes int64) {
	label := map[uint64]*block{}
	byCharges := map[string]*block{}
	for _, e := range entries {
		b := label[e.row]
		if b == nil {
			q := charges(e.row)
			key := fmt.Sprint(q)
			if b = byCharges[key]; b == nil {
				b = &block{charges: q, real: true}
				byCharges[key] = b
				blocks = append(blocks, b)
			}
			label[e.row] = b
			b.rows = append(b.rows, e.row)
		}
		b.entries = append(b.entries, e)
		b.real = b.real && imag(e.amplitude) == 0
	}
	slices.SortFunc(blocks, func(a, b *block) int { return slices.Compare(a.charges, b.charges) })
	for _, b := range blocks {
		slices.Sort(b.rows)
		seen := map[column]bool{}
		for _, e := range b.entries {
			seen[column{e.column, e.state}] = true
		}
		for c := range seen {
			b.columns = append(b.columns, c)
		}
		slices.SortFunc(b.columns, func(x, y column) int {
			if x.state != y.state {
				return int(x.state - y.state)
			}
			if x.rest < y.rest {
				return -1
			}
			return 1
		})
		bytes += int64(len(b.rows)) * int64(len(b.columns)) * 16
	}
	return blocks, bytes
}

// solve fills in the matrix and returns the squares of its singular values.
func (b *block) solve() (Block, error) {
	n, m := len(b.rows), len(b.columns)
	matrix := make([]complex128, n*m)
	place := make(map[column]int, m)
	for j, c := range b.columns {
		place[c] = j
	}
	for _, e := range b.entries {
		i, _ := slices.BinarySearch(b.rows, e.row)
		matrix[i*m+place[column{e.column, e.state}]] += e.amplitude
	}
	b.entries = nil
	values, err := singular(matrix, n, m, b.real)
	if err != nil {
		return Block{}, fmt.Errorf("entangle: block %v: %w", b.charges, err)
	}
	for i, v := range values {
		values[i] = v * v
	}
	return Block{b.charges, n, values}, nil
}

func singular(matrix []complex128, rows, columns int, isReal bool) ([]float64, error) {
	if !isReal {
		return dense.SingularComplex(matrix, rows, columns)
	}
	re := make([]float64, len(matrix))
	for i, z := range matrix {
		re[i] = real(z)
	}
	return dense.SingularReal(re, rows, columns)
}

// charged returns the charges of a part given by a selection of sites.
func charged(space *basis.Space, charges []basis.Charge, sites []int) func(row uint64) []int {
	return func(row uint64) []int {
		q := make([]int, len(charges))
		for i, charge := range charges {
			for _, site := range sites {
				q[i] += charge.Weights[site][space.Level(basis.Configuration(row), site)]
			}
			if charge.Modulus > 0 {
				q[i] = (q[i]%charge.Modulus + charge.Modulus) % charge.Modulus
			}
		}
		return q
	}
}
