package friction

import (
	"math"

	"borewright/calc"
	"borewright/calc/flow"
)

// Input is what the friction of a wall depends on.
type Input struct {
	Density            float64       // [kg/m³]
	Velocity           float64       // [m/s], on the true flow area
	KinematicViscosity float64       // [m²/s]
	Roughness          float64       // absolute [m]
	HydraulicDiameter  float64       // [m]
	LaminarConstant    calc.Optional // f·Re of the section
	LaminarEquivalent  calc.Optional // [m]
	Regime             flow.Regime   // of the same flow, by [flow.RegimeOf]
	Law                Law
	DiameterRule       DiameterRule
}

// check refuses what no wall and no flow can have.
func (in *Input) check() error {
	switch {
	case in.Regime.Name < flow.AtRest || in.Regime.Name > flow.Turbulent:
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "flow_regime", Value: float64(in.Regime.Name), Detail: "friction needs the regime of the flow"}
	case !in.Law.turbulent():
		return unknownLaw(in.Law)
	case in.DiameterRule > LaminarEquivalentDiameter:
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "friction_diameter", Value: float64(in.DiameterRule), Detail: "say hydraulic or laminar_equivalent"}
	}
	if err := calc.Density.Check(in.Density); err != nil {
		return err
	}
	if err := calc.KinematicViscosity.Check(in.KinematicViscosity); err != nil {
		return err
	}
	if err := calc.Roughness.Check(in.Roughness); err != nil {
		return err
	}
	return in.checkFlow()
}

// checkFlow refuses what did not come from a section and a regime.
func (in *Input) checkFlow() error {
	if !(in.Velocity >= 0 && in.Velocity <= math.MaxFloat64) {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "velocity", Value: in.Velocity, Detail: "flow runs from inlet to outlet; for the other direction swap the ends"}
	}
	if !positive(in.HydraulicDiameter) {
		return notPositive("hydraulic_diameter", in.HydraulicDiameter)
	}
	if in.Regime.Name != flow.AtRest && !positive(in.Regime.Reynolds) {
		return notPositive("reynolds", in.Regime.Reynolds)
	}
	if in.LaminarConstant.Valid && !positive(in.LaminarConstant.Value) {
		return notPositive("laminar_constant", in.LaminarConstant.Value)
	}
	if in.LaminarEquivalent.Valid && !positive(in.LaminarEquivalent.Value) {
		return notPositive("laminar_equivalent_diameter", in.LaminarEquivalent.Value)
	}
	return nil
}

func positive(v float64) bool { return v > 0 && v <= math.MaxFloat64 }

func notPositive(quantity string, v float64) error {
	return &calc.Error{Kind: calc.ErrDomain, Quantity: quantity, Value: v, Detail: "this must be positive and finite"}
}
