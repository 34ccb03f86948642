package fluid

import (
	"fmt"
	"math"

	"borewright/calc"
)

// AirMolarMass [kg/mol] is what a relative density is relative to. Source: ISO
// 6976:2016, molar mass of dry air of standard composition (from memory).
const AirMolarMass = 28.96546e-3

// ConstantsInput is a gas by its constants at one state.
type ConstantsInput struct {
	MolarMass             calc.Optional // exactly one of the two [kg/mol]
	RelativeDensity       calc.Optional // ideal, to air at the same temperature and pressure [1]
	HeatCapacityRatio     calc.Optional // without it there is no sound speed
	CompressibilityFactor calc.Optional // not Valid: 1
	DynamicViscosity      float64
	StatePoint
}

// ByConstants returns the properties of a gas given by its constants.
//
// Equation:
//
//	ρ = p M/(Z R T), M = d Mair, a = sqrt(γ p/ρ)
//
// Symbols:
//   - ρ: density [kg/m³]
//   - p: absolute pressure [Pa]
//   - M: molar mass [kg/mol]
//   - Z: compressibility factor at the state [1]
//   - R: molar gas constant [J/(mol K)]
//   - T: temperature [K]
//   - d: relative density, to air [1]
//   - Mair: molar mass of air, 28.96546e-3 [kg/mol]
//   - a: sound speed [m/s]
//   - γ: heat capacity ratio [1]
//
// Validity: a gas with a constant compressibility factor. The sound speed is that
// of such a gas.
//
// Source: law of the perfect gas with a compressibility factor; ISO 6976:2016 for
// the molar mass of air (from memory).
//
// Accuracy: 1e-15; the compressibility factor decides.
//
// Errors: [calc.ErrDomain] for a value out of bounds, a density out of bounds that
// follows from them, or not exactly one of molar mass and relative density.
func ByConstants(in ConstantsInput) (Properties, error) {
	mass, err := in.molarMass()
	if err != nil {
		return Properties{}, err
	}
	z := 1.0
	if in.CompressibilityFactor.Valid {
		z = in.CompressibilityFactor.Value
	}
	if err := in.check(z); err != nil {
		return Properties{}, err
	}
	density := in.Pressure * mass / (z * calc.MolarGasConstant * in.Temperature)
	if b := calc.Density.Bound(); !b.Contains(density) {
		return Properties{}, &calc.Error{Kind: calc.ErrDomain, Quantity: "pressure", Value: in.Pressure,
			Detail: fmt.Sprintf("a gas of this molar mass has a density of %.3g kg/m3 at this state, outside %g to %g kg/m3", density, b.Min, b.Max)}
	}
	p := Properties{
		Density: density, DynamicViscosity: in.DynamicViscosity, KinematicViscosity: in.DynamicViscosity / density, Phase: Gas,
		HeatCapacityRatio: in.HeatCapacityRatio, Temperature: calc.Some(in.Temperature), Pressure: calc.Some(in.Pressure),
		MolarMass: calc.Some(mass), Source: "gas by its constants, as given",
	}
	if in.HeatCapacityRatio.Valid {
		p.SoundSpeed = calc.Some(math.Sqrt(in.HeatCapacityRatio.Value * in.Pressure / density))
	}
	return p, p.checkKinematic()
}

func (in *ConstantsInput) molarMass() (float64, error) {
	switch {
	case in.MolarMass.Valid && in.RelativeDensity.Valid:
		return 0, &calc.Error{Kind: calc.ErrDomain, Quantity: "relative_density", Value: in.RelativeDensity.Value, Detail: "give molar_mass or relative_density, not both"}
	case in.MolarMass.Valid:
		return in.MolarMass.Value, calc.MolarMass.Check(in.MolarMass.Value)
	case in.RelativeDensity.Valid:
		return in.RelativeDensity.Value * AirMolarMass, calc.RelativeDensity.Check(in.RelativeDensity.Value)
	}
	return 0, &calc.Error{Kind: calc.ErrDomain, Quantity: "molar_mass", Detail: "give molar_mass or relative_density"}
}

func (in *ConstantsInput) check(z float64) error {
	if in.HeatCapacityRatio.Valid {
		if err := calc.HeatCapacityRatio.Check(in.HeatCapacityRatio.Value); err != nil {
			return err
		}
	}
	for _, c := range [...]struct {
		input calc.Input
		value float64
	}{{calc.CompressibilityFactor, z}, {calc.DynamicViscosity, in.DynamicViscosity}, {calc.Temperature, in.Temperature}, {calc.Pressure, in.Pressure}} {
		if err := c.input.Check(c.value); err != nil {
			return err
		}
	}
	return nil
}

// ReferenceDensity returns the density of a gas at the reference state of its
// volume, by which a volume flow stated there becomes a mass flow.
//
// Equation:
//
//	ρ = p M/(R T)
//
// Symbols:
//   - ρ: density at the reference state [kg/m³]
//   - p: reference pressure, absolute [Pa]
//   - M: molar mass [kg/mol]
//   - R: molar gas constant [J/(mol K)]
//   - T: reference temperature [K]
//
// Validity: reference states near the atmosphere, where a gas is taken as ideal:
// the convention of the trade for normal and standard volumes, whatever the
// compressibility factor in the line.
//
// Source: common practice; ISO 13443:1996 for the states (from memory).
//
// Accuracy: exact by convention; the real volume of air at 0 °C differs by 0.06 %.
//
// Errors: [calc.ErrDomain] for a fluid whose molar mass is not known, or a state
// out of bounds.
func ReferenceDensity(p *Properties, s StatePoint) (float64, error) {
	if !p.MolarMass.Valid {
		return 0, &calc.Error{Kind: calc.ErrDomain, Quantity: "reference_volume_flow",
			Detail: "a volume at reference conditions needs a gas whose molar mass is known: air, or a gas by molar_mass or relative_density; else give mass_flow"}
	}
	if err := calc.ReferenceTemperature.Check(s.Temperature); err != nil {
		return 0, err
	}
	if err := calc.ReferencePressure.Check(s.Pressure); err != nil {
		return 0, err
	}
	return s.Pressure * p.MolarMass.Value / (calc.MolarGasConstant * s.Temperature), nil
}
