package lanczos

import (
	"sync"
	"sync/atomic"
)

// task is work that falls into blocks which do not touch each other.
type task interface {
	block(b, worker int)
}

// crew is a set of goroutines that take blocks of one task after another. Which
// goroutine takes which block is open, so a task must not depend on it.
type crew struct {
	workers int
	wake    []chan struct{}
	done    sync.WaitGroup
	next    atomic.Int64
	blocks  int64
	task    task
}

func newCrew(workers int) *crew {
	c := &crew{workers: workers}
	for w := 1; w < workers; w++ {
		wake := make(chan struct{}, 1)
		c.wake = append(c.wake, wake)
		go func() {
			for range wake {
				c.take(w)
				c.done.Done()
			}
		}()
	}
	return c
}

// do runs all blocks of t and returns when they are done.
func (c *crew) do(blocks int, t task) {
	c.task, c.blocks = t, int64(blocks)
	c.next.Store(0)
	helpers := c.wake[:min(len(c.wake), (blocks-1)/2)]
	c.done.Add(len(helpers))
	for _, wake := range helpers {
		wake <- struct{}{}
	}
	c.take(0)
	c.done.Wait()
}

func (c *crew) take(worker int) {
	for {
		b := c.next.Add(1) - 1
		if b >= c.blocks {
			return
		}
		c.task.block(int(b), worker)
	}
}

// close ends the goroutines.
func (c *crew) close() {
	for _, wake := range c.wake {
		close(wake)
	}
}
