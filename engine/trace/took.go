package trace

import (
	"fmt"
	"math"
	"strconv"
)

// Took prints a time in seconds with its unit, in at most seven characters up
// to years and always as many digits, so that a clock that runs does not
// jump: 84 us, 3.39 ms, 12.0 s, 27.8 h; "-" where it is not known.
func Took(seconds float64) string {
	switch s := seconds; {
	case math.IsNaN(s) || math.IsInf(s, 0) || s < 0:
		return "-"
	case s == 0:
		return "0 s"
	case s < 0.9995e-6:
		return fmt.Sprintf("%.0f ns", s*1e9)
	case s < 9.95e-6:
		return fmt.Sprintf("%.1f us", s*1e6)
	case s < 0.9995e-3:
		return fmt.Sprintf("%.0f us", s*1e6)
	case s < 0.9995:
		return three(s*1e3) + " ms"
	case s < 99999.5:
		return three(s) + " s"
	default:
		return three(s/3600) + " h"
	}
}

// three prints x, at least 1 when rounded, with three digits or all before
// the point.
func three(x float64) string {
	decimals := 0
	switch {
	case x < 9.995:
		decimals = 2
	case x < 99.95:
		decimals = 1
	}
	return strconv.FormatFloat(x, 'f', decimals, 64)
}
