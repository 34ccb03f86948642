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
	if bad != nil {
		return Quantity{}, bad.about(text, kind)
	}
	return q, nil
}

// ParseIn reads the number of a cell whose column header gave the unit: the
// number alone, or with a tolerance.
func ParseIn(number string, unit Unit, kind Kind) (Quantity, error) {
	q, bad := parse(number, kind, &unit)
	if bad != nil {
		return Quantity{}, bad.about(number, kind)
	}
	return q, nil
}

// Measures refuses a unit, of a column header say, that is none of the kind.
func (u Unit) Measures(kind Kind) error {
	if bad := tables().fits(&u, kind); bad != nil {
		return bad.about(u.text, kind)
	}
	return nil
}

// ParseUnit reads a unit alone, as a column header or a conversion names it.
func ParseUnit(text string) (Unit, error) {
	t := tables()
	body := trimBlanks(text)
	if body == "" {
		return Unit{}, (&refusal{code: CodeBlank, reason: "blank, where a unit belongs"}).about(text, Other)
	}
	u, bad := t.readUnit(body, true)
	if bad != nil {
		return Unit{}, bad.about(text, Other)
	}
	return u, nil
}

func parse(text string, kind Kind, header *Unit) (Quantity, *refusal) {
	t := tables()
	var own Unit
	p, tolerance, bad := t.split(text, kind, header, &own)
	if bad != nil {
		return Quantity{}, bad
	}
	if bad := t.fits(p.unit, kind); bad != nil {
		return Quantity{}, bad
	}
	q := Quantity{Value: p.unit.toSI(p.number).round() + 0, Basis: p.unit.basis}
	if kind == ReferenceVolumeFlow {
		q.Reference = p.unit.reference
	}
	if !isFinite(q.Value) {
		return Quantity{}, &refusal{code: CodeNotFinite, reason: "beyond what a number holds"}
	}
	if tolerance != "" {
		q.Tolerance, bad = t.tolerance(tolerance, measured{q.Value, p.unit, kind, header != nil})
	}
	return q, bad
}

// parts of a quantity text.
type parts struct {
	number pair
	unit   *Unit
}

// split takes a text apart: its number, its unit (or the header's) and what
// follows ±, "" without it. A unit that is no name of the tables is composed in own.
func (t *table) split(text string, kind Kind, header, own *Unit) (p parts, tolerance string, bad *refusal) {
	body := trimBlanks(text)
	r, ok := scanNumber(body)
	if !ok {
		return p, "", noNumber(body)
	}
	rest := trimBlanks(body[r.end:])
	p.number = r.value
	if header == nil && rest != "" && !isDigit(rest[0]) {
		if p.unit = t.units[rest]; p.unit != nil {
			return p, "", nil
		}
	}
	if !isFinite(r.value.hi) {
		return p, "", &refusal{code: CodeNotFinite, reason: "beyond what a number holds"}
	}
	if bad := badContinuation(body, r.end); bad != nil {
		return p, "", bad
	}
	rest, tolerance = cutTolerance(rest)
	p.unit, bad = t.unitOf(rest, kind, header, own)
	return p, tolerance, bad
}

// unitOf fills in the unit: the text's own, the header's, or the number one.
func (t *table) unitOf(rest string, kind Kind, header, own *Unit) (*Unit, *refusal) {
	switch u := t.units[rest]; {
	case rest == "" && header != nil:
		return header, nil
	case rest == "" && (kind == Dimensionless || kind == Other):
		return t.units["1"], nil
	case rest == "":
		return nil, &refusal{code: CodeUnitRequired, reason: "a number without a unit; in SI it would be in " + kind.SI() + ", so write the unit"}
	case header != nil:
		return nil, &refusal{code: CodeMalformedUnit, reason: "the column already gives the unit " + header.text + "; write the number alone"}
	case u != nil:
		return u, nil
	}
	var bad *refusal
	*own, bad = t.readUnit(rest, kind >= kinds)
	if bad == nil && own.text == "" && t.fits(own, kind) != nil {
		*own, bad = t.readUnit(rest, true) // the refusal needs its spelling
	}
	return own, bad
}

// fits checks that a unit measures the kind, and says so the right way.
func (t *table) fits(u *Unit, kind Kind) *refusal {
	if kind >= kinds || u.dimension != kindTable[kind].dimension {
		return t.mismatch(u, kind)
	}
	switch kind {
	case StatePressure:
		if u.basis == Plain {
			return t.basisNeeded(u)
		}
		return nil
	case Temperature:
		if u.role == difference {
			return &refusal{code: CodeTemperatureDifference, reason: "a difference, where a temperature belongs; write it as a point"}
		}
		return nil
	case ReferenceVolumeFlow:
		return nil
	}
	switch {
	case u.basis != Plain:
		return &refusal{code: CodePressureBasis, reason: "a pressure difference takes a plain unit such as kPa, bar or psi, neither absolute nor gauge"}
	case u.role == point:
		return &refusal{code: CodeTemperatureDifference, reason: "a point on the scale, where a difference belongs; write K or " + u.text + "_diff"}
	case u.reference.Given():
		return &refusal{code: CodeReferenceConditions, reason: "stated at reference conditions, where " + kind.words() + " belongs; give reference_volume_flow, or the value at the actual state"}
	}
	return nil
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
