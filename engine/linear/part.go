package linear

// ParsePart reads one part of a pairing alone, NAME[:ARGS]. Samples are
// written in the same grammar.
func ParsePart(s string) (Part, error) { return parsePart(s) }
