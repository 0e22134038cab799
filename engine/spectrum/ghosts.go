package spectrum

import "math"

const (
	sameValue  = 1e-8  // copies of one eigenvalue agree to this, relative
	noWeight   = 1e-16 // a node with less, not settled, is a copy on its way
	settledGap = 1e-3  // a node is settled when its bound is this part of its gap
)

// Cluster is one eigenvalue as a run in floating point sees it: where
// orthogonality is lost, copies of it (ghosts) appear, whose weights add up to
// that of the one (Greenbaum and Strakoš, SIAM J. Matrix Anal. Appl. 13, 1992).
type Cluster struct {
	Value  float64
	Weight float64
	Bound  float64 // an eigenvalue lies within it
	Copies int     // 1 without ghosts; those on their way are counted where they head
	Gap    float64 // to the nearest other cluster; +Inf for the only one
}

// Settled says whether the bound is below a thousandth of the gap.
func (c Cluster) Settled() bool { return c.Bound <= settledGap*math.Min(c.Gap, math.Abs(c.Value)) }

// Clusters merges the ghosts of a quadrature, values rising. Nodes that agree
// to 1e-8 are one eigenvalue, and a node of weight below 1e-16 that no
// eigenvalue is near is a copy on its way from one to the next.
func (q Quadrature) Clusters() []Cluster {
	out := make([]Cluster, 0, len(q.Nodes))
	transit := 0
	for i, v := range q.Nodes {
		if q.Weights[i] < noWeight && q.Bounds[i] > sameValue*v {
			transit++
			continue
		}
		if k := len(out) - 1; k >= 0 && v-out[k].Value <= sameValue*v {
			c := &out[k]
			if q.Weights[i] > c.Weight {
				c.Value = v
			}
			c.Weight += q.Weights[i]
			c.Bound = math.Min(c.Bound, q.Bounds[i])
			c.Copies++
			continue
		}
		out = append(out, Cluster{Value: v, Weight: q.Weights[i], Bound: q.Bounds[i], Copies: 1})
	}
	setGaps(out)
	if transit > 0 {
		q.assignTransit(out)
	}
	return out
}

func setGaps(c []Cluster) {
	for i := range c {
		c[i].Gap = math.Inf(1)
		if i > 0 {
			c[i].Gap = c[i].Value - c[i-1].Value
			c[i-1].Gap = math.Min(c[i-1].Gap, c[i].Gap)
		}
	}
}

// assignTransit counts a copy on its way with the cluster it has come close to.
func (q Quadrature) assignTransit(c []Cluster) {
	at := 0
	for i, v := range q.Nodes {
		if !(q.Weights[i] < noWeight && q.Bounds[i] > sameValue*v) {
			continue
		}
		for at+1 < len(c) && math.Abs(c[at+1].Value-v) < math.Abs(c[at].Value-v) {
			at++
		}
		if len(c) > 0 && math.Abs(c[at].Value-v) <= settledGap*math.Min(c[at].Gap, math.Abs(v)) {
			c[at].Copies++
		}
	}
}
