package export

import (
	"encoding/csv"
	"io"
	"math"
	"strconv"
)

// Decimals of the numbers in files: a tenth of a millimetre, a tenth of a newton, a tenth of a square millimetre, a
// micrometre of diameter, a gram. All are finer than anything that is built or measured.
const (
	lengthDecimals   = 4 // m
	forceDecimals    = 4 // kN, kNm
	areaDecimals     = 4 // cm2
	diameterDecimals = 3 // mm
	massDecimals     = 3 // kg
	shareDecimals    = 6
	degreeDecimals   = 8 // of longitude and latitude: a millimetre on the ground
)

// table is a CSV file on its way: RFC 4180, fields quoted where needed, lines that end in CR LF.
type table struct{ w *csv.Writer }

func newTable(w io.Writer, header ...string) *table {
	t := &table{csv.NewWriter(w)}
	t.w.UseCRLF = true
	t.row(header...)
	return t
}

// row writes one line; an error is kept and comes from close.
func (t *table) row(fields ...string) { _ = t.w.Write(fields) }

func (t *table) close() error {
	t.w.Flush()
	return t.w.Error()
}

// decimal writes a number with a fixed count of decimals, and never a negative zero.
func decimal(v float64, decimals int) string {
	s := strconv.FormatFloat(v, 'f', decimals, 64)
	if len(s) > 0 && s[0] == '-' && isZero(s[1:]) {
		return s[1:]
	}
	return s
}

// short writes a number with at most so many decimals and no zeros at the end.
func short(v float64, decimals int) string {
	p := math.Pow(10, float64(decimals))
	if r := math.Round(v*p) / p; r != 0 && finite(r) {
		return strconv.FormatFloat(r, 'f', -1, 64)
	} else if finite(r) {
		return "0"
	}
	return strconv.FormatFloat(v, 'f', -1, 64)
}

func isZero(digits string) bool {
	for _, c := range digits {
		if c != '0' && c != '.' {
			return false
		}
	}
	return true
}

func yesNo(b bool) string {
	if b {
		return "yes"
	}
	return "no"
}
