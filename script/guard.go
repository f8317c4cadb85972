package script

import (
	"runtime/metrics"
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
	start := stacks()
	t := time.NewTicker(stackInterval)
	defer t.Stop()
	for {
		select {
		case <-done:
			return
		case <-t.C:
			now := stacks()
			start = min(start, now)
			if now <= start+stackLimit {
				continue
			}
			if run.TooDeep() {
				run.Overflow()
				return
			}
			start = now // another script's, the host's, or many short ones
		}
	}
}
