package load

import "encoding/binary"

// eightDigits reads the eight digits that stand first in s, all at once; ok is
// false where s is shorter or one of its first eight bytes is not a digit.
func eightDigits(s []byte) (v uint64, ok bool) {
	const each = 0x0101010101010101
	if len(s) < 8 {
		return 0, false
	}
	w := binary.LittleEndian.Uint64(s)
	// A digit is 0x30 to 0x39: its high half is 3, and still is with 6 added.
	if w&(0xf0*each) != 0x30*each || (w+6*each)&(0xf0*each) != 0x30*each {
		return 0, false
	}
	w -= '0' * each
	w = w*10 + w>>8                                        // every other byte: a pair of digits
	a, b := w&0x000000ff000000ff, w>>16&0x000000ff000000ff // pairs 1 and 3, pairs 2 and 4
	return (a*(100+1000000<<32) + b*(1+10000<<32)) >> 32, true
}
