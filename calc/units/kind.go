package units

import "strings"

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
	Frequency
	SurfaceTension
	SpecificVolume
	SpecificEnergy
	SpecificHeatCapacity
	ThermalConductivity
	MassFlux
	kinds
	// Other is what a conversion reports for a dimension that has no kind here.
	Other = kinds
)

type kindRow struct {
	name, si, example string
	dimension         Dimension
	plant, us         string
}

// kindTable describes the kinds. The units of the plant and us columns are
// those of [Plant] and [US].
var kindTable = [kinds + 1]kindRow{
	Dimensionless:         {"dimensionless", "1", "0.05", Dimension{}, "1", "1"},
	Length:                {"length", "m", "150 mm", Dimension{1}, "mm", "ft"},
	Area:                  {"area", "m2", "0.0177 m2", Dimension{2}, "m2", "ft2"},
	Volume:                {"volume", "m3", "2.5 m3", Dimension{3}, "m3", "gal_us"},
	Angle:                 {"angle", "rad", "30 deg", Dimension{7: 1}, "deg", "deg"},
	Time:                  {"time", "s", "90 s", Dimension{2: 1}, "s", "s"},
	Mass:                  {"mass", "kg", "25 kg", Dimension{1: 1}, "kg", "lb"},
	Force:                 {"force", "N", "1.2 kN", Dimension{1, 1, -2}, "N", "lbf"},
	Energy:                {"energy", "J", "3 kWh", Dimension{2, 1, -2}, "kJ", "BTU"},
	Power:                 {"power", "W", "7.5 kW", Dimension{2, 1, -3}, "kW", "hp"},
	Velocity:              {"velocity", "m/s", "1.8 m/s", Dimension{1, 0, -1}, "m/s", "ft/s"},
	Acceleration:          {"acceleration", "m/s2", "9.81 m/s2", Dimension{1, 0, -2}, "m/s2", "ft/s2"},
	MassFlow:              {"mass_flow", "kg/s", "2000 kg/h", Dimension{0, 1, -1}, "kg/h", "lb/h"},
	VolumeFlow:            {"volume_flow", "m3/s", "120 m3/h", Dimension{3, 0, -1}, "m3/h", "gal_us/min"},
	MolarFlow:             {"molar_flow", "mol/s", "40 kmol/h", Dimension{2: -1, 5: 1}, "kmol/h", "lbmol/h"},
	ReferenceVolumeFlow:   {"reference_volume_flow", "m3/s", "500 Nm3/h", Dimension{3, 0, -1}, "m3/h", "ft3/min"},
	Pressure:              {"pressure", "Pa", "12 kPa", Dimension{-1, 1, -2}, "kPa", "psi"},
	StatePressure:         {"state_pressure", "Pa", "4.2 barg", Dimension{-1, 1, -2}, "kPaa", "psia"},
	PressureGradient:      {"pressure_gradient", "Pa/m", "250 Pa/m", Dimension{-2, 1, -2}, "Pa/m", "psi/100ft"},
	Temperature:           {"temperature", "K", "25 degC", Dimension{4: 1}, "degC", "degF"},
	TemperatureDifference: {"temperature_difference", "K", "10 degC_diff", Dimension{4: 1}, "degC_diff", "degF_diff"},
	Density:               {"density", "kg/m3", "998 kg/m3", Dimension{-3, 1}, "kg/m3", "lb/ft3"},
	DynamicViscosity:      {"dynamic_viscosity", "Pa.s", "1.0 mPa.s", Dimension{-1, 1, -1}, "mPa.s", "cP"},
	KinematicViscosity:    {"kinematic_viscosity", "m2/s", "1.0 mm2/s", Dimension{2, 0, -1}, "mm2/s", "cSt"},
	MolarMass:             {"molar_mass", "kg/mol", "28.96 g/mol", Dimension{1: 1, 5: -1}, "g/mol", "lb/lbmol"},
	Frequency:             {"frequency", "1/s", "50 Hz", Dimension{2: -1}, "Hz", "Hz"},
	SurfaceTension:        {"surface_tension", "N/m", "72 mN/m", Dimension{0, 1, -2}, "mN/m", "dyn/cm"},
	SpecificVolume:        {"specific_volume", "m3/kg", "0.5 m3/kg", Dimension{3, -1}, "m3/kg", "ft3/lb"},
	SpecificEnergy:        {"specific_energy", "J/kg", "2257 kJ/kg", Dimension{2, 0, -2}, "kJ/kg", "BTU/lb"},
	SpecificHeatCapacity:  {"specific_heat_capacity", "J/(kg.K)", "4.18 kJ/(kg.K)", Dimension{2, 0, -2, 0, -1}, "kJ/(kg.K)", "BTU/(lb.degF_diff)"},
	ThermalConductivity:   {"thermal_conductivity", "W/(m.K)", "0.6 W/(m.K)", Dimension{1, 1, -3, 0, -1}, "W/(m.K)", "BTU/(h.ft.degF_diff)"},
	MassFlux:              {"mass_flux", "kg/(m2.s)", "800 kg/(m2.s)", Dimension{-2, 1, -1}, "kg/(m2.s)", "lb/(ft2.s)"},
	Other:                 {name: "other"},
}

// Kinds lists every kind.
func Kinds() []Kind {
	list := make([]Kind, 0, kinds)
	for k := Dimensionless; k < kinds; k++ {
		list = append(list, k)
	}
	return list
}

func (k Kind) row() *kindRow { return &kindTable[min(k, Other)] }

// Name is the name of the kind in answers ("volume_flow").
func (k Kind) Name() string { return k.row().name }

// String is the name of the kind.
func (k Kind) String() string { return k.Name() }

// SI is the unit of the kind's field in answers and in JSON bodies ("m3/s").
func (k Kind) SI() string { return k.row().si }

// Example is a text that [Parse] accepts for the kind ("120 m3/h").
func (k Kind) Example() string { return k.row().example }

// Dimension of the kind. Some kinds share one: what tells energy from torque or
// a point from a difference is not the dimension.
func (k Kind) Dimension() Dimension { return k.row().dimension }

// ASCII is the SI unit as a column name carries it ("m3_per_s"); a
// dimensionless kind has none.
func (k Kind) ASCII() string { return asciiOf(k.SI()) }

// words is the name of the kind in a sentence.
func (k Kind) words() string {
	switch k {
	case Dimensionless:
		return "a number without a unit"
	case Pressure:
		return "a pressure difference"
	case StatePressure:
		return "a pressure that says absolute or gauge"
	case ReferenceVolumeFlow:
		return "a volume flow at reference conditions"
	}
	article := "a "
	if strings.ContainsRune("aeiou", rune(k.Name()[0])) {
		article = "an "
	}
	return article + strings.ReplaceAll(k.Name(), "_", " ")
}

// kindOf names the kind of a unit by what it carries: the first kind of its
// dimension, a state pressure where there is a basis, a point or a difference.
func kindOf(u *Unit) Kind {
	switch {
	case u.basis != Plain:
		return StatePressure
	case u.role == difference:
		return TemperatureDifference
	case u.reference.Given() && u.dimension == VolumeFlow.Dimension():
		return ReferenceVolumeFlow
	}
	for k := Dimensionless; k < kinds; k++ {
		if kindTable[k].dimension == u.dimension {
			return k
		}
	}
	return Other
}
