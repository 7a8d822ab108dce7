//go:build amd64 && !noasm

package kernel

// shapes are those that the processor and the operating system support, the fastest last.
var shapes = supported()

func supported() []shape {
	s := []shape{plainShape}
	if hasAVX2FMA() {
		s = append(s, shape{"avx2", 4, 12, func(k int, a []float64, lda int, b, c []float64, ldc int) {
			_, _, _ = a[3*lda+k-1], b[12*k-1], c[3*ldc+11]
			tileAVX2(k, &a[0], lda, &b[0], &c[0], ldc)
		}})
	}
	if useAVX512 {
		s = append(s, shape{"avx512", 8, 16, func(k int, a []float64, lda int, b, c []float64, ldc int) {
			_, _, _ = a[7*lda+k-1], b[16*k-1], c[7*ldc+15]
			tileAVX512(k, &a[0], lda, &b[0], &c[0], ldc)
		}})
	}
	return s
}

var useAVX512 = hasAVX512()

// solve16 solves sixteen rows for sixteen columns: see solve16Go.
func solve16(l, x *[Width * Width]float64) {
	if useAVX512 {
		solveAVX512(&l[0], &x[0])
		return
	}
	solve16Go(l, x)
}

// tileAVX2 computes C -= A B' for one 4 x 12 tile: a has row stride lda, b holds k
// columns of 12, c has row stride ldc.
//
//go:noescape
func tileAVX2(k int, a *float64, lda int, b, c *float64, ldc int)

// tileAVX512 is the same for a tile of 8 x 16.
//
//go:noescape
func tileAVX512(k int, a *float64, lda int, b, c *float64, ldc int)

//go:noescape
func solveAVX512(l, x *float64)

// Bits of what the processor says of itself, and of the registers that the operating system saves.
const (
	leaf1FMA, leaf1Saves, leaf1AVX = 1 << 12, 1 << 27, 1 << 28
	leaf7AVX2, leaf7AVX512F        = 1 << 5, 1 << 16
	savesAVX, savesAVX512          = 0x6, 0xe6
)

func hasAVX2FMA() bool {
	_, _, ecx1, _ := cpuid(1, 0)
	const want = leaf1FMA | leaf1Saves | leaf1AVX
	if ecx1&want != want || saved()&savesAVX != savesAVX {
		return false
	}
	_, ebx7, _, _ := cpuid(7, 0)
	return ebx7&leaf7AVX2 != 0
}

func hasAVX512() bool {
	if !hasAVX2FMA() || saved()&savesAVX512 != savesAVX512 {
		return false
	}
	_, ebx7, _, _ := cpuid(7, 0)
	return ebx7&leaf7AVX512F != 0
}

func saved() uint32 {
	lo, _ := xgetbv()
	return lo
}

//go:noescape
func cpuid(leaf, sub uint32) (eax, ebx, ecx, edx uint32)

//go:noescape
func xgetbv() (eax, edx uint32)
