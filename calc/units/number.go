package units

import (
	"math"
	"strconv"
)

// reading is the number of a quantity, exact where it has at most 19 digits.
type reading struct {
	value pair
	end   int // index behind the number
}

// scanNumber finds the longest JSON number at the start of text: no plus sign,
// no leading zeros, digits on both sides of the point. It reports false where
// there is none.
func scanNumber(text string) (reading, bool) {
	i, digits, scale := 0, 0, 0
	var mantissa uint64
	negative := i < len(text) && text[i] == '-'
	if negative {
		i++
	}
	first := i
	for i < len(text) && isDigit(text[i]) && (i == first || text[first] != '0') {
		mantissa, digits = grown(mantissa, digits, text[i])
		i++
	}
	if i == first {
		return reading{}, false
	}
	if i+1 < len(text) && text[i] == '.' && isDigit(text[i+1]) {
		for i++; i < len(text) && isDigit(text[i]); i++ {
			mantissa, digits = grown(mantissa, digits, text[i])
			scale--
		}
	}
	exponent, end := scanExponent(text, i)
	if digits > 19 || scale+exponent > 22 || scale+exponent < -22 {
		v, _ := strconv.ParseFloat(text[:end], 64)
		return reading{pair{hi: v}, end}, true
	}
	return reading{scaled(mantissa, scale+exponent, negative), end}, true
}

// grown appends a digit; leading zeros do not count as digits.
func grown(mantissa uint64, digits int, c byte) (uint64, int) {
	if mantissa == 0 && c == '0' {
		return 0, digits
	}
	return mantissa*10 + uint64(c-'0'), digits + 1
}

// scanExponent reads e±digits at i, if it is complete. Far beyond the range of
// a double the digits do not matter any more.
func scanExponent(text string, i int) (exponent, end int) {
	if i >= len(text) || text[i]|0x20 != 'e' {
		return 0, i
	}
	j, negative := i+1, false
	if j < len(text) && (text[j] == '+' || text[j] == '-') {
		negative = text[j] == '-'
		j++
	}
	if j >= len(text) || !isDigit(text[j]) {
		return 0, i
	}
	for ; j < len(text) && isDigit(text[j]); j++ {
		exponent = min(exponent*10+int(text[j]-'0'), 1e6)
	}
	if negative {
		exponent = -exponent
	}
	return exponent, j
}

func scaled(mantissa uint64, exponent int, negative bool) pair {
	v := pairOfInteger(mantissa)
	switch {
	case exponent > 0:
		v = v.times(pair{hi: tens[exponent]})
	case exponent < 0:
		v = v.over(pair{hi: tens[-exponent]})
	}
	if negative && mantissa != 0 {
		return pair{-v.hi, -v.lo}
	}
	return v
}

// tens are the powers of ten that a double holds exactly.
var tens = [...]float64{1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11,
	1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22}

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

func isFinite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }
