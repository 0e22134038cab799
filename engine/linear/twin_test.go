package linear

import "testing"

// twins run each kernel that has vector instructions, in blocks of any length.
var twins = []struct {
	name string
	run  func(o operands) float64
}{
	{"dot", func(o operands) float64 { return dot(o.x, o.y) }},
	{"axpy", func(o operands) float64 { axpy(o.y, o.x, o.a); return 0 }},
	{"step", func(o operands) float64 { step(o.x, o.y, o.z, o.a, o.b); return 0 }},
	{"taps", func(o operands) float64 { sumTaps(o.w, []tap{{o.x, o.y}, {o.y, o.z}, {o.z, o.x}}); return 0 }},
	{"less taps", func(o operands) float64 { tapsOff(o.w, o.x, []tap{{o.x, o.y}, {o.y, o.z}, {o.z, o.x}}); return 0 }},
	{"less taps in place", func(o operands) float64 { tapsOff(o.w, o.w, []tap{{o.x, o.y}}); return 0 }},
	{"less taps from the end", func(o operands) float64 { tapsOffUp(o.w, o.z, o.x, []tap{{o.x, o.y}, {o.y, o.z}}); return 0 }},
	{"less taps in place from the end", func(o operands) float64 { tapsOffUp(o.w, o.z, o.w, []tap{{o.x, o.y}}); return 0 }},
	{"less single taps", func(o operands) float64 {
		tapsOff(o.w, o.x, []tapOf[float32]{{short32(o.x), o.y}, {short32(o.y), o.z}, {short32(o.z), o.x}})
		return 0
	}},
	{"less single taps from the end", func(o operands) float64 {
		tapsOffUp(o.w, o.z, o.x, []tapOf[float32]{{short32(o.x), o.y}, {short32(o.y), o.z}})
		return 0
	}},
	{"one tap", func(o operands) float64 { sumTaps(o.w, []tap{{o.x, o.y}}); return 0 }},
}

// short32 rounds each value to single precision.
func short32(v []float64) []float32 {
	s := make([]float32, len(v))
	for i := range v {
		s[i] = float32(v[i])
	}
	return s
}

// The vector instructions give the bits of their portable twins.
func TestTwins(t *testing.T) {
	if !vectored {
		t.Skip("this processor lacks the vector instructions, only the portable twins run")
	}
	defer func() { vectored = true }()
	for _, k := range twins {
		for n := range 131 {
			vectored = true
			got := drawn(n)
			sum := k.run(got)
			vectored = false
			want := drawn(n)
			if plain := k.run(want); sum != plain || !got.equal(want) {
				t.Errorf("%s, length %d: other bits than the portable twin", k.name, n)
			}
		}
	}
}
