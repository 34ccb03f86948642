package flow

import "borewright/calc"

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
//	possible from the lower to the upper one, the limits included;
//	laminar Le/Dh = (0.619^1.6 + (0.0567 Re)^1.6)^(1/1.6), turbulent Le/Dh = 1.359 Re^(1/4)
//
// Symbols:
//   - Re: Reynolds number [1]
//   - V: velocity on the true flow area [m/s]
//   - Dh: hydraulic diameter [m]
//   - ν: kinematic viscosity [m²/s]
//   - Le: entry length, the larger one where both regimes are possible [m]
//
// Validity: limits 2300 and 4000 for a round pipe with ordinary approach flow,
// assumed for other sections; 2040 with a disturbed approach. Calm approach
// keeps laminar flow possible up to and with the Reynolds number given with it,
// while the name above the band stays turbulent; below the upper limit that number
// has no effect. Limits given by the caller replace those of the approach. At
// velocity 0 nothing is possible and the name is [AtRest]. Re from 1e-100.
//
// Source: common practice; Avila et al. 2011, Science 333, 192 (from memory); entry
// lengths Durst et al. 2005, J. Fluids Eng. 127, 1154, and Bhatti & Shah 1987,
// Handbook of Single-Phase Convective Heat Transfer, chapter 4 (from memory).
//
// Accuracy: Re to 2 ulp; the limits are a convention within some hundreds; entry
// lengths 1e-12, testdata/flow/entry_length.csv, the laws behind them about 30 %
// (common practice).
//
// Errors: [calc.ErrDomain] for impossible input, limits in the wrong order, or a
// calm Reynolds number without calm approach and the reverse; [calc.ErrRange] for a
// flow so small that no factor could be written; [calc.ErrNonFinite] on overflow.
func RegimeOf(in RegimeInput) (Regime, error) {
	if err := in.check(); err != nil {
		return Regime{}, err
	}
	b, err := in.Criteria.band()
	if err != nil {
		return Regime{}, err
	}
	r := Regime{Lower: b.lower, Upper: b.upper}
	r.AssumedForSection = !in.Round && !(in.Criteria.Lower.Valid && in.Criteria.Upper.Valid)
	if err := in.reynolds(&r); err != nil {
		return Regime{}, err
	}
	r.name(in.Velocity, &in.Criteria)
	r.entry(in.HydraulicDiameter)
	if !calc.Finite(r.EntryLength.Value) {
		return Regime{}, &calc.Error{Kind: calc.ErrNonFinite, Quantity: "entry_length", Value: r.EntryLength.Value}
	}
	return r, nil
}

// leastReynolds keeps 1/Re and what is made of it finite.
const leastReynolds = 1e-100

func (in *RegimeInput) reynolds(r *Regime) error {
	r.Reynolds = in.Velocity * in.HydraulicDiameter / in.KinematicViscosity
	if !calc.Finite(r.Reynolds) {
		return &calc.Error{Kind: calc.ErrNonFinite, Quantity: "reynolds", Value: r.Reynolds}
	}
	if in.Velocity > 0 && r.Reynolds < leastReynolds {
		return &calc.Error{Kind: calc.ErrRange, Quantity: "velocity", Value: in.Velocity,
			Detail: "the flow is so small that its Reynolds number is below 1e-100; say 0 for a fluid at rest"}
	}
	return nil
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

// band is the limits between which both regimes are possible.
type band struct{ lower, upper float64 }

// band gives the limits that hold for the criteria.
func (c *Criteria) band() (band, error) {
	b := band{lower: DefaultLower, upper: DefaultUpper}
	if c.Approach > Calm {
		return band{}, &calc.Error{Kind: calc.ErrDomain, Quantity: "approach_flow", Value: float64(c.Approach), Detail: "say ordinary, disturbed or calm"}
	}
	if c.Approach == Disturbed {
		b.lower = DisturbedLower
	}
	if err := c.given(&b); err != nil {
		return band{}, err
	}
	if b.lower > b.upper {
		return band{}, c.wrongOrder(b)
	}
	return b, c.checkCalm()
}

// given puts in the limits that the caller gave.
func (c *Criteria) given(b *band) error {
	if c.Lower.Valid {
		if err := calc.LowerCriticalReynolds.Check(c.Lower.Value); err != nil {
			return err
		}
		b.lower = c.Lower.Value
	}
	if c.Upper.Valid {
		if err := calc.UpperCriticalReynolds.Check(c.Upper.Value); err != nil {
			return err
		}
		b.upper = c.Upper.Value
	}
	return nil
}

// wrongOrder points at the limit that the caller gave.
func (c *Criteria) wrongOrder(b band) error {
	if c.Lower.Valid {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "lower_critical_reynolds", Value: b.lower, Min: calc.LowerCriticalReynolds.Bound().Min, Max: b.upper,
			Detail: "the lower limit must not exceed the upper one, which is " + shortest(b.upper)}
	}
	return &calc.Error{Kind: calc.ErrDomain, Quantity: "upper_critical_reynolds", Value: b.upper, Min: b.lower, Max: calc.UpperCriticalReynolds.Bound().Max,
		Detail: "the upper limit must not be below the lower one, which is " + shortest(b.lower)}
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

func (r *Regime) name(velocity float64, c *Criteria) {
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
