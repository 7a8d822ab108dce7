package kernel

// tileGo computes the mr x nr tile C -= A B' from packed strips, in plain Go: two columns of B at a time, so that the
// sums stay in registers.
func tileGo(k int, a, b, c []float64, ldc int) {
	for s := 0; s < nr; s += 2 {
		var c00, c01, c10, c11, c20, c21, c30, c31 float64
		for p := range k {
			x := a[p*mr : p*mr+mr : p*mr+mr]
			y := b[p*nr+s : p*nr+s+2 : p*nr+s+2]
			y0, y1 := y[0], y[1]
			c00 += x[0] * y0
			c01 += x[0] * y1
			c10 += x[1] * y0
			c11 += x[1] * y1
			c20 += x[2] * y0
			c21 += x[2] * y1
			c30 += x[3] * y0
			c31 += x[3] * y1
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
