package script

import (
	"runtime/metrics"
	"sync/atomic"
	"time"

	"ketloom/script/machine"
)

// Limits on the stacks of all goroutines together, beyond what they had when a
// script started. The Go runtime ends the whole program when one stack reaches
// 1 GB; stacks double, so a script is stopped when they have passed half of it.
const (
	stackLimit    = 400 << 20
	stackInterval = 10 * time.Millisecond
)

const stackMetric = "/memory/classes/heap/stacks:bytes"

// active is the number of scripts that run.
var active atomic.Int32

func stacks() uint64 {
	s := []metrics.Sample{{Name: stackMetric}}
	metrics.Read(s)
	if s[0].Value.Kind() != metrics.KindUint64 {
		return 0
	}
	return s[0].Value.Uint64()
}

// watch ends the run when its functions call each other without end.
func watch(run *machine.Run, done <-chan struct{}) {
	active.Add(1)
	defer active.Add(-1)
	start := stacks()
	t := time.NewTicker(stackInterval)
	defer t.Stop()
	for {
		select {
		case <-done:
			return
		case <-t.C:
			now := stacks()
			if now <= start+stackLimit {
				continue
			}
			if active.Load() == 1 || run.TooDeep() {
				run.Overflow()
				return
			}
			start = now // another script's, or the host's
		}
	}
}
