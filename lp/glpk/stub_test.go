//go:build !(glpk && cgo)

package glpk

import (
	"context"
	"strings"
	"testing"

	"boughwork/lp"
)

// A build without GLPK must say what to install and how to build.
func TestStubSaysWhatToDo(t *testing.T) {
	sol, err := Solver{}.Solve(context.Background(), &lp.Problem{Block: []int32{0}}, nil, lp.Settings{})
	if sol != nil || err == nil {
		t.Fatalf("got %v, %v; want an error", sol, err)
	}
	for _, want := range []string{"libglpk-dev", "-tags glpk", "C compiler"} {
		if !strings.Contains(err.Error(), want) {
			t.Errorf("%q does not say %q", err, want)
		}
	}
}
