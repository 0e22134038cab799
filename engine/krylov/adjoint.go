package krylov

import (
	"errors"

	"dwindle/engine/linear"
)

// adjoint applies the transposes that two-sided methods need.
type adjoint struct {
	at, mt linear.Transposer // mt is nil without a preconditioner
}

// newAdjoint finds the transposes of A and of M⁻¹. It fails where one is
// missing.
func newAdjoint(p Problem) (adjoint, error) {
	var t adjoint
	var ok bool
	if t.at, ok = linear.As[linear.Transposer](p.A); !ok {
		return t, errors.New("krylov: products with the transpose of A are not to be had")
	}
	if _, plain := linear.As[linear.Identity](p.M); plain {
		return t, nil
	}
	if t.mt, ok = linear.As[linear.Transposer](p.M); !ok {
		return t, errors.New("krylov: products with the transpose of M are not to be had")
	}
	return t, nil
}
