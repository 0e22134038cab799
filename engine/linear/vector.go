package linear

import "math"

// Dot returns xᵀ y. The lengths are equal.
func Dot(x, y []float64) float64 {
	j := begin(dotKernel, len(x))
	j.x, j.y = x, y[:len(x)]
	return j.finishSum()
}

func dotKernel(j *job, lo, hi, block int) { j.part[block] = dot(j.x[lo:hi], j.y[lo:hi]) }

// Norm2 returns ‖x‖₂, also where the squares would over- or underflow.
func Norm2(x []float64) float64 {
	s := Dot(x, x)
	if s > 1e-280 && s < 1e300 {
		return math.Sqrt(s)
	}
	m := NormInf(x)
	if m == 0 || math.IsInf(m, 0) || math.IsNaN(m) {
		return m
	}
	s = 0
	for _, v := range x {
		s += (v / m) * (v / m)
	}
	return m * math.Sqrt(s)
}

// NormInf returns max |x_i|, NaN if any entry is NaN, 0 for no entries.
func NormInf(x []float64) float64 {
	m := 0.0
	for _, v := range x {
		if a := math.Abs(v); a > m || a != a {
			m = a
			if m != m {
				return m
			}
		}
	}
	return m
}

// Axpy computes y += a x.
func Axpy(a float64, x, y []float64) {
	j := begin(axpyKernel, len(y))
	j.a, j.x, j.y = a, x[:len(y)], y
	j.finish()
}

func axpyKernel(j *job, lo, hi, _ int) { axpy(j.y[lo:hi], j.x[lo:hi], j.a) }

// Xpby computes y = x + b y.
func Xpby(x []float64, b float64, y []float64) {
	j := begin(xpbyKernel, len(y))
	j.b, j.x, j.y = b, x[:len(y)], y
	j.finish()
}

func xpbyKernel(j *job, lo, hi, _ int) {
	b, x, y := j.b, j.x[lo:hi], j.y[lo:hi]
	y = y[:len(x)]
	for i, v := range x {
		y[i] = v + b*y[i]
	}
}

// Lin computes dst = a x + b y; dst may be x or y.
func Lin(dst []float64, a float64, x []float64, b float64, y []float64) {
	j := begin(linKernel, len(dst))
	j.a, j.b, j.x, j.y, j.w = a, b, x[:len(dst)], y[:len(dst)], dst
	j.finish()
}

func linKernel(j *job, lo, hi, _ int) {
	a, b, x, y, w := j.a, j.b, j.x[lo:hi], j.y[lo:hi], j.w[lo:hi]
	y, w = y[:len(x)], w[:len(x)]
	for i, v := range x {
		w[i] = a*v + b*y[i]
	}
}

// Scale computes dst = a x; dst may be x.
func Scale(dst []float64, a float64, x []float64) {
	j := begin(scaleKernel, len(dst))
	j.a, j.x, j.w = a, x[:len(dst)], dst
	j.finish()
}

func scaleKernel(j *job, lo, hi, _ int) {
	a, x, w := j.a, j.x[lo:hi], j.w[lo:hi]
	w = w[:len(x)]
	for i, v := range x {
		w[i] = a * v
	}
}

// MulDot computes dst = d∘x (elementwise) and returns xᵀ dst; dst may be x
// only if the result of the dot product is not needed.
func MulDot(dst, d, x []float64) float64 {
	j := begin(mulDotKernel, len(dst))
	j.w, j.v, j.x = dst, d[:len(dst)], x[:len(dst)]
	return j.finishSum()
}

func mulDotKernel(j *job, lo, hi, block int) {
	w, d, x := j.w[lo:hi], j.v[lo:hi], j.x[lo:hi]
	d, w = d[:len(x)], w[:len(x)]
	for i, v := range x {
		w[i] = d[i] * v
	}
	j.part[block] = dot(x, w)
}

// AxpyDot computes y += a x and returns yᵀ z with the new y; z may be y.
func AxpyDot(a float64, x, y, z []float64) float64 {
	j := begin(axpyDotKernel, len(y))
	j.a, j.x, j.y, j.v = a, x[:len(y)], y, z[:len(y)]
	return j.finishSum()
}

func axpyDotKernel(j *job, lo, hi, block int) {
	y := j.y[lo:hi]
	axpy(y, j.x[lo:hi], j.a)
	j.part[block] = dot(y, j.v[lo:hi]) // still in the nearest cache
}

// StepDirection computes x += a p, then p = z + b p, in one pass: the last two
// lines of a conjugate gradient step.
func StepDirection(x []float64, a float64, p []float64, z []float64, b float64) {
	j := begin(stepKernel, len(x))
	j.x, j.a, j.u, j.v, j.b = x, a, p[:len(x)], z[:len(x)], b
	j.finish()
}

func stepKernel(j *job, lo, hi, _ int) { step(j.x[lo:hi], j.u[lo:hi], j.v[lo:hi], j.a, j.b) }
