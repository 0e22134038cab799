package linear

// Dot2 returns xᵀ y and xᵀ z in one pass. The lengths are equal.
func Dot2(x, y, z []float64) (xy, xz float64) {
	j := begin(dot2Kernel, len(x))
	j.x, j.y, j.v = x, y[:len(x)], z[:len(x)]
	return j.finishSums()
}

func dot2Kernel(j *job, lo, hi, block int) {
	x, y, z := j.x[lo:hi], j.y[lo:hi], j.v[lo:hi]
	y, z = y[:len(x)], z[:len(x)]
	j.part[block] = dot(x, y)
	*j.second(block) = dot(x, z)
}

// AxpyDot2 computes y += a x and returns yᵀ y and yᵀ z with the new y.
func AxpyDot2(a float64, x, y, z []float64) (yy, yz float64) {
	j := begin(axpyDot2Kernel, len(y))
	j.a, j.x, j.y, j.v = a, x[:len(y)], y, z[:len(y)]
	return j.finishSums()
}

func axpyDot2Kernel(j *job, lo, hi, block int) {
	y, z := j.y[lo:hi], j.v[lo:hi]
	axpy(y, j.x[lo:hi], j.a)
	j.part[block] = dot(y, y)
	*j.second(block) = dot(y, z)
}

// Axpy2 computes y += a x + b z in one pass; x and z may be the same.
func Axpy2(y []float64, a float64, x []float64, b float64, z []float64) {
	j := begin(axpy2Kernel, len(y))
	j.y, j.a, j.x, j.b, j.v = y, a, x[:len(y)], b, z[:len(y)]
	j.finish()
}

func axpy2Kernel(j *job, lo, hi, _ int) {
	a, b, x, y, z := j.a, j.b, j.x[lo:hi], j.y[lo:hi], j.v[lo:hi]
	y, z = y[:len(x)], z[:len(x)]
	for i, v := range x {
		y[i] += a*v + b*z[i]
	}
}

// Recur computes w = z + b w + c v: the three-term recurrence of a search
// direction. w overlaps neither z nor v.
func Recur(w, z []float64, b float64, v []float64, c float64) {
	j := begin(recurKernel, len(w))
	j.w, j.x, j.a, j.v, j.b = w, z[:len(w)], b, v[:len(w)], c
	j.finish()
}

func recurKernel(j *job, lo, hi, _ int) {
	b, c, w, z, v := j.a, j.b, j.w[lo:hi], j.x[lo:hi], j.v[lo:hi]
	w, v = w[:len(z)], v[:len(z)]
	for i, zi := range z {
		w[i] = zi + b*w[i] + c*v[i]
	}
}

// LinDot computes dst = a x + b y and returns dstᵀ dst; dst may be x or y.
func LinDot(dst []float64, a float64, x []float64, b float64, y []float64) float64 {
	j := begin(linDotKernel, len(dst))
	j.a, j.b, j.x, j.y, j.w = a, b, x[:len(dst)], y[:len(dst)], dst
	return j.finishSum()
}

func linDotKernel(j *job, lo, hi, block int) {
	a, b, x, y, w := j.a, j.b, j.x[lo:hi], j.y[lo:hi], j.w[lo:hi]
	y, w = y[:len(x)], w[:len(x)]
	for i, v := range x {
		w[i] = a*v + b*y[i]
	}
	j.part[block] = dot(w, w)
}
