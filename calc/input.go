package calc

import "math"

// Input names one numeric input of the contract. Its bound is stated here once:
// calc checks it, the strict reader checks it, and a test compares it with the
// OpenAPI document, so that the three cannot drift.
type Input uint8

// The numeric inputs, by the leaf names of the contract.
const (
	NoInput Input = iota
	// section
	Diameter
	Width
	Height
	CornerRadius
	OuterDiameter
	InnerDiameter
	Base
	ApexOffset
	Sides
	SideLength
	Radius
	Angle
	BottomWidth
	BankLeft
	BankRight
	Gap
	Vertex
	LiquidDepth
	OutsideDiameter
	WallThickness
	LiningThickness
	// fluid
	Density
	DynamicViscosity
	KinematicViscosity
	VapourPressure
	Temperature
	Pressure
	MolarMass
	RelativeDensity
	HeatCapacityRatio
	CompressibilityFactor
	// flow
	VolumeFlow
	MassFlow
	Velocity
	ReferenceVolumeFlow
	ReferenceTemperature
	ReferencePressure
	// wall and regime
	Roughness
	LowerCriticalReynolds
	UpperCriticalReynolds
	CalmLaminarToReynolds
	// segment
	Length
	Rise
	LossCoefficient
	Count
	RatedDrop
	RatedFlow
	Exponent
	InletPressure
	OutletPressure
	AtmosphericPressure
	Altitude
	Gravity
	DistributionPoints
	inputs // the number of inputs
)

// Bound is the stated interval of one input: Min ≤ value ≤ Max, or Min < value
// where OpenMin is set. It stands where the law or the arithmetic ends; a value
// that is only unusual is a caution and no error.
type Bound struct {
	Name     string // leaf name in the contract
	Unit     string // SI unit; "1" for a ratio
	Min, Max float64
	OpenMin  bool
	Integer  bool
}

const (
	smallest = 1e-9 // m: below, no continuum
	largest  = 1e6  // m
)

var bounds = [inputs]Bound{
	NoInput:               {},
	Diameter:              {Name: "diameter", Unit: "m", Min: smallest, Max: largest},
	Width:                 {Name: "width", Unit: "m", Min: smallest, Max: largest},
	Height:                {Name: "height", Unit: "m", Min: smallest, Max: largest},
	CornerRadius:          {Name: "corner_radius", Unit: "m", Min: 0, Max: largest},
	OuterDiameter:         {Name: "outer_diameter", Unit: "m", Min: smallest, Max: largest},
	InnerDiameter:         {Name: "inner_diameter", Unit: "m", Min: smallest, Max: largest},
	Base:                  {Name: "base", Unit: "m", Min: smallest, Max: largest},
	ApexOffset:            {Name: "apex_offset", Unit: "m", Min: -largest, Max: largest},
	Sides:                 {Name: "sides", Unit: "1", Min: 3, Max: 1000, Integer: true},
	SideLength:            {Name: "side_length", Unit: "m", Min: smallest, Max: largest},
	Radius:                {Name: "radius", Unit: "m", Min: smallest, Max: largest},
	Angle:                 {Name: "angle", Unit: "rad", Min: 1e-6, Max: 2 * math.Pi},
	BottomWidth:           {Name: "bottom_width", Unit: "m", Min: 0, Max: largest},
	BankLeft:              {Name: "bank_left", Unit: "1", Min: -1e6, Max: 1e6},
	BankRight:             {Name: "bank_right", Unit: "1", Min: -1e6, Max: 1e6},
	Gap:                   {Name: "gap", Unit: "m", Min: smallest, Max: largest},
	Vertex:                {Name: "vertices", Unit: "m", Min: -largest, Max: largest},
	LiquidDepth:           {Name: "liquid_depth", Unit: "m", Min: smallest, Max: largest},
	OutsideDiameter:       {Name: "outside_diameter", Unit: "m", Min: smallest, Max: largest},
	WallThickness:         {Name: "wall_thickness", Unit: "m", Min: 0, Max: largest},
	LiningThickness:       {Name: "lining_thickness", Unit: "m", Min: 0, Max: largest},
	Density:               {Name: "density", Unit: "kg/m3", Min: 1e-9, Max: 1e6},
	DynamicViscosity:      {Name: "dynamic_viscosity", Unit: "Pa.s", Min: 1e-12, Max: 1e9},
	KinematicViscosity:    {Name: "kinematic_viscosity", Unit: "m2/s", Min: 1e-15, Max: 1e12},
	VapourPressure:        {Name: "vapour_pressure", Unit: "Pa", Min: 0, Max: 1e12},
	Temperature:           {Name: "temperature", Unit: "K", Min: 0, OpenMin: true, Max: 1e5},
	Pressure:              {Name: "pressure", Unit: "Pa", Min: 0, OpenMin: true, Max: 1e12},
	MolarMass:             {Name: "molar_mass", Unit: "kg/mol", Min: 1e-4, Max: 10},
	RelativeDensity:       {Name: "relative_density", Unit: "1", Min: 0.01, Max: 100},
	HeatCapacityRatio:     {Name: "heat_capacity_ratio", Unit: "1", Min: 1, OpenMin: true, Max: 2},
	CompressibilityFactor: {Name: "compressibility_factor", Unit: "1", Min: 0.01, Max: 10},
	VolumeFlow:            {Name: "volume_flow", Unit: "m3/s", Min: 0, Max: 1e12},
	MassFlow:              {Name: "mass_flow", Unit: "kg/s", Min: 0, Max: 1e15},
	Velocity:              {Name: "velocity", Unit: "m/s", Min: 0, Max: 1e6},
	ReferenceVolumeFlow:   {Name: "reference_volume_flow", Unit: "m3/s", Min: 0, Max: 1e12},
	ReferenceTemperature:  {Name: "reference_temperature", Unit: "K", Min: 100, Max: 1000},
	ReferencePressure:     {Name: "reference_pressure", Unit: "Pa", Min: 1e3, Max: 1e7},
	Roughness:             {Name: "roughness", Unit: "m", Min: 0, Max: largest},
	LowerCriticalReynolds: {Name: "lower_critical_reynolds", Unit: "1", Min: 1, Max: 1e6},
	UpperCriticalReynolds: {Name: "upper_critical_reynolds", Unit: "1", Min: 1, Max: 1e6},
	CalmLaminarToReynolds: {Name: "calm_laminar_to_reynolds", Unit: "1", Min: 1, Max: 1e6},
	Length:                {Name: "length", Unit: "m", Min: smallest, Max: largest},
	Rise:                  {Name: "rise", Unit: "m", Min: -largest, Max: largest},
	LossCoefficient:       {Name: "loss_coefficient", Unit: "1", Min: -1e3, Max: 1e9},
	Count:                 {Name: "count", Unit: "1", Min: 1, Max: 1e6, Integer: true},
	RatedDrop:             {Name: "rated_drop", Unit: "Pa", Min: 0, Max: 1e12},
	RatedFlow:             {Name: "rated_flow", Unit: "m3/s", Min: 0, OpenMin: true, Max: 1e12},
	Exponent:              {Name: "exponent", Unit: "1", Min: 0, Max: 4},
	InletPressure:         {Name: "inlet_pressure", Unit: "Pa", Min: 0, OpenMin: true, Max: 1e12},
	OutletPressure:        {Name: "outlet_pressure", Unit: "Pa", Min: 0, OpenMin: true, Max: 1e12},
	AtmosphericPressure:   {Name: "atmospheric_pressure", Unit: "Pa", Min: 0, OpenMin: true, Max: 1e9},
	Altitude:              {Name: "altitude", Unit: "m", Min: -2000, Max: 32000},
	Gravity:               {Name: "gravity", Unit: "m/s2", Min: 1e-6, Max: 1e3},
	DistributionPoints:    {Name: "distribution_points", Unit: "1", Min: 2, Max: 1000, Integer: true},
}

// Bound returns the stated interval of the input.
func (i Input) Bound() *Bound { return &bounds[i] }

// String is the leaf name of the input.
func (i Input) String() string { return bounds[i].Name }

// Inputs lists every input, for the tests that compare the bounds with the
// document and drive each bound from both sides.
func Inputs() []Input {
	list := make([]Input, 0, inputs-1)
	for i := NoInput + 1; i < inputs; i++ {
		list = append(list, i)
	}
	return list
}

// Contains reports whether v lies in the interval.
func (b *Bound) Contains(v float64) bool {
	return v >= b.Min && v <= b.Max && (!b.OpenMin || v > b.Min) && (!b.Integer || v == math.Trunc(v))
}

// Check refuses a value outside the stated interval of the input.
func (i Input) Check(v float64) error {
	if b := &bounds[i]; !b.Contains(v) {
		return &Error{Kind: ErrDomain, Quantity: b.Name, Value: v, Min: b.Min, Max: b.Max}
	}
	return nil
}
