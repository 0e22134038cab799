package run

import "strings"

// mostOff is how many letters a mistyped name may be off.
const mostOff = 2

// nearest is the known name that was probably meant, with its first parameter
// where that was written without a colon (ilu0 for ilu:0); empty where none is
// near.
func nearest(name string, known []string) string {
	name = strings.ToLower(name)
	stem := strings.TrimRight(name, "0123456789")
	best, least := "", min(mostOff, len(name)/2)+1
	for _, k := range known {
		if k == name {
			return k
		}
		if k == stem {
			return stem + ":" + name[len(stem):]
		}
		if d := lettersOff(name, k); d < least {
			best, least = k, d
		}
	}
	return best
}

// lettersOff is the least number of letters to insert, delete or replace that
// turns a into b (Levenshtein, Soviet Physics Doklady 10, 1966).
func lettersOff(a, b string) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range len(a) {
		diagonal := row[0]
		row[0] = i + 1
		for j := range len(b) {
			cost := diagonal
			if a[i] != b[j] {
				cost++
			}
			diagonal = row[j+1]
			row[j+1] = min(cost, diagonal+1, row[j]+1)
		}
	}
	return row[len(b)]
}
