package linear

import "sync/atomic"

// Block is the fixed reduction length: every sum over a vector or over rows
// is taken block by block, and the block sums are added pairwise in order.
// The result is therefore the same bits for any number of threads.
const Block = 1024

// job is one kernel call shared by the team: operands, scalars and the block
// sums. Kernels are plain functions of a job, and jobs are used again, so
// that no call allocates.
type job struct {
	kernel        func(j *job, lo, hi, block int)
	n             int // elements (or rows)
	u, v, w, x, y []float64
	a, b          float64
	m             *CSR
	d             []diagonal
	blk           *blocks
	part          []float64 // sums, one or two a block
	shares        []share   // one a thread
	failed        atomic.Pointer[any]
}

// share is one thread's part of the blocks. The others help when theirs is
// done. It fills a cache line, so that threads at work do not disturb each
// other.
type share struct {
	next atomic.Int64 // the first block not yet taken
	end  int64
	_    [48]byte
}

// spare is the job to be used next.
var spare atomic.Pointer[job]

// begin hands out a job to fill in; finish, finishSum or finishSums runs it.
func begin(kernel func(j *job, lo, hi, block int), n int) *job {
	j := spare.Swap(nil)
	if j == nil {
		j = new(job)
	}
	j.kernel, j.n = kernel, n
	return j
}

// finish runs the job.
func (j *job) finish() {
	theTeam.run(j)
	j.release()
}

// finishSum runs the job, whose kernel writes part[block], and returns the
// sum of the parts.
func (j *job) finishSum() float64 {
	j.makeParts(j.blocks())
	theTeam.run(j)
	s := pairwise(j.part)
	j.release()
	return s
}

// finishSums runs the job, whose kernel writes part[block] and
// part[blocks+block], and returns both sums.
func (j *job) finishSums() (float64, float64) {
	blocks := j.blocks()
	j.makeParts(2 * blocks)
	theTeam.run(j)
	s0, s1 := pairwise(j.part[:blocks]), pairwise(j.part[blocks:])
	j.release()
	return s0, s1
}

// second is where the kernel puts the second sum of its block.
func (j *job) second(block int) *float64 { return &j.part[len(j.part)/2+block] }

func (j *job) blocks() int { return (j.n + Block - 1) / Block }

func (j *job) makeParts(n int) {
	if cap(j.part) < n {
		j.part = make([]float64, n)
	}
	j.part = j.part[:n]
}

// release lets go of the operands and keeps the job for the next call.
func (j *job) release() {
	j.u, j.v, j.w, j.x, j.y, j.m, j.d, j.blk = nil, nil, nil, nil, nil, nil, nil, nil
	spare.Store(j)
}

// split gives each thread its part of the blocks: the same one in every
// kernel, so that a vector's part stays in the cache of its thread.
func (j *job) split(threads, blocks int) {
	if cap(j.shares) < threads {
		j.shares = make([]share, threads)
	}
	j.shares = j.shares[:threads]
	for i := range j.shares {
		j.shares[i].next.Store(int64(blocks * i / threads))
		j.shares[i].end = int64(blocks * (i + 1) / threads)
	}
}

// work takes chunks of blocks, first of the thread's own share, then of the
// others', until none is left. A panic of the kernel is kept for the caller.
func (j *job) work(thread int) {
	defer func() {
		if p := recover(); p != nil {
			kept := p // on the heap in this case only
			j.failed.Store(&kept)
		}
	}()
	for i := range j.shares {
		s := &j.shares[(thread+i)%len(j.shares)]
		for s.next.Load() < s.end {
			first := s.next.Add(chunkBlocks) - chunkBlocks
			for k := first; k < min(first+chunkBlocks, s.end); k++ {
				lo := int(k) * Block
				j.kernel(j, lo, min(lo+Block, j.n), int(k))
			}
		}
	}
}

// pairwise adds the values by halving, so that the rounding error grows with
// log2 of their number.
func pairwise(p []float64) float64 {
	if len(p) <= 8 {
		s := 0.0
		for _, v := range p {
			s += v
		}
		return s
	}
	h := len(p) / 2
	return pairwise(p[:h]) + pairwise(p[h:])
}
