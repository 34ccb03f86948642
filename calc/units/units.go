// Package units reads quantities as engineers write them and turns them into
// coherent SI, by exact factors, refusing to guess.
package units

// Kind is the kind of a quantity: what it measures, with the SI unit of its field.
type Kind uint8

// The kinds of quantity.
const (
	Dimensionless Kind = iota
	Length
	Area
	Volume
	Angle
	Time
	Mass
	Force
	Energy
	Power
	Velocity
	Acceleration
	MassFlow
	VolumeFlow
	MolarFlow
	ReferenceVolumeFlow // volume flow at stated reference conditions
	Pressure            // a difference
	StatePressure       // absolute; a unit must say absolute or gauge
	PressureGradient
	Temperature // a point
	TemperatureDifference
	Density
	DynamicViscosity
	KinematicViscosity
	MolarMass
	kinds
)

// Basis of a state pressure.
type Basis uint8

// A state pressure is absolute or gauge; everything else is plain.
const (
	Plain Basis = iota
	Absolute
	Gauge
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
	Tolerance Tolerance
}

// Error is a refusal with a stable code and what would have been accepted.
type Error struct {
	Code   string // wrong_dimension, unknown_unit, not_a_number, unit_required, pressure_basis, ...
	Detail string
}

func (e *Error) Error() string { return e.Detail }

// SI is the unit of the kind's field in answers and in JSON bodies ("m3/s").
func (k Kind) SI() string { return "" }

// Parse reads "<number> <unit>" as a quantity of the kind. A bare number is
// accepted only for a dimensionless kind.
func Parse(text string, kind Kind) (Quantity, error) { return Quantity{}, &Error{} }
