package direct

// buckets keeps numbers 0..n−1 in lists by a key of 0..n−1. A number is in at
// most one list.
type buckets struct {
	head, next, prev []int32 // length n each, −1 ends a list
	where            []int32 // key of each number, −1 if in no list
	lowest           int32
}

func newBuckets(n int) buckets {
	b := buckets{head: make([]int32, n), next: make([]int32, n), prev: make([]int32, n), where: make([]int32, n)}
	for i := range b.head {
		b.head[i], b.next[i], b.prev[i], b.where[i] = -1, -1, -1, -1
	}
	return b
}

// push puts i in front of list k without a way to remove it again.
func (b *buckets) push(i, k int32) {
	b.next[i] = b.head[k]
	b.head[k] = i
}

// add puts i in front of list k.
func (b *buckets) add(i, k int32) {
	b.push(i, k)
	if h := b.next[i]; h >= 0 {
		b.prev[h] = i
	}
	b.prev[i], b.where[i] = -1, k
	b.lowest = min(b.lowest, k)
}

// remove takes i out of its list, if it is in one.
func (b *buckets) remove(i int32) {
	k := b.where[i]
	if k < 0 {
		return
	}
	if p := b.prev[i]; p >= 0 {
		b.next[p] = b.next[i]
	} else {
		b.head[k] = b.next[i]
	}
	if n := b.next[i]; n >= 0 {
		b.prev[n] = b.prev[i]
	}
	b.where[i] = -1
}

// least takes out a number of the lowest key. There must be one.
func (b *buckets) least() int32 {
	for b.head[b.lowest] < 0 {
		b.lowest++
	}
	i := b.head[b.lowest]
	b.remove(i)
	return i
}
