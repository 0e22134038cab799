package linear

// NullSpace is the part of a null space that is seen without factorising:
// vectors of zeros and ones with disjoint supports, which are therefore
// orthogonal. Vector k is 1 on the Size[k] rows i with Of[i] = k.
type NullSpace struct {
	Of   []int32    // length n; -1 where no vector reaches
	Size []int32    // rows of each vector
	Sure []Zeroness // how surely each is a null vector
}

// LeftNull returns the visible left null vectors of a, those y with yᵀA = 0:
// one for each empty row, and one for each component whose columns all sum to
// zero. at is the transpose of a (a itself if it is symmetric), c its
// components, delta the relative change of an entry its digits leave open.
func LeftNull(a, at *CSR, c *Components, delta float64) *NullSpace {
	sums := c.RowSums(at, delta)
	label := make([]int32, c.Count)
	for k := range label {
		label[k] = -1
	}
	s := &NullSpace{Of: make([]int32, a.NRows)}
	for i, k := range c.Of {
		switch {
		case a.emptyRow(i):
			s.Of[i] = s.open(ExactlyZero)
		case sums[k] == NotZero:
			s.Of[i] = -1
			continue
		case label[k] < 0:
			label[k] = s.open(sums[k])
			s.Of[i] = label[k]
		default:
			s.Of[i] = label[k]
		}
		s.Size[s.Of[i]]++
	}
	return s
}

func (s *NullSpace) open(sure Zeroness) int32 {
	s.Size = append(s.Size, 0)
	s.Sure = append(s.Sure, sure)
	return int32(len(s.Size) - 1)
}

func (a *CSR) emptyRow(i int) bool {
	_, vals := a.Row(i)
	for _, v := range vals {
		if v != 0 {
			return false
		}
	}
	return true
}

// Means writes to dst, for each vector, the mean of b over its rows: the
// coefficient of that vector in b. The sums are compensated.
func (s *NullSpace) Means(dst, b []float64) {
	clear(dst)
	lost := make([]float64, len(dst))
	for i, k := range s.Of {
		if k >= 0 {
			var err float64
			dst[k], err = TwoSum(dst[k], b[i])
			lost[k] += err
		}
	}
	for k := range dst {
		dst[k] = (dst[k] + lost[k]) / float64(s.Size[k])
	}
}

// Project computes dst = b minus its part in the null space; dst may be b.
func (s *NullSpace) Project(dst, b []float64) {
	mean := make([]float64, len(s.Size))
	copy(dst, b)
	for range 2 { // the second pass takes what rounding left in the first
		s.Means(mean, dst)
		for i, k := range s.Of {
			if k >= 0 {
				dst[i] -= mean[k]
			}
		}
	}
}
