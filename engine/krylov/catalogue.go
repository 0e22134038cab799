package krylov

// Catalogue lists the solvers. Each entry stands in its solver's file.
var Catalogue = []Entry{
	sdEntry,
	richardsonEntry,
	chebyshevEntry,
	cgEntry,
	fcgEntry,
	dcgEntry,
	crEntry,
	minresEntry,
	symmlqEntry,
	bicgEntry,
	cgnrEntry,
	cgneEntry,
	lsqrEntry,
	lsmrEntry,
	cgsEntry,
	tfqmrEntry,
	qmrEntry,
	bicgstablEntry,
	bicgstabEntry,
	gmresEntry,
	fgmresEntry,
	gmresdrEntry,
	gcrEntry,
	idrEntry,
}

// Lookup returns the solver of that name.
func Lookup(name string) (Entry, bool) {
	for _, e := range Catalogue {
		if e.Name == name {
			return e, true
		}
	}
	return Entry{}, false
}
