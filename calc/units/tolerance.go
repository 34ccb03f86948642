package units

import "strings"

// cutTolerance splits a text at ± or +/-.
func cutTolerance(text string) (unit, tolerance string) {
	for _, mark := range [...]string{"±", "+/-"} {
		if before, after, found := strings.Cut(text, mark); found {
			after = trimBlanks(after)
			if after == "" {
				after = " "
			}
			return trimBlanks(before), after
		}
	}
	return text, ""
}

// measured is a value as far as its tolerance needs it.
type measured struct {
	value  float64 // SI
	unit   *Unit
	kind   Kind
	header bool // the unit stood in a column header
}

// ownUnit reports whether a half-width without a unit is in the value's own.
func (m *measured) ownUnit() bool {
	return m.header || m.kind == Dimensionless || m.unit.text == "1"
}

// tolerance reads what follows ±: a half-width in a unit or in per cent of the
// value, and k=2 when it is an expanded uncertainty.
func (t *table) tolerance(text string, m measured) (Tolerance, *refusal) {
	text, coverage, bad := cutCoverage(text)
	if bad != nil {
		return Tolerance{}, bad
	}
	r, ok := scanNumber(text)
	if !ok {
		return Tolerance{}, noTolerance("a half-width must follow ±")
	}
	rest := trimBlanks(text[r.end:])
	if bad := badContinuation(text, r.end); bad != nil {
		return Tolerance{}, bad
	}
	var width pair
	if u := t.units[rest]; u != nil && u.text == "%" {
		width, bad = m.percent(r.value)
	} else {
		width, bad = t.halfWidth(m, rest, r.value)
	}
	half := width.round() + 0
	switch {
	case bad != nil:
		return Tolerance{}, bad
	case !isFinite(half):
		return Tolerance{}, &refusal{code: CodeNotFinite, reason: "the half-width is beyond what a number holds"}
	case half < 0:
		return Tolerance{}, noTolerance("the half-width is negative")
	}
	return Tolerance{Given: true, HalfWidth: half, Coverage: coverage}, nil
}

// cutCoverage splits "3 % k=2".
func cutCoverage(text string) (half string, coverage float64, bad *refusal) {
	before, after, found := strings.Cut(text, "=")
	if !found {
		return text, 0, nil
	}
	before, found = strings.CutSuffix(trimBlanks(before), "k")
	after = trimBlanks(after)
	r, ok := scanNumber(after)
	if !found || !ok || r.end < len(after) {
		return "", 0, noTolerance("a coverage factor is written k=2")
	}
	coverage = r.value.round()
	if !(coverage > 0) || !isFinite(coverage) {
		return "", 0, noTolerance("a coverage factor is positive")
	}
	return trimBlanks(before), coverage, nil
}

func (m *measured) percent(percent pair) (pair, *refusal) {
	switch {
	case m.kind == Temperature:
		return pair{}, noTolerance("a percentage of a temperature has no meaning, since zero is where the scale puts it; write ± 0.5 K")
	case m.unit.basis == Gauge:
		return pair{}, noTolerance("a percentage of a gauge pressure is refused, since zero is the atmosphere; write ± 0.1 bar")
	case m.unit.text == "%":
		return pair{}, noTolerance("per cent of the value, or percentage points? write the value as a plain number")
	}
	width := pair{hi: m.value}.times(percent).over(pair{hi: 100})
	if m.value < 0 {
		width = pair{-width.hi, -width.lo}
	}
	return width, nil
}

// halfWidth reads a half-width in a unit of the same dimension; temperatures and
// pressures behind ± are differences. Without a unit it is in the value's own
// where that cannot be mistaken.
func (t *table) halfWidth(m measured, rest string, number pair) (pair, *refusal) {
	if rest == "" {
		if !m.ownUnit() {
			return pair{}, noTolerance("the half-width needs a unit or %")
		}
		return number.times(m.unit.factor), nil
	}
	u, bad := t.readUnit(rest, false)
	if bad != nil {
		return pair{}, bad
	}
	if u.dimension != m.unit.dimension {
		return pair{}, noTolerance("the half-width is not of the kind of the value")
	}
	if u.reference.Given() && u.reference != m.unit.reference {
		return pair{}, noTolerance("the half-width is at other reference conditions than the value")
	}
	return number.times(u.factor), nil
}

func noTolerance(reason string) *refusal {
	return &refusal{code: CodeToleranceMalformed, reason: reason}
}
