package lanczos

import "time"

// clock calls the progress hook, not more often than the eye can follow.
type clock struct {
	hook        func(what string, done, total int64, rate float64)
	begun, last time.Time
}

const progressInterval = 100 * time.Millisecond

func newClock(hook func(what string, done, total int64, rate float64)) *clock {
	c := &clock{hook: hook}
	if hook != nil {
		c.begun = time.Now()
	}
	return c
}

func (c *clock) tick(what string, done, total int) {
	if c.hook == nil {
		return
	}
	now := time.Now()
	if now.Sub(c.last) < progressInterval {
		return
	}
	c.last = now
	rate := 0.0
	if seconds := now.Sub(c.begun).Seconds(); seconds > 0 {
		rate = float64(done) / seconds
	}
	c.hook(what, int64(done), int64(total), rate)
}
