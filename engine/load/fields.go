package load

// isBlank tells the characters that separate numbers on a line.
func isBlank(c byte) bool { return c == ' ' || c == '\t' || c == '\r' || c == '\v' || c == '\f' }

// blank tells whether a line holds nothing.
func blank(line []byte) bool { return len(skipBlank(line)) == 0 }

func skipBlank(s []byte) []byte {
	for i, c := range s {
		if !isBlank(c) {
			return s[i:]
		}
	}
	return nil
}

// word returns the first field of s and what follows it.
func word(s []byte) (w, rest []byte) {
	s = skipBlank(s)
	for i, c := range s {
		if isBlank(c) {
			return s[:i], s[i:]
		}
	}
	return s, nil
}

// words splits a line into fields, at most limit of them; further ones are
// dropped.
func words(s []byte, limit int) [][]byte {
	var out [][]byte
	for len(out) < limit {
		w, rest := word(s)
		if len(w) == 0 {
			break
		}
		out, s = append(out, w), rest
	}
	return out
}

// largest bounds every count and index that is read, so that small multiples
// of it do not overflow.
const largest = 1_000_000_000_000_000

// count reads a whole number without sign, standing first in s. It fails
// where something else stands there or the number exceeds largest.
func count(s []byte) (v int, rest []byte, ok bool) {
	s = skipBlank(s)
	i := 0
	for ; i < len(s); i++ {
		d := s[i] - '0'
		if d > 9 {
			break
		}
		if v = v*10 + int(d); v > largest {
			return 0, s, false
		}
	}
	if i == 0 || i < len(s) && !isBlank(s[i]) {
		return 0, s, false
	}
	return v, s[i:], true
}
