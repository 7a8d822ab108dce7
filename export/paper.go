package export

import "math"

// paper is a sheet size in landscape with everything that depends on it, mm.
type paper struct {
	name          string
	w, h          float64
	margin        float64 // from the edge of the paper to the frame
	column        float64 // width of the column of words on the right
	gap           float64 // between the frame, the views and the column
	text, small   float64 // sizes (em) of text
	head, title   float64
	hair, fine    float64 // line widths
	medium, heavy float64
	widest        float64 // of the thickest bar, unless there are many
	hatchStep     float64
}

// The two sheets. Text on both can be read at arm's length in print; sizes are those of ISO 3098 (1.8, 2.5, 3.5, 5, 7 mm
// capitals).
var (
	paperA3 = paper{name: "A3", w: 420, h: 297, margin: 8, column: 98, gap: 4, text: 2.5, small: 2.15, head: 3.1, title: 4.6,
		hair: 0.1, fine: 0.18, medium: 0.3, heavy: 0.5, widest: 1.3, hatchStep: 2}
	paperA1 = paper{name: "A1", w: 841, h: 594, margin: 12, column: 168, gap: 7, text: 3.6, small: 3, head: 4.6, title: 7.5,
		hair: 0.13, fine: 0.22, medium: 0.4, heavy: 0.7, widest: 1.9, hatchStep: 3}
)

// scales are the denominators that a drawing may have: those that scale rulers have, and their tens.
var scales = []float64{5, 10, 20, 25, 50, 75, 100, 125, 200, 250, 300, 400, 500, 750, 1000, 1250, 2000, 2500, 5000, 10000, 20000, 25000,
	50000, 100000,
	200000, 500000, 1000000}

// largestOnA3 is the smallest scale that an A3 sheet is used for: below 1:100 the joints of a roof can no longer be told
// apart there.
const largestOnA3 = 100

// axonometricSlack is how many times smaller than the plan the axonometric view may be.
const axonometricSlack = 4

// sizes are what the four views show, m.
type sizes struct{ plan, long, end, axo extent }

// arrangement says where the views are on a sheet. The boxes are for the drawings alone; words and dimensions have their
// room around them.
type arrangement struct {
	scale, axoScale      float64 // denominators
	plan, long, end, axo box
	endOnLeft            bool // the end elevation begins where the plan begins, not in the middle of its box
}

// arrange chooses sheet, scale and places. The plan and the long elevation share their horizontal axis, the two elevations their
// ground.
func arrange(s sizes) (paper, arrangement) {
	for _, p := range []paper{paperA3, paperA1} {
		for _, scale := range scales {
			if p.name == paperA3.name && scale > largestOnA3 {
				break
			}
			if a, ok := p.arranged(s, scale); ok {
				return p, a
			}
		}
	}
	last := scales[len(scales)-1]
	a, _ := paperA1.arranged(s, last)
	return paperA1, a
}

// arranged tries the ways to place four views at a scale and returns the one with the largest axonometric view.
func (p paper) arranged(s sizes, scale float64) (best arrangement, ok bool) {
	for _, way := range []func(sizes, float64, float64) (arrangement, bool){p.sideBySide, p.threeRows, p.stacked, p.fourRows} {
		a, fits := way(s, scale, 0)
		if !fits {
			continue
		}
		for _, d := range scales {
			if h := s.axo.h() * mmPerM / d; d >= scale && s.axo.w()*mmPerM/d <= a.axo.w() && h <= a.axo.h() {
				a, _ = way(s, scale, a.axo.h()-h)
				a.axoScale = d
				break
			}
		}
		if a.axoScale > 0 && a.axoScale <= axonometricSlack*scale && (!ok || a.axoScale < best.axoScale) {
			best, ok = a, true
		}
	}
	return best, ok
}

// area is the part of the sheet for views.
func (p paper) area() box {
	d := p.margin + p.gap
	return box{d, d, p.w - p.margin - p.column - 2*p.gap, p.h - d}
}

// Room around a view for dimensions, levels and its title, in sizes of text.
const (
	roomLeft, roomRight      = 7.0, 4.5
	roomTop                  = 1.4
	roomBelow, roomUnder     = 4.4, 9.2 // below a view; under the plan, which has dimensions there
	titleLine, planTitleLine = 2.6, 8.4 // from the window down to the title
)

// cell is the size that a view needs with the room around it, mm.
func (p paper) cell(e extent, scale, below float64) (w, h float64) {
	return e.w()*mmPerM/scale + (roomLeft+roomRight)*p.text, e.h()*mmPerM/scale + (roomTop+below)*p.text
}

// inner takes the room around a view away from its cell.
func (p paper) inner(b box, below float64) box {
	return box{b.x0 + roomLeft*p.text, b.y0 + roomTop*p.text, b.x1 - roomRight*p.text, b.y1 - below*p.text}
}

// sideBySide has the plan over the long elevation on the left, the axonometric view over the end elevation on the right.
// In this and the other ways to place the views spare is the height in mm that the axonometric view does not need; it
// goes to all rows.
func (p paper) sideBySide(s sizes, scale, _ float64) (a arrangement, ok bool) {
	area := p.area()
	pw, ph := p.cell(s.plan, scale, roomUnder)
	_, lh := p.cell(s.long, scale, roomBelow)
	ew, _ := p.cell(s.end, scale, roomBelow)
	spare := area.h() - ph - lh
	if spare < 0 || area.w() < pw+ew {
		return a, false
	}
	x := area.x0 + pw + (area.w()-pw-ew)/3
	y := area.y0 + ph + spare/2
	return arrangement{scale: scale,
		plan: p.inner(box{area.x0, area.y0, x, y}, roomUnder), axo: p.inner(box{x, area.y0, area.x1, y}, roomBelow),
		long: p.inner(box{area.x0, y, x, area.y1}, roomBelow), end: p.inner(box{x, y, area.x1, area.y1}, roomBelow)}, true
}

// threeRows has the plan, the two elevations side by side, and the axonometric view under each other.
func (p paper) threeRows(s sizes, scale, spare float64) (a arrangement, ok bool) {
	area := p.area()
	pw, ph := p.cell(s.plan, scale, roomUnder)
	_, lh := p.cell(s.long, scale, roomBelow)
	ew, _ := p.cell(s.end, scale, roomBelow)
	if area.h() < ph+lh || area.w() < pw+ew {
		return a, false
	}
	x := area.x0 + pw + (area.w()-pw-ew)/3
	y0 := area.y0 + ph + spare/3
	y1 := y0 + lh + spare/3
	return arrangement{scale: scale,
		plan: p.inner(box{area.x0, area.y0, x, y0}, roomUnder), long: p.inner(box{area.x0, y0, x, y1}, roomBelow),
		end: p.inner(box{x, y0, area.x1, y1}, roomBelow), axo: p.inner(box{area.x0, y1, area.x1, area.y1}, roomBelow)}, true
}

// stacked has the plan and the long elevation over the full width, and under them the axonometric view with the end
// elevation on its right.
func (p paper) stacked(s sizes, scale, spare float64) (a arrangement, ok bool) {
	area := p.area()
	pw, ph := p.cell(s.plan, scale, roomUnder)
	_, lh := p.cell(s.long, scale, roomBelow)
	ew, eh := p.cell(s.end, scale, roomBelow)
	if area.h() < ph+lh+eh || area.w() < math.Max(pw, ew) {
		return a, false
	}
	spare = math.Min(spare, area.h()-ph-lh-eh)
	y0 := area.y0 + ph + spare/3
	y1 := y0 + lh + spare/3
	x := area.x1 - ew
	return arrangement{scale: scale,
		plan: p.inner(box{area.x0, area.y0, area.x1, y0}, roomUnder), long: p.inner(box{area.x0, y0, area.x1, y1}, roomBelow),
		end: p.inner(box{x, y1, area.x1, area.y1}, roomBelow), axo: p.inner(box{area.x0, y1, x, area.y1}, roomBelow)}, true
}

// fourRows has the views under each other, the end elevation last: for long roofs.
func (p paper) fourRows(s sizes, scale, spare float64) (a arrangement, ok bool) {
	area := p.area()
	pw, ph := p.cell(s.plan, scale, roomUnder)
	_, lh := p.cell(s.long, scale, roomBelow)
	ew, eh := p.cell(s.end, scale, roomBelow)
	if area.h() < ph+lh+eh || area.w() < pw || pw < ew {
		return a, false
	}
	y0 := area.y0 + ph + spare/4
	y1 := y0 + lh + spare/4
	y2 := area.y1 - eh - spare/4
	x := area.x0 + (area.w()-pw)/2
	return arrangement{scale: scale,
		plan: p.inner(box{area.x0, area.y0, area.x1, y0}, roomUnder), long: p.inner(box{area.x0, y0, area.x1, y1}, roomBelow),
		axo: p.inner(box{area.x0, y1, area.x1, y2}, roomBelow), end: p.inner(box{x, y2, area.x1, area.y1}, roomBelow), endOnLeft: true}, true
}
