package flow

import (
	"math"

	"borewright/calc"
)

// Limits of the regimes of a round pipe, on the hydraulic diameter.
const (
	// DefaultLower and DefaultUpper are common practice for ordinary pipework.
	DefaultLower = 2300
	DefaultUpper = 4000
	// DisturbedLower is where turbulence outlives its decay. Source: Avila et al.
	// 2011, Science 333, 192: 2040 ± 10.
	DisturbedLower = 2040
)

// RegimeInput is what the regime depends on.
type RegimeInput struct {
	Velocity           float64 // [m/s]
	HydraulicDiameter  float64 // [m]
	KinematicViscosity float64 // [m²/s]
	Round              bool    // a full circle
	Criteria           Criteria
}

// RegimeOf returns the Reynolds number, the flow regime and every regime that
// can occur.
//
// Equation:
//
//	Re = V Dh/ν; laminar below the lower, turbulent above the upper limit, both
//	possible from the lower to the upper one, the limits included
//
// Symbols:
//   - Re: Reynolds number [1]
//   - V: velocity on the true flow area [m/s]
//   - Dh: hydraulic diameter [m]
//   - ν: kinematic viscosity [m²/s]
//
// Validity: limits 2300 and 4000 for a round pipe with ordinary approach flow,
// assumed for other sections; 2040 with a disturbed approach. Calm approach
// keeps laminar flow possible up to the Reynolds number given with it, while the
// name above the band stays turbulent.
//
// Source: common practice; Avila et al. 2011, Science 333, 192.
//
// Accuracy: the limits are a convention within some hundreds.
//
// Errors: [calc.ErrDomain] for impossible input or limits in the wrong order;
// [calc.ErrNonFinite] on overflow.
func RegimeOf(in RegimeInput) (Regime, error) {
	if err := in.check(); err != nil {
		return Regime{}, err
	}
	r, err := in.Criteria.band()
	if err != nil {
		return Regime{}, err
	}
	r.AssumedForSection = !in.Round && !(in.Criteria.Lower.Valid && in.Criteria.Upper.Valid)
	r.Reynolds = in.Velocity * in.HydraulicDiameter / in.KinematicViscosity
	if !calc.Finite(r.Reynolds) {
		return Regime{}, &calc.Error{Kind: calc.ErrNonFinite, Quantity: "reynolds", Value: r.Reynolds}
	}
	r.name(in.Velocity, in.Criteria)
	r.entry(in.HydraulicDiameter)
	return r, nil
}

func (in *RegimeInput) check() error {
	if err := calc.KinematicViscosity.Check(in.KinematicViscosity); err != nil {
		return err
	}
	if !(in.HydraulicDiameter > 0) || !calc.Finite(in.HydraulicDiameter) {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "hydraulic_diameter", Value: in.HydraulicDiameter}
	}
	if !(in.Velocity >= 0) || !calc.Finite(in.Velocity) {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "velocity", Value: in.Velocity, Detail: "flow runs from inlet to outlet; for the other direction swap the ends"}
	}
	return nil
}

// band gives the limits that hold for the criteria.
func (c *Criteria) band() (Regime, error) {
	r := Regime{Lower: DefaultLower, Upper: DefaultUpper}
	if c.Approach == Disturbed {
		r.Lower = DisturbedLower
	}
	if c.Lower.Valid {
		r.Lower = c.Lower.Value
	}
	if c.Upper.Valid {
		r.Upper = c.Upper.Value
	}
	for _, limit := range [2]struct {
		in    calc.Input
		value float64
	}{{calc.LowerCriticalReynolds, r.Lower}, {calc.UpperCriticalReynolds, r.Upper}} {
		if err := limit.in.Check(limit.value); err != nil {
			return Regime{}, err
		}
	}
	if r.Lower > r.Upper {
		return Regime{}, &calc.Error{Kind: calc.ErrDomain, Quantity: "lower_critical_reynolds", Value: r.Lower, Max: r.Upper,
			Detail: "the lower limit must not exceed the upper one, which is " + shortest(r.Upper)}
	}
	return r, c.checkCalm()
}

func (c *Criteria) checkCalm() error {
	if c.Approach == Calm {
		if c.CalmTo == 0 {
			return &calc.Error{Kind: calc.ErrDomain, Quantity: "calm_laminar_to_reynolds",
				Detail: "say with calm_laminar_to_reynolds up to which Reynolds number the calm flow can stay laminar"}
		}
		return calc.CalmLaminarToReynolds.Check(c.CalmTo)
	}
	if c.CalmTo != 0 {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "calm_laminar_to_reynolds", Value: c.CalmTo,
			Detail: "this belongs to approach_flow calm; leave it out or say calm"}
	}
	return nil
}

func (r *Regime) name(velocity float64, c Criteria) {
	switch {
	case velocity == 0:
		r.Name = AtRest
	case r.Reynolds < r.Lower:
		r.Name, r.CanBeLaminar = Laminar, true
	case r.Reynolds <= r.Upper:
		r.Name, r.CanBeLaminar, r.CanBeTurbulent = Transitional, true, true
	default:
		r.Name, r.CanBeTurbulent = Turbulent, true
		r.CanBeLaminar = c.Approach == Calm && r.Reynolds <= c.CalmTo
	}
}

// entry sets the entry length, the larger where both regimes can occur.
func (r *Regime) entry(diameter float64) {
	if r.CanBeLaminar {
		r.EntryLength = calc.Some(LaminarEntryDiameters(r.Reynolds) * diameter)
	}
	if r.CanBeTurbulent {
		turbulent := calc.Some(TurbulentEntryDiameters(r.Reynolds) * diameter)
		if r.CanBeLaminar {
			r.EntryIfLaminar, r.EntryIfTurbulent = r.EntryLength, turbulent
		}
		r.EntryLength.Valid = true
		r.EntryLength.Value = math.Max(r.EntryLength.Value, turbulent.Value)
	}
}

// LaminarEntryDiameters returns the length in hydraulic diameters over which a
// laminar flow develops. Le/D = (0.619^1.6 + (0.0567 Re)^1.6)^(1/1.6) for a round
// pipe, which holds down to creeping flow, where 0.06 Re would vanish. Source:
// Durst et al. 2005, J. Fluids Eng. 127, 1154 (from memory).
func LaminarEntryDiameters(reynolds float64) float64 {
	const creeping = 0.4641998955855258 // 0.619^1.6
	return math.Pow(creeping+math.Pow(0.0567*reynolds, 1.6), 1/1.6)
}

// TurbulentEntryDiameters returns the length in hydraulic diameters over which a
// turbulent flow develops: Le/D = 1.359 Re^(1/4). Source: Bhatti & Shah 1987,
// Handbook of Single-Phase Convective Heat Transfer (from memory).
func TurbulentEntryDiameters(reynolds float64) float64 {
	return 1.359 * math.Sqrt(math.Sqrt(reynolds))
}

// String is the name of the regime in the contract.
func (n Name) String() string {
	return [...]string{"", "at_rest", "laminar", "transitional", "turbulent"}[n]
}
