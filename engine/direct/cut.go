package direct

// The sides of a cut.
const (
	sideA   = 0
	sideCut = 1
	sideB   = 2
)

// refinePasses is how often the separator is swept for better vertices.
const refinePasses = 8

// sides turns the levels of the region in the queue into sides of the cut at
// level l. A vertex of that level with nothing beyond stays on the near side.
func (d *dissector) sides(l int) {
	at := int32(l)
	for _, v := range d.queue {
		switch {
		case d.level[v] < at:
			d.level[v] = sideA
		case d.level[v] > at:
			d.level[v] = sideB
		default:
			d.level[v] = sideCut
		}
	}
}

// refine moves vertices of the separator to a side where that makes it
// smaller, or keeps its size and evens out the sides: v goes to one side, its
// neighbours of the other side into the separator.
func (d *dissector) refine() {
	var size [3]int
	var cut []int32
	for _, v := range d.queue {
		size[d.level[v]]++
		if d.level[v] == sideCut {
			cut = append(cut, v)
		}
	}
	for range refinePasses {
		moved := false
		for k := 0; k < len(cut); k++ {
			v := cut[k]
			if d.level[v] == sideCut {
				var ok bool
				cut, ok = d.move(cut, v, &size)
				moved = moved || ok
			}
		}
		kept := cut[:0]
		for _, v := range cut {
			if d.level[v] == sideCut {
				kept = append(kept, v)
			}
		}
		cut = kept
		if !moved {
			return
		}
	}
}

// move moves v out of the separator if that is worth it and appends to cut
// what enters instead.
func (d *dissector) move(cut []int32, v int32, size *[3]int) ([]int32, bool) {
	var beside [3]int
	for _, w := range d.g.neighbours(v) {
		if s := d.level[w]; s != unseen {
			beside[s]++
		}
	}
	to, from := int32(sideA), int32(sideB)
	if beside[sideA] < beside[sideB] || beside[sideA] == beside[sideB] && size[sideA] > size[sideB] {
		to, from = sideB, sideA
	}
	enter := beside[from]
	if enter > 1 || enter == 1 && size[to]+1 >= size[from] {
		return cut, false
	}
	d.level[v] = to
	size[to]++
	size[sideCut] += enter - 1
	size[from] -= enter
	for _, w := range d.g.neighbours(v) {
		if d.level[w] == from {
			d.level[w] = sideCut
			cut = append(cut, w)
		}
	}
	return cut, true
}
