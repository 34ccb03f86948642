package friction

import (
	"math"

	"borewright/calc"
	"borewright/calc/flow"
)

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
	var r Result
	err := in.Into(&r)
	return r, err
}

// Into writes the friction of the wall into r, without the copies of [Of]; with an
// error r is empty.
//
// Equation:
//
//	as [Of]
//
// Symbols:
//   - r: the friction of the wall, each with its unit at [Result] [1], [Pa] or [m/s]
//
// Validity: that of [Of].
//
// Source: that of [Of].
//
// Accuracy: the digits of [Of].
//
// Errors: those of [Of].
func (in *Input) Into(r *Result) error {
	*r = Result{}
	if err := in.check(); err != nil {
		return err
	}
	r.RelativeRoughness = in.Roughness / in.HydraulicDiameter
	if in.Regime.Name == flow.AtRest {
		return nil
	}
	if err := in.branches(r); err != nil {
		*r = Result{}
		return err
	}
	in.wall(r)
	if sum := r.Darcy.Value + r.WallShear + r.RoughnessReynolds; !calc.Finite(sum) { // none is negative
		*r = Result{}
		return &calc.Error{Kind: calc.ErrNonFinite, Quantity: "wall_shear_stress", Value: sum}
	}
	return nil
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
