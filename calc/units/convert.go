package units

// StandardAtmosphere is the pressure that gauge pressures are taken against
// when nothing else is said, in Pa. Source: 10th CGPM 1954, resolution 4 (from memory).
const StandardAtmosphere = 101325

// GasConstant is the molar gas constant in J/(mol.K), by which volumes at a
// reference state become amounts. Source: CODATA 2018, rounded to ten digits as
// the check values have it; the exact value is 8.31446261815324.
const GasConstant = 8.314462618

// Conversion is a quantity in another unit.
type Conversion struct {
	Value     float64
	Unit      string // the one output spelling of the unit
	Kind      Kind
	Tolerance Tolerance // with its half-width in the unit
}

// Convert returns a quantity in another unit, gauge pressures against the
// standard atmosphere. The kind follows from the units; where several share a
// dimension, energy stands before torque, pressure before stress, a temperature
// point before a difference unless a unit says difference.
//
// Equation:
//
//	x2 = (x1 + a1) f1 / f2 - a2
//
// Symbols:
//   - x1: value as given [its unit]
//   - x2: value wanted [the unit wanted]
//   - a1, a2: offsets of the units, 0 but for degC and degF [their units]
//   - f1, f2: factors of the units [SI unit per unit]
//
// Validity: units of one dimension; a volume at reference conditions also becomes
// an amount of substance of an ideal gas, and the other way round.
//
// Source: units.csv, by unit.
//
// Accuracy: correctly rounded but for ties within 1e-31, reference volumes 4e-16;
// testdata/units/conversions.csv.
//
// Errors: [Error] with the codes of [Parse], and wrong_dimension, pressure_basis,
// temperature_difference or reference_conditions where the two units do not agree.
func Convert(quantity, to string) (Conversion, error) {
	return ConvertAt(quantity, to, StandardAtmosphere)
}

// ConvertAt is [Convert] with the atmosphere that gauge pressures are taken against.
//
// Equation:
//
//	x2 = ((x1 + a1) f1 + p) / f2 - a2
//
// Symbols:
//   - x1: value as given [its unit]
//   - x2: value wanted [the unit wanted]
//   - a1, a2: offsets of the units, 0 but for degC and degF [their units]
//   - f1, f2: factors of the units [SI unit per unit]
//   - p: pressure of the atmosphere from gauge to absolute, its negative from
//     absolute to gauge, 0 else [Pa]
//
// Validity: as [Convert]; the atmosphere is positive.
//
// Source: units.csv, by unit.
//
// Accuracy: as [Convert].
//
// Errors: as [Convert], and not_finite for an atmosphere that is not positive and finite.
func ConvertAt(quantity, to string, atmosphere float64) (Conversion, error) {
	if !(atmosphere > 0) || !isFinite(atmosphere) {
		return Conversion{}, &Error{Code: CodeNotFinite, Detail: "the pressure of the atmosphere must be positive and finite"}
	}
	t := tables()
	var own Unit
	from, tolerance, bad := t.split(quantity, Other, nil, &own)
	if bad != nil {
		return Conversion{}, bad.about(quantity, Other)
	}
	target, err := ParseUnit(to)
	if err != nil {
		return Conversion{}, err
	}
	c, bad := t.converted(from, &target, tolerance, atmosphere)
	if bad != nil {
		return Conversion{}, bad.about(quantity+" to "+to, Other)
	}
	return c, nil
}

func (t *table) converted(from parts, to *Unit, tolerance string, atmosphere float64) (Conversion, *refusal) {
	ratio, bad := agree(from.unit, to)
	if bad != nil {
		return Conversion{}, bad
	}
	y := from.unit.toSI(from.number)
	q := Quantity{Value: y.round() + 0, Basis: from.unit.basis}
	c := Conversion{Unit: to.text, Kind: sharedKind(from.unit, to)}
	if tolerance != "" {
		if q.Tolerance, bad = t.tolerance(tolerance, measured{value: q.Value, unit: from.unit, kind: c.Kind}); bad != nil {
			return Conversion{}, bad
		}
	}
	switch {
	case from.unit.basis == Gauge && to.basis == Absolute:
		y = y.plus(pair{hi: atmosphere})
	case from.unit.basis == Absolute && to.basis == Gauge:
		y = y.minus(pair{hi: atmosphere})
	}
	c.Value = to.fromSI(y.times(ratio)).round() + 0
	c.Tolerance = q.Tolerance
	c.Tolerance.HalfWidth = pair{hi: q.Tolerance.HalfWidth}.times(ratio).over(to.factor).round() + 0
	if !isFinite(q.Value) || !isFinite(c.Value) || !isFinite(c.Tolerance.HalfWidth) {
		return Conversion{}, &refusal{code: CodeNotFinite, reason: "beyond what a number holds"}
	}
	return c, nil
}

// agree checks that one unit can become the other, and gives the ratio between
// their values in SI: 1, but for volumes of gas at other reference conditions.
func agree(from, to *Unit) (pair, *refusal) {
	if from.reference != to.reference {
		return gasRatio(from, to)
	}
	switch {
	case from.dimension != to.dimension:
		return pair{}, &refusal{code: CodeWrongDimension,
			reason: from.text + " measures " + measure(from) + ", " + to.text + " measures " + measure(to)}
	case (from.basis == Plain) != (to.basis == Plain):
		return pair{}, &refusal{code: CodePressureBasis, reason: "one unit says absolute or gauge and the other does not; say it in both or in none"}
	case from.role == point && to.role == difference || from.role == difference && to.role == point:
		return pair{}, &refusal{code: CodeTemperatureDifference, reason: "a point on a scale and a difference do not turn into each other"}
	}
	return one, nil
}

func measure(u *Unit) string {
	if k := kindOf(u); k != Other {
		return k.Name() + " (" + u.dimension.String() + ")"
	}
	return u.dimension.String()
}

// gasRatio turns volumes at reference conditions into amounts by the ideal gas,
// n = p V / (R T), and amounts into other volumes.
func gasRatio(from, to *Unit) (pair, *refusal) {
	amount, ok := from.amount()
	wanted, ok2 := to.amount()
	if !ok || !ok2 {
		return pair{}, &refusal{code: CodeReferenceConditions,
			reason: "one unit is at reference conditions and the other at none; the actual state or the molar flow must be known"}
	}
	if amount.dimension != wanted.dimension {
		return pair{}, &refusal{code: CodeWrongDimension, reason: from.text + " and " + to.text + " do not measure the same"}
	}
	return amount.factor.over(wanted.factor), nil
}

// amount gives what one SI unit of u is worth in moles: 1 for an amount of
// substance itself, p/(R T) for a volume at a reference state.
func (u *Unit) amount() (Unit, bool) {
	if !u.reference.Given() {
		return Unit{dimension: u.dimension, factor: one}, u.dimension[5] == 1
	}
	d, ok := u.dimension.with(Dimension{-3, 0, 0, 0, 0, 1}, 1)
	factor := pair{hi: u.reference.Pressure}.over(pair{hi: GasConstant}.times(pair{hi: u.reference.Temperature}))
	return Unit{dimension: d, factor: factor}, ok
}

// sharedKind names the kind of a conversion: what either of the units says.
func sharedKind(from, to *Unit) Kind {
	if to.role == neutral && from.role == difference {
		return TemperatureDifference
	}
	return kindOf(to)
}
