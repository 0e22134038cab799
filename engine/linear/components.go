package linear

// Components are the connected parts of the pattern of A+Aᵀ. Entries equal to
// zero connect nothing.
type Components struct {
	Count int
	Of    []int32 // component of each row, length n, numbered by its first row
	Size  []int32 // rows of each component, length Count
}

// FindComponents finds the connected components of a square matrix by
// union–find (Tarjan 1975) in one pass over the entries.
func FindComponents(a *CSR) *Components {
	n := a.NRows
	root := make([]int32, n)
	for i := range root {
		root[i] = int32(i)
	}
	for i := 0; i < n; i++ {
		cols, vals := a.Row(i)
		for k, j := range cols {
			if vals[k] != 0 {
				join(root, int32(i), j)
			}
		}
	}
	return number(root)
}

// join unites two sets under the smaller root, so that a root is the first row
// of its set.
func join(root []int32, i, j int32) {
	i, j = find(root, i), find(root, j)
	if i < j {
		root[j] = i
	} else {
		root[i] = j
	}
}

// find returns the root of i, halving the path on the way.
func find(root []int32, i int32) int32 {
	for root[i] != i {
		root[i] = root[root[i]]
		i = root[i]
	}
	return i
}

// number turns roots into component numbers, in place: a root comes before
// every other row of its set.
func number(root []int32) *Components {
	c := &Components{Of: root}
	for i, r := range root {
		if int(r) == i {
			root[i] = int32(c.Count)
			c.Count++
			c.Size = append(c.Size, 0)
		} else {
			root[i] = root[r]
		}
		c.Size[root[i]]++
	}
	return c
}
