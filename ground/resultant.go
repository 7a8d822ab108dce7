package ground

import "boughwork/geom"

// Resultant returns the resultant force of case k, N, and its moment about (0, 0, 0), Nm. The weight of the bars is not
// in it.
func (s *Structure) Resultant(k int) (force, momentAboutOrigin geom.Vec) {
	for _, l := range s.Cases[k].Loads {
		force = force.Add(l.Force)
		momentAboutOrigin = momentAboutOrigin.Add(s.Nodes[l.Node].At.Cross(l.Force))
	}
	return force, momentAboutOrigin
}

// Count returns the number of nodes of a role.
func (s *Structure) Count(r Role) int {
	n := 0
	for _, d := range s.Nodes {
		if d.Role == r {
			n++
		}
	}
	return n
}
