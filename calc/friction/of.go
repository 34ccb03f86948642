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

// Of returns the friction of the wall in the regimes that are possible.
//
// Equation:
//
//	laminar f = C/Re; turbulent f by the law at Re D/Dh and ε/D;
//	τ = f ρ V²/8, u* = V sqrt(f/8), ε⁺ = u* ε/ν
//
// Symbols:
//   - f: Darcy friction factor; the larger of the possible branches [1]
//   - C: laminar constant of the section [1]
//   - Re: Reynolds number on the hydraulic diameter [1]
//   - ε: absolute roughness [m]
//   - Dh: hydraulic diameter [m]
//   - D: diameter inside f: Dh, or the laminar equivalent one by the rule [m]
//   - τ: wall shear stress, mean over the wetted perimeter [Pa]
//   - ρ: density [kg/m³]
//   - V: velocity on the true flow area [m/s]
//   - u*: friction velocity [m/s]
//   - ν: kinematic viscosity [m²/s]
//   - ε⁺: roughness Reynolds number [1]
//
// Validity: fully developed flow of a Newtonian fluid; the ranges of the laws.
// Where turbulent flow is possible, not certain, at a Reynolds number below the
// range of the law, Colebrook-White stands in. At rest no factor is valid and the
// rest is 0.
//
// Source: definitions, common practice; laws see [Laws]; roughness regimes by
// Nikuradse, VDI-Forschungsheft 361, 1933 (from memory).
//
// Accuracy: 1e-15 on top of the factor of the law, see [Laws].
//
// Errors: [calc.ErrUnknown] where laminar flow is possible and the constant of
// the section is not known, or its equivalent diameter is asked for and not known;
// [calc.ErrRange] outside the range of the law or for a turbulent wall rougher than
// 0.05 D; [calc.ErrDomain] for impossible input; [calc.ErrNonFinite] on overflow.
func Of(in Input) (Result, error) {
	if err := in.check(); err != nil {
		return Result{}, err
	}
	r := Result{RelativeRoughness: in.Roughness / in.HydraulicDiameter}
	if in.Regime.Name == flow.AtRest {
		return r, nil
	}
	if err := in.branches(&r); err != nil {
		return Result{}, err
	}
	in.wall(&r)
	if !calc.Finite(r.Darcy.Value + r.WallShear + r.RoughnessReynolds) { // none is negative
		return Result{}, &calc.Error{Kind: calc.ErrNonFinite, Quantity: "wall_shear_stress", Value: r.WallShear}
	}
	return r, nil
}

// wall gives what follows from the factor.
func (in *Input) wall(r *Result) {
	f := r.Darcy.Value
	r.Fanning = calc.Some(f / 4)
	r.WallShear = f * in.Velocity * (in.Density * in.Velocity) / 8
	r.FrictionVelocity = in.Velocity * math.Sqrt(f/8)
	r.RoughnessReynolds = r.FrictionVelocity * in.Roughness / in.KinematicViscosity
	if r.Law != LaminarLaw {
		r.RoughnessRegime = roughnessRegime(r.RoughnessReynolds)
	}
}

// branches evaluates each possible regime; the plain value is the larger one.
func (in *Input) branches(r *Result) error {
	var laminar float64
	if in.Regime.CanBeLaminar {
		if !in.LaminarConstant.Valid {
			return &calc.Error{Kind: calc.ErrUnknown, Quantity: "laminar_constant",
				Detail: "laminar friction is not known yet for this section; it is known for circle, pipe, ellipse, rectangle, concentric annulus, equilateral triangle and parallel plates, each flowing full"}
		}
		laminar = in.LaminarConstant.Value / in.Regime.Reynolds
		r.Darcy, r.Law = calc.Some(laminar), LaminarLaw
	}
	if !in.Regime.CanBeTurbulent {
		return nil
	}
	turbulent, law, err := in.turbulent()
	if err != nil {
		return err
	}
	r.LawBelowRange = law != in.Law
	if in.Regime.CanBeLaminar {
		r.IfLaminar, r.IfTurbulent = calc.Some(laminar), calc.Some(turbulent)
	}
	if !in.Regime.CanBeLaminar || turbulent > laminar {
		r.Darcy, r.Law = calc.Some(turbulent), law
	}
	return nil
}

// turbulent evaluates the law, or Colebrook-White where that has to stand in.
func (in *Input) turbulent() (float64, Law, error) {
	diameter, err := in.diameterInside()
	if err != nil {
		return 0, 0, err
	}
	p := Point{Reynolds: in.Regime.Reynolds * (diameter / in.HydraulicDiameter), RelativeRoughness: in.Roughness / diameter}
	if p.RelativeRoughness > MaxRelativeRoughness {
		return 0, 0, tooRough(in.Roughness, diameter)
	}
	law := in.Law
	if in.Regime.CanBeLaminar && p.Reynolds < laws[law].Range.MinReynolds {
		law = ColebrookWhiteLaw
	}
	f, err := law.Factor(p)
	return f, law, err
}

// diameterInside is the diameter on which the turbulent law is evaluated.
func (in *Input) diameterInside() (float64, error) {
	if in.DiameterRule == HydraulicDiameter {
		return in.HydraulicDiameter, nil
	}
	if !in.LaminarEquivalent.Valid {
		return 0, &calc.Error{Kind: calc.ErrUnknown, Quantity: "friction_diameter",
			Detail: "the laminar equivalent diameter is not known yet for this section; use hydraulic"}
	}
	return in.LaminarEquivalent.Value, nil
}

func tooRough(roughness, diameter float64) error {
	most := MaxRelativeRoughness * diameter
	return &calc.Error{Kind: calc.ErrRange, Quantity: "roughness", Value: roughness, Max: most,
		Detail: "turbulent friction is known for a roughness of at most 0.05 of the diameter, here " + text(most) + " m; is the roughness in the right unit?"}
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
