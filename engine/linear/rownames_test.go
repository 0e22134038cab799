package linear

import "testing"

func TestRowNames(t *testing.T) {
	var none RowNames
	labels := RowNames{Labels: []string{"1:ux", "", "1:rz"}, Fields: []string{"u", "r"}, FieldOf: []int32{0, 0, 1}}
	fields := RowNames{Fields: []string{"u", "r"}, FieldOf: []int32{0, 0, 1}}
	for _, c := range []struct{ got, want string }{
		{none.Row(2), "row 3"},
		{none.List([]int{2, 0, 1}, 2), "rows 3, 1, ..."},
		{none.List([]int{2}, 2), "row 3"},
		{none.Both(0, 1, 2), "rows 1, 2 and 3"},
		{none.Both(4), "row 5"},
		{labels.Row(2), "row 3 = 1:rz"},
		{labels.Row(1), "row 2 (u)"},
		{labels.Row(7), "row 8"},
		{labels.List([]int{0, 1, 2}, 6), "rows 1 = 1:ux, 2 (u), 3 = 1:rz"},
		{fields.Both(0, 2), "rows 1 (u) and 3 (r)"},
	} {
		if c.got != c.want {
			t.Errorf("%q, want %q", c.got, c.want)
		}
	}
}
