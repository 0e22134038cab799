// Package samples generates systems whose answers are known, all from one
// invented scenario: a river weir under refurbishment, with its gate plates,
// frames, galleries and cables. Each sample shows one thing that makes a
// linear solve slow or fail, says where its form comes from and what is known
// of its spectrum.
//
// A sample is written NAME[:ARGS] in the grammar of pairings: plate:200,
// plate:200,jump=1e4, seepage:b=leaky. Adding one is one file and one line in
// Catalogue.
package samples
