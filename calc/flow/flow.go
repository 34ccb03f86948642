// Package flow turns a rate of flow into velocity on the true flow area and
// names the flow regime.
package flow

import "borewright/calc"

// Measure tells how the rate of flow was given.
type Measure uint8

// The measures of a rate of flow.
const (
	ByVolume Measure = iota + 1
	ByMass
	ByVelocity
)

// Rate is a rate of flow in one of its measures, SI.
type Rate struct {
	By    Measure
	Value float64 // m³/s, kg/s or m/s
}

// State is the flow in all its measures.
type State struct {
	MassFlow   float64 // [kg/s]
	VolumeFlow float64 // [m³/s]
	Velocity   float64 // V = volume flow / flow area [m/s]
}

// Name of a flow regime.
type Name uint8

// The regimes. AtRest is flow 0.
const (
	AtRest Name = iota + 1
	Laminar
	Transitional
	Turbulent
)

// Approach is the quality of the flow that arrives.
type Approach uint8

// The approaches of the contract.
const (
	Ordinary Approach = iota
	Disturbed
	Calm
)

// Criteria are the limits of the regimes; zero values mean the defaults.
type Criteria struct {
	Lower, Upper calc.Optional // critical Reynolds numbers
	Approach     Approach
	CalmTo       float64 // Reynolds number to which calm flow can stay laminar; given with Calm, and only then
}

// Regime is the flow regime and how sure it is. Entry lengths are those of a round
// pipe on the hydraulic diameter; the plain one is the larger of the branches that
// are possible, and the branches stand only where both are.
type Regime struct {
	Reynolds          float64
	Name              Name
	CanBeLaminar      bool
	CanBeTurbulent    bool
	Lower, Upper      float64       // the critical Reynolds numbers used
	AssumedForSection bool          // the band is of the round pipe, the section is not round
	EntryLength       calc.Optional // [m]
	EntryIfLaminar    calc.Optional // [m]
	EntryIfTurbulent  calc.Optional // [m]
}
