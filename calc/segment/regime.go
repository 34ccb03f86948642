package segment

import (
	"borewright/calc"
	"borewright/calc/flow"
	"borewright/calc/friction"
)

// Regime fills the result to the flow regime.
//
// Equation:
//
//	section, then V = q/A, then Re = V Dh/ν
//
// Symbols:
//   - V: velocity on the true flow area [m/s]
//   - q: volume flow [m³/s]
//   - A: flow area [m²]
//   - Re: Reynolds number [1]
//   - Dh: hydraulic diameter [m]
//   - ν: kinematic viscosity [m²/s]
//
// Validity: that of [flow.RegimeOf].
//
// Source: [section.Section.Of], [flow.StateOf], [flow.RegimeOf].
//
// Accuracy: that of its parts.
//
// Errors: those of its parts. With an error the result is empty.
func Regime(in *Input, out *Result) error {
	err := in.regime(out)
	if err != nil {
		*out = Result{}
	}
	return err
}

func (in *Input) regime(out *Result) error {
	out.Fluid, out.Friction, out.Pressure, out.Conditions = in.Fluid, friction.Result{}, Pressure{}, Conditions{} // the rest is set below
	if out.Gas.Stations[0].Pressure != 0 {                                                                        // of a gas before; most lines have none
		out.Gas = GasRun{}
	}
	var err error
	if err = in.Section.Into(&out.Section); err != nil {
		return err
	}
	if out.Flow, err = flow.StateOf(in.Flow, out.Section.FlowArea, in.Fluid.Density); err != nil {
		return err
	}
	out.Regime, err = flow.RegimeOf(flow.RegimeInput{
		Velocity: out.Flow.Velocity, HydraulicDiameter: out.Section.HydraulicDiameter,
		KinematicViscosity: in.Fluid.KinematicViscosity, Round: out.Section.Round, Criteria: in.Criteria,
	})
	if err != nil {
		return err
	}
	c := &out.Conditions
	c.AtRest = out.Regime.Name == flow.AtRest
	c.RegimeUncertain = out.Regime.CanBeLaminar && out.Regime.CanBeTurbulent
	// near the band only: far from it the limits do not matter
	c.BandAssumed = out.Regime.AssumedForSection && out.Regime.Reynolds > out.Regime.Lower/2 && out.Regime.Reynolds < 2*out.Regime.Upper
	return nil
}

// Friction fills the result to the friction of the wall.
//
// Equation:
//
//	as [Regime], then f and the wall shear stress f ρ V²/8
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - ρ: density [kg/m³]
//   - V: velocity on the true flow area [m/s]
//
// Validity: that of [friction.Of].
//
// Source: [friction.Of].
//
// Accuracy: that of its parts.
//
// Errors: those of its parts. With an error the result is empty.
func Friction(in *Input, out *Result) error {
	err := in.friction(out)
	if err != nil {
		*out = Result{}
	}
	return err
}

func (in *Input) friction(out *Result) error {
	if err := calc.Roughness.Check(in.Roughness); err != nil {
		return err
	}
	if err := in.regime(out); err != nil {
		return err
	}
	f := friction.Input{
		Density: in.Fluid.Density, Velocity: out.Flow.Velocity, KinematicViscosity: in.Fluid.KinematicViscosity,
		Roughness: in.Roughness, HydraulicDiameter: out.Section.HydraulicDiameter,
		LaminarConstant: out.Section.LaminarConstant, LaminarEquivalent: out.Section.LaminarEquivalent,
		Regime: out.Regime, Law: in.Law, DiameterRule: in.DiameterRule,
	}
	err := f.Into(&out.Friction)
	out.Conditions.LawBelowRange = out.Friction.LawBelowRange
	return err
}
