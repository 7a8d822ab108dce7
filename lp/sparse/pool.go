package sparse

import (
	"math/bits"
	"sync"
)

// pool keeps the update matrices of fronts for reuse, by powers of two.
type pool struct {
	mu   sync.Mutex
	free [48][][]float64
}

// get returns room for n numbers, not cleared.
func (p *pool) get(n int) []float64 {
	if n == 0 {
		return nil
	}
	class := bits.Len(uint(n - 1))
	p.mu.Lock()
	list := p.free[class]
	if len(list) == 0 {
		p.mu.Unlock()
		return make([]float64, n, 1<<class)
	}
	x := list[len(list)-1][:n]
	p.free[class] = list[:len(list)-1]
	p.mu.Unlock()
	return x
}

// put gives x back.
func (p *pool) put(x []float64) {
	if cap(x) == 0 {
		return
	}
	class := bits.Len(uint(cap(x) - 1))
	p.mu.Lock()
	p.free[class] = append(p.free[class], x)
	p.mu.Unlock()
}
