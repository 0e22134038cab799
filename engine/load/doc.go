// Package load is stage 1: bytes become a linear.System.
//
// It reads Matrix Market, Harwell–Boeing and Rutherford–Boeing files, plain
// or compressed with gzip, as a stream, and vectors from Matrix Market array
// files or plain columns. Nothing is guessed: a file that breaks the rules of
// its format is refused with the line and the reason, and memory is taken for
// what the file holds, never for what its size line claims.
//
// A plain coordinate file is parsed on all threads in chunks, as far as its
// lines are in order; the rest, and with it whatever is wrong, is left to the
// same reader that takes streams, so that there is one judge of every file.
package load
