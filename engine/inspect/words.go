package inspect

import "fmt"

// doubt makes a proved statement a measured one and says which printed digits
// could overturn it.
func (l *look) doubt(f Fact, could string) Fact {
	f.Certainty = Measured
	if l.delta > 0 {
		f.Why += fmt.Sprintf("; the file has %d digits and %s: write 17 digits and run again", l.s.Digits, could)
	}
	return f
}

// count prints a number with its noun.
func count(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}
