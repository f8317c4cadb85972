package entangle

import (
	"cmp"
	"context"
	"fmt"
	"slices"
	"sync"
	"sync/atomic"

	"ketloom/lanczos/dense"
)

// solve makes and solves the blocks, as many at a time as the memory allows. A
// matrix counts twice, since it is copied when it is solved.
func (k *cut) solve(ctx context.Context, l *layout) ([]Block, error) {
	solved := make([]Block, len(l.blocks))
	progress := newReporter(k.options, "blocks", int64(len(solved)))
	var batch []*window
	var bytes int64
	flush := func() error {
		if len(batch) == 0 {
			return nil
		}
		err := k.solveBatch(ctx, l, batch, solved, progress)
		batch, bytes = nil, 0
		return err
	}
	for i, e := range l.blocks {
		need := 2 * float64(e.rows) * float64(e.columns) * float64(l.element())
		if need > float64(k.options.Memory) {
			weights, err := k.gram(ctx, l, i)
			if err != nil {
				return nil, err
			}
			solved[i] = Block{e.charges, e.rows, weights, k.floor(e.rounding() * weights[0])}
			progress.add(1)
			continue
		}
		if bytes+int64(need) > k.options.Memory {
			if err := flush(); err != nil {
				return nil, err
			}
		}
		batch = append(batch, l.whole(i))
		bytes += int64(need)
	}
	if err := flush(); err != nil {
		return nil, err
	}
	return solved, nil
}

// solveBatch fills the windows of whole blocks and takes their singular values,
// the most expensive first.
func (k *cut) solveBatch(ctx context.Context, l *layout, batch []*window, solved []Block, progress *reporter) error {
	if err := k.fill(ctx, l, batch); err != nil {
		return err
	}
	slices.SortStableFunc(batch, func(a, b *window) int { return cmp.Compare(b.cost(), a.cost()) })
	errs := make([]error, len(batch))
	var next atomic.Int64
	var wg sync.WaitGroup
	for range min(k.options.Workers, len(batch)) {
		wg.Go(func() {
			for ctx.Err() == nil {
				i := int(next.Add(1)) - 1
				if i >= len(batch) {
					return
				}
				e := l.blocks[batch[i].block]
				solved[batch[i].block], errs[i] = k.singular(e, batch[i])
				batch[i] = nil
				progress.add(1)
			}
		})
	}
	wg.Wait()
	if err := ctx.Err(); err != nil {
		return err
	}
	for _, err := range errs {
		if err != nil {
			return err
		}
	}
	return nil
}

// cost of the singular values, in units that do not matter.
func (w *window) cost() float64 {
	return float64(w.rows) * float64(w.columns) * float64(min(w.rows, w.columns))
}

// singular returns the squares of the singular values of a whole block.
func (k *cut) singular(e extent, w *window) (Block, error) {
	var values []float64
	var err error
	if w.real != nil {
		values, err = dense.SingularReal(w.real, w.rows, w.columns)
	} else {
		values, err = dense.SingularComplex(w.complex, w.rows, w.columns)
	}
	if err != nil {
		return Block{}, fmt.Errorf("entangle: block %v: %w", e.charges, err)
	}
	slack := e.rounding() * values[0]
	for i, s := range values {
		values[i] = s * s
	}
	return Block{e.charges, e.rows, values, k.floor(slack * slack)}, nil
}

// floor returns the weight up to which a weight counts as zero.
func (k *cut) floor(rounding float64) float64 {
	return max(rounding, k.options.Error*k.options.Error)
}
