// Package fluid gives density, viscosity and what else a calculation needs of
// the fluid at its state.
package fluid

import "borewright/calc"

// Phase of the fluid.
type Phase uint8

// The phases a calculation tells apart.
const (
	Liquid Phase = iota + 1
	Gas
)

// Properties of a fluid at one state.
type Properties struct {
	Density            float64 // ρ [kg/m³]
	DynamicViscosity   float64 // μ [Pa s]
	KinematicViscosity float64 // ν = μ/ρ [m²/s]
	Phase              Phase
	VapourPressure     calc.Optional // absolute [Pa]
	SoundSpeed         calc.Optional // [m/s]
	HeatCapacityRatio  calc.Optional // of a gas, cp/cv or its isentropic exponent [1]
	Temperature        calc.Optional // of the state, where it is known [K]
	Pressure           calc.Optional // of the state, absolute, where it is known [Pa]
	MolarMass          calc.Optional // of a gas, where it is known [kg/mol]
	Source             string        // where the values come from ("given" for posted ones)
}
