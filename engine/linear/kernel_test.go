package linear

import (
	"fmt"
	"math"
	"slices"
	"testing"
)

// lengths sit on and around every seam: strands of four, blocks, chunks, the
// length below which one thread works alone, and several chunks a thread.
var lengths = []int{0, 1, 3, 4, 5, 1023, 1024, 1025, 8 * Block, 8*Block + 1, 40*Block + 17}

// operands are the vectors and scalars of one trial of a kernel.
type operands struct {
	x, y, z, w []float64
	a, b       float64
}

func drawn(n int) operands {
	o := operands{a: -1.25, b: 0.3}
	for i, v := range []*[]float64{&o.x, &o.y, &o.z, &o.w} {
		*v = make([]float64, n)
		Uniform(*v, uint64(100*n+i))
	}
	return o
}

// kernels runs each kernel, and the plain loop it must agree with. Both change
// the operands and return their sums.
var kernels = []struct {
	name   string
	run    func(o operands) []float64
	simple func(o operands, i int, sum []float64)
	sums   int
}{
	{"Dot", func(o operands) []float64 { return []float64{Dot(o.x, o.y)} },
		func(o operands, i int, s []float64) { s[0] += o.x[i] * o.y[i] }, 1},
	{"Norm2", func(o operands) []float64 { return []float64{math.Pow(Norm2(o.x), 2)} },
		func(o operands, i int, s []float64) { s[0] += o.x[i] * o.x[i] }, 1},
	{"Axpy", func(o operands) []float64 { Axpy(o.a, o.x, o.y); return nil },
		func(o operands, i int, _ []float64) { o.y[i] += o.a * o.x[i] }, 0},
	{"Xpby", func(o operands) []float64 { Xpby(o.x, o.b, o.y); return nil },
		func(o operands, i int, _ []float64) { o.y[i] = o.x[i] + o.b*o.y[i] }, 0},
	{"Lin", func(o operands) []float64 { Lin(o.w, o.a, o.x, o.b, o.y); return nil },
		func(o operands, i int, _ []float64) { o.w[i] = o.a*o.x[i] + o.b*o.y[i] }, 0},
	{"Lin in place", func(o operands) []float64 { Lin(o.x, o.a, o.x, o.b, o.y); return nil },
		func(o operands, i int, _ []float64) { o.x[i] = o.a*o.x[i] + o.b*o.y[i] }, 0},
	{"Scale", func(o operands) []float64 { Scale(o.w, o.a, o.x); return nil },
		func(o operands, i int, _ []float64) { o.w[i] = o.a * o.x[i] }, 0},
	{"MulDot", func(o operands) []float64 { return []float64{MulDot(o.w, o.y, o.x)} },
		func(o operands, i int, s []float64) { o.w[i] = o.y[i] * o.x[i]; s[0] += o.x[i] * o.w[i] }, 1},
	{"AxpyDot", func(o operands) []float64 { return []float64{AxpyDot(o.a, o.x, o.y, o.z)} },
		func(o operands, i int, s []float64) { o.y[i] += o.a * o.x[i]; s[0] += o.y[i] * o.z[i] }, 1},
	{"AxpyDot with itself", func(o operands) []float64 { return []float64{AxpyDot(o.a, o.x, o.y, o.y)} },
		func(o operands, i int, s []float64) { o.y[i] += o.a * o.x[i]; s[0] += o.y[i] * o.y[i] }, 1},
	{"StepDirection", func(o operands) []float64 { StepDirection(o.x, o.a, o.y, o.z, o.b); return nil },
		func(o operands, i int, _ []float64) { o.x[i] += o.a * o.y[i]; o.y[i] = o.z[i] + o.b*o.y[i] }, 0},
	{"Dot2", func(o operands) []float64 { u, v := Dot2(o.x, o.y, o.z); return []float64{u, v} },
		func(o operands, i int, s []float64) { s[0] += o.x[i] * o.y[i]; s[1] += o.x[i] * o.z[i] }, 2},
	{"AxpyDot2", func(o operands) []float64 { u, v := AxpyDot2(o.a, o.x, o.y, o.z); return []float64{u, v} },
		func(o operands, i int, s []float64) {
			o.y[i] += o.a * o.x[i]
			s[0] += o.y[i] * o.y[i]
			s[1] += o.y[i] * o.z[i]
		}, 2},
	{"Axpy2", func(o operands) []float64 { Axpy2(o.y, o.a, o.x, o.b, o.z); return nil },
		func(o operands, i int, _ []float64) { o.y[i] += o.a*o.x[i] + o.b*o.z[i] }, 0},
	{"Recur", func(o operands) []float64 { Recur(o.w, o.z, o.b, o.y, o.a); return nil },
		func(o operands, i int, _ []float64) { o.w[i] = o.z[i] + o.b*o.w[i] + o.a*o.y[i] }, 0},
	{"LinDot", func(o operands) []float64 { return []float64{LinDot(o.w, o.a, o.x, o.b, o.y)} },
		func(o operands, i int, s []float64) { o.w[i] = o.a*o.x[i] + o.b*o.y[i]; s[0] += o.w[i] * o.w[i] }, 1},
}

func (o operands) all() [][]float64 { return [][]float64{o.x, o.y, o.z, o.w} }

func (o operands) equal(p operands) bool {
	for k, v := range o.all() {
		if !slices.Equal(v, p.all()[k]) {
			return false
		}
	}
	return true
}

func TestKernelsAgainstPlainLoops(t *testing.T) {
	for _, k := range kernels {
		for _, n := range lengths {
			got, want := drawn(n), drawn(n)
			sums := k.run(got)
			expect := make([]float64, k.sums)
			for i := range n {
				k.simple(want, i, expect)
			}
			if !got.equal(want) {
				t.Errorf("%s, length %d: vectors differ from the plain loop", k.name, n)
			}
			for i, s := range sums { // entries are below 2 in size, so 1e-12·n covers the rounding
				if math.Abs(s-expect[i]) > 1e-12*float64(n+1) {
					t.Errorf("%s, length %d: sum %g, plain loop %g", k.name, n, s, expect[i])
				}
			}
		}
	}
}

// Every kernel gives the same bits on one, two, three and five threads.
func TestKernelsDoNotDependOnThreads(t *testing.T) {
	defer SetThreads(1)
	for _, k := range kernels {
		for _, n := range lengths {
			SetThreads(1)
			want := drawn(n)
			sums := k.run(want)
			for _, threads := range []int{2, 3, 5} {
				SetThreads(threads)
				got := drawn(n)
				if s := k.run(got); !slices.Equal(s, sums) || !got.equal(want) {
					t.Errorf("%s, length %d: %d threads differ from one", k.name, n, threads)
				}
			}
		}
	}
}

func TestNorm2AtTheEdges(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	for _, c := range []struct {
		x    []float64
		want float64
	}{
		{nil, 0},
		{[]float64{0, 0}, 0},
		{[]float64{3e200, -4e200}, 5e200},
		{[]float64{3e-200, 4e-200}, 5e-200},
		{[]float64{3e-320, 4e-320}, 5e-320},
		{[]float64{1, inf}, inf},
		{[]float64{1, nan}, nan},
		{[]float64{nan, inf}, nan},
	} {
		got := Norm2(c.x)
		same := got == c.want || math.IsNaN(got) && math.IsNaN(c.want)
		if !same && math.Abs(got-c.want) > math.Max(1e-15*c.want, 0x1p-1074) {
			t.Errorf("Norm2(%v) = %g, want %g", c.x, got, c.want)
		}
	}
	if m := NormInf([]float64{-3, 2}); m != 3 {
		t.Errorf("NormInf = %g", m)
	}
}

// Uniform's first numbers, from the published SplitMix64 sequence of seed 0
// (0xe220a8397b1dcdaf, 0x6e789e6aa1b965f4: Steele, Lea and Flood's reference
// code, from memory).
func TestUniformIsSplitMix64(t *testing.T) {
	var x [2]float64
	Uniform(x[:], 0)
	for i, bits := range []uint64{0xe220a8397b1dcdaf, 0x6e789e6aa1b965f4} {
		if want := float64(bits>>11)/(1<<52) - 1; x[i] != want {
			t.Errorf("number %d: %v, want %v", i, x[i], want)
		}
	}
}

// Kernels and products allocate nothing once warm.
func TestNoAllocation(t *testing.T) {
	defer SetThreads(1)
	a := plateMatrix(100)
	o := drawn(a.NRows)
	for _, threads := range []int{1, 2} {
		SetThreads(threads)
		for _, k := range kernels {
			if got := testing.AllocsPerRun(20, func() { k.run(o) }); got > float64(min(k.sums, 1)) { // the slice of sums
				t.Errorf("%s on %d threads allocates %g times", k.name, threads, got)
			}
		}
		if got := testing.AllocsPerRun(20, func() { a.Apply(o.w, o.x); a.ApplyDot(o.w, o.x) }); got > 0 {
			t.Errorf("products on %d threads allocate %g times", threads, got)
		}
	}
}

func ExampleSetThreads() {
	x := []float64{1, 2, 3}
	SetThreads(2)
	fmt.Println(Threads(), Dot(x, x))
	SetThreads(1)
	fmt.Println(Threads(), Dot(x, x))
	// Output:
	// 2 14
	// 1 14
}
