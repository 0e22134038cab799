package load

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strconv"
	"testing"
)

// wantNearest compares nearest with the library; answered tells whether 128
// bits decided.
func wantNearest(t *testing.T, w uint64, q int) (answered bool) {
	t.Helper()
	got, ok := nearest(w, q)
	want, err := strconv.ParseFloat(fmt.Sprintf("%de%d", w, q), 64)
	if ok && (err != nil || math.Float64bits(got) != math.Float64bits(want)) {
		t.Errorf("%de%d: %v; want %v (%v)", w, q, got, want, err)
	}
	return ok
}

// Every power of ten is tried with mantissas short, long and near the middle
// between two doubles; nearly all of those with a normal result are decided.
func TestNearest(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	tried, undecided := 0, 0
	for q := leastTen - 2; q <= mostTen+2; q++ {
		for range 150 {
			w := max(r.Uint64()>>r.IntN(64), 1)
			size := math.Log10(float64(w)) + float64(q)
			ok := wantNearest(t, w, q)
			if size > -307 && size < 308 {
				tried++
				if !ok {
					undecided++
				}
			} else if ok && (size < -308.3 || size > 308.3) {
				t.Errorf("%de%d was answered", w, q)
			}
		}
	}
	if undecided*1000 > tried {
		t.Errorf("%d of %d numbers are left to the library", undecided, tried)
	}
}

// Halves between neighbouring doubles, exact in decimal, go to the even one;
// their neighbours do not.
func TestNearestTies(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	five := uint64(1)
	for k := 0; k <= 4; k++ { // (2m+1)/2^k = (2m+1)·5^k·10^-k
		for range 2000 {
			odd := (1<<53 | r.Uint64N(1<<53)) | 1
			if odd > math.MaxUint64/five {
				continue
			}
			for d := range uint64(3) {
				wantNearest(t, odd*five+d-1, -k)
			}
		}
		five *= 5
	}
	for q, p := 0, uint64(1); q <= 23; q, p = q+1, p*5 { // (2m+1)·2^j = w·10^q with w = (2m+1)/5^q
		for range 200 {
			w := (1<<53+r.Uint64N(1<<53))/p + 1
			for d := range uint64(3) {
				wantNearest(t, w+d, q)
			}
		}
	}
}

// Just below a power of two, rounding up lengthens the number.
func TestNearestCarry(t *testing.T) {
	for k := 54; k <= 64; k++ {
		if !wantNearest(t, math.MaxUint64>>(64-k), 0) {
			t.Errorf("2^%d-1 is left to the library", k)
		}
	}
}

func TestLog2Five(t *testing.T) {
	for q := leastTen; q <= mostTen; q++ {
		if want := int(math.Floor(float64(q) * math.Log2(5))); log2Five(q) != want {
			t.Errorf("5^%d: %d; want %d", q, log2Five(q), want)
		}
	}
}

func TestEightDigits(t *testing.T) {
	for v := uint64(0); v < 100_000_000; v += 9973 {
		s := fmt.Sprintf("%08d", v)
		if got, ok := eightDigits([]byte(s)); !ok || got != v {
			t.Fatalf("%s: %d, %v", s, got, ok)
		}
	}
	for at := range 8 {
		for c := range 256 {
			s := []byte("12345678")
			s[at] = byte(c)
			if _, ok := eightDigits(s); ok != (c >= '0' && c <= '9') {
				t.Errorf("%q: read %v", s, ok)
			}
		}
	}
	if _, ok := eightDigits([]byte("1234567")); ok {
		t.Error("seven digits were read as eight")
	}
}

func BenchmarkFives(b *testing.B) {
	for b.Loop() {
		makeFives()
	}
}

func BenchmarkDecimal17(b *testing.B) {
	s := []byte("-0.84743373693723267")
	b.SetBytes(int64(len(s)))
	for b.Loop() {
		scanDecimal(s, false)
	}
}
