package units

import (
	"strings"
	"unicode/utf8"
)

// Tolerance follows a value behind ±. The half-width is in SI, of the value.
type Tolerance struct {
	Given     bool
	HalfWidth float64
	Coverage  float64 // coverage factor of an expanded normal one; 0: rectangular
}

// Quantity is a value in the SI unit of its kind. A gauge pressure is not yet
// absolute: the caller adds the atmosphere of the site.
type Quantity struct {
	Value     float64
	Basis     Basis
	Reference Reference // of a reference volume flow whose unit fixes it
	Tolerance Tolerance
}

// Parse reads "<number> <unit>" as a quantity of the kind. A bare number is
// accepted only for a dimensionless kind.
func Parse(text string, kind Kind) (Quantity, error) {
	q, bad := parse(text, kind, nil)
	if bad.code != "" {
		return Quantity{}, bad.about(text, kind)
	}
	return q, nil
}

// ParseIn reads the number of a cell whose column header gave the unit: the
// number alone, or with a tolerance.
func ParseIn(number string, unit Unit, kind Kind) (Quantity, error) {
	q, bad := parse(number, kind, &unit)
	if bad.code != "" {
		return Quantity{}, bad.about(number, kind)
	}
	return q, nil
}

// ParseUnit reads a unit alone, as a column header or a conversion names it.
func ParseUnit(text string) (Unit, error) {
	t := tables()
	body := trimBlanks(text)
	if body == "" {
		return Unit{}, refusal{code: CodeBlank, reason: "blank, where a unit belongs"}.about(text, Other)
	}
	u, bad := t.readUnit(body, true)
	if bad.code != "" {
		return Unit{}, bad.about(text, Other)
	}
	return u, nil
}

func parse(text string, kind Kind, header *Unit) (Quantity, refusal) {
	t := tables()
	split, bad := t.split(text, kind, header)
	if bad.code != "" {
		return Quantity{}, bad
	}
	if bad := t.fits(&split.unit, kind); bad.code != "" {
		return Quantity{}, bad
	}
	q := Quantity{Value: split.unit.toSI(split.number).round() + 0, Basis: split.unit.basis}
	if kind == ReferenceVolumeFlow {
		q.Reference = split.unit.reference
	}
	if !isFinite(q.Value) {
		return Quantity{}, refusal{code: CodeNotFinite, reason: "beyond what a number holds"}
	}
	if split.tolerance != "" {
		q.Tolerance, bad = t.tolerance(split, kind, q, header != nil)
	}
	return q, bad
}

// parts of a quantity text.
type parts struct {
	number    pair
	unit      Unit
	tolerance string // behind the mark, "" without one
}

// split takes a text apart: its number, its unit (or the header's) and what
// follows ±.
func (t *table) split(text string, kind Kind, header *Unit) (parts, refusal) {
	body := trimBlanks(text)
	r, ok := scanNumber(body)
	if !ok {
		return parts{}, noNumber(body)
	}
	rest := trimBlanks(body[r.end:])
	p := parts{number: r.value}
	if header == nil && rest != "" && !isDigit(rest[0]) {
		if u := t.units[rest]; u != nil {
			p.unit = *u
			return p, refusal{}
		}
	}
	if !isFinite(r.value.hi) {
		return parts{}, refusal{code: CodeNotFinite, reason: "beyond what a number holds"}
	}
	if bad := badContinuation(body, r.end); bad.code != "" {
		return parts{}, bad
	}
	rest, p.tolerance = cutTolerance(rest)
	return t.unitOf(p, rest, kind, header)
}

// unitOf fills in the unit: the text's own, the header's, or the number one.
func (t *table) unitOf(p parts, rest string, kind Kind, header *Unit) (parts, refusal) {
	var bad refusal
	switch {
	case rest == "" && header != nil:
		p.unit = *header
	case rest == "" && (kind == Dimensionless || kind == Other):
		p.unit = *t.units["1"]
	case rest == "":
		bad = refusal{code: CodeUnitRequired, reason: "a number without a unit; in SI it would be in " + kind.SI() + ", so write the unit"}
	case header != nil:
		bad = refusal{code: CodeMalformedUnit, reason: "the column already gives the unit " + header.text + "; write the number alone"}
	default:
		p.unit, bad = t.readUnit(rest, kind >= kinds)
		if bad.code == "" && p.unit.text == "" && t.fits(&p.unit, kind).code != "" {
			p.unit, bad = t.readUnit(rest, true) // the refusal needs its spelling
		}
	}
	return p, bad
}

// fits checks that a unit measures the kind, and says so the right way.
func (t *table) fits(u *Unit, kind Kind) refusal {
	if kind >= kinds || u.dimension != kindTable[kind].dimension {
		return t.mismatch(u, kind)
	}
	switch kind {
	case StatePressure:
		if u.basis == Plain {
			return t.basisNeeded(u)
		}
		return refusal{}
	case Temperature:
		if u.role == difference {
			return refusal{code: CodeTemperatureDifference, reason: "a difference, where a temperature belongs; write it as a point"}
		}
		return refusal{}
	case ReferenceVolumeFlow:
		return refusal{}
	}
	switch {
	case u.basis != Plain:
		return refusal{code: CodePressureBasis, reason: "a pressure difference takes a plain unit such as kPa, bar or psi, neither absolute nor gauge"}
	case u.role == point:
		return refusal{code: CodeTemperatureDifference, reason: "a point on the scale, where a difference belongs; write K or " + u.text + "_diff"}
	case u.reference.Given():
		return refusal{code: CodeReferenceConditions, reason: "stated at reference conditions, where " + kind.words() + " belongs; give reference_volume_flow, or the value at the actual state"}
	}
	return refusal{}
}

// trimBlanks cuts blanks of any width at both ends.
func trimBlanks(s string) string {
	for len(s) > 0 && (s[0] == ' ' || s[0] == '\t' || s[0] == '\n' || s[0] == '\r') {
		s = s[1:]
	}
	for len(s) > 0 && (s[len(s)-1] == ' ' || s[len(s)-1] == '\t' || s[len(s)-1] == '\n' || s[len(s)-1] == '\r') {
		s = s[:len(s)-1]
	}
	if len(s) > 0 && (s[0] >= utf8.RuneSelf || s[len(s)-1] >= utf8.RuneSelf) {
		return strings.TrimFunc(s, isBlank)
	}
	return s
}

// isBlank knows the blanks that office programs put between number and unit.
func isBlank(r rune) bool {
	switch r {
	case ' ', '\t', '\n', '\r', '\u00a0', '\u2009', '\u202f':
		return true
	}
	return false
}
