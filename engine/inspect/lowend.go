package inspect

import "math"

// LowEnd returns the low end of a spectrum of A or of what scaling makes of it:
// of an A known to be singular 0 where rounding alone can make the difference,
// and then rounded is true.
func (f *Facts) LowEnd(x Spectrum) (value float64, rounded bool) {
	round := float64(f.N) * 0x1p-53 * max(math.Abs(x.Largest), math.Abs(x.Smallest))
	if f.Singular.Answer == Yes && x.Zeros == 0 && math.Abs(x.Smallest) <= round {
		return 0, true
	}
	return x.Smallest, false
}

// Settled says of both ends whether they are known to a twentieth; one that is
// not is what a subspace reached, and the end itself may lie further out.
func (x Spectrum) Settled() (low, high bool) {
	settled := func(value, bound float64) bool { return !(bound > 0.05*math.Abs(value)) }
	return settled(x.Smallest, x.SmallestBound), settled(x.Largest, x.LargestBound)
}
