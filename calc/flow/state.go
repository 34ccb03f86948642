package flow

import "borewright/calc"

// StateOf returns the flow in all its measures.
//
// Equation:
//
//	V = q/A, m = ρ q
//
// Symbols:
//   - V: velocity, mean over the true flow area [m/s]
//   - q: volume flow [m³/s]
//   - A: flow area, area > 0 [m²]
//   - m: mass flow [kg/s]
//   - ρ: density, density > 0 [kg/m³]
//
// Validity: exact by definition. The area is the true one, never that of a circle
// of the hydraulic diameter.
//
// Source: definition; continuity.
//
// Accuracy: 2 ulp.
//
// Errors: [calc.ErrDomain] for a flow that is negative or no number (swap the
// ends), or an area or density that is not positive; [calc.ErrNonFinite] on overflow.
func StateOf(rate Rate, area, density float64) (State, error) {
	if !(area > 0) || !calc.Finite(area) {
		return State{}, &calc.Error{Kind: calc.ErrDomain, Quantity: "flow_area", Value: area}
	}
	if err := calc.Density.Check(density); err != nil {
		return State{}, err
	}
	if err := rate.check(); err != nil {
		return State{}, err
	}
	s := rate.state(area, density)
	if !calc.Finite(s.Velocity) || !calc.Finite(s.MassFlow) || !calc.Finite(s.VolumeFlow) {
		return State{}, &calc.Error{Kind: calc.ErrNonFinite, Quantity: "velocity", Value: s.Velocity}
	}
	return s, nil
}

// input is the input that the measure belongs to.
func (m Measure) input() calc.Input {
	switch m {
	case ByVolume:
		return calc.VolumeFlow
	case ByMass:
		return calc.MassFlow
	case ByVelocity:
		return calc.Velocity
	}
	return calc.NoInput
}

func (r Rate) check() error {
	in := r.By.input()
	if in == calc.NoInput {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "flow", Detail: "give one of volume_flow, mass_flow and velocity"}
	}
	if r.Value < 0 {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: in.String(), Value: r.Value, Max: in.Bound().Max,
			Detail: "flow runs from inlet to outlet; for the other direction swap the ends and change the sign of rise"}
	}
	return in.Check(r.Value)
}

func (r Rate) state(area, density float64) State {
	switch r.By {
	case ByVolume:
		return State{MassFlow: r.Value * density, VolumeFlow: r.Value, Velocity: r.Value / area}
	case ByMass:
		volume := r.Value / density
		return State{MassFlow: r.Value, VolumeFlow: volume, Velocity: volume / area}
	}
	volume := r.Value * area
	return State{MassFlow: volume * density, VolumeFlow: volume, Velocity: r.Value}
}
