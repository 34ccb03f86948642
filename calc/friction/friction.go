// Package friction gives the Darcy friction factor: laminar from the section's
// own constant, turbulent by the published laws, each inside its range.
package friction

import "borewright/calc"

// Law is a turbulent friction law.
type Law uint8

// The laws. The zero value is the default.
const (
	ColebrookWhiteLaw Law = iota
	HaalandLaw
	SwameeJainLaw
	SerghidesLaw
	ChurchillLaw
	BlasiusLaw
	PrandtlSmoothLaw
	VonKarmanRoughLaw
	LaminarLaw // the section's own laminar constant; never asked for by name
)

// DiameterRule selects the diameter inside the friction factor.
type DiameterRule uint8

// The diameter rules of the contract.
const (
	HydraulicDiameter DiameterRule = iota
	LaminarEquivalentDiameter
)

// RoughnessRegime tells how the wall's roughness acts.
type RoughnessRegime uint8

// Nikuradse's three regimes, by the roughness Reynolds number.
const (
	HydraulicallySmooth RoughnessRegime = iota + 1
	TransitionallyRough
	FullyRough
)

// Result is the friction of the wall with what it rests on. Factors are not
// Valid at rest.
type Result struct {
	Darcy             calc.Optional   // f, the larger of the possible branches
	Fanning           calc.Optional   // f/4
	Law               Law             // the law of the plain value
	RelativeRoughness float64         // roughness / hydraulic diameter
	WallShear         float64         // f ρ V²/8 [Pa], mean over the wetted perimeter
	FrictionVelocity  float64         // sqrt(wall shear / ρ) [m/s]
	RoughnessReynolds float64         // friction velocity · roughness / ν
	RoughnessRegime   RoughnessRegime // zero where the plain value is laminar
	IfLaminar         calc.Optional   // both branches where both regimes are possible
	IfTurbulent       calc.Optional
	LawBelowRange     bool // Colebrook-White stands in for the chosen law, which ends above this Reynolds number
}
