package samples

// Catalogue lists the samples in the order they are shown.
var Catalogue = []Sample{
	plate,
	frame,
	seepage,
	duct,
	acoustics,
	drains,
	strut,
	feeder,
	strakos,
	shift,
	kershaw,
	line,
}
