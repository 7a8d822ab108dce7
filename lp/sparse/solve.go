package sparse

// Solve replaces b by the solution x of A x = b. Entries are in the order of the graph: the rows of block 0, of block 1
// and so on.
func (f *Factor) Solve(b []float64) {
	x := make([]float64, len(b))
	f.permute(b, x, true)
	row := make([]int, 0, 64)
	start := f.starts()
	for i := range f.sym.node {
		row = f.forward(int32(i), x, start, row)
	}
	for i := len(f.sym.node) - 1; i >= 0; i-- {
		row = f.backward(int32(i), x, start, row)
	}
	f.permute(b, x, false)
}

// permute copies b into elimination order, or back.
func (f *Factor) permute(b, x []float64, in bool) {
	at := 0
	for _, v := range f.sym.order {
		n := f.sym.graph.Size[v]
		if in {
			copy(x[at:at+n], b[f.offset[v]:])
		} else {
			copy(b[f.offset[v]:f.offset[v]+n], x[at:])
		}
		at += n
	}
}

// starts returns the first scalar row of every position.
func (f *Factor) starts() []int {
	s := make([]int, len(f.sym.order)+1)
	for p, v := range f.sym.order {
		s[p+1] = s[p] + f.sym.graph.Size[v]
	}
	return s
}

// belowRows lists the scalar rows below the own rows of a supernode.
func (f *Factor) belowRows(t *supernode, start, row []int) []int {
	row = row[:0]
	for _, p := range t.below {
		for r := start[p]; r < start[p+1]; r++ {
			row = append(row, r)
		}
	}
	return row
}

func (f *Factor) forward(i int32, x []float64, start, row []int) []int {
	t := &f.sym.node[i]
	a, ld := f.panel[i], t.cols
	own := x[start[t.first]:start[t.last]]
	for j := range own {
		own[j] = (own[j] - dot(own[:j], a[j*ld:])) / a[j*ld+j]
	}
	row = f.belowRows(t, start, row)
	for q, r := range row {
		x[r] -= dot(own, a[(ld+q)*ld:])
	}
	return row
}

func (f *Factor) backward(i int32, x []float64, start, row []int) []int {
	t := &f.sym.node[i]
	a, ld := f.panel[i], t.cols
	own := x[start[t.first]:start[t.last]]
	row = f.belowRows(t, start, row)
	for q, r := range row {
		axpy(-x[r], a[(ld+q)*ld:], own)
	}
	for j := len(own) - 1; j >= 0; j-- {
		own[j] /= a[j*ld+j]
		axpy(-own[j], a[j*ld:], own[:j])
	}
	return row
}

// axpy adds s times the first len(y) entries of x to y.
func axpy(s float64, x, y []float64) {
	if s == 0 {
		return
	}
	x = x[:len(y)]
	for i, v := range x {
		y[i] += s * v
	}
}
