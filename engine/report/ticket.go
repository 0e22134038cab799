package report

import "io"

// Ticket writes the head of the report alone, to be pasted into a ticket.
func Ticket(w io.Writer, d Document) error { return writeLines(w, Head(d)) }
