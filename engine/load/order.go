package load

import "math"

// maxOrder is the largest order whose columns an int32 can number.
const maxOrder = math.MaxInt32

// emptyOrder is the largest order that is read whatever the matrix holds.
const emptyOrder = 1 << 20

// checkOrder refuses a shape that is not that of a system, and one whose row
// pointers would take far more memory than its entries: most of its rows
// would be empty, and it could not be solved.
func checkOrder(l *lines, rows, cols, stored int) error {
	switch {
	case rows != cols:
		return l.fail("A must be square; this one has %d rows and %d columns", rows, cols)
	case rows == 0:
		return l.fail("the matrix is empty")
	case rows > emptyOrder && rows/4 > stored:
		return l.fail("%d rows but only %d entries: most rows would be empty", rows, stored)
	}
	return nil
}
