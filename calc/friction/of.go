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
	Regime             flow.Regime
	Law                Law
	DiameterRule       DiameterRule
}

// Of returns the friction of the wall in the regimes that are possible.
//
// Equation:
//
//	laminar f = C/Re; turbulent f by the law at Re and ε/Dh;
//	τ = f ρ V²/8, u* = V sqrt(f/8), ε⁺ = u* ε/ν
//
// Symbols:
//   - f: Darcy friction factor; the larger of the possible branches [1]
//   - C: laminar constant of the section [1]
//   - Re: Reynolds number on the hydraulic diameter [1]
//   - ε: absolute roughness [m]
//   - Dh: hydraulic diameter, or inside f the laminar equivalent one [m]
//   - τ: wall shear stress, mean over the wetted perimeter [Pa]
//   - ρ: density [kg/m³]
//   - V: velocity on the true flow area [m/s]
//   - u*: friction velocity [m/s]
//   - ν: kinematic viscosity [m²/s]
//   - ε⁺: roughness Reynolds number [1]
//
// Validity: fully developed flow of a Newtonian fluid; the ranges of the laws.
//
// Source: definitions, e.g. ISO 80000-11 for the numbers; laws see [Laws];
// roughness regimes by Nikuradse 1933 (from memory).
//
// Accuracy: exact arithmetic on the factor of the law.
//
// Errors: [calc.ErrUnknown] where laminar flow is possible and the constant of
// the section is not known; [calc.ErrRange] outside the range of the law.
func Of(in Input) (Result, error) {
	r := Result{RelativeRoughness: in.Roughness / in.HydraulicDiameter}
	if in.Regime.Name == flow.AtRest {
		return r, nil
	}
	if err := in.branches(&r); err != nil {
		return Result{}, err
	}
	f := r.Darcy.Value
	r.Fanning = calc.Some(f / 4)
	r.WallShear = f * in.Density * in.Velocity * in.Velocity / 8
	r.FrictionVelocity = in.Velocity * math.Sqrt(f/8)
	r.RoughnessReynolds = r.FrictionVelocity * in.Roughness / in.KinematicViscosity
	if r.Law != LaminarLaw {
		r.RoughnessRegime = roughnessRegime(r.RoughnessReynolds)
	}
	return r, nil
}

// branches evaluates each possible regime; the plain value is the larger one.
func (in *Input) branches(r *Result) error {
	var laminar, turbulent float64
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
	turbulent, below, err := in.turbulent()
	if err != nil {
		return err
	}
	r.LawBelowRange = below
	if !in.Regime.CanBeLaminar || turbulent > laminar {
		r.Darcy, r.Law = calc.Some(turbulent), in.Law
		if below {
			r.Law = ColebrookWhiteLaw
		}
	}
	if in.Regime.CanBeLaminar {
		r.IfLaminar, r.IfTurbulent = calc.Some(laminar), calc.Some(turbulent)
	}
	return nil
}

// turbulent evaluates the law; where turbulent flow is possible below the range
// of the law, Colebrook-White stands in.
func (in *Input) turbulent() (f float64, below bool, err error) {
	diameter := in.HydraulicDiameter
	if in.DiameterRule == LaminarEquivalentDiameter {
		if !in.LaminarEquivalent.Valid {
			return 0, false, &calc.Error{Kind: calc.ErrUnknown, Quantity: "friction_diameter",
				Detail: "the laminar equivalent diameter is not known yet for this section; use hydraulic"}
		}
		diameter = in.LaminarEquivalent.Value
	}
	p := Point{Reynolds: in.Regime.Reynolds * (diameter / in.HydraulicDiameter), RelativeRoughness: in.Roughness / diameter}
	if p.RelativeRoughness > MaxRelativeRoughness {
		return 0, false, tooRough(p.RelativeRoughness, diameter)
	}
	law := in.Law
	if law != ColebrookWhiteLaw && p.Reynolds < laws[law].Range.MinReynolds && in.Regime.CanBeLaminar {
		law, below = ColebrookWhiteLaw, true
	}
	f, err = law.Factor(p)
	return f, below, err
}

func tooRough(relative, diameter float64) error {
	return &calc.Error{Kind: calc.ErrRange, Quantity: "roughness", Value: relative * diameter, Max: MaxRelativeRoughness * diameter,
		Detail: "turbulent friction is known for a roughness of at most 0.05 of the diameter, here " + text(MaxRelativeRoughness*diameter) + " m; is the roughness in the right unit?"}
}

func roughnessRegime(plus float64) RoughnessRegime {
	switch {
	case plus < SmoothBelow:
		return HydraulicallySmooth
	case plus <= RoughAbove:
		return TransitionallyRough
	}
	return FullyRough
}

// String is the name of the roughness regime in the contract.
func (r RoughnessRegime) String() string {
	return [...]string{"", "smooth", "transitional", "rough"}[r]
}

func reynoldsRange(law string, re, least, most float64) error {
	if re >= least && re <= most {
		return nil
	}
	return &calc.Error{Kind: calc.ErrRange, Quantity: "friction_law", Value: re, Min: least, Max: most,
		Detail: law + " holds for Reynolds numbers from " + text(least) + " to " + text(most)}
}
