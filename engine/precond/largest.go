package precond

import "math"

// fewToDrop entries are dropped one after the other quicker than by looking for
// the size that cuts them off.
const fewToDrop = 3

// largest moves the p entries of largest size to the front, in their present
// order (the first of equals), and returns how many stay. sizes is work space,
// returned for the next call.
func largest(cols []int32, vals []float64, p int, sizes []float64) ([]float64, int) {
	if len(cols) <= p {
		return sizes, len(cols)
	}
	if p == 0 {
		return sizes, 0
	}
	if len(cols) <= p+fewToDrop {
		for n := len(cols); n > p; n-- {
			dropLeast(cols[:n], vals[:n])
		}
		return sizes, p
	}
	sizes = sizes[:0]
	for _, v := range vals {
		sizes = append(sizes, math.Abs(v))
	}
	cut := nth(sizes, p-1)
	equals := p
	for _, v := range vals {
		if math.Abs(v) > cut {
			equals--
		}
	}
	n := 0
	for k, v := range vals {
		size := math.Abs(v)
		if size == cut && equals > 0 {
			equals--
		} else if !(size > cut) {
			continue
		}
		cols[n], vals[n] = cols[k], v
		n++
	}
	return sizes, n
}

// dropLeast takes out the entry of least size, the last of equals; the place
// at the end is left over.
func dropLeast(cols []int32, vals []float64) {
	at, least := 0, math.Inf(1)
	for k, v := range vals {
		if size := math.Abs(v); size <= least {
			at, least = k, size
		}
	}
	copy(cols[at:], cols[at+1:])
	copy(vals[at:], vals[at+1:])
}

// nth returns the k-th largest of v, counted from 0, and reorders v (Hoare,
// Comm. ACM 4 (1961) 321–322).
func nth(v []float64, k int) float64 {
	lo, hi := 0, len(v)-1
	for lo < hi {
		x, i, j := v[(lo+hi)/2], lo, hi
		for i <= j {
			for v[i] > x {
				i++
			}
			for v[j] < x {
				j--
			}
			if i <= j {
				v[i], v[j] = v[j], v[i]
				i++
				j--
			}
		}
		switch {
		case k <= j:
			hi = j
		case k >= i:
			lo = i
		default:
			return v[k]
		}
	}
	return v[k]
}
