package run

import (
	"fmt"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// fieldNorms returns the 2-norm of the part of v that lies in each field of
// unknowns; nil where no fields are known. Parts are scaled by ‖v‖∞, so that
// no square over- or underflows.
func fieldNorms(s linear.System, v []float64) []float64 {
	if s.FieldOf == nil {
		return nil
	}
	norms := make([]float64, len(s.Fields))
	m := linear.NormInf(v)
	if m == 0 || math.IsNaN(m) || math.IsInf(m, 0) {
		for f := range norms {
			norms[f] = m
		}
		return norms
	}
	for i, x := range v {
		x /= m
		norms[s.FieldOf[i]] += x * x
	}
	for f := range norms {
		norms[f] = m * math.Sqrt(norms[f])
	}
	return norms
}

// fieldResiduals holds the residual in the scratch against b, field by field;
// nil where no fields are known.
func (t *Trial) fieldResiduals() []trace.Field {
	norms := fieldNorms(t.sys, t.scratch.r)
	if norms == nil {
		return nil
	}
	fields := make([]trace.Field, len(norms))
	for f, r := range norms {
		size := t.sizes.fields[f]
		if size == 0 {
			size = t.sizes.b
		}
		fields[f] = trace.Field{Name: t.sys.Fields[f], Residual: over(r, size), Componentwise: math.NaN()}
		if t.limits.FieldTol != nil {
			fields[f].Tol = t.limits.FieldTol[f]
		}
	}
	for _, f := range t.sys.FieldOf {
		fields[f].Rows++
	}
	return fields
}

// unsolvedField returns the field that misses its own tolerance by the largest
// factor, nil where each holds.
func (a *audit) unsolvedField() *trace.Field {
	if a == nil {
		return nil
	}
	var worst *trace.Field
	for k := range a.fields {
		f := &a.fields[k]
		if f.Tol > 0 && !(f.Residual <= f.Tol) && (worst == nil || f.Residual*worst.Tol > worst.Residual*f.Tol) {
			worst = f
		}
	}
	return worst
}

// fieldWords tells of the field that misses its own tolerance, if one does.
func (a *audit) fieldWords() string {
	f := a.unsolvedField()
	if f == nil {
		return ""
	}
	return fmt.Sprintf("; field %s stands at %.2g, above its own %.2g", f.Name, f.Residual, f.Tol)
}
