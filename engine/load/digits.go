package load

// digitCount finds with how many significant decimal digits the values of a
// matrix are written.
//
// The digits of a value run from its first nonzero digit to the last one
// written, trailing zeros included; only in a number without a decimal point
// trailing zeros do not count, since they may just hold the place. The digits
// of a file are those of its longest value, 17 at most: 17 digits determine a
// double.
//
// A file whose values are all exact counts as 17 too. A value is taken as
// exact when it is
//   - zero, or
//   - an integer that is written down to its units (256, -1.0, 4.000e+00), or
//   - a binary fraction of at most six significant digits (0.25, -1.5), or
//   - one digit times a power of ten (1e+06).
//
// A rounded value meets this by chance in at most one of five cases, so that
// a whole matrix of rounded values does not. 2.83e+06 is an integer but not
// written down to its units: it may be any number of three digits.
type digitCount struct {
	most  int  // digits of the longest value
	loose bool // a value that may be rounded was seen
}

// add takes note of one value.
func (c *digitCount) add(x decimal) {
	if x.digits > c.most {
		c.most = max(c.most, x.digits-x.openZeros())
	}
	c.loose = c.loose || !x.exact()
}

// join takes note of the values that another count saw.
func (c *digitCount) join(o digitCount) {
	c.most, c.loose = max(c.most, o.most), c.loose || o.loose
}

// result returns the digits of the file, 1 to 17.
func (c *digitCount) result() int {
	if !c.loose {
		return 17
	}
	return min(max(c.most, 1), 17)
}

// openZeros counts the trailing zeros of a number without a point.
func (x decimal) openZeros() (n int) {
	if x.point || x.digits > 19 {
		return 0
	}
	for m := x.mant; m != 0 && m%10 == 0; m /= 10 {
		n++
	}
	return n
}

// exact tells whether a value can be taken as exact; see digitCount.
func (x decimal) exact() bool {
	if x.mant == 0 {
		return true
	}
	if x.digits > 19 {
		return false
	}
	m, last := x.mant, x.last
	for m%10 == 0 {
		m, last = m/10, last+1
	}
	switch {
	case x.last > 0:
		return m < 10
	case last >= 0:
		return true
	}
	for ; last < 0 && m%5 == 0; last++ {
		m /= 5
	}
	return last == 0 && x.short(6)
}

// short tells whether the digits before the trailing zeros are at most most.
func (x decimal) short(most int) bool {
	n, m := x.digits, x.mant
	for m%10 == 0 {
		m, n = m/10, n-1
	}
	return n <= most
}
