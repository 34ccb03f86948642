package units

import (
	"slices"
	"strings"
)

const (
	mostNames  = 3
	longestFix = 24 // a longer name is no typing error of a unit
)

// nearest lists the names that a typing error may have meant: the same letters
// in another case first, then one or two letters off.
func (t *table) nearest(symbol string) []string {
	if len(symbol) > longestFix {
		return nil
	}
	var found [3][]string
	for _, u := range t.outputs {
		if kindOf(u) == Other {
			continue
		}
		if d := distance(symbol, u.text); d < len(found) && !slices.Contains(found[d], u.text) {
			found[d] = append(found[d], u.text)
		}
	}
	names := found[0]
	if len(symbol) > 1 {
		names = append(names, found[1]...)
	}
	if len(symbol) > 4 {
		names = append(names, found[2]...)
	}
	return names[:min(len(names), mostNames)]
}

// distance counts the letters to change, insert or drop; 0 means another case,
// and 3 stands for anything further.
func distance(a, b string) int {
	if len(a)-len(b) > 2 || len(b)-len(a) > 2 || len(b) > longestFix+2 {
		return 3
	}
	if strings.EqualFold(a, b) {
		return 0
	}
	var row [longestFix + 4]int
	for j := range row {
		row[j] = j
	}
	for i := range len(a) {
		diagonal := row[0]
		row[0] = i + 1
		for j := range len(b) {
			change := diagonal
			if a[i] != b[j] {
				change++
			}
			diagonal = row[j+1]
			row[j+1] = min(change, row[j]+1, row[j+1]+1)
		}
	}
	return max(1, min(row[len(b)], 3))
}
