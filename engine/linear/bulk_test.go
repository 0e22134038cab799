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

// Touched memory keeps what it holds, whatever part is touched and whoever
// writes to it meanwhile.
func TestTouch(t *testing.T) {
	Touch[int32](nil)
	for _, n := range []int{1, 1000, 1 << 20} {
		s := Bulk[float64](n)
		half := n / 2
		for k := range half {
			s[k] = float64(k)
		}
		done := make(chan bool)
		go func() {
			Touch(s)
			Touch(s[n/3 : n/3+n/2])
			close(done)
		}()
		for k := half; k < n; k++ {
			s[k] = float64(k)
		}
		<-done
		for k := range s {
			if s[k] != float64(k) {
				t.Fatalf("%d of %d is %v", k, n, s[k])
			}
		}
	}
}
