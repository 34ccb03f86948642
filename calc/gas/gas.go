// Package gas integrates the flow of a perfect gas along a line of constant
// area: isothermal or adiabatic, with friction and loss coefficients spread over
// the length, to the pressure at the other end or to the point where it chokes.
package gas

import (
	"math"

	"borewright/calc"
)

// Gas is a perfect gas with a constant compressibility factor.
type Gas struct {
	SpecificConstant  float64 // Z R / M [J/(kg K)]
	HeatCapacityRatio float64 // γ [1]; 0: not known, then there is no Mach number and no adiabatic law
}

// State is the gas at one place.
type State struct {
	Pressure    float64 // static, absolute [Pa]
	Temperature float64 // static [K]
	Velocity    float64 // [m/s]
	Mach        float64 // velocity / sqrt(γ Z R T / M) [1]; 0 where γ is not known
}

// Line is a line of constant area with a steady flow.
type Line struct {
	Gas        Gas
	MassFlux   float64 // G = mass flow / area [kg/(m² s)]
	Resistance float64 // f L/D + ΣK [1], positive
	Lift       float64 // g · rise [m²/s²]
}

// Known is the state that is given, and at which end.
type Known struct {
	Pressure    float64 // static, absolute [Pa]
	Temperature float64 // static [K]
	AtOutlet    bool
}

// Ends are the states at both ends of the line. Drop is the fall of static
// pressure from inlet to outlet, Loss the part of it that friction and fittings take,
// Weight the part that lifts the gas, Faster what the velocity gains: each formed
// without subtracting the ends where they are close, so that a slow gas loses no digits.
type Ends struct {
	In, Out State
	Drop    float64 // [Pa]
	Loss    float64 // [Pa]
	Weight  float64 // [Pa]
	Faster  float64 // [m/s]
}

// At is the state of the known end, its velocity by continuity.
func (l *Line) At(k Known) State { return l.stateAt(k.Pressure, k.Temperature) }

// Part is the line over a part of its length, from 0 to 1.
func (l *Line) Part(part float64) Line {
	p := *l
	p.Resistance *= part
	p.Lift *= part
	return p
}

// stateAt completes a state from pressure and temperature by continuity.
func (l *Line) stateAt(pressure, temperature float64) State {
	s := State{Pressure: pressure, Temperature: temperature, Velocity: l.MassFlux * l.Gas.SpecificConstant * temperature / pressure}
	if l.Gas.HeatCapacityRatio > 0 {
		s.Mach = s.Velocity / l.Gas.soundSpeed(temperature)
	}
	return s
}

func (g *Gas) soundSpeed(temperature float64) float64 {
	return math.Sqrt(g.HeatCapacityRatio * g.SpecificConstant * temperature)
}

// check refuses what no gas line can be.
func (l *Line) check(k Known) error {
	switch {
	case !(l.Gas.SpecificConstant > 0) || math.IsInf(l.Gas.SpecificConstant, 0):
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "molar_mass", Value: l.Gas.SpecificConstant}
	case l.Gas.HeatCapacityRatio != 0 && !(l.Gas.HeatCapacityRatio > 1 && l.Gas.HeatCapacityRatio <= 2):
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "heat_capacity_ratio", Value: l.Gas.HeatCapacityRatio, Min: 1, Max: 2,
			Detail: "a heat capacity ratio lies above 1 and at most at 2"}
	case !(l.MassFlux > 0) || math.IsInf(l.MassFlux, 0):
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "mass_flow", Value: l.MassFlux}
	case !(l.Resistance > 0) || math.IsInf(l.Resistance, 0):
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "loss_coefficient", Value: l.Resistance,
			Detail: "friction and loss coefficients together must take pressure from the gas"}
	case !calc.Finite(l.Lift):
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "rise", Value: l.Lift}
	case !(k.Pressure > 0) || math.IsInf(k.Pressure, 0):
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "pressure", Value: k.Pressure}
	case !(k.Temperature > 0) || math.IsInf(k.Temperature, 0):
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "temperature", Value: k.Temperature}
	}
	return nil
}

// ChokedError tells that the line is too long for the flow: the gas reaches its
// limiting velocity before the outlet. Resistance is the f L/D + ΣK at which it does.
type ChokedError struct {
	Resistance float64
}

func (e *ChokedError) Error() string { return "the flow chokes before the outlet" }
