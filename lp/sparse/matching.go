package sparse

// matching is a maximum matching of the edges between the sides a and b of a cut (Hopcroft and Karp 1973).
type matching struct {
	d     *dissection
	a     []int32
	cross map[int32][]int32 // neighbours in b of every block of a that has some
	mate  map[int32]int32   // of matched blocks, both sides
	level map[int32]int32
}

func newMatching(d *dissection, a, b []int32) *matching {
	m := &matching{d: d, a: a, cross: map[int32][]int32{}, mate: map[int32]int32{}}
	for _, v := range a {
		part := d.part[v]
		for _, w := range d.adj[v] {
			if d.part[w] == part && d.local[w] == 2 {
				m.cross[v] = append(m.cross[v], w)
			}
		}
	}
	return m
}

// run augments along shortest alternating paths until there are none.
func (m *matching) run() {
	for m.layers() {
		for _, v := range m.a {
			if _, matched := m.mate[v]; !matched && m.cross[v] != nil {
				m.augment(v)
			}
		}
	}
}

// layers numbers the blocks of a by the length of the shortest alternating path from an unmatched one, and reports
// whether some path ends in an unmatched block of b.
func (m *matching) layers() bool {
	m.level = map[int32]int32{}
	var queue []int32
	for _, v := range m.a {
		if _, matched := m.mate[v]; !matched && m.cross[v] != nil {
			m.level[v] = 0
			queue = append(queue, v)
		}
	}
	found := false
	for len(queue) > 0 {
		v := queue[0]
		queue = queue[1:]
		for _, w := range m.cross[v] {
			u, matched := m.mate[w]
			if !matched {
				found = true
			} else if _, seen := m.level[u]; !seen {
				m.level[u] = m.level[v] + 1
				queue = append(queue, u)
			}
		}
	}
	return found
}

func (m *matching) augment(v int32) bool {
	here := m.level[v]
	m.level[v] = -1 // each block is on one path of a phase at most
	for _, w := range m.cross[v] {
		u, matched := m.mate[w]
		if !matched || (m.level[u] == here+1 && m.augment(u)) {
			m.mate[v], m.mate[w] = w, v
			return true
		}
	}
	return false
}

// cover returns a minimum vertex cover: with Z the blocks reached from unmatched blocks of a by alternating paths, the
// blocks of a outside Z and the blocks of b inside Z.
func (m *matching) cover() map[int32]bool {
	reached := map[int32]bool{}
	var queue []int32
	for _, v := range m.a {
		if _, matched := m.mate[v]; !matched && m.cross[v] != nil {
			reached[v] = true
			queue = append(queue, v)
		}
	}
	cover := map[int32]bool{}
	for len(queue) > 0 {
		v := queue[0]
		queue = queue[1:]
		for _, w := range m.cross[v] {
			if cover[w] {
				continue
			}
			cover[w] = true
			if u := m.mate[w]; !reached[u] {
				reached[u] = true
				queue = append(queue, u)
			}
		}
	}
	for _, v := range m.a {
		if m.cross[v] != nil && !reached[v] {
			cover[v] = true
		}
	}
	return cover
}
