package direct

import (
	"sync"
	"weak"

	"dwindle/engine/linear"
)

// recent holds the latest predictions, so that one matrix is not ordered anew
// each time its memory is asked for. Matrices are read-only once built, and
// are not kept alive by it.
var recent memo

const memoLength = 6

type memo struct {
	sync.Mutex
	list []remembered
}

type remembered struct {
	of  weak.Pointer[linear.CSR]
	how Ordering
	sym *Symbolic
	lu  *LUPlan
}

// Predict returns Analyse(a, Order(a, how)), remembered for the next call.
func Predict(a *linear.CSR, how Ordering) *Symbolic {
	return recent.get(a, how, func(r *remembered) bool { return r.sym != nil },
		func(r *remembered) { r.sym = Analyse(a, Order(a, how)) }).sym
}

// PredictLU returns PlanLU(a, how), remembered for the next call.
func PredictLU(a *linear.CSR, how Ordering) *LUPlan {
	return recent.get(a, how, func(r *remembered) bool { return r.lu != nil },
		func(r *remembered) { r.lu = PlanLU(a, how) }).lu
}

// get finds what was remembered of a, or makes it.
func (m *memo) get(a *linear.CSR, how Ordering, has func(*remembered) bool, make func(*remembered)) remembered {
	key := weak.Make(a)
	m.Lock()
	defer m.Unlock()
	for k, r := range m.list {
		if r.of == key && r.how == how && has(&r) {
			copy(m.list[1:k+1], m.list[:k])
			m.list[0] = r
			return r
		}
	}
	r := remembered{of: key, how: how}
	make(&r)
	m.list = append([]remembered{r}, m.list[:min(len(m.list), memoLength-1)]...)
	return r
}
