package flow

import "strconv"

// shortest is a number as a person writes it.
func shortest(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

// String is the name of the regime in the contract, empty for none.
func (n Name) String() string {
	switch n {
	case AtRest:
		return "at_rest"
	case Laminar:
		return "laminar"
	case Transitional:
		return "transitional"
	case Turbulent:
		return "turbulent"
	}
	return ""
}

// String is the name of the approach in the contract.
func (a Approach) String() string {
	switch a {
	case Ordinary:
		return "ordinary"
	case Disturbed:
		return "disturbed"
	case Calm:
		return "calm"
	}
	return "unknown"
}
