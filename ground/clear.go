package ground

import "boughwork/geom"

// footLift is how far above the ground a foot is tested against the keep-clears, m: a keep-clear that begins at the ground
// leaves no room for a foot although the foot lies on its face.
const footLift = 0.1

// allowed reports whether a node may be at a place: in no keep-clear, and in the envelope if there is one.
func (b *builder) allowed(at geom.Vec) bool {
	return !b.keepClear.BlockedAt(at) && b.envelope.Contains(at, at)
}
