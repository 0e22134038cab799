package load

import "math"

// value returns the next real number, or whole number where the format says
// so. A field without a decimal point, or without an exponent under a scale
// factor, has a value by Fortran's rules that hardly any program means:
// it is refused.
func (c *cards) value() (decimal, error) {
	text, f, err := c.next()
	if err != nil {
		return decimal{}, err
	}
	x, n := scanDecimal(text, true)
	switch {
	case n == 0 || n < len(text):
		return x, badValue(c.l, text)
	case math.IsInf(x.val, 0):
		return x, c.l.fail("%s is too large for a double", quoted(text))
	case f.integer && (x.point || x.exp):
		return x, c.l.fail("%s %d of %d is %s, not a whole number", c.what, c.k, c.n, quoted(text))
	case x.mant == 0:
	case !f.integer && !x.point && f.decimals > 0:
		return x, c.l.fail("%s has no decimal point; its format %s would put one before its last %d digits",
			quoted(text), c.f.text, f.decimals)
	case !f.integer && !x.exp && f.scale != 0:
		return x, c.l.fail("%s has no exponent; the scale factor in its format %s would change its value",
			quoted(text), c.f.text)
	}
	return x, nil
}
