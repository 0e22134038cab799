package direct

import (
	"context"
	"math"
)

// panel is how many groups of rows are worked on together, so that the rows
// they are multiplied with stay in the cache.
const panel = 8

// factor overwrites the lower triangle of A by L with L Lᵀ = A, tile by tile,
// each from all to its left. It returns the row whose pivot is not positive,
// or −1; the rows before it are then complete, and so is the part of that row
// left of the diagonal.
func (l *skyline) factor(ctx context.Context) (broken int, err error) {
	groups := len(l.first)
	for p0 := 0; p0 < groups; p0 += panel {
		if err := ctx.Err(); err != nil {
			return -1, err
		}
		p1 := min(p0+panel, groups)
		left := l.first[p0]
		for _, f := range l.first[p0:p1] {
			left = min(left, f)
		}
		for j := left / tile; j < p1; j++ {
			if j >= p0 {
				if r := l.diagonalTile(j); r >= 0 {
					return tile*j + r, nil
				}
			}
			for i := max(p0, j+1); i < p1; i++ {
				if l.first[i] <= tile*j {
					l.offTile(i, j)
				}
			}
		}
	}
	return -1, nil
}

// subtract takes from tile (i, j) the products of the rows left of it.
func (l *skyline) subtract(i, j int) {
	k0, k1 := max(l.first[i], l.first[j]), tile*j
	if k0 >= k1 {
		return
	}
	fi, fj := l.first[i], l.first[j]
	a0, a1, a2, a3 := l.row(i, 0), l.row(i, 1), l.row(i, 2), l.row(i, 3)
	at := k1 - fi
	for c := 0; c < tile; c += 2 {
		b0, b1 := l.row(j, c)[k0-fj:k1-fj], l.row(j, c+1)[k0-fj:k1-fj]
		s := dots(a0[k0-fi:at], a1[k0-fi:at], a2[k0-fi:at], a3[k0-fi:at], b0, b1)
		a0[at+c] -= s[0]
		a0[at+c+1] -= s[1]
		a1[at+c] -= s[2]
		a1[at+c+1] -= s[3]
		a2[at+c] -= s[4]
		a2[at+c+1] -= s[5]
		a3[at+c] -= s[6]
		a3[at+c+1] -= s[7]
	}
}

// dots returns the eight dot products of four rows with two, all of one length.
func dots(a0, a1, a2, a3, b0, b1 []float64) [8]float64 {
	n := len(b0)
	a0, a1, a2, a3, b1 = a0[:n], a1[:n], a2[:n], a3[:n], b1[:n]
	var s00, s01, s10, s11, s20, s21, s30, s31 float64
	for k, y0 := range b0 {
		y1 := b1[k]
		x := a0[k]
		s00 += x * y0
		s01 += x * y1
		x = a1[k]
		s10 += x * y0
		s11 += x * y1
		x = a2[k]
		s20 += x * y0
		s21 += x * y1
		x = a3[k]
		s30 += x * y0
		s31 += x * y1
	}
	return [8]float64{s00, s01, s10, s11, s20, s21, s30, s31}
}

// diagonalTile factorises tile (j, j) and returns the row within it whose
// pivot is not positive, or −1.
func (l *skyline) diagonalTile(j int) int {
	l.subtract(j, j)
	at := tile*j - l.first[j]
	for r := range tile {
		row := l.row(j, r)[at:]
		for c := range r {
			row[c] = solved(row, l.row(j, c)[at:], c)
		}
		d := row[r]
		for k := range r {
			d -= row[k] * row[k]
		}
		if !(d > 0) {
			return r
		}
		row[r] = math.Sqrt(d)
	}
	return -1
}

// offTile computes tile (i, j) of L for i > j.
func (l *skyline) offTile(i, j int) {
	l.subtract(i, j)
	at, dt := tile*j-l.first[i], tile*j-l.first[j]
	for r := range tile {
		row := l.row(i, r)[at:]
		for c := range tile {
			row[c] = solved(row, l.row(j, c)[dt:], c)
		}
	}
}

// solved returns (x_c − Σ_{k<c} x_k l_k)/l_c.
func solved(x, l []float64, c int) float64 {
	s := x[c]
	for k := range c {
		s -= x[k] * l[k]
	}
	return s / l[c]
}
