package layout_test

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math"
	"os"
	"strings"
	"testing"

	"boughwork/ground/layout"
)

// ledger is testdata/reference/layout.json.
type ledger struct {
	About       []string `json:"about"`
	Published   []*entry `json:"published"`
	Independent []*entry `json:"independent"`
}

// entry is a case of the ledger. All but Ours and Difference is written by hand.
type entry struct {
	ID         string  `json:"id"`
	What       string  `json:"what"`
	Source     string  `json:"source"`
	Dimension  string  `json:"dimension"`
	Grid       string  `json:"grid"`
	Exact      float64 `json:"exact"`
	Kind       string  `json:"kind"`
	Ours       float64 `json:"ours"`
	Difference float64 `json:"difference"` // ours / exact - 1
	Allowed    float64 `json:"allowed"`
}

// The kinds of an entry.
const (
	exactly     = "exact"
	fromAbove   = "from above"
	sameLattice = "same lattice"
)

// exactShare is how far below the exact value a value from above may lie: the gap, and no more.
const exactShare = 1e-6

const (
	oursDigits       = 7 // significant digits of Ours
	differenceDigits = 6 // digits of Difference after the point: what seven digits of Ours can show
)

func (l *ledger) all() []*entry { return append(append([]*entry{}, l.Published...), l.Independent...) }

func (e *entry) gap() float64 {
	if e.Kind == exactly {
		return exactGap
	}
	return gridGap
}

// current reports whether the value written is that of v, to the digits written and the gap.
func (e *entry) current(v float64) bool {
	half := 0.5 * math.Pow(10, math.Floor(math.Log10(v))+1-oursDigits)
	return math.Abs(e.Ours-v) <= 1.001*half+e.gap()*v
}

// readLedger reads the ledger and refuses one that leaves something out.
func readLedger(t *testing.T) *ledger {
	data, err := os.ReadFile(ledgerPath)
	if err != nil {
		t.Fatal(err)
	}
	l := &ledger{}
	dec := json.NewDecoder(bytes.NewReader(data))
	dec.DisallowUnknownFields()
	if err := dec.Decode(l); err != nil {
		t.Fatalf("%s: %v", ledgerPath, err)
	}
	seen := map[string]bool{}
	for _, e := range l.all() {
		switch {
		case seen[e.ID]:
			t.Fatalf("%s: %s is there twice", ledgerPath, e.ID)
		case e.What == "" || e.Source == "" || e.Grid == "" || e.Dimension != "2D" && e.Dimension != "3D":
			t.Fatalf("%s: %s does not say what it is, where it comes from, its grid and dimension", ledgerPath, e.ID)
		case e.Kind != exactly && e.Kind != fromAbove && e.Kind != sameLattice:
			t.Fatalf("%s: %s: kind %q", ledgerPath, e.ID, e.Kind)
		case !(e.Exact > 0) || !(e.Allowed > 0) || e.Kind == exactly && e.Allowed > 1e-6:
			t.Fatalf("%s: %s: exact %g, allowed %g", ledgerPath, e.ID, e.Exact, e.Allowed)
		}
		seen[e.ID] = true
	}
	return l
}

// writeLedger writes our values down. A value that is still current is left as it is, so that a run on another machine
// changes nothing.
func writeLedger(t *testing.T, l *ledger, results map[string]*layout.Result) {
	for _, e := range l.all() {
		r := results[e.ID]
		if r == nil {
			continue
		}
		if !e.current(r.Volume) {
			e.Ours = round(r.Volume, oursDigits-1-int(math.Floor(math.Log10(r.Volume))))
		}
		e.Difference = round(e.Ours/e.Exact-1, differenceDigits)
	}
	var out bytes.Buffer
	enc := json.NewEncoder(&out)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	if err := enc.Encode(l); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(ledgerPath, out.Bytes(), 0o644); err != nil {
		t.Fatal(err)
	}
}

// round rounds to a number of digits after the point; -0 becomes 0.
func round(v float64, digits int) float64 {
	p := math.Pow(10, float64(digits))
	return math.Round(v*p)/p + 0
}

// markdown returns the tables of the README.
func (l *ledger) markdown() string {
	var b strings.Builder
	b.WriteString("Volumes times strength, for loads and lengths of 1 unless the case says otherwise. A value on a lattice (a/4: nodes every quarter of a)\n" +
		"is approached from above as the lattice is refined; [testdata/reference/layout.json](testdata/reference/layout.json) says how far\n" +
		"each may be off, and the tests compute them all.\n\n")
	b.WriteString("| case | source | exact | ours | difference |\n| --- | --- | --- | --- | --- |\n")
	for _, e := range l.Published {
		e.row(&b)
	}
	b.WriteString("\nThe optimum of the same linear program, found by others:\n\n| case | source | theirs | ours | difference |\n| --- | --- | --- | --- | --- |\n")
	for _, e := range l.Independent {
		e.row(&b)
	}
	return b.String()
}

func (e *entry) row(b *strings.Builder) {
	difference := fmt.Sprintf("%+.2f %%", 100*e.Difference)
	if math.Abs(e.Difference) <= exactShare {
		difference = "below 1e-6"
	} else if math.Abs(e.Difference) < 1e-4 {
		difference = fmt.Sprintf("%+.4f %%", 100*e.Difference)
	}
	fmt.Fprintf(b, "| %s %s (%s, %s) | %s | %s | %s | %s |\n", e.ID, strings.ReplaceAll(e.What, "|", "\\|"), e.Dimension, e.Grid, e.Source,
		number(e.Exact), number(e.Ours), difference)
}

func number(v float64) string { return fmt.Sprintf("%.*g", oursDigits, v) }
