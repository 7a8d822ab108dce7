package kernel

// shape is a micro tile of mr x nr entries of C with the code that computes it: run does C -= A B' from k columns of
// A, row-major, and of a packed strip of B. All shapes add up an entry in the same order, so those that use fused multiplication and
// addition give the same bits.
type shape struct {
	name   string
	mr, nr int
	run    func(k int, a []float64, lda int, b, c []float64, ldc int)
}

// plainShape is there on every machine.
var plainShape = shape{"plain", 4, 12, tileGo}

// chosen is the shape that this machine does best.
var chosen = shapes[len(shapes)-1]

// tileGo computes the 4 x 12 tile in plain Go: two columns of B at a time, so that the sums stay in registers.
func tileGo(k int, a []float64, lda int, b, c []float64, ldc int) {
	const nr = 12
	a0, a1, a2, a3 := a[:k], a[lda:][:k], a[2*lda:][:k], a[3*lda:][:k]
	for s := 0; s < nr; s += 2 {
		var c00, c01, c10, c11, c20, c21, c30, c31 float64
		for p, x0 := range a0 {
			y := b[p*nr+s : p*nr+s+2 : p*nr+s+2]
			y0, y1 := y[0], y[1]
			c00 += x0 * y0
			c01 += x0 * y1
			c10 += a1[p] * y0
			c11 += a1[p] * y1
			c20 += a2[p] * y0
			c21 += a2[p] * y1
			c30 += a3[p] * y0
			c31 += a3[p] * y1
		}
		c[s] -= c00
		c[s+1] -= c01
		c[ldc+s] -= c10
		c[ldc+s+1] -= c11
		c[2*ldc+s] -= c20
		c[2*ldc+s+1] -= c21
		c[3*ldc+s] -= c30
		c[3*ldc+s+1] -= c31
	}
}
