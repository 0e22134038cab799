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
	r := remembered{of: weak.Make(a), how: how}
	if m.find(&r, has) {
		return r
	}
	make(&r)
	m.Lock()
	defer m.Unlock()
	m.list = append([]remembered{r}, m.list[:min(len(m.list), memoLength-1)]...)
	return r
}

// find completes r by what was remembered of the same matrix, if has agrees.
func (m *memo) find(r *remembered, has func(*remembered) bool) bool {
	m.Lock()
	defer m.Unlock()
	for _, q := range m.list {
		if q.of == r.of && q.how == r.how && has(&q) {
			*r = q
			return true
		}
	}
	return false
}
