//go:build amd64 && !noasm

package kernel

// useAVX2 is true if the processor and the operating system support AVX2 and FMA.
var useAVX2 = hasAVX2FMA()

func tile(k int, a, b, c []float64, ldc int) {
	if !useAVX2 {
		tileGo(k, a, b, c, ldc)
		return
	}
	_ = c[3*ldc+nr-1]
	_, _ = a[mr*k-1], b[nr*k-1]
	tileAVX2(k, &a[0], &b[0], &c[0], ldc)
}

// tileAVX2 computes C -= A B' for one 4 x 12 tile: a holds k columns of 4, b holds k columns of 12, c has row stride ldc.
//
//go:noescape
func tileAVX2(k int, a, b, c *float64, ldc int)

// hasAVX2FMA asks the processor.
func hasAVX2FMA() bool {
	_, _, ecx1, _ := cpuid(1, 0)
	const fma, osxsave, avx = 1 << 12, 1 << 27, 1 << 28
	if ecx1&fma == 0 || ecx1&osxsave == 0 || ecx1&avx == 0 {
		return false
	}
	if lo, _ := xgetbv(); lo&6 != 6 { // the system saves the wide registers
		return false
	}
	_, ebx7, _, _ := cpuid(7, 0)
	return ebx7&(1<<5) != 0
}

//go:noescape
func cpuid(leaf, sub uint32) (eax, ebx, ecx, edx uint32)

//go:noescape
func xgetbv() (eax, edx uint32)
