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

// checkEvery is the number of candidates between two looks at the context.
const checkEvery = 1 << 14

// portion is what one part of the enumeration found.
type portion struct {
	list []uint64
	stab []uint16
}

// enumerate lists the words of the basis, part by part, in ascending order.
func (b *Basis) enumerate(ctx context.Context, o Options) error {
	bans := newBans(b.words(), b.sector.Constraints)
	if b.sym == nil {
		parts := b.ladder.starts(enumerationParts)
		return b.collect(ctx, o, len(parts), b.ladder.total, func(part int, seen *sighting) portion {
			return b.allowed(parts[part], bans, seen)
		})
	}
	e := newExtender(b, bans)
	parts := e.parts(enumerationParts)
	return b.collect(ctx, o, len(parts), b.numbers.total, func(part int, seen *sighting) portion {
		return e.extend(parts[part], seen)
	})
}

// collect makes all parts, each by one of the workers, and joins them.
func (b *Basis) collect(ctx context.Context, o Options, parts int, candidates uint64, part func(i int, seen *sighting) portion) error {
	found := make([]portion, parts)
	var next, visited atomic.Int64
	var wg sync.WaitGroup
	report := newReporter(o.Progress, "enumerate", int64(candidates))
	for range o.Workers {
		wg.Go(func() {
			seen := &sighting{ctx: ctx, left: checkEvery, tell: func(n int64) { report.tell(visited.Add(n)) }}
			for {
				i := int(next.Add(1)) - 1
				if i >= parts || ctx.Err() != nil {
					break
				}
				found[i] = part(i, seen)
			}
			seen.tell(int64(checkEvery - seen.left))
		})
	}
	wg.Wait()
	if err := ctx.Err(); err != nil {
		return err
	}
	b.join(found)
	return nil
}

// sighting counts the candidates that one worker visits.
type sighting struct {
	ctx  context.Context
	left int
	tell func(n int64)
}

// more counts a candidate; it is false when the context has ended.
func (s *sighting) more() bool {
	if s.left--; s.left > 0 {
		return true
	}
	s.left = checkEvery
	s.tell(checkEvery)
	return s.ctx.Err() == nil
}

// allowed lists the configurations of one part that no constraint forbids.
func (b *Basis) allowed(from start, bans *bans, seen *sighting) portion {
	var p portion
	if bans.allow(from.prefix) {
		b.ladder.walk(from, bans, func(c Configuration) bool {
			p.list = append(p.list, uint64(c))
			return seen.more()
		})
	}
	return p
}

// join concatenates the parts and builds the index.
func (b *Basis) join(found []portion) {
	for _, p := range found {
		b.length += len(p.list)
	}
	b.list = make([]uint64, 0, b.length)
	if b.sym != nil {
		b.stab = make([]uint16, 0, b.length)
	}
	for i := range found {
		b.list = append(b.list, found[i].list...)
		b.stab = append(b.stab, found[i].stab...)
		found[i] = portion{}
	}
	if b.sym == nil {
		b.index = newIndex(b.list, b.ladder.total, func(w uint64) (uint64, bool) { return b.rank.rank(Configuration(w)) })
		return
	}
	b.index = newIndex(b.list, b.numbers.total, b.numbers.numberOf)
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
