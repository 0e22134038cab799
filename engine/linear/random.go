package linear

// Uniform fills dst with numbers uniform in [−1, 1) from SplitMix64 (Steele,
// Lea and Flood 2014), started at start: documented, so that a made
// right-hand side can be made again elsewhere.
func Uniform(dst []float64, start uint64) {
	for i := range dst {
		start += 0x9e3779b97f4a7c15
		z := start
		z = (z ^ (z >> 30)) * 0xbf58476d1ce4e5b9
		z = (z ^ (z >> 27)) * 0x94d049bb133111eb
		z ^= z >> 31
		dst[i] = float64(z>>11)/(1<<52) - 1
	}
}
