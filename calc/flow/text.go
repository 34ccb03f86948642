package flow

import "strconv"

// shortest is a number as a person writes it.
func shortest(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }
