package report

import (
	"strings"
	"testing"

	"dwindle/engine/inspect"
)

// Of many free directions the first are told one by one, and how many there
// are; where the search ended early that is said, with the count of pivots.
func TestManyFreeDirections(t *testing.T) {
	facts := func(found, nullity, pivots int, more bool) *inspect.Facts {
		return &inspect.Facts{Study: &inspect.Study{Null: make([]inspect.NullDirection, found), Nullity: nullity, ZeroPivots: pivots, More: more}}
	}
	for _, c := range []struct {
		facts *inspect.Facts
		told  int
		last  string
	}{
		{facts(6, 6, 6, false), 6, ""},
		{facts(12, 12, 12, false), 8, "12 in all, 8 of them told"},
		{facts(24, 24, 30, true), 8, "24 found, and more are there: LDL' leaves 30 pivots zero to rounding"},
		{facts(2, 2, 0, true), 2, "2 found, and more may be there"},
	} {
		told, last := 0, ""
		for _, i := range studyItems(c.facts) {
			switch {
			case i.label == "free direction":
				told++
			case i.label == "free directions":
				last = i.text
			}
		}
		if told != c.told || last != c.last {
			t.Errorf("%d told, %q; want %d, %q", told, last, c.told, c.last)
		}
	}
}

// A direction that is one number is told by the rows where it is, not by some
// of them.
func TestLevelOfAFreeDirection(t *testing.T) {
	v := inspect.NullDirection{Quotient: 1e-16, Support: 4, Rows: []int{3, 2, 4, 5}, Level: &inspect.Level{Count: 4, First: 2, Last: 5}}
	if s := nullText(v, &inspect.Facts{}); !strings.HasSuffix(s, "; constant on rows 3 to 6, zero on all others") {
		t.Error(s)
	}
}
