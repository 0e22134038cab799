package inspect

// mostRows is how many rows a fact names at most.
const mostRows = 16

// top keeps the rows with the largest values, the largest first; among equals
// the earlier row. The zero value is empty.
type top struct {
	rows   []int
	values []float64
}

// add offers a row.
func (t *top) add(row int, value float64) {
	k := len(t.rows)
	if k == mostRows && !(value > t.values[k-1]) {
		return
	}
	if k < mostRows {
		t.rows, t.values = append(t.rows, row), append(t.values, value)
	} else {
		k--
	}
	for ; k > 0 && value > t.values[k-1]; k-- {
		t.rows[k], t.values[k] = t.rows[k-1], t.values[k-1]
	}
	t.rows[k], t.values[k] = row, value
}

// list returns a copy of the rows.
func (t *top) list() []int { return append([]int(nil), t.rows...) }
