package sparse

import "math/bits"

// leaf orders a set of blocks by minimum degree (Tinney and Walker 1967; Rose 1972) on the graph that elimination makes,
// held as one row of bits a block. Neighbours outside that are still to be eliminated (the halo) count for the degree,
// so that blocks on a border are kept for later.
func (d *dissection) leaf(blocks []int32) {
	if len(blocks) == 0 {
		return
	}
	members := append([]int32(nil), blocks...)
	for i, v := range members {
		d.local[v] = int32(i + 1)
	}
	inside := len(members)
	for i := 0; i < inside; i++ {
		for _, w := range d.adj[members[i]] {
			if d.local[w] == 0 && !d.done(w) {
				members = append(members, w)
				d.local[w] = int32(len(members))
			}
		}
	}
	e := newElimination(d, members)
	for range inside {
		i := e.lightest(inside)
		e.eliminate(i)
		d.out = append(d.out, members[i])
	}
	for _, v := range members {
		d.local[v] = 0
	}
	for _, v := range blocks {
		d.part[v] = 0 // eliminated
	}
}

// done reports whether block w has been put in order already.
func (d *dissection) done(w int32) bool { return d.part[w] == 0 }

// elimination is the graph of a leaf and its halo while blocks are eliminated.
type elimination struct {
	words int
	row   [][]uint64
	deg   []int
	gone  []bool
}

func newElimination(d *dissection, members []int32) *elimination {
	n := len(members)
	e := &elimination{words: (n + 63) / 64, row: make([][]uint64, n), deg: make([]int, n), gone: make([]bool, n)}
	all := make([]uint64, n*e.words)
	for i, v := range members {
		e.row[i] = all[i*e.words : (i+1)*e.words]
		for _, w := range d.adj[v] {
			if j := d.local[w] - 1; j >= 0 && int(j) != i {
				e.row[i][j/64] |= 1 << (j % 64)
			}
		}
	}
	for i := range members {
		e.deg[i] = e.degree(i)
	}
	return e
}

// degree counts the neighbours of i. Blocks count alike, whatever their rows: counting words of bits is what makes it fast.
func (e *elimination) degree(i int) int {
	total := 0
	for _, word := range e.row[i] {
		total += bits.OnesCount64(word)
	}
	return total
}

// each calls f for every neighbour of i, in order.
func (e *elimination) each(i int, f func(j int)) {
	for w, word := range e.row[i] {
		for word != 0 {
			f(w*64 + bits.TrailingZeros64(word))
			word &= word - 1
		}
	}
}

// lightest returns the block of the least degree among the first n, the first of equals.
func (e *elimination) lightest(n int) int {
	best := -1
	for i := range n {
		if !e.gone[i] && (best < 0 || e.deg[i] < e.deg[best]) {
			best = i
		}
	}
	return best
}

// eliminate joins all neighbours of i with each other and takes i away.
func (e *elimination) eliminate(i int) {
	e.gone[i] = true
	var near []int
	e.each(i, func(j int) { near = append(near, j) })
	for _, j := range near {
		row := e.row[j]
		for w, word := range e.row[i] {
			row[w] |= word
		}
		row[i/64] &^= 1 << (i % 64)
		row[j/64] &^= 1 << (j % 64)
	}
	for _, j := range near {
		e.deg[j] = e.degree(j)
	}
}
