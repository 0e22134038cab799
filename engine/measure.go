package engine

import (
	"slices"
	"time"

	"dwindle/engine/linear"
	"dwindle/samples"
)

// KernelSpeed is what one kernel moves on this machine.
type KernelSpeed struct {
	Name  string
	Bytes int64   // counted bytes of one call: what must be read and written once
	Time  float64 // seconds a call, median
	Rate  float64 // bytes a second
	Share float64 // of the measured memory bandwidth
}

// measureOn is the system the kernels are measured on: a million unknowns.
const measureOn = "sample:plate:1000"

// farBeyondCaches is the length of the vectors that bandwidth is measured on.
const farBeyondCaches = 1 << 24

// MeasureKernels measures this machine's memory bandwidth, w = a x + b y on
// vectors far beyond its caches, and what the kernels of an iteration on a
// million unknowns move, products by every form of storage among them; those
// whose vectors stay in a cache may exceed it.
// threads < 1 asks for the default.
func MeasureKernels(threads int) ([]KernelSpeed, error) {
	if threads < 1 {
		threads = defaultThreads()
	}
	linear.SetThreads(threads)
	s, err := samples.Build(measureOn)
	if err != nil {
		return nil, err
	}
	a := s.Matrix()
	n := int64(a.NRows)
	v := make([][]float64, 4)
	for i := range v {
		v[i] = make([]float64, n)
		linear.Uniform(v[i], uint64(i))
	}
	x, y, z, w := v[0], v[1], v[2], v[3]
	product := a.Bytes() + 16*n
	list := []KernelSpeed{bandwidth(),
		timed("dot product", 16*n, func() { linear.Dot(x, y) }),
		timed("y += a x", 24*n, func() { linear.Axpy(1e-9, x, y) }),
		timed("w = a x + b y", 24*n, func() { linear.Lin(w, 0.5, x, 0.5, y) }),
		timed("y += a x with dot", 24*n, func() { linear.AxpyDot(1e-9, x, y, y) }),
		timed("step and direction", 40*n, func() { linear.StepDirection(x, 1e-9, w, z, 0.5) }),
		timed("product", product, func() { a.Apply(z, x) }),
		timed("product with dot", product, func() { a.ApplyDot(z, x) }),
	}
	forms, err := formProducts()
	if err != nil {
		return nil, err
	}
	list = append(list, forms...)
	if again := bandwidth(); again.Rate > list[0].Rate {
		list[0] = again // the first look was disturbed
	}
	for i := range list {
		list[i].Share = list[i].Rate / list[0].Rate
	}
	return list, nil
}

// bandwidth times a triad on vectors that no cache holds.
func bandwidth() KernelSpeed {
	var v [3][]float64
	for i := range v {
		v[i] = make([]float64, farBeyondCaches)
		linear.Uniform(v[i], uint64(i))
	}
	return timed("memory bandwidth", 24*farBeyondCaches, func() { linear.Lin(v[2], 0.5, v[0], 0.5, v[1]) })
}

// timed calls f for about a quarter of a second and takes the median.
func timed(name string, bytes int64, f func()) KernelSpeed {
	var times []float64
	f()
	for start := time.Now(); len(times) < 9 || time.Since(start) < 250*time.Millisecond; {
		t := time.Now()
		f()
		times = append(times, time.Since(t).Seconds())
	}
	slices.Sort(times)
	t := times[len(times)/2]
	return KernelSpeed{Name: name, Bytes: bytes, Time: t, Rate: float64(bytes) / t}
}
