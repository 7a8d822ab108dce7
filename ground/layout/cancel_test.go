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

// Only a record that claims nothing may go unjudged: one that says more without bars must be found out.
func TestUncountedMustClaimNothing(t *testing.T) {
	s := canopy(2)
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	r, err := Solve(ctx, s, Options{})
	if err != nil {
		t.Fatal(err)
	}
	for name, lie := range map[string]func(*Record){
		"optimal":   func(r *Record) { r.Status = lp.Optimal.String() },
		"bound":     func(r *Record) { r.Certificate.BoundM3 = 1 },
		"objective": func(r *Record) { r.Certificate.ObjectiveM3 = 1 },
		"volume":    func(r *Record) { r.Certificate.VolumeM3 = 1 },
	} {
		rec := NewRecord(s, r, Meta{})
		lie(rec)
		if rep, err := Verify(rec); err == nil && rep.OK() {
			t.Errorf("%s: a record without bars or candidates passes", name)
		}
	}
}
