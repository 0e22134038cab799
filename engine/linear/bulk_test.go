package linear

import "testing"

// Rooms of all sizes hold zeros and take what is written, to the last place.
func TestBulk(t *testing.T) {
	for _, n := range []int{0, 1, 1000, 1 << 18, 1<<20 + 3} {
		s := Bulk[float64](n)
		if len(s) != n {
			t.Fatalf("%d places; want %d", len(s), n)
		}
		for k := range s {
			if s[k] != 0 {
				t.Fatalf("%d of %d is %v", k, n, s[k])
			}
			s[k] = float64(k)
		}
		for k := range s {
			if s[k] != float64(k) {
				t.Fatalf("%d of %d is %v", k, n, s[k])
			}
		}
	}
}
