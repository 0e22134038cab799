package precond

// Catalogue lists the preconditioners. Each entry stands in its own file.
var Catalogue = []Entry{
	noneEntry,
	jacobiEntry,
	blockJacobiEntry,
	gsEntry,
	sorEntry,
	sgsEntry,
	ssorEntry,
	icEntry,
	amgEntry,
	micEntry,
	ictEntry,
	iluEntry,
	miluEntry,
	ilutEntry,
	ilutpEntry,
	fsaiEntry,
	spaiEntry,
	polyEntry,
	rasEntry,
	schurEntry,
	givenEntry,
	ownFactorsEntry,
	ownSolveEntry,
	choleskyEntry,
	ldlEntry,
	luEntry,
}

// Lookup returns the preconditioner of that name.
func Lookup(name string) (Entry, bool) {
	for _, e := range Catalogue {
		if e.Name == name {
			return e, true
		}
	}
	return Entry{}, false
}
