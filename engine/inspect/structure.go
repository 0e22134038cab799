package inspect

// defect is a proof that A is singular by its pattern: count rows too many,
// and size of them that have nonzeros in size−1 columns only, rows naming some.
type defect struct {
	count, size int
	rows        []int
}

// matching assigns to rows different columns that hold nonzeros of theirs.
type matching struct {
	l     *look
	rowOf []int32 // row assigned to each column, −1 for none; length n
	cheap []int   // per row, next entry to try for a free column
	next  []int   // per row, next entry of the search
	seen  []int32 // per column, the last root that visited it, plus one
	work  int     // entry visits left
}

// structure finds the structural rank by augmenting paths with a cheap look
// ahead (Duff, ACM TOMS 7, 1981). It gives up, without a result, when the work
// exceeds 40 visits an entry: then nothing is claimed.
func (l *look) structure() (defect, error) {
	n := l.f.N
	if l.f.DiagMissing+l.f.DiagZero == 0 || l.f.EmptyRowCount+l.f.EmptyColCount > 0 {
		return defect{}, nil
	}
	m := matching{l: l, rowOf: make([]int32, n), cheap: make([]int, n), next: make([]int, n), seen: make([]int32, n)}
	m.work = 40*len(l.a.Val) + 1000
	for j := range m.rowOf {
		m.rowOf[j] = -1
		m.cheap[j] = l.a.Ptr[j]
	}
	var d defect
	for i := range n {
		if err := l.every(i); err != nil {
			return d, err
		}
		if !m.augment(i) {
			if m.work <= 0 {
				return defect{}, nil
			}
			if d.count++; d.count == 1 {
				d.size, d.rows = m.reached(i)
			}
		}
	}
	return d, nil
}

// augment finds a path from row root to a free column, depth first, and
// switches the assignment along it.
func (m *matching) augment(root int) bool {
	a := m.l.a
	rows, cols := []int32{int32(root)}, []int32{}
	m.next[root] = a.Ptr[root]
	for len(rows) > 0 {
		i := rows[len(rows)-1]
		if j := m.free(int(i)); j >= 0 {
			m.rowOf[j] = i
			for k := len(cols) - 1; k >= 0; k-- {
				m.rowOf[cols[k]] = rows[k]
			}
			return true
		}
		j := m.advance(int(i), root)
		if m.work <= 0 {
			return false
		}
		if j < 0 {
			rows = rows[:len(rows)-1]
			if len(cols) > 0 {
				cols = cols[:len(cols)-1]
			}
			continue
		}
		cols = append(cols, j)
		r := m.rowOf[j]
		m.next[r] = a.Ptr[r]
		rows = append(rows, r)
	}
	return false
}

// free returns an unassigned column of row i, or −1; over the whole search
// each entry is looked at once.
func (m *matching) free(i int) int32 {
	a := m.l.a
	for ; m.cheap[i] < a.Ptr[i+1]; m.cheap[i]++ {
		if k := m.cheap[i]; a.Val[k] != 0 && m.rowOf[a.Col[k]] < 0 {
			m.work--
			return a.Col[k]
		}
	}
	return -1
}

// advance returns the next column of row i not yet visited from root, or −1.
func (m *matching) advance(i, root int) int32 {
	a := m.l.a
	for m.next[i] < a.Ptr[i+1] {
		k := m.next[i]
		m.next[i]++
		m.work--
		if j := a.Col[k]; a.Val[k] != 0 && m.seen[j] != int32(root)+1 {
			m.seen[j] = int32(root) + 1
			return j
		}
	}
	return -1
}

// reached lists the rows of a failed search from root: they have nonzeros in
// the visited columns only, one fewer than they are.
func (m *matching) reached(root int) (size int, rows []int) {
	rows = []int{root}
	size = 1
	for j, s := range m.seen {
		if s == int32(root)+1 {
			size++
			rows = first16(rows, int(m.rowOf[j]))
		}
	}
	return size, rows
}
