package inspect

// pictureSize is the most cells a side of the picture of the pattern has.
const pictureSize = 64

// picture counts nonzeros by cell.
type picture struct {
	n, cells int
	count    []int
}

func newPicture(n int) *picture {
	c := min(n, pictureSize)
	return &picture{n: n, cells: c, count: make([]int, c*c)}
}

// mark counts the nonzero (i, j).
func (p *picture) mark(i, j int) { p.count[(i*p.cells/p.n)*p.cells+j*p.cells/p.n]++ }

// densities returns the share of each cell's places that hold a nonzero.
func (p *picture) densities() [][]float64 {
	side := make([]float64, p.cells) // places of each cell along one side
	for i := range p.cells {
		side[i] = float64(ceilDiv((i+1)*p.n, p.cells) - ceilDiv(i*p.n, p.cells))
	}
	d := make([][]float64, p.cells)
	for i := range d {
		d[i] = make([]float64, p.cells)
		for j := range d[i] {
			d[i][j] = float64(p.count[i*p.cells+j]) / (side[i] * side[j])
		}
	}
	return d
}

func ceilDiv(a, b int) int { return (a + b - 1) / b }
