package check

import "dwindle/engine/linear"

// backward are the normwise backward errors ‖r‖/(‖A‖‖x‖+‖b‖) (Rigal and Gaches,
// J. ACM 14 (1967) 543–548), the componentwise one, and the form without b
// that minimal residual codes test.
func (w *work) backward() {
	r, z, b, x := w.out.Residual, w.out.Norms, w.q.System.B, w.q.X
	x2, xInf, b2 := linear.Norm2(x), linear.NormInf(x), linear.Norm2(b)
	w.add("backward", Backward, true, "||r||inf/(||A||inf ||x||inf + ||b||inf)", over(r.Inf, z.Inf*xInf+linear.NormInf(b)))
	w.add("backward-1", Backward, true, "||r||1/(||A||1 ||x||1 + ||b||1)", over(r.One, z.One*norm1(x)+norm1(b)))
	w.add("backward-2", Backward, true, "||r||2/(||A||2 ||x||2 + ||b||2)", over(r.Two, z.Two*x2+b2))
	w.add("backward-f", Backward, true, "||r||2/(||A||F ||x||2 + ||b||2)", over(r.Two, z.Fro*x2+b2))
	w.add("componentwise", Backward, true, "max |r|i/(|A||x| + |b|)i", w.out.Componentwise)
	w.add("minimal-2", Minimal, true, "||r||2/(||A||2 ||x||2)", over(r.Two, z.Two*x2))
	w.add("minimal-f", Minimal, true, "||r||2/(||A||F ||x||2)", over(r.Two, z.Fro*x2))
	w.add("minimal-1", Minimal, true, "||r||1/(||A||1 ||x||1)", over(r.One, z.One*norm1(x)))
	w.add("minimal-inf", Minimal, true, "||r||inf/(||A||inf ||x||inf)", over(r.Inf, z.Inf*xInf))
}
