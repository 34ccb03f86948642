package fluid

import "borewright/calc"

// GivenInput is a fluid as somebody posts it: its density and exactly one of the
// two viscosities.
type GivenInput struct {
	Density            float64
	DynamicViscosity   calc.Optional
	KinematicViscosity calc.Optional
	VapourPressure     calc.Optional // absolute [Pa]
	Phase              Phase         // zero: by density
}

// The densities [kg/m³] by which a fluid without a named phase is told apart.
const (
	liquidAbove = 100
	gasBelow    = 50
)

// Given returns the properties of a fluid given by density and viscosity.
//
// Equation:
//
//	ν = μ/ρ
//
// Symbols:
//   - ν: kinematic viscosity [m²/s]
//   - μ: dynamic viscosity [Pa s]
//   - ρ: density [kg/m³]
//
// Validity: any Newtonian fluid within the bounds; without a phase a density
// above 100 kg/m³ is a liquid, below 50 kg/m³ a gas.
//
// Source: definition.
//
// Accuracy: 1 ulp.
//
// Errors: [calc.ErrDomain] if a value is out of bounds, if not exactly one
// viscosity is given, or if the density leaves the phase open.
func Given(in GivenInput) (Properties, error) {
	if err := calc.Density.Check(in.Density); err != nil {
		return Properties{}, err
	}
	p := Properties{Density: in.Density, Phase: in.Phase, VapourPressure: in.VapourPressure, Source: "given"}
	if err := p.viscosities(in); err != nil {
		return Properties{}, err
	}
	if in.VapourPressure.Valid {
		if err := calc.VapourPressure.Check(in.VapourPressure.Value); err != nil {
			return Properties{}, err
		}
	}
	if p.Phase != 0 {
		return p, nil
	}
	switch {
	case in.Density > liquidAbove:
		p.Phase = Liquid
	case in.Density < gasBelow:
		p.Phase = Gas
	default:
		return Properties{}, &calc.Error{Kind: calc.ErrDomain, Quantity: "phase",
			Detail: "between 50 and 100 kg/m3 a fluid may be a liquid or a gas; say which with phase"}
	}
	return p, nil
}

func (p *Properties) viscosities(in GivenInput) error {
	switch {
	case in.DynamicViscosity.Valid && in.KinematicViscosity.Valid:
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "kinematic_viscosity", Value: in.KinematicViscosity.Value,
			Detail: "give dynamic_viscosity or kinematic_viscosity, not both"}
	case in.DynamicViscosity.Valid:
		if err := calc.DynamicViscosity.Check(in.DynamicViscosity.Value); err != nil {
			return err
		}
		p.DynamicViscosity = in.DynamicViscosity.Value
		p.KinematicViscosity = p.DynamicViscosity / p.Density
	case in.KinematicViscosity.Valid:
		if err := calc.KinematicViscosity.Check(in.KinematicViscosity.Value); err != nil {
			return err
		}
		p.KinematicViscosity = in.KinematicViscosity.Value
		p.DynamicViscosity = p.KinematicViscosity * p.Density
	default:
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "dynamic_viscosity", Detail: "give dynamic_viscosity or kinematic_viscosity"}
	}
	return calc.KinematicViscosity.Check(p.KinematicViscosity)
}

// String is the name of the phase in the contract.
func (p Phase) String() string { return [...]string{"", "liquid", "gas"}[p] }
