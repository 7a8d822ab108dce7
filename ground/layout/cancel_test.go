package layout

import (
	"context"
	"testing"

	"boughwork/lp"
)

// A study that ends before it has begun must say so, and its record must hold together all the same: a person who stops a
// large study at once still gets files.
func TestCancelledAtOnce(t *testing.T) {
	s := canopy(2)
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	r, err := Solve(ctx, s, Options{})
	if err != nil || r.Status != lp.Cancelled || len(r.Bars) > 0 {
		t.Fatalf("%+v, %v", r, err)
	}
	verified(t, s, r)
}
