package export

import (
	"strconv"

	"boughwork/geom"
	"boughwork/ground/layout"
)

// marks are the names of bars, nodes and cases that all files share: bars B1, B2 ... and cases C1, C2 ... in the order
// of the record; of the nodes that the layout uses, feet F1 ..., wall supports W1 ... and all other joints J1 ..., each in
// the order of the nodes. A node has one mark, so that nothing has two names.
type marks struct {
	node []string // "" for a node that the layout does not use
	used []int    // nodes with a mark, in order
}

// newMarks marks the nodes that a bar meets, and the supported nodes that a load presses on directly.
func newMarks(rec *layout.Record) marks {
	use := make([]bool, len(rec.Nodes))
	for _, b := range rec.Bars {
		use[b.Nodes[0]], use[b.Nodes[1]] = true, true
	}
	for _, c := range rec.Cases {
		for _, l := range c.Loads {
			if n := int(l[0]); held(rec.Nodes[n]) && (l[1] != 0 || l[2] != 0 || l[3] != 0) {
				use[n] = true
			}
		}
	}
	m := marks{node: make([]string, len(rec.Nodes))}
	count := map[string]int{}
	for i, n := range rec.Nodes {
		if !use[i] {
			continue
		}
		letter := markLetter(n.Role)
		count[letter]++
		m.node[i] = letter + strconv.Itoa(count[letter])
		m.used = append(m.used, i)
	}
	return m
}

func markLetter(role string) string {
	switch role {
	case "footing":
		return "F"
	case "wall":
		return "W"
	}
	return "J"
}

// barMark is the mark of bars[i].
func barMark(i int) string { return "B" + strconv.Itoa(i+1) }

// caseMark is the mark of cases[k].
func caseMark(k int) string { return "C" + strconv.Itoa(k+1) }

// held reports whether a node is held in any direction.
func held(n layout.RecordNode) bool { return n.Fixed[0] || n.Fixed[1] || n.Fixed[2] }

// at is the place of node i.
func at(rec *layout.Record, i int) geom.Vec { return geom.FromArray(rec.Nodes[i].XYZ) }

// lengthOf is the length of a bar, m.
func lengthOf(rec *layout.Record, b layout.RecordBar) float64 {
	return at(rec, b.Nodes[1]).Sub(at(rec, b.Nodes[0])).Norm()
}
