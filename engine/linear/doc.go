// Package linear holds what every other package of the engine works on:
// operators and their optional abilities, the compressed-row matrix, the
// vector kernels with the thread team that runs them, the system A x = b
// with what is known of it, and the words a pairing is written in
// (parameters and grammar).
//
// It imports nothing else of this module.
package linear
