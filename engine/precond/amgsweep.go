package precond

// tile is how many rows are swept before the residuals behind them follow,
// while their entries are still in the cache.
const tile = 256

// startRows sweeps a block down from zero and follows with the residuals. As
// (D + E + L) u = b, that of a row inside the block is
//
//	r_i = e_i u_i − Σ_{j>i} a_ij u_j
//
// and is known once its last column has been swept. Rows with entries outside
// the block wait for borderRows.
func (s *relaxation) startRows(part int) {
	lo, hi := s.block(part)
	ptr, col := s.a.Ptr, s.a.Col
	behind := lo
	for start := lo; start < hi; start += tile {
		end := min(start+tile, hi)
		s.start(lo, start, end)
		for ; behind < end; behind++ {
			from, to := ptr[behind], ptr[behind+1]
			if int(col[from]) < lo || int(col[to-1]) >= hi {
				continue
			}
			if int(col[to-1]) >= end {
				break
			}
			s.follow(behind)
		}
	}
}

// start sweeps the rows from to to of the block that begins at lo. The entry
// next to the diagonal comes last, so that a row waits as little as possible
// for the one before it.
func (s *relaxation) start(lo, from, to int) {
	ptr, b, u, inverse := s.a.Ptr, s.b, s.dst, s.inverse
	for i := from; i < to; i++ {
		cols, vals := s.a.Col[ptr[i]:ptr[i+1]], s.a.Val[ptr[i]:ptr[i+1]]
		vals = vals[:len(cols)]
		t, v := b[i], inverse[i]
		near, coupling := 0.0, 0.0
		for k, c := range cols {
			if int(c) >= i {
				break
			}
			if int(c) >= lo {
				t -= coupling * near
				near, coupling = u[uint32(c)], vals[k]
			}
		}
		u[i] = t*v - (coupling*v)*near
	}
}

// follow computes the residual of row i after the first sweep.
func (s *relaxation) follow(i int) {
	u := s.dst
	from, to := s.a.Ptr[i], s.a.Ptr[i+1]
	cols, vals := s.a.Col[from:to], s.a.Val[from:to]
	vals = vals[:len(cols)]
	t := 0.0
	if s.excess != nil {
		t = s.excess[i] * u[i]
	}
	for k := len(cols) - 1; k >= 0 && int(cols[k]) > i; k-- {
		t -= vals[k] * u[uint32(cols[k])]
	}
	s.r[i] = t
}

// borderRows computes the residuals that need other blocks.
func (s *relaxation) borderRows(part int) {
	u := s.dst
	for _, i := range s.border[part] {
		t := s.b[i]
		cols, vals := s.a.Row(int(i))
		for k, c := range cols {
			t -= vals[k] * u[uint32(c)]
		}
		s.r[i] = t
	}
}

func (s *relaxation) downRows(part int) {
	lo, hi := s.block(part)
	ptr, b, dst, x, inverse := s.a.Ptr, s.b, s.dst, s.x, s.inverse
	for i := lo; i < hi; i++ {
		cols, vals := s.a.Col[ptr[i]:ptr[i+1]], s.a.Val[ptr[i]:ptr[i+1]]
		vals = vals[:len(cols)]
		t := b[i]
		for k, c := range cols {
			v := x
			if int(c) >= lo && int(c) < i {
				v = dst
			}
			t -= vals[k] * v[uint32(c)]
		}
		dst[i] = x[i] + t*inverse[i]
	}
}

// upRows goes through each row from its end: what lies outside the block, the
// entries already swept, nearest last, and those still to come.
func (s *relaxation) upRows(part int) {
	lo, hi := s.block(part)
	ptr, b, dst, x, inverse := s.a.Ptr, s.b, s.dst, s.x, s.inverse
	for i := hi - 1; i >= lo; i-- {
		cols, vals := s.a.Col[ptr[i]:ptr[i+1]], s.a.Val[ptr[i]:ptr[i+1]]
		vals = vals[:len(cols)]
		t, v := b[i], inverse[i]
		k := len(cols) - 1
		for ; k >= 0 && int(cols[k]) >= hi; k-- {
			t -= vals[k] * x[uint32(cols[k])]
		}
		near, coupling := 0.0, 0.0
		for ; k >= 0 && int(cols[k]) > i; k-- {
			t -= coupling * near
			near, coupling = dst[uint32(cols[k])], vals[k]
		}
		for ; k >= 0; k-- {
			t -= vals[k] * x[uint32(cols[k])]
		}
		dst[i] = (x[i] + t*v) - (coupling*v)*near
	}
}

func (s *relaxation) residualRows(part int) {
	lo, hi := s.block(part)
	ptr, b, dst, x := s.a.Ptr, s.b, s.dst, s.x
	for i := lo; i < hi; i++ {
		cols, vals := s.a.Col[ptr[i]:ptr[i+1]], s.a.Val[ptr[i]:ptr[i+1]]
		vals = vals[:len(cols)]
		t := b[i]
		for k, c := range cols {
			t -= vals[k] * x[uint32(c)]
		}
		dst[i] = t
	}
}
