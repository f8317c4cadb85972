package dense

import (
	"runtime"
	"sync"
)

// share runs work over [0,n) in contiguous pieces of at least grain, one for each
// processor. Pieces must be independent of each other, so that the bits of the
// result do not depend on where the cuts fall.
func share(n, grain int, work func(from, to int)) {
	pieces := min(runtime.GOMAXPROCS(0), n/max(grain, 1))
	if pieces <= 1 {
		work(0, n)
		return
	}
	var done sync.WaitGroup
	for p := range pieces {
		done.Go(func() { work(p*n/pieces, (p+1)*n/pieces) })
	}
	done.Wait()
}
