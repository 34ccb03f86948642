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
// above 100 kg/m³ is a liquid, below 50 kg/m³ a gas, and from 50 to 100 kg/m³, both
// included, it must be said. A phase that is said stands at any density.
//
// Source: definition; the densities common practice.
//
// Accuracy: 1 ulp.
//
// Errors: [calc.ErrDomain] if a value is out of bounds, the other viscosity that
// follows from it included, if not exactly one viscosity is given, or if the
// density leaves the phase open.
func Given(in GivenInput) (Properties, error) {
	if err := calc.Density.Check(in.Density); err != nil {
		return Properties{}, err
	}
	p := Properties{Density: in.Density, VapourPressure: in.VapourPressure, Source: "given"}
	if err := p.viscosities(&in); err != nil {
		return Properties{}, err
	}
	if in.VapourPressure.Valid {
		if err := calc.VapourPressure.Check(in.VapourPressure.Value); err != nil {
			return Properties{}, err
		}
	}
	var err error
	if p.Phase, err = in.phase(); err != nil {
		return Properties{}, err
	}
	return p, nil
}

// phase is the one that was said, or the one that the density leaves.
func (in *GivenInput) phase() (Phase, error) {
	switch {
	case in.Phase == Liquid || in.Phase == Gas:
		return in.Phase, nil
	case in.Phase != 0:
		return 0, &calc.Error{Kind: calc.ErrDomain, Quantity: "phase", Value: float64(in.Phase), Detail: "say liquid or gas"}
	case in.Density > liquidAbove:
		return Liquid, nil
	case in.Density < gasBelow:
		return Gas, nil
	}
	return 0, &calc.Error{Kind: calc.ErrDomain, Quantity: "phase",
		Detail: "between 50 and 100 kg/m3 a fluid may be a liquid or a gas; say which with phase"}
}

// viscosities sets both viscosities from the one that is given.
func (p *Properties) viscosities(in *GivenInput) error {
	dynamic, kinematic := in.DynamicViscosity, in.KinematicViscosity
	switch {
	case dynamic.Valid && kinematic.Valid:
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "kinematic_viscosity", Value: kinematic.Value,
			Detail: "give dynamic_viscosity or kinematic_viscosity, not both"}
	case dynamic.Valid:
		p.DynamicViscosity, p.KinematicViscosity = dynamic.Value, dynamic.Value/p.Density
		if err := calc.DynamicViscosity.Check(dynamic.Value); err != nil {
			return err
		}
		return p.checkKinematic()
	case kinematic.Valid:
		p.DynamicViscosity, p.KinematicViscosity = kinematic.Value*p.Density, kinematic.Value
		return calc.KinematicViscosity.Check(kinematic.Value)
	}
	return &calc.Error{Kind: calc.ErrDomain, Quantity: "dynamic_viscosity", Detail: "give dynamic_viscosity or kinematic_viscosity"}
}

// checkKinematic points at the viscosity that was given when the one that
// follows from it is out of bounds.
func (p *Properties) checkKinematic() error {
	if b := calc.KinematicViscosity.Bound(); !b.Contains(p.KinematicViscosity) {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "dynamic_viscosity", Value: p.DynamicViscosity, Min: b.Min * p.Density, Max: b.Max * p.Density,
			Detail: "with this density the kinematic viscosity is outside 1e-15 to 1e12 m2/s"}
	}
	return nil
}

// String is the name of the phase in the contract; empty where it is none.
func (p Phase) String() string {
	switch p {
	case Liquid:
		return "liquid"
	case Gas:
		return "gas"
	}
	return ""
}
