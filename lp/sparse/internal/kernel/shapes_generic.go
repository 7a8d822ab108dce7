//go:build !amd64 || noasm

package kernel

var shapes = []shape{plainShape}

// solve16 is the plain solve.
func solve16(l, x *[Width * Width]float64) { solve16Go(l, x) }
