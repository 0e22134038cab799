package report

import (
	"fmt"
	"math"
	"strconv"
)

// finite says whether x is a number that can be printed.
func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// sci prints a residual or a condition in 7 characters: 9.1e-09; "-" where it
// is unknown.
func sci(x float64) string {
	if !finite(x) {
		return "-"
	}
	return fmt.Sprintf("%.1e", x)
}

// memory prints an amount of memory.
func memory(n int64) string {
	x, unit := float64(n), 0
	units := []string{"B", "KiB", "MiB", "GiB", "TiB"}
	for x >= 1000 && unit < len(units)-1 {
		x, unit = x/1024, unit+1
	}
	if unit == 0 {
		return fmt.Sprintf("%d B", n)
	}
	return fmt.Sprintf("%.3g %s", x, units[unit])
}

// times prints a speed-up.
func times(x float64) string {
	if x >= 10 {
		return fmt.Sprintf("%.0f", x)
	}
	return fmt.Sprintf("%.1f", x)
}

// plural prints a count with its noun.
func plural(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return strconv.Itoa(n) + " " + many
}

// exact prints a number in the fewest characters that read back to it.
func exact(x float64) string { return strconv.FormatFloat(x, 'g', -1, 64) }
