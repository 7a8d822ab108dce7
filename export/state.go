package export

import (
	"math"

	"boughwork/ground/layout"
)

// reversalShare is the share of the largest force of a bar that its largest force of the other sign must pass before the
// bar counts as one that works both ways. One twentieth: less than that never sets a member's size, and would make
// nearly every bar of a roof with wind a bar of both kinds.
const reversalShare = 0.05

// State says how a bar works over all cases.
type State string

// The states of a bar.
const (
	Tension     State = "tension"
	Compression State = "compression"
	Both        State = "both" // tension in one case and compression in another, the smaller at least 1/20 of the larger
	Idle        State = "idle" // no force in any case
)

// extremes are the largest forces of a bar: tension and compression in kN, both as positive numbers or 0, and the case
// of each or -1.
type extremes struct {
	tension, compression         float64
	tensionCase, compressionCase int
}

func extremesOf(b layout.RecordBar) extremes {
	e := extremes{tensionCase: -1, compressionCase: -1}
	for k, q := range b.ForceKN {
		if q > e.tension {
			e.tension, e.tensionCase = q, k
		}
		if -q > e.compression {
			e.compression, e.compressionCase = -q, k
		}
	}
	return e
}

func (e extremes) state() State {
	floor := reversalShare * math.Max(e.tension, e.compression)
	switch {
	case e.tension == 0 && e.compression == 0:
		return Idle
	case e.compression < floor:
		return Tension
	case e.tension < floor:
		return Compression
	}
	return Both
}

// utilisation is the share of a bar's plastic strength that it uses in case k.
func utilisation(rec *layout.Record, b layout.RecordBar, k int) float64 {
	strength := rec.Material.TensionMPa
	if b.ForceKN[k] < 0 {
		strength = rec.Material.CompressionMPa
	}
	if b.ForceKN[k] == 0 {
		return 0
	}
	capacity := strength * b.AreaM2 * kiloPerMega
	if capacity <= 0 {
		return math.Inf(1)
	}
	return math.Abs(b.ForceKN[k]) / capacity
}

// kiloPerMega turns MPa x m2 = MN into kN.
const kiloPerMega = 1e3

// sizingCase is the case in which a bar uses most of its strength; -1 if there is no case.
func sizingCase(rec *layout.Record, b layout.RecordBar) int {
	best, at := -1.0, -1
	for k := range b.ForceKN {
		if u := utilisation(rec, b, k); u > best {
			best, at = u, k
		}
	}
	return at
}

// solidDiameter is the diameter of a solid round bar of that area, in mm.
func solidDiameter(areaM2 float64) float64 { return 2 * math.Sqrt(areaM2/math.Pi) * mmPerM }

// mmPerM turns m into mm.
const mmPerM = 1e3
