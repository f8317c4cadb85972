package entangle

import (
	"sync"
	"time"
)

// reporter passes progress on, at most every tenth of a second but for the end.
type reporter struct {
	report      func(what string, done, total int64, rate float64)
	what        string
	total       int64
	mu          sync.Mutex
	done        int64
	begun, last time.Time
}

func newReporter(o Options, what string, total int64) *reporter {
	now := time.Now()
	return &reporter{report: o.Progress, what: what, total: total, begun: now, last: now}
}

func (r *reporter) add(n int64) {
	if r.report == nil {
		return
	}
	r.mu.Lock()
	defer r.mu.Unlock()
	r.done += n
	now := time.Now()
	if r.done < r.total && now.Sub(r.last) < time.Second/10 {
		return
	}
	r.last = now
	rate := 0.0
	if passed := now.Sub(r.begun).Seconds(); passed > 0 {
		rate = float64(r.done) / passed
	}
	r.report(r.what, r.done, r.total, rate)
}
