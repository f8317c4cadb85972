package archive

import (
	"runtime"
	"sync"
)

// piece is the memory in which one chunk is packed or unpacked.
type piece struct {
	number  int
	words   []byte // the values, little-endian
	scratch []byte
	packed  []byte
	coding  uint32
	squares float64 // sum of the squares of the values
	top     float64 // largest modulus
	err     error
	done    chan struct{}
}

var spare = sync.Pool{New: func() any { return &piece{done: make(chan struct{}, 1)} }}

// resize makes room for a number of values.
func (p *piece) resize(values int) {
	p.words = sized(p.words, 8*values)
	p.scratch = sized(p.scratch, 8*values)
}

func sized(b []byte, n int) []byte {
	if cap(b) < n {
		return make([]byte, n)
	}
	return b[:n]
}

// inOrder calls work for the numbers 0 … n-1, on as many goroutines as there are
// processors, and take for each in ascending order, on the goroutine of the
// caller. It ends with the first error in that order, and after all goroutines.
func inOrder(n int, work, take func(p *piece) error) error {
	workers := min(n, runtime.GOMAXPROCS(0))
	ring := make([]*piece, min(n, workers+2))
	jobs := make(chan *piece, len(ring))
	var running sync.WaitGroup
	for range workers {
		running.Go(func() {
			for p := range jobs {
				p.err = work(p)
				p.done <- struct{}{}
			}
		})
	}
	for k := range ring {
		ring[k] = spare.Get().(*piece)
		ring[k].number = k
		jobs <- ring[k]
	}
	err := takeAll(n, ring, jobs, take)
	close(jobs)
	running.Wait()
	for _, p := range ring {
		select {
		case <-p.done:
		default:
		}
		spare.Put(p)
	}
	return err
}

func takeAll(n int, ring []*piece, jobs chan<- *piece, take func(p *piece) error) error {
	for k := range n {
		p := ring[k%len(ring)]
		<-p.done
		if p.err != nil {
			return p.err
		}
		if err := take(p); err != nil {
			return err
		}
		if next := k + len(ring); next < n {
			p.number = next
			jobs <- p
		}
	}
	return nil
}
