package lp

import (
	"errors"
	"fmt"
	"math"
)

// Validate returns an error that names the bar (or case, or block) and the field if the problem makes no sense: slices of
// the wrong length, NaN, rows out of range or twice in a bar, a strength, cost or limit that the documentation of Problem
// and Bars does not allow. A valid problem may still have no solution.
func (p *Problem) Validate() error {
	if p.Rows < 0 {
		return fmt.Errorf("lp: Rows %d: want zero or more", p.Rows)
	}
	if err := p.validateBlocks(); err != nil {
		return err
	}
	if err := p.Bars.validate(p.Rows); err != nil {
		return err
	}
	for k, c := range p.Cases {
		if !finite(c.Gravity) {
			return fmt.Errorf("lp: case %d (%s): Gravity %g: want a finite number", k, c.Name, c.Gravity)
		}
		if len(c.Load) != p.Rows {
			return fmt.Errorf("lp: case %d (%s): Load has %d entries: want one a row, %d", k, c.Name, len(c.Load), p.Rows)
		}
		for r, f := range c.Load {
			if !finite(f) {
				return fmt.Errorf("lp: case %d (%s): Load[%d] is %g: want a finite number", k, c.Name, r, f)
			}
		}
	}
	return nil
}

func (p *Problem) validateBlocks() error {
	n := len(p.Block) - 1
	if n < 0 {
		return errors.New("lp: Block is empty: want the first row of every block and, at the end, Rows")
	}
	if p.Block[0] != 0 || int(p.Block[n]) != p.Rows {
		return fmt.Errorf("lp: Block goes from %d to %d: want from 0 to Rows, %d", p.Block[0], p.Block[n], p.Rows)
	}
	for v := range n {
		if p.Block[v+1] < p.Block[v] {
			return fmt.Errorf("lp: block %d: Block falls from %d to %d: want it to rise", v, p.Block[v], p.Block[v+1])
		}
	}
	if len(p.At) != n {
		return fmt.Errorf("lp: At has %d places: want one a block, %d", len(p.At), n)
	}
	for v, at := range p.At {
		nans := 0
		for _, x := range at {
			if math.IsInf(x, 0) {
				return fmt.Errorf("lp: block %d: At is %v: want finite numbers, or NaN for a block without a place", v, at)
			}
			if math.IsNaN(x) {
				nans++
			}
		}
		if nans != 0 && nans != 3 {
			return fmt.Errorf("lp: block %d: At is %v: want three numbers, or three NaN for a block without a place", v, at)
		}
	}
	return nil
}

func (b *Bars) validate(rows int) error {
	n := b.Len()
	for _, f := range []struct {
		name string
		len  int
	}{{"Tension", len(b.Tension)}, {"Compression", len(b.Compression)}, {"Upper", len(b.Upper)}, {"Fixed", len(b.Fixed)}} {
		if f.len != n {
			return fmt.Errorf("lp: bars: %s has %d entries: want as many as Cost, %d", f.name, f.len, n)
		}
	}
	entries := len(b.Row)
	if len(b.B) != entries || len(b.H) != entries {
		return fmt.Errorf("lp: bars: B has %d and H has %d entries: want as many as Row, %d", len(b.B), len(b.H), entries)
	}
	if n == 0 && len(b.Ptr) == 0 {
		return nil
	}
	if len(b.Ptr) != n+1 || b.Ptr[0] != 0 || int(b.Ptr[n]) != entries {
		return fmt.Errorf("lp: bars: Ptr has %d entries: want %d, from 0 to the length of Row, %d", len(b.Ptr), n+1, entries)
	}
	seen := make([]int32, rows) // the last bar, counted from 1, that had the row
	for i := range n {
		if err := b.validateColumn(i, seen); err != nil {
			return err
		}
		if err := b.validateValues(i); err != nil {
			return err
		}
	}
	return nil
}

func (b *Bars) validateColumn(i int, seen []int32) error {
	if b.Ptr[i+1] < b.Ptr[i] || int(b.Ptr[i+1]) > len(b.Row) {
		return fmt.Errorf("lp: bar %d: Ptr goes from %d to %d: want it to rise, up to %d", i, b.Ptr[i], b.Ptr[i+1], len(b.Row))
	}
	for j := b.Ptr[i]; j < b.Ptr[i+1]; j++ {
		r := b.Row[j]
		if r < 0 || int(r) >= len(seen) {
			return fmt.Errorf("lp: bar %d: Row %d: want 0 to %d", i, r, len(seen)-1)
		}
		if seen[r] == int32(i+1) {
			return fmt.Errorf("lp: bar %d: Row %d is there twice: add the entries up", i, r)
		}
		seen[r] = int32(i + 1)
		if !finite(b.B[j]) {
			return fmt.Errorf("lp: bar %d: B in row %d is %g: want a finite number", i, r, b.B[j])
		}
		if !finite(b.H[j]) {
			return fmt.Errorf("lp: bar %d: H in row %d is %g: want a finite number", i, r, b.H[j])
		}
	}
	return nil
}

func (b *Bars) validateValues(i int) error {
	st, sc, up, fixed := b.Tension[i], b.Compression[i], b.Upper[i], b.Fixed[i]
	endless := math.IsInf(st, 1) || math.IsInf(sc, 1)
	switch {
	case !(st >= 0):
		return fmt.Errorf("lp: bar %d: Tension %g: want zero or a positive strength", i, st)
	case !(sc >= 0):
		return fmt.Errorf("lp: bar %d: Compression %g: want zero or a positive strength", i, sc)
	case st == 0 && sc == 0:
		return fmt.Errorf("lp: bar %d: Tension and Compression are both 0: leave the bar out", i)
	case math.IsInf(st, 1) && math.IsInf(sc, 1):
		return fmt.Errorf("lp: bar %d: Tension and Compression are both unlimited: hold the row instead", i)
	case endless && !fixed:
		return fmt.Errorf("lp: bar %d: unlimited strength (Tension %g, Compression %g): want a Fixed bar", i, st, sc)
	case !(up >= 0):
		return fmt.Errorf("lp: bar %d: Upper %g: want zero or a positive area, +Inf for none", i, up)
	case fixed && math.IsInf(up, 1):
		return fmt.Errorf("lp: bar %d: Fixed with Upper %g: want a finite area", i, up)
	case endless && up == 0:
		return fmt.Errorf("lp: bar %d: unlimited strength with Upper 0: want an area above zero", i)
	case !fixed && !(b.Cost[i] > 0 && finite(b.Cost[i])):
		return fmt.Errorf("lp: bar %d: Cost %g: want a positive number", i, b.Cost[i])
	}
	return nil
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
