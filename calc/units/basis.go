package units

import "strings"

var basisSuffixes = [...]struct {
	text  string
	basis Basis
}{
	{"(g)", Gauge}, {"(a)", Absolute}, {"(G)", Gauge}, {"(A)", Absolute}, {"(gauge)", Gauge}, {"(abs)", Absolute},
	{"_gauge", Gauge}, {"_abs", Absolute}, {" gauge", Gauge}, {" abs", Absolute}, {" absolute", Absolute}, {" g", Gauge}, {" a", Absolute},
}

// cutBasis splits "bar(g)" or "bar abs" into the plain unit and its basis.
func cutBasis(text string) (string, Basis) {
	if strings.IndexByte(text, '(') < 0 && strings.IndexByte(text, '_') < 0 && strings.IndexByte(text, ' ') < 0 {
		return text, Plain
	}
	for _, s := range basisSuffixes {
		base, found := strings.CutSuffix(text, s.text)
		if !found {
			continue
		}
		base = strings.TrimRight(base, " ")
		if base == "" || strings.IndexByte("./*(", base[len(base)-1]) >= 0 || strings.HasSuffix(base, "·") {
			continue
		}
		return base, s.basis
	}
	return text, Plain
}

// withBasis reads a plain pressure and marks it absolute or gauge.
func (t *table) withBasis(base string, basis Basis, spelled bool) (Unit, *refusal) {
	u, bad := t.readUnit(base, spelled)
	if bad != nil {
		return Unit{}, bad
	}
	if u.dimension != Pressure.Dimension() || u.basis != Plain {
		return Unit{}, &refusal{code: CodeMalformedUnit, reason: "only a plain pressure can be marked absolute or gauge, once"}
	}
	u.basis = basis
	if spelled {
		u.text = t.basisName(u.text, basis)
	}
	return u, nil
}

// basisName is the name of a pressure unit with its basis: barg where there is
// one, else bar_gauge.
func (t *table) basisName(text string, basis Basis) string {
	short, long := "a", "_abs"
	if basis == Gauge {
		short, long = "g", "_gauge"
	}
	if u := t.units[text+short]; u != nil && u.basis == basis && u.text == text+short {
		return u.text
	}
	return text + long
}
