package interior

import (
	"runtime"
	"sync"
	"sync/atomic"
)

// inChunks calls f for stretches of 0 to n-1 from several goroutines. What f writes must belong to its stretch, so that the
// outcome does not depend on how many there are.
func inChunks(n, size int, f func(lo, hi int)) {
	workers := min(runtime.GOMAXPROCS(0), (n+size-1)/size)
	if workers < 2 {
		f(0, n)
		return
	}
	var next atomic.Int64
	var wg sync.WaitGroup
	for range workers {
		wg.Go(func() {
			for lo := int(next.Add(1)-1) * size; lo < n; lo = int(next.Add(1)-1) * size {
				f(lo, min(n, lo+size))
			}
		})
	}
	wg.Wait()
}
