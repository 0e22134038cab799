package inspect

import (
	"math"

	"dwindle/engine/spectrum"
)

// A density has densityBars bars; it is estimated with densityProbes random
// vectors of densitySteps products each.
const (
	densityBars   = 24
	densitySteps  = 40
	densityProbes = 8
	wideSpectrum  = 100 // ratio of the ends from which bars are equal on a logarithmic scale
)

// density tells where the eigenvalues of a symmetric A lie: counted where all
// are known, else estimated.
func (e *exam) density() error {
	x := e.out.Raw
	if !e.symmetric || x == nil || !finite(x.Smallest) || !(x.Largest > x.Smallest) {
		return nil
	}
	edges := barEdges(x.Smallest, x.Largest)
	if x.Exact {
		e.out.Density = counted(x.Values, edges)
		return nil
	}
	work := densityProbes * densitySteps * (e.product() + 4*densitySteps*float64(e.f.N))
	if !e.spend(work) {
		return nil
	}
	bars, err := spectrum.Density(e.ctx, e.f.N, e.a.Apply, edges, densitySteps, densityProbes)
	for _, b := range bars {
		e.out.Density = append(e.out.Density, Bin(b))
	}
	return err
}

// barEdges part a spectrum: alike on a logarithmic scale where it is positive
// and wide.
func barEdges(low, high float64) []float64 {
	edges := make([]float64, densityBars+1)
	for k := range edges {
		t := float64(k) / densityBars
		edges[k] = low + t*(high-low)
		if low > 0 && high > wideSpectrum*low {
			edges[k] = low * math.Pow(high/low, t)
		}
	}
	edges[0], edges[densityBars] = low, high
	return edges
}

// counted is the density of eigenvalues that are all known, in rising order.
func counted(values []complex128, edges []float64) []Bin {
	bins := make([]Bin, len(edges)-1)
	k := 0
	for i := range bins {
		bins[i].From, bins[i].To = edges[i], edges[i+1]
	}
	for _, v := range values {
		for k < len(bins)-1 && real(v) >= edges[k+1] {
			k++
		}
		bins[k].Count++
	}
	return bins
}
