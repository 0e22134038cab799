package engine

import (
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"math"

	"dwindle/engine/linear"
)

// fingerprint is the SHA-256 of order, pattern, values and right-hand side,
// in this order, little-endian: the same for the same numbers from any file
// format. A matrix-free system gives the digest of its order and b alone.
func fingerprint(s linear.System) string {
	h := sha256.New()
	buf := make([]byte, 0, 1<<16)
	put := func(v uint64) {
		buf = binary.LittleEndian.AppendUint64(buf, v)
		if len(buf) >= 1<<16-8 {
			h.Write(buf)
			buf = buf[:0]
		}
	}
	put(uint64(s.N()))
	if m := s.Matrix(); m != nil {
		for _, p := range m.Ptr {
			put(uint64(p))
		}
		for k, c := range m.Col {
			put(uint64(c))
			put(math.Float64bits(m.Val[k]))
		}
	}
	for _, v := range s.B {
		put(math.Float64bits(v))
	}
	h.Write(buf)
	return hex.EncodeToString(h.Sum(nil))
}
