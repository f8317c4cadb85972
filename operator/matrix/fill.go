package matrix

import (
	"context"
	"errors"
	"fmt"
	"sync"
	"sync/atomic"
	"time"
)

// groupBlocks is the number of blocks a worker that are computed before they are
// packed, so that what waits to be packed stays small.
const groupBlocks = 16

// errUneven says that a store that was planned uniform has several values.
var errUneven = errors.New("matrix: several values")

// segment is a block of rows before it is joined to the others. Its values are
// numbers in the table of the coder, or plain where the coder gave up, or none
// where the store is uniform.
type segment struct {
	lengths  []int32
	columns  []uint32
	wide     []uint64
	coder    *coder
	codes    []uint32
	values   []complex128
	diagonal []complex128
	uneven   bool
}

// builder is the working memory of one goroutine that builds.
type builder struct {
	scratch scratch
	coder   *coder
	uniform bool
	value   complex128
	wide    bool
}

// fill computes all rows in parallel and packs them in order.
func fill(ctx context.Context, r *rows, p *Plan, o Options) (*store, error) {
	s, err := fillAs(ctx, r, *p, o)
	if errors.Is(err, errUneven) {
		p.uniform, p.Values = false, 2
		s, err = fillAs(ctx, r, *p, o)
	}
	return s, err
}

func fillAs(ctx context.Context, r *rows, p Plan, o Options) (*store, error) {
	blocks := (p.Rows + blockRows - 1) / blockRows
	s := &store{real: p.Real, start: make([]int64, p.Rows+1), uniform: p.uniform, value: p.value}
	pack := newPacker(s, p, r.to == r.from)
	report := newReporter(o.Progress, int64(p.Rows))
	group := groupBlocks * o.Workers
	segments := make([]segment, group)
	work := make([]builder, o.Workers)
	for w := range work {
		work[w] = builder{coder: newCoder(p), uniform: p.uniform, value: p.value, wide: pack.wide}
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
			if segments[b-first].uneven {
				return nil, errUneven
			}
			pack.add(b*blockRows, &segments[b-first])
		}
		if s.bytes() > o.Memory && o.Form != Stored {
			return nil, fmt.Errorf("matrix: the stored form passes the limit of %d MiB, though the plan said %d MiB; ask for the form on the fly", o.Memory>>20, p.StoredBytes>>20)
		}
		report(int64(min(last*blockRows, p.Rows)))
	}
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

func (g *segment) compute(r *rows, first, last int, w *builder) {
	*g = segment{lengths: g.lengths[:0], columns: g.columns[:0], wide: g.wide[:0], coder: w.coder,
		codes: g.codes[:0], values: g.values[:0], diagonal: g.diagonal[:0]}
	for i := first; i < last; i++ {
		g.diagonal = append(g.diagonal, r.row(i, &w.scratch))
		g.lengths = append(g.lengths, int32(len(w.scratch.columns)))
		for n, column := range w.scratch.columns {
			g.point(column, w.wide)
			switch v := w.scratch.values[n]; {
			case !w.uniform:
				g.put(v)
			case v != w.value:
				g.uneven = true
			}
		}
	}
}

func (g *segment) point(column int, wide bool) {
	if wide {
		g.wide = append(g.wide, uint64(column))
		return
	}
	g.columns = append(g.columns, uint32(column))
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
