package krylov_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// MINRES minimises over the Krylov space: its residuals equal those of dense
// least squares over a basis built by Arnoldi with full reorthogonalisation
// (gonum QR). Where the largest Ritz values converge within 30 steps, every
// three-term recurrence loses orthogonality and lags behind (plain textbook
// Lanczos at the same step and by as much): there the comparison ends before.
// With Jacobi the same holds for D^(−1/2) A D^(−1/2).
func TestMinresAgainstLeastSquares(t *testing.T) {
	for _, c := range []struct {
		file, precond string
		steps         int
	}{
		{"pts5ldd03.mtx", "none", 30},
		{"jagmesh7.mtx", "none", 30},
		{"bcsstk16.mtx.gz", "none", 30},
		{"bcsstk01.rsa", "none", 24},
		{"494_bus.mtx", "none", 17},
		{"hangGlider_2.mtx", "none", 26},
		{"bcsstk01.rsa", "jacobi", 30},
		{"494_bus.mtx", "jacobi", 30},
		{"bcsstk16.mtx.gz", "jacobi", 30},
	} {
		t.Run(c.file+"+"+c.precond, func(t *testing.T) {
			a := opened(t, c.file)
			b := ones(a.NRows)
			r := begun(t, a, b, nil, "minres+"+c.precond)
			scaled, rhs := a, b
			if c.precond == "jacobi" {
				scaled, rhs = symmetricallyScaled(a, b)
			}
			worst := 0.0
			for k, want := range leastSquares(scaled, rhs, c.steps) {
				got := r.step().Residual
				worst = math.Max(worst, math.Abs(got-want)/math.Max(want, 1e-4*r.first.Residual))
				if worst > 1e-8 {
					t.Fatalf("step %d: %.12g, dense %.12g", k+1, got, want)
				}
				if r.last.Done {
					break
				}
			}
			t.Logf("%d steps, largest relative difference %.1e", r.steps, worst)
		})
	}
}

// symmetricallyScaled returns D^(−1/2) A D^(−1/2) and D^(−1/2) b.
func symmetricallyScaled(a *linear.CSR, b []float64) (*linear.CSR, []float64) {
	d, c := make([]float64, len(b)), make([]float64, len(b))
	a.Diagonal(d)
	s := &linear.CSR{NRows: a.NRows, NCols: a.NCols, Ptr: a.Ptr, Col: a.Col, Val: make([]float64, len(a.Val))}
	for i := range d {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			s.Val[k] = a.Val[k] / math.Sqrt(d[i]*d[a.Col[k]])
		}
		c[i] = b[i] / math.Sqrt(d[i])
	}
	return s, c
}

// leastSquares returns min ‖b − A V y‖ over Krylov spaces of dimension 1 to
// steps, fewer when the space is exhausted.
func leastSquares(a *linear.CSR, b []float64, steps int) []float64 {
	n := len(b)
	v := [][]float64{unitOf(b)}
	var out []float64
	av := mat.NewDense(n, min(steps, n), nil)
	for k := 0; k < min(steps, n); k++ {
		w := make([]float64, n)
		a.Apply(w, v[k])
		av.SetCol(k, w)
		out = append(out, fit(av.Slice(0, n, 0, k+1), b))
		size := linear.Norm2(w)
		for pass := 0; pass < 2; pass++ {
			for _, u := range v {
				linear.Axpy(-linear.Dot(u, w), u, w)
			}
		}
		if linear.Norm2(w) < 1e-13*size {
			break
		}
		v = append(v, unitOf(w))
	}
	return out
}

func unitOf(x []float64) []float64 {
	u := make([]float64, len(x))
	linear.Scale(u, 1/linear.Norm2(x), x)
	return u
}

// fit returns min ‖b − M y‖.
func fit(m mat.Matrix, b []float64) float64 {
	var qr mat.QR
	qr.Factorize(m)
	rhs := mat.NewVecDense(len(b), b)
	var y, r mat.VecDense
	if err := qr.SolveVecTo(&y, false, rhs); err != nil {
		panic(err)
	}
	r.MulVec(m, &y)
	r.SubVec(rhs, &r)
	return mat.Norm(&r, 2)
}

// BiCGStab with Jacobi, iterations 1 to 10, against the recurrence of van der
// Vorst's paper written plainly on dense rows.
func TestBiCGStabAgainstPlain(t *testing.T) {
	for _, file := range []string{"bcsstk01.rsa", "494_bus.mtx", "bfwa62.mtx"} {
		t.Run(file, func(t *testing.T) {
			a := opened(t, file)
			b := ones(a.NRows)
			r := begun(t, a, b, nil, "bicgstab+jacobi")
			worst := 0.0
			for k, want := range plainBiCGStab(a, b, 10) {
				got := r.step().Residual
				worst = math.Max(worst, math.Abs(got-want)/want)
				if worst > 1e-6 {
					t.Fatalf("iteration %d: %.12g, plain %.12g", k+1, got, want)
				}
			}
			t.Logf("largest relative difference %.1e", worst)
		})
	}
}

// plainBiCGStab returns ‖r‖₂ of the first iterations with M = diag(A).
func plainBiCGStab(a *linear.CSR, b []float64, steps int) []float64 {
	n := len(b)
	mul := func(x []float64) []float64 {
		y := make([]float64, n)
		for i := range y {
			for j := range x {
				if v := a.At(i, j); v != 0 {
					y[i] += v * x[j]
				}
			}
		}
		return y
	}
	inv := func(x []float64) []float64 {
		y := make([]float64, n)
		for i := range y {
			y[i] = x[i] / a.At(i, i)
		}
		return y
	}
	dot := func(x, y []float64) (s float64) {
		for i := range x {
			s += x[i] * y[i]
		}
		return s
	}
	r := append([]float64(nil), b...)
	hat := append([]float64(nil), b...)
	p, v := make([]float64, n), make([]float64, n)
	rho, alpha, omega := 1.0, 1.0, 1.0
	var norms []float64
	for range steps {
		rhoNew := dot(hat, r)
		beta := rhoNew / rho * alpha / omega
		rho = rhoNew
		for i := range p {
			p[i] = r[i] + beta*(p[i]-omega*v[i])
		}
		v = mul(inv(p))
		alpha = rho / dot(hat, v)
		s := make([]float64, n)
		for i := range s {
			s[i] = r[i] - alpha*v[i]
		}
		t := mul(inv(s))
		omega = dot(t, s) / dot(t, t)
		for i := range r {
			r[i] = s[i] - omega*t[i]
		}
		norms = append(norms, math.Sqrt(dot(r, r)))
	}
	return norms
}

// BiCGStab's α and β are BiCG's with the same shadow vector (van der Vorst
// 1992), here against BiCG's two-sided recurrence.
func TestBiCGStabCoefficients(t *testing.T) {
	const n = 40
	var e []linear.Entry
	for i := range n {
		e = append(e, linear.Entry{I: i, J: i, V: 4 + float64(i)/10})
		if i > 0 {
			e = append(e, linear.Entry{I: i, J: i - 1, V: -1.6}, linear.Entry{I: i - 1, J: i, V: -0.4})
		}
	}
	a := linear.FromEntries(n, n, e)
	s := begun(t, a, ones(n), nil, "bicgstab")
	r, h, p, ph := ones(n), ones(n), ones(n), ones(n)
	q, qh := make([]float64, n), make([]float64, n)
	for k := range 9 {
		a.Apply(q, p)
		a.ApplyT(qh, ph)
		rho := linear.Dot(h, r)
		alpha := rho / linear.Dot(ph, q)
		linear.Axpy(-alpha, q, r)
		linear.Axpy(-alpha, qh, h)
		beta := linear.Dot(h, r) / rho
		linear.Xpby(r, beta, p)
		linear.Xpby(h, beta, ph)
		rd := s.step()
		if math.Abs(rd.Alpha/alpha-1) > 1e-10 || math.Abs(rd.Beta/beta-1) > 1e-10 {
			t.Errorf("step %d: α %g β %g, BiCG %g %g", k+1, rd.Alpha, rd.Beta, alpha, beta)
		}
	}
}

// The Lanczos matrix of MINRES from the coefficients of CG (Golub and Van
// Loan): T₁₁ = 1/α₀, T_{j+1,j+1} = 1/α_j + β_j/α_{j−1}, T_{j,j+1} = √β_j/α_{j−1},
// with the same preconditioner.
func TestMinresIsLanczos(t *testing.T) {
	a := plate(12)
	b := make([]float64, 144)
	linear.Uniform(b, 12)
	for _, m := range []string{"none", "jacobi", "ssor:1.3", "ic:0"} {
		c, s := begun(t, a, b, nil, "cg+"+m), begun(t, a, b, nil, "minres+"+m)
		alpha, beta := math.Inf(1), 0.0
		for k := range 12 {
			rc, rs := c.step(), s.step()
			near(t, m+" T_kk", rs.Alpha, 1/rc.Alpha+beta/alpha, 1e-10)
			near(t, m+" T_{k,k+1}", rs.Beta, math.Sqrt(rc.Beta)/rc.Alpha, 1e-10)
			alpha, beta = rc.Alpha, rc.Beta
			if k == 0 && len(rs.Events)+len(rc.Events) > 0 {
				t.Error("events in the first step")
			}
		}
	}
}
