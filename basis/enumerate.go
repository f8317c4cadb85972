package basis

import (
	"context"
	"sync"
	"sync/atomic"
	"time"
)

// enumerationParts divides the enumeration finely enough that workers finish
// together; the parts do not depend on the number of workers.
const enumerationParts = 512

// enumerate lists the representatives, part by part, in ascending order.
func (b *Basis) enumerate(ctx context.Context, o Options) error {
	parts := b.ladder.starts(enumerationParts)
	found := make([]portion, len(parts))
	bans := newBans(b.space, b.sector.Constraints)
	var next, visited atomic.Int64
	var wg sync.WaitGroup
	report := newReporter(o.Progress, "enumerate", int64(b.ladder.total))
	for range o.Workers {
		wg.Go(func() {
			for {
				p := int(next.Add(1)) - 1
				if p >= len(parts) || ctx.Err() != nil {
					return
				}
				found[p] = b.collect(ctx, parts[p], bans, func(n int64) { report.tell(visited.Add(n)) })
			}
		})
	}
	wg.Wait()
	if err := ctx.Err(); err != nil {
		return err
	}
	b.join(found)
	return nil
}

// portion is what one part of the enumeration found.
type portion struct {
	list []Configuration
	stab []uint16
}

// checkEvery is the number of configurations between two looks at the context.
const checkEvery = 1 << 14

// collect lists the representatives of one part; visited is told how many
// configurations went by since it was last called.
func (b *Basis) collect(ctx context.Context, from start, bans *bans, visited func(n int64)) portion {
	var p portion
	if !bans.allow(from.prefix) {
		return p
	}
	countdown := checkEvery
	b.ladder.walk(from, bans, func(c Configuration) bool {
		if countdown--; countdown == 0 {
			countdown = checkEvery
			visited(checkEvery)
			if ctx.Err() != nil {
				return false
			}
		}
		if b.sym == nil {
			p.list = append(p.list, c)
			return true
		}
		if size, smallest := b.sym.stabiliser(uint64(c)); smallest && size > 0 {
			p.list = append(p.list, c)
			p.stab = append(p.stab, uint16(size-1))
		}
		return true
	})
	visited(int64(checkEvery - countdown))
	return p
}

// join concatenates the parts and builds the index.
func (b *Basis) join(found []portion) {
	for _, p := range found {
		b.length += len(p.list)
	}
	b.list = make([]Configuration, 0, b.length)
	if b.sym != nil {
		b.stab = make([]uint16, 0, b.length)
	}
	for i := range found {
		b.list = append(b.list, found[i].list...)
		b.stab = append(b.stab, found[i].stab...)
		found[i] = portion{}
	}
	b.index = newIndex(b.list, b.ladder.total, b.rank)
}

// reporter passes progress on, at most ten times a second.
type reporter struct {
	hook  func(what string, done, total int64, rate float64)
	what  string
	total int64
	begun time.Time
	last  time.Time
	mu    sync.Mutex
}

func newReporter(hook func(string, int64, int64, float64), what string, total int64) *reporter {
	return &reporter{hook: hook, what: what, total: total, begun: time.Now()}
}

func (r *reporter) tell(done int64) {
	if r.hook == nil {
		return
	}
	r.mu.Lock()
	defer r.mu.Unlock()
	now := time.Now()
	if done < r.total && now.Sub(r.last) < 100*time.Millisecond {
		return
	}
	r.last = now
	rate := 0.0
	if seconds := now.Sub(r.begun).Seconds(); seconds > 0 {
		rate = float64(done) / seconds
	}
	r.hook(r.what, done, r.total, rate)
}
