// Package segment puts a defensible pressure drop on one segment of a line: it
// asks section, flow, friction and fitting once each and keeps every
// intermediate value.
package segment

import (
	"borewright/calc"
	"borewright/calc/fitting"
	"borewright/calc/flow"
	"borewright/calc/fluid"
	"borewright/calc/friction"
	"borewright/calc/section"
)

// EndKind is what the segment is joined to at one end.
type EndKind uint8

// The ends. SameSection, the zero value, means the segment's own section.
const (
	SameSection EndKind = iota
	OtherSection
	Reservoir     // at rest
	FreeDischarge // a jet leaving with the segment's own velocity
)

// End is one end of a segment.
type End struct {
	Kind    EndKind
	Section section.Section // of OtherSection
}

// Input is one segment in SI units.
type Input struct {
	Section        section.Section
	Fluid          fluid.Properties
	Flow           flow.Rate
	Criteria       flow.Criteria
	Roughness      float64
	Law            friction.Law
	DiameterRule   friction.DiameterRule
	Length         float64       // developed length [m]
	Rise           calc.Optional // outlet level - inlet level [m]; not Valid: taken as level
	Fittings       []fitting.Item
	Inlet, Outlet  End
	InletPressure  calc.Optional // static, absolute [Pa]; at most one of the two
	OutletPressure calc.Optional
	Gravity        float64 // [m/s²]

	GasModel            GasModel
	AnswerAtChoking     bool          // a flow that chokes is answered at the largest one that does not
	SurroundingsDensity calc.Optional // of the air around the line [kg/m³]
}

// StandardGravity is the conventional value, 9.80665 m/s² exactly.
// Source: 3rd CGPM (1901); ISO 80000-3:2019.
const StandardGravity = 9.80665

// Pressure is the account of pressure over the segment. A drop is positive when
// pressure falls in the direction of flow.
type Pressure struct {
	FrictionDrop      float64 // [Pa]
	FittingsDrop      float64
	TotalPressureLoss float64 // friction + fittings
	LossCoefficients  float64 // ΣK of the fittings by coefficient
	CoefficientDrop   float64 // the part of FittingsDrop by coefficients
	ComponentDrop     float64 // the part of FittingsDrop by rating

	ElevationDrop      calc.Optional // ρ g rise; not Valid with a free surface
	AccelerationDrop   calc.Optional
	StaticPressureDrop calc.Optional
	InletVelocity      float64 // at the two ends [m/s]
	OutletVelocity     float64
	FrictionGradient   float64       // [Pa/m]
	HeadLoss           float64       // [m of the fluid]
	FluidPower         calc.Optional // [W]; not Valid with a free surface

	FrictionDropIfLaminar         calc.Optional
	FrictionDropIfTurbulent       calc.Optional
	StaticPressureDropIfLaminar   calc.Optional
	StaticPressureDropIfTurbulent calc.Optional

	InletPressure  calc.Optional // absolute [Pa]
	OutletPressure calc.Optional
	LowestPressure calc.Optional

	GaugePressureDrop calc.Optional // what gauges at both ends show [Pa]

	GasModel GasModel // zero for a liquid

	FrictionSlope calc.Optional // only with a free surface [1]
	BedSlope      calc.Optional // -rise/length [1]
}

// Conditions are what a reader of the result must know; the service words them.
type Conditions struct {
	AtRest              bool
	RegimeUncertain     bool
	BandAssumed         bool // regime limits of the round pipe on another section
	LawBelowRange       bool
	Developing          bool // length < entry length
	BelowVapour         bool // lowest pressure under the vapour pressure
	NotPositive         bool // lowest absolute pressure at or under zero
	DepthGiven          bool // free surface: the depth is given, not solved
	ConstantLossLowRe   bool // loss coefficient used below Re 1e4
	ConstantLossLaminar bool
	EndLossMissing      bool // a reservoir end and no loss coefficient at all
	GasIncompressible   bool // a gas taken as incompressible
	Choked              bool // answered at the largest flow, more was asked for

	GasRiseWithoutSurroundings bool
}

// Result keeps every intermediate value of the segment. The functions of this
// package fill it as far as their name says.
type Result struct {
	Section    section.Properties
	Fluid      fluid.Properties
	Flow       flow.State
	Regime     flow.Regime
	Friction   friction.Result
	Pressure   Pressure
	Conditions Conditions
	Gas        GasRun // of a gas that is carried isothermally or adiabatically
}
