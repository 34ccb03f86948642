package units

// Basis of a state pressure.
type Basis uint8

// A state pressure is absolute or gauge; everything else is plain.
const (
	Plain Basis = iota
	Absolute
	Gauge
)

// role tells a temperature point from a difference; kelvins serve as both.
type role uint8

const (
	neutral role = iota
	point
	difference
)

// Reference is the state that a gas volume is stated at.
type Reference struct {
	Temperature float64 // K
	Pressure    float64 // Pa, absolute
}

// Given reports whether the unit fixed a reference state.
func (r Reference) Given() bool { return r.Temperature > 0 }

// Unit is a unit that has been read: what it is worth in SI, what it measures
// and its one output spelling.
type Unit struct {
	text      string
	factor    pair
	offset    pair // added before the factor; zero but for degC and degF
	dimension Dimension
	reference Reference
	basis     Basis
	role      role
}

// String is the one spelling of the unit in answers; [Parse] reads it back.
func (u Unit) String() string { return u.text }

// ASCII is the spelling for a column name ("m3_per_s"), empty for the number one.
func (u Unit) ASCII() string { return asciiOf(u.text) }

// Dimension is what the unit measures.
func (u Unit) Dimension() Dimension { return u.dimension }

// Basis tells whether a pressure in this unit is absolute, gauge, or a difference.
func (u Unit) Basis() Basis { return u.basis }

// Reference is the state that a gas volume in this unit is stated at.
func (u Unit) Reference() Reference { return u.reference }

// Kind names what the unit measures; see [Convert] for dimensions shared by
// several kinds.
func (u Unit) Kind() Kind { return kindOf(&u) }

// ToSI returns a value of the unit in the coherent SI unit of its dimension. A
// gauge pressure stays gauge.
//
// Equation:
//
//	y = (x + a) n / d
//
// Symbols:
//   - y: value in SI [SI unit of the dimension]
//   - x: value in the unit [the unit]
//   - a: offset, 0 but for degC and degF [the unit]
//   - n/d: factor of units.csv, an exact ratio [SI unit per unit]
//
// Validity: every finite value whose result is finite.
//
// Source: units.csv, by unit.
//
// Accuracy: correctly rounded but for ties within 1e-31; testdata/units/conversions.csv.
//
// Errors: [Error] with code not_finite if the value is not finite or overflows.
func (u Unit) ToSI(value float64) (float64, error) {
	return finite(u.toSI(pair{hi: value}).round())
}

// FromSI returns a value in SI in the unit.
//
// Equation:
//
//	x = y d / n - a
//
// Symbols:
//   - x: value in the unit [the unit]
//   - y: value in SI [SI unit of the dimension]
//   - n/d: factor of units.csv, an exact ratio [SI unit per unit]
//   - a: offset, 0 but for degC and degF [the unit]
//
// Validity: every finite value whose result is finite.
//
// Source: units.csv, by unit.
//
// Accuracy: correctly rounded but for ties within 1e-31; testdata/units/conversions.csv.
//
// Errors: [Error] with code not_finite if the value is not finite or overflows.
func (u Unit) FromSI(value float64) (float64, error) {
	return finite(u.fromSI(pair{hi: value}).round())
}

func (u *Unit) toSI(x pair) pair {
	if u.offset.hi != 0 {
		x = x.plus(u.offset)
	}
	return x.times(u.factor)
}

func (u *Unit) fromSI(y pair) pair {
	x := y.over(u.factor)
	if u.offset.hi != 0 {
		x = x.minus(u.offset)
	}
	return x
}

// finite refuses what is not a number that an answer may contain. The sum with
// zero turns -0 into 0.
func finite(v float64) (float64, error) {
	if !isFinite(v) {
		return 0, &Error{Code: CodeNotFinite, Detail: "the value is not finite in this unit"}
	}
	return v + 0, nil
}
