package export

import "strings"

// emWidths are the widths of the characters from space to tilde in thousandths of an em, those of the widest of the
// common sans-serif faces (measured on DejaVu Sans): what fits with these fits with the faces that a reader is likely to
// have.
var emWidths = [95]uint16{
	318, 401, 460, 838, 636, 950, 780, 275, 390, 390, 500, 838, 318, 361, 318, 337, // space to /
	636, 636, 636, 636, 636, 636, 636, 636, 636, 636, 337, 337, 838, 838, 838, 531, // 0 to ?
	1000, 684, 686, 698, 770, 632, 575, 775, 752, 295, 295, 656, 557, 863, 748, 787, // @ to O
	603, 787, 695, 635, 611, 732, 684, 989, 685, 611, 685, 390, 337, 390, 838, 500, // P to _
	500, 613, 635, 550, 635, 615, 352, 635, 634, 278, 278, 579, 278, 974, 634, 612, // ` to o
	635, 635, 411, 521, 392, 634, 592, 818, 592, 592, 525, 636, 337, 636, 838, // p to ~
}

const (
	wideFrom     = 0x2E80 // from here on characters fill a square: East Asian scripts
	otherWidth   = 0.84   // em, of letters with accents and of other scripts: as wide as most capitals
	boldIncrease = 1.12   // bold faces are up to an eighth wider
)

// textWidth is the width in mm that a line of text needs at most, at a size (em) in mm.
func textWidth(s string, size float64, bold bool) float64 {
	w := 0.0
	for _, r := range s {
		switch {
		case r >= ' ' && r <= '~':
			w += float64(emWidths[r-' ']) / 1000
		case r >= wideFrom:
			w++
		default:
			w += otherWidth
		}
	}
	if bold {
		w *= boldIncrease
	}
	return w * size
}

// trimmed shortens a text so that it fits in a width, with an ellipsis.
func trimmed(s string, width, size float64, bold bool) string {
	if textWidth(s, size, bold) <= width {
		return s
	}
	runes := []rune(s)
	for n := len(runes) - 1; n > 0; n-- {
		if t := strings.TrimRight(string(runes[:n]), " ") + "…"; textWidth(t, size, bold) <= width {
			return t
		}
	}
	return ""
}

// wrapped breaks a text into lines that fit in a width. A word that is too long for a line is broken.
func wrapped(s string, width, size float64, bold bool) (lines []string) {
	line := ""
	for _, word := range strings.Fields(s) {
		if next := strings.TrimLeft(line+" "+word, " "); textWidth(next, size, bold) <= width {
			line = next
			continue
		}
		if line != "" {
			lines = append(lines, line)
		}
		for textWidth(word, size, bold) > width && len([]rune(word)) > 1 {
			runes, n := []rune(word), 1
			for n < len(runes) && textWidth(string(runes[:n+1]), size, bold) <= width {
				n++
			}
			lines = append(lines, string(runes[:n]))
			word = string(runes[n:])
		}
		line = word
	}
	if line != "" {
		lines = append(lines, line)
	}
	return lines
}
