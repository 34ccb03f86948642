package units

import (
	"strconv"
	"strings"
)

// compiled multiplies the factors of an expression. What has an offset, a basis
// or a reference state keeps its meaning only when it stands alone.
func (p *parser) compiled() (Unit, *refusal) {
	if p.n == 1 && p.terms[0].exponent == 1 && p.terms[0].count == 1 {
		return *p.terms[0].unit, nil
	}
	u := Unit{factor: one}
	for i := range p.terms[:p.n] {
		if bad := u.multiply(&p.terms[i]); bad != nil {
			return Unit{}, bad
		}
	}
	if !u.factor.usable() {
		return Unit{}, p.malformed("its size is beyond what a number holds")
	}
	return u, nil
}

func (u *Unit) multiply(t *term) *refusal {
	switch v := t.unit; {
	case v.role == point:
		return &refusal{code: CodeTemperatureDifference,
			reason: v.text + " is a point on a scale and cannot stand in a compound; write K or " + v.text + "_diff"}
	case v.basis != Plain:
		return &refusal{code: CodePressureBasis, reason: v.text + " is a state and cannot stand in a compound; write the plain unit"}
	case v.reference.Given() && (t.exponent != 1 || u.reference.Given()):
		return &refusal{code: CodeReferenceConditions, reason: v.text + " can stand once, as the volume that flows"}
	case v.reference.Given():
		u.reference = v.reference
	}
	var ok bool
	if u.dimension, ok = u.dimension.with(t.unit.dimension, t.exponent); !ok {
		return &refusal{code: CodeMalformedUnit, reason: "its powers are too large"}
	}
	u.factor = u.factor.times(t.unit.factor.power(t.exponent))
	if t.count > 1 {
		n := pairOfInteger(uint64(t.count))
		if t.exponent < 0 {
			n = one.over(n)
		}
		u.factor = u.factor.times(n)
	}
	return nil
}

// spelling composes the one output form: factors in their order, products with
// a point, one slash, parentheses below it when there are several.
func (p *parser) spelling() string {
	if p.n == 0 {
		return "1"
	}
	var above, below []string
	for _, t := range p.terms[:p.n] {
		if t.unit.text == "1" && t.count == 1 {
			continue
		}
		if t.exponent > 0 {
			above = append(above, t.spelling(t.exponent))
		} else {
			below = append(below, t.spelling(-t.exponent))
		}
	}
	text := strings.Join(above, ".")
	if text == "" {
		text = "1"
	}
	switch len(below) {
	case 0:
		return text
	case 1:
		return text + "/" + below[0]
	}
	return text + "/(" + strings.Join(below, ".") + ")"
}

func (t *term) spelling(exponent int) string {
	text := t.unit.text
	if t.unit.text == "1" {
		return strconv.Itoa(int(t.count))
	}
	if strings.ContainsAny(text, "./") {
		text = "(" + text + ")"
	}
	if t.count > 1 {
		text = strconv.Itoa(int(t.count)) + text
	}
	if exponent != 1 {
		text += strconv.Itoa(exponent)
	}
	return text
}
