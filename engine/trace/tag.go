package trace

import "strconv"

// tags are the signs of trials in the order of their numbers. Left out are
// signs that charts mark with: x for what broke down, and the capitals of
// common stopping rules.
const tags = "123456789abcdefghijklmnopqrstuvwyzACDFGHJKLMNOQSTUVWYZ"

// Tag is the sign by which a trial goes everywhere: on screens, in reports and
// on stderr. Trials count from 1; beyond the signs there are, the tag is the
// number.
func Tag(number int) string {
	if number >= 1 && number <= len(tags) {
		return tags[number-1 : number]
	}
	return strconv.Itoa(number)
}
