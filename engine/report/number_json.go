package report

import (
	"math"
	"strconv"
)

// number is a float that JSON can hold: unknown and infinite are null, others
// are written in the fewest digits that read back to them.
type number float64

// MarshalJSON writes the number or null.
func (x number) MarshalJSON() ([]byte, error) { return []byte(x.text()), nil }

func (x number) text() string {
	v := float64(x)
	switch {
	case !finite(v):
		return "null"
	case v == 0:
		return "0" // never -0
	}
	return strconv.FormatFloat(v, 'g', -1, 64)
}

// unknown is a number that is written as null.
var unknown = number(math.NaN())
