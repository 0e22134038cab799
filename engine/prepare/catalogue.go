package prepare

import "slices"

// Catalogue lists every preparation. A new one is a file and a line here.
var Catalogue = []Entry{
	scaleEntry,
	projectEntry,
	matchEntry,
	symmetriseEntry,
	pruneEntry,
	rcmEntry,
	amdEntry,
	ndEntry,
	colourEntry,
	shiftEntry,
	rescaleEntry,
}

// Lookup returns the preparation of that name.
func Lookup(name string) (Entry, bool) {
	i := slices.IndexFunc(Catalogue, func(e Entry) bool { return e.Name == name })
	if i < 0 {
		return Entry{}, false
	}
	return Catalogue[i], true
}
