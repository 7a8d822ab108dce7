package layout

import (
	"math/rand/v2"
	"slices"
	"testing"
)

// The bars that every node starts with hold every round together: a wrong selection would leave nodes loose.
func TestSmallest(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 1))
	for n := 1; n < 40; n++ {
		x := make([]float64, n)
		for i := range x {
			x[i] = float64(r.IntN(n)) // with equals
		}
		sorted := slices.Sorted(slices.Values(x))
		for k := range n {
			if got := smallest(slices.Clone(x), k); got != sorted[k] {
				t.Fatalf("%v: number %d is %g, want %g", x, k, got, sorted[k])
			}
		}
	}
}

// Among those wanted, all that are as near as the last must come too, or the start would depend on the order of nodes.
func TestShortestTakesAllThatAreAsNear(t *testing.T) {
	all := []near{{5, 2}, {1, 1}, {2, 2}, {3, 3}, {4, 2}}
	got := shortest(all, 2)
	if want := []near{{1, 1}, {2, 2}, {4, 2}, {5, 2}}; !slices.Equal(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
	if got := shortest(all, 9); len(got) != len(all) {
		t.Errorf("got %v of %v", got, all)
	}
}
