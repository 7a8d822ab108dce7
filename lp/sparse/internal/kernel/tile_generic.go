//go:build !amd64 || noasm

package kernel

func tile(k int, a, b, c []float64, ldc int) { tileGo(k, a, b, c, ldc) }
