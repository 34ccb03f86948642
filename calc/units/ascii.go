package units

import "strings"

// asciiOf writes a unit as a column name carries it: m3/s as m3_per_s.
func asciiOf(text string) string {
	switch text {
	case "1":
		return ""
	case "%":
		return "percent"
	}
	var b strings.Builder
	for _, r := range text {
		switch {
		case r == '/':
			b.WriteString("_per_")
		case r == '.':
			b.WriteByte('_')
		case r == '(' || r == ')':
		case r < 0x80 && (r >= '0' && r <= '9' || r|0x20 >= 'a' && r|0x20 <= 'z' || r == '_'):
			b.WriteRune(r)
		default:
			b.WriteByte('_')
		}
	}
	return strings.TrimPrefix(b.String(), "1_")
}

// UnitFromASCII reads the unit of a column name in the form that answers give
// it: m3_per_s, Pa_s, kPaa. The answer's own Pa of a state pressure is absolute.
func UnitFromASCII(text string, kind Kind) (Unit, error) {
	t := tables()
	if kind < kinds {
		for s := range systems {
			if u := t.systems[s][kind]; u.ASCII() == text {
				return u, nil
			}
		}
	}
	u, bad := t.fromASCII(text)
	if bad == nil && kind < kinds {
		bad = t.fits(&u, kind)
	}
	if bad != nil {
		return Unit{}, bad.about(text, kind)
	}
	return u, nil
}

// fromASCII undoes asciiOf: _per_ is the quotient, and an underscore the
// product where the name with it is no unit.
func (t *table) fromASCII(text string) (Unit, *refusal) {
	above, below, quotient := strings.Cut("_"+text, "_per_")
	above = strings.TrimPrefix(above, "_")
	if above == "" {
		above = "1"
	}
	candidates := []string{above, strings.ReplaceAll(above, "_", ".")}
	if quotient {
		below = strings.ReplaceAll(below, "_per_", "/")
		candidates = []string{above + "/" + below, above + "/(" + strings.ReplaceAll(below, "_", ".") + ")",
			candidates[1] + "/" + below, candidates[1] + "/(" + strings.ReplaceAll(below, "_", ".") + ")"}
	}
	var first *refusal
	for i, c := range candidates {
		u, bad := t.readUnit(c, true)
		if bad == nil {
			return u, bad
		}
		if i == 0 {
			first = bad
		}
	}
	return Unit{}, first
}
