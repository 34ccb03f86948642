package units

import "strconv"

// Dimension holds the exponents of the base quantities: length, mass, time,
// electric current, temperature, amount of substance, luminous intensity, and
// plane angle, which is kept apart from the number one.
type Dimension [8]int8

var baseUnits = [8]string{"m", "kg", "s", "A", "K", "mol", "cd", "rad"}

// largestExponent bounds what a dimension holds.
const largestExponent = 99

// String writes the dimension in base units, "m-1.kg.s-2".
func (d Dimension) String() string {
	text := ""
	for i, e := range d {
		if e == 0 {
			continue
		}
		if text != "" {
			text += "."
		}
		text += baseUnits[i]
		if e != 1 {
			text += strconv.Itoa(int(e))
		}
	}
	if text == "" {
		return "1"
	}
	return text
}

// with adds n times the exponents of b, and reports whether they stay in bounds.
func (d Dimension) with(b Dimension, n int) (Dimension, bool) {
	for i := range d {
		e := int(d[i]) + n*int(b[i])
		if e > largestExponent || e < -largestExponent {
			return d, false
		}
		d[i] = int8(e)
	}
	return d, true
}
