package layout

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"
	"reflect"
	"strings"

	"boughwork/ground"
)

// Write writes a record as JSON. Numbers read back to the same float64. Every element of a long list stands on a line of
// its own, so that two records can be compared line by line.
func Write(w io.Writer, r *Record) error {
	var b bytes.Buffer
	b.WriteString("{\n")
	v := reflect.ValueOf(r).Elem()
	first := true
	for i := range v.NumField() {
		name, option, _ := strings.Cut(v.Type().Field(i).Tag.Get("json"), ",")
		if option == "omitempty" && v.Field(i).IsZero() {
			continue
		}
		if !first {
			b.WriteString(",\n")
		}
		first = false
		fmt.Fprintf(&b, "%q: ", name)
		if err := writeField(&b, v.Field(i)); err != nil {
			return fmt.Errorf("layout: record: %s: %w", name, err)
		}
	}
	b.WriteString("\n}\n")
	_, err := w.Write(b.Bytes())
	return err
}

func writeField(b *bytes.Buffer, v reflect.Value) error {
	if v.Kind() != reflect.Slice || v.Len() == 0 {
		return writeJSON(b, v)
	}
	for i := range v.Len() {
		b.WriteString([]string{"[\n", ",\n"}[min(i, 1)])
		if err := writeJSON(b, v.Index(i)); err != nil {
			return err
		}
	}
	b.WriteString("\n]")
	return nil
}

func writeJSON(b *bytes.Buffer, v reflect.Value) error {
	text, err := json.Marshal(v.Interface())
	if err != nil {
		return err
	}
	b.Write(text)
	return nil
}

// Read reads a record. It fails on a file of another format or version, on unknown members, and on a record whose
// indices do not fit together; whether its numbers are true is for Verify to say.
func Read(r io.Reader) (*Record, error) {
	dec := json.NewDecoder(r)
	dec.DisallowUnknownFields()
	rec := &Record{}
	if err := dec.Decode(rec); err != nil {
		return nil, fmt.Errorf("layout: record: %w", err)
	}
	if rec.Format != Format || rec.Version != FormatVersion {
		return nil, fmt.Errorf("layout: record: format %q version %d, want %q version %d", rec.Format, rec.Version, Format, FormatVersion)
	}
	if err := rec.consistent(); err != nil {
		return nil, fmt.Errorf("layout: record: %w", err)
	}
	return rec, nil
}

// consistent checks that every index and every list length of the record is possible.
func (r *Record) consistent() error {
	n, k := len(r.Nodes), len(r.Cases)
	if _, err := r.ParseStatus(); err != nil {
		return err
	}
	if r.Candidates.ThroughNodeM != ground.ThroughNode {
		return fmt.Errorf("candidates.through_node_m is %g, this program knows %g", r.Candidates.ThroughNodeM, ground.ThroughNode)
	}
	if (r.Deck == ground.DeckDiaphragm.String()) != (len(r.Diaphragms) > 0) {
		return fmt.Errorf("deck %q with %d diaphragms", r.Deck, len(r.Diaphragms))
	}
	node := func(what string, i int) error {
		if i < 0 || i >= n {
			return fmt.Errorf("%s: node %d of %d", what, i, n)
		}
		return nil
	}
	for c, cs := range r.Cases {
		for j, l := range cs.Loads {
			if l[0] != float64(int(l[0])) || node("", int(l[0])) != nil {
				return fmt.Errorf("cases[%d].loads[%d]: node %v of %d", c, j, l[0], n)
			}
		}
	}
	pairOf := func(what string, p [2]int) error {
		if p[0] == p[1] {
			return fmt.Errorf("%s joins node %d to itself", what, p[0])
		}
		if err := node(what, p[0]); err != nil {
			return err
		}
		return node(what, p[1])
	}
	for i, b := range r.Bars {
		if err := pairOf(fmt.Sprintf("bars[%d]", i), b.Nodes); err != nil {
			return err
		}
		if len(b.ForceKN) != k {
			return fmt.Errorf("bars[%d]: %d forces for %d cases", i, len(b.ForceKN), k)
		}
	}
	for i, kp := range r.Candidates.Kept {
		if err := pairOf(fmt.Sprintf("candidates.kept[%d]", i), kp.Nodes); err != nil {
			return err
		}
	}
	inDeck := map[int]bool{}
	for d, dia := range r.Diaphragms {
		for _, i := range dia.Nodes {
			if inDeck[i] {
				return fmt.Errorf("diaphragms[%d]: node %d is in a diaphragm already", d, i)
			}
			inDeck[i] = true
			if err := node(fmt.Sprintf("diaphragms[%d]", d), i); err != nil {
				return err
			}
		}
	}
	for f, foot := range r.Footings {
		for _, i := range foot.Nodes {
			if err := node(fmt.Sprintf("footings[%d]", f), i); err != nil {
				return err
			}
		}
	}
	if u := r.Certificate.Displacement; len(u) > 0 {
		if len(u) != k {
			return fmt.Errorf("certificate: displacements of %d cases for %d", len(u), k)
		}
		for c := range u {
			if len(u[c]) != n {
				return fmt.Errorf("certificate: case %d: displacements of %d nodes for %d", c, len(u[c]), n)
			}
		}
	}
	if c := r.Collapse; c != nil && len(c.Motion) != n && len(c.Motion) != 0 {
		return fmt.Errorf("collapse: motion of %d nodes for %d", len(c.Motion), n)
	}
	return nil
}
