// Package engine answers why a linear solve is slow or failing and what to
// use instead. A session takes a system through six stages:
//
//	1  load      bytes → linear.System, position in every error
//	2  inspect   system → Facts
//	3  run       pairings → histories: trial, fair slices, limits, audits, clock
//	4  diagnose  facts + histories → findings: one pure rule per file
//	5  choose    findings + histories → line-up and ranked choice
//	6  report    document → text, JSON, CSV, Markdown
//
// Beside them stands check, which judges a solution from elsewhere without
// any trial.
//
// The materials they work with are nouns: linear (operators, matrix, kernels,
// pairing grammar), prepare (system → system, with the way back), trace
// (records, events, endings), krylov and precond (methods, with their
// catalogues), spectrum and direct.
//
// Nouns never import verbs; a verb imports earlier verbs' results only. A
// test enforces the table.
package engine
