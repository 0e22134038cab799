// Package check judges a solution from elsewhere without any trial: every
// common measure of its residual, its backward and forward errors, the rows
// that are worst, and which measure a number that another program printed may
// have been.
package check
