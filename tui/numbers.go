package tui

import (
	"math"
	"strconv"
)

// none stands for a number that is not known.
const none = "-"

// sci writes v with two digits, 1.2e-03: seven cells for two-digit exponents,
// 1e-102 beyond; "-" for NaN and infinities, 0 for both zeros.
func sci(v float64) string {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return none
	}
	if v == 0 {
		return "0"
	}
	s := strconv.FormatFloat(v, 'e', 1, 64)
	if len(s) > 7 && s[0] != '-' {
		s = strconv.FormatFloat(v, 'e', 0, 64)
	}
	return s
}

// power writes a decade or a tolerance: 1e-08, or 3.2e-07 where one digit
// does not say it.
func power(v float64) string {
	short := strconv.FormatFloat(v, 'e', 0, 64)
	if back, err := strconv.ParseFloat(short, 64); err == nil && back == v {
		return short
	}
	return sci(v)
}

// count writes n with thin groups: 1 390 112.
func count(n int) string {
	s := strconv.Itoa(n)
	start := 0
	if n < 0 {
		start = 1
	}
	for i := len(s) - 3; i > start; i -= 3 {
		s = s[:i] + " " + s[i:]
	}
	return s
}

// compact writes n in at most five cells: 11070, 139k, 1.39M.
func compact(n int) string {
	v, unit := float64(n), ""
	switch {
	case n >= 1e9:
		v, unit = v/1e9, "G"
	case n >= 1e6:
		v, unit = v/1e6, "M"
	case n >= 1e5:
		v, unit = v/1e3, "k"
	default:
		return strconv.Itoa(n)
	}
	return strconv.FormatFloat(v, 'g', 3, 64) + unit
}

// iterations writes a count of them in at most six cells.
func iterations(n int) string {
	if n < 1e6 {
		return strconv.Itoa(n)
	}
	return compact(n)
}

// size writes a number of bytes: 12.3 MiB.
func size(b int64) string {
	if b <= 0 {
		return none
	}
	v := float64(b)
	for _, unit := range []string{"B", "KiB", "MiB"} {
		if v < 1000 {
			return strconv.FormatFloat(v, 'g', 3, 64) + " " + unit
		}
		v /= 1024
	}
	return strconv.FormatFloat(v, 'f', 1, 64) + " GiB"
}

// value writes a number of evidence: an integer as such, else two digits.
func value(v float64) string {
	if v == math.Trunc(v) && math.Abs(v) < 1e6 {
		return strconv.FormatInt(int64(v), 10)
	}
	return sci(v)
}

// short writes a number of an axis: 2.5, 20, 5000, 2e+05.
func short(v float64) string {
	if v != 0 && (math.Abs(v) >= 1e5 || math.Abs(v) < 1e-3) {
		return power(v)
	}
	return strconv.FormatFloat(v, 'g', 4, 64)
}
