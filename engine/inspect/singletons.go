package inspect

import "math"

// singletons counts the rows that stand alone with their column, and ranges
// over the others.
func (l *look) singletons() error {
	f := &l.f
	var alone, discs, diag gather
	for i, g := range l.flags {
		if err := l.every(i); err != nil {
			return err
		}
		d := l.a.At(i, i)
		if d != 0 && g&(rowOff|colOff) == 0 {
			f.Singletons++
			f.SingletonRows = first16(f.SingletonRows, i)
			alone.add(i, d)
			continue
		}
		off := 0.0
		cols, vals := l.a.Row(i)
		for k, j := range cols {
			if int(j) != i {
				off += math.Abs(vals[k])
			}
		}
		discs.span(i, d-off, d+off)
		if d != 0 {
			diag.add(i, math.Abs(d))
		}
	}
	f.SingletonDiag, f.RestGershgorin, f.RestDiag = alone.Range, discs.Range, diag.Range
	return nil
}
