package layout_test

import (
	"context"
	"flag"
	"fmt"
	"math"
	"os"
	"strings"
	"sync"
	"testing"

	"boughwork/ground/layout"
)

var update = flag.Bool("update", false, "write our values into the ledger and its table into the README")

const (
	ledgerPath = "../../testdata/reference/layout.json"
	readmePath = "../../README.md"
)

// Gaps to which the cases are solved. Small ones are cheap to solve well; a lattice is off by far more than its gap.
const (
	exactGap = 1e-8
	gridGap  = 1e-6
)

// digitsShare is how closely the figure written in the ledger agrees with the closed form: it has seven digits.
const digitsShare = 5e-7

// TestReference solves every case of the ledger and compares it with its published value; it fails as well if the
// ledger or the table in the README no longer says what the program finds.
func TestReference(t *testing.T) {
	l := readLedger(t)
	results := solveAll(t, l)
	t.Run("nested", func(t *testing.T) { checkNested(t, results) })
	t.Run("level", func(t *testing.T) { checkLevel(t, results) })
	if *update {
		writeLedger(t, l, results)
	}
	t.Run("stored", func(t *testing.T) { checkStored(t, l, results) })
	t.Run("readme", func(t *testing.T) { checkReadme(t, l) })
}

// solveAll solves the cases of the ledger and judges each.
func solveAll(t *testing.T, l *ledger) map[string]*layout.Result {
	cases := map[string]referenceCase{}
	for _, c := range append(append([]referenceCase{}, exactCases...), gridCases...) {
		if _, twice := cases[c.id]; twice {
			t.Fatalf("two cases are called %s", c.id)
		}
		cases[c.id] = c
	}
	results := map[string]*layout.Result{}
	var mu sync.Mutex
	t.Run("cases", func(t *testing.T) {
		for _, e := range l.all() {
			c, ok := cases[e.ID]
			if !ok {
				t.Errorf("the ledger has %s, the test has not", e.ID)
				continue
			}
			delete(cases, e.ID)
			t.Run(e.ID, func(t *testing.T) {
				t.Parallel()
				r := solveReference(t, c, e)
				mu.Lock()
				defer mu.Unlock()
				results[e.ID] = r
			})
		}
		for id := range cases {
			t.Errorf("the test has %s, the ledger has not", id)
		}
	})
	return results
}

// solveReference solves a case and compares volume and bound with the value of the ledger.
func solveReference(t *testing.T, c referenceCase, e *entry) *layout.Result {
	if math.Abs(e.Exact/c.exact-1) > digitsShare {
		t.Errorf("the ledger says %.10g, the closed form %.10g", e.Exact, c.exact)
	}
	b := newBuilder()
	c.build(b)
	r, err := layout.Solve(context.Background(), &b.Structure, layout.Options{Gap: e.gap()})
	if err != nil {
		t.Fatal(err)
	}
	if got := r.Status.String(); got != "optimal" {
		t.Fatalf("status %s", got)
	}
	rep, err := layout.Verify(layout.NewRecord(&b.Structure, r, layout.Meta{}))
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range rep.Checks {
		if !f.OK {
			t.Errorf("verify: %s: %g, limit %g: %s", f.Name, f.Value, f.Limit, f.Text)
		}
	}
	if r.Gap > e.gap() {
		t.Errorf("gap %.3g, wanted %.3g", r.Gap, e.gap())
	}
	low := -e.Allowed
	if e.Kind == fromAbove {
		low = -exactShare
	}
	if d := r.Volume/c.exact - 1; d < low || d > e.Allowed {
		t.Errorf("%s (%s): ours %.9g, exact %.9g: difference %.3g, allowed %.3g to %.3g", e.What, e.Grid, r.Volume, c.exact, d, low, e.Allowed)
	}
	if e.Kind == exactly && r.Bound > c.exact*(1+exactShare) {
		t.Errorf("the bound %.9g is above the least volume %.9g", r.Bound, c.exact)
	}
	return r
}

// checkNested checks that volumes fall as lattices gain nodes.
func checkNested(t *testing.T, results map[string]*layout.Result) {
	for _, ids := range nested {
		for i := 1; i < len(ids); i++ {
			coarse, fine := results[ids[i-1]], results[ids[i]]
			if coarse == nil || fine == nil {
				t.Errorf("%v were not solved", ids)
				continue
			}
			if fine.Bound > coarse.Volume {
				t.Errorf("%s needs %.8g at least, %s on part of its nodes only %.8g", ids[i], fine.Bound, ids[i-1], coarse.Volume)
			}
		}
	}
}

// checkLevel checks that more planes beside a plane lattice change nothing.
func checkLevel(t *testing.T, results map[string]*layout.Result) {
	for _, ids := range level {
		plane, space := results[ids[0]], results[ids[1]]
		if plane == nil || space == nil {
			t.Errorf("%v were not solved", ids)
			continue
		}
		if math.Abs(space.Volume/plane.Volume-1) > 2*gridGap {
			t.Errorf("%s needs %.9g in the plane, %s %.9g in space", ids[0], plane.Volume, ids[1], space.Volume)
		}
	}
}

// checkStored compares the results with the values written in the ledger, to the digits written and the gap.
func checkStored(t *testing.T, l *ledger, results map[string]*layout.Result) {
	for _, e := range l.all() {
		r := results[e.ID]
		if r == nil {
			t.Errorf("%s was not solved", e.ID)
			continue
		}
		if !e.current(r.Volume) {
			t.Errorf("%s: the ledger says ours is %.8g, it is %.8g; run with -update", e.ID, e.Ours, r.Volume)
		}
		if d := round(e.Ours/e.Exact-1, differenceDigits); math.Abs(d-e.Difference) > 1e-12 {
			t.Errorf("%s: the ledger says the difference is %g, it is %g; run with -update", e.ID, e.Difference, d)
		}
	}
}

const (
	tableBegin = "<!-- reference:begin -->\n"
	tableEnd   = "<!-- reference:end -->"
)

// checkReadme compares the table in the README with the ledger, or writes it.
func checkReadme(t *testing.T, l *ledger) {
	data, err := os.ReadFile(readmePath)
	if err != nil {
		t.Fatal(err)
	}
	before, rest, ok := strings.Cut(string(data), tableBegin)
	old, after, ok2 := strings.Cut(rest, tableEnd)
	if !ok || !ok2 {
		t.Fatalf("README.md has no %s ... %s", strings.TrimSpace(tableBegin), tableEnd)
	}
	table := l.markdown()
	if old == table {
		return
	}
	if !*update {
		t.Fatal("the table of reference values in README.md is not that of the ledger; run: go test ./ground/layout -run TestReference -update")
	}
	if err := os.WriteFile(readmePath, fmt.Appendf(nil, "%s%s%s%s%s", before, tableBegin, table, tableEnd, after), 0o644); err != nil {
		t.Fatal(err)
	}
}
