package linear

import "sync/atomic"

// partStride is how many blocks of a job stand for one part: so many that the
// team takes one part at a time and shares even two of them.
const partStride = max(serialBelow, chunkBlocks)

// errand carries the work of one call of Parallel to the team. It is used
// again, so that no call allocates.
type errand struct {
	do     func(part int)
	kernel func(j *job, lo, hi, block int)
}

// idle is the errand to be used next.
var idle atomic.Pointer[errand]

// Parallel runs do(0), …, do(parts−1) on the thread team, each once, in any
// order and side by side; it returns when all are done. The parts share no
// data that one of them writes, and call no kernel of this package that runs
// on the team. What is a part follows from the data, never from the number of
// threads, so that results do not depend on it. A panic of a part is raised
// again here.
func Parallel(parts int, do func(part int)) {
	if parts <= 1 {
		if parts == 1 {
			do(0)
		}
		return
	}
	e := idle.Swap(nil)
	if e == nil {
		e = new(errand)
		e.kernel = e.run
	}
	e.do = do
	begin(e.kernel, parts*partStride*Block).finish()
	e.do = nil
	idle.Store(e)
}

func (e *errand) run(_ *job, _, _, block int) {
	if block%partStride == 0 {
		e.do(block / partStride)
	}
}
