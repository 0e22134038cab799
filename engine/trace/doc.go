// Package trace holds what a trial leaves behind: readings, records, events,
// build notes, endings. It is plain data, the same for every method, and
// imports nothing else of this module.
package trace
