// Package document is the one strict reader: from bytes to quantities. It reads
// a request as the OpenAPI document states it, collects every violation with a
// pointer to its field, and guesses nothing.
package document

import (
	"borewright/calc"
	"borewright/calc/flow"
	"borewright/calc/fluid"
	"borewright/calc/friction"
	"borewright/calc/section"
	"borewright/calc/segment"
	"borewright/calc/units"
)

// Door is a calculation that a request asks for. Each door uses the blocks of
// the doors before it and refuses the blocks that it does not use.
type Door uint8

// The doors of one calculation.
const (
	SectionDoor Door = iota + 1
	RegimeDoor
	FrictionDoor
	SegmentDoor
	FluidDoor
)

// Number is a quantity of a request in SI, and whether it was given at all.
type Number struct {
	Value     float64
	Given     bool
	Basis     units.Basis // Gauge: the service adds the atmosphere of the site
	Tolerance units.Tolerance
}

// Request is a document that has been read and found well-formed. It holds
// numbers and names; the service resolves the names.
type Request struct {
	Door      Door
	ID, Title string
	Tags      []Tag

	Section   Section
	Fluid     Fluid
	Flow      Flow
	Roughness Number

	Law            friction.Law
	LawGiven       bool
	DiameterRule   friction.DiameterRule
	DiameterGiven  bool
	LowerCritical  Number
	UpperCritical  Number
	Approach       flow.Approach
	CalmTo         Number
	Length, Rise   Number
	Fittings       []Fitting
	Inlet, Outlet  End
	InletPressure  Number
	OutletPressure Number
	Site           Site
	Surroundings   Surroundings
	GasModel       segment.GasModel
	AtChoking      bool   // answer a flow that chokes at the largest one that does not
	Distribution   Number // the points of it

	decoder decoder // its memory is used again by the next Read
}

// Tag is free text that a list carries along.
type Tag struct{ Name, Text string }

// Section is a section block: a shape of the table and its dimensions in the
// order of the table.
type Section struct {
	Given       bool
	Spec        *ShapeSpec
	Dims        [maxDims]Number // by the order of Spec.Fields
	Vertices    [][2]float64    // polygon
	DryEdges    []int           // polygon
	Standard    string          // pipe by standard
	Size        string
	Schedule    string
	LiquidDepth Number
}

const maxDims = 6

// ShapeSpec is one row of the table of shapes: the name of the shape, its
// numeric fields in order, and how calc's shape is built from them.
type ShapeSpec struct {
	Name   string
	Fields []FieldSpec
	Depth  bool // it can hold a liquid with a free surface
	// Build makes the shape from a section whose fields have been read. It is
	// nil for the pipe, whose names the service resolves first.
	Build func(*Section) section.Shape
}

// FieldSpec is one numeric field of a request: its input (name and bounds are
// calc's), its kind, and whether it must be there.
type FieldSpec struct {
	Input    calc.Input
	Kind     units.Kind
	Required bool
}

// FluidWay is how a fluid is told.
type FluidWay uint8

// The ways to tell a fluid.
const (
	ByProperties FluidWay = iota // density and one viscosity
	BySubstance                  // a name and a state
	ByConstants                  // a gas by its constants and a state
)

// Fluid is a fluid told in one of the ways.
type Fluid struct {
	Given bool
	Way   FluidWay

	Density            Number
	DynamicViscosity   Number // of properties and constants
	KinematicViscosity Number
	VapourPressure     Number
	Phase              fluid.Phase // zero: not given

	Substance   Substance
	Saturated   fluid.Phase // of a state on the saturation line; zero: by temperature and pressure
	Temperature Number
	Pressure    Number

	MolarMass             Number // exactly one of the two
	RelativeDensity       Number
	HeatCapacityRatio     Number
	CompressibilityFactor Number
}

// Substance is a fluid by name.
type Substance uint8

// The substances.
const (
	Water Substance = iota + 1
	Air
)

// String is the name of the substance in the contract.
func (s Substance) String() string { return [...]string{"", "water", "air"}[s] }

// Surroundings are what stands around the line.
type Surroundings struct {
	Given       bool
	Substance   Substance
	Temperature Number
}

// Flow is a rate of flow in exactly one of its measures.
type Flow struct {
	Given   bool
	By      flow.Measure // zero: a volume at a reference state
	Measure Number

	ReferenceTemperature Number
	ReferencePressure    Number
}

// Fitting is one entry of the fittings: a loss coefficient or a rated component.
type Fitting struct {
	LossCoefficient Number
	Count           Number
	RatedDrop       Number
	RatedFlow       Number
	Exponent        Number
}

// EndKind is what stands at one end of a segment.
type EndKind uint8

// The ends a request can name.
const (
	NoEnd EndKind = iota
	SectionEnd
	ReservoirEnd
	FreeDischargeEnd
)

// End is one end of a segment.
type End struct {
	Kind    EndKind
	Section Section
}

// Site is where the plant stands.
type Site struct {
	AtmosphericPressure Number // at most one of the two
	Altitude            Number
	Gravity             Number
}

// Violation is one thing that is wrong with a request.
type Violation struct {
	Pointer   string // JSON pointer without the leading "#", "/section/width"; "" is the whole document
	Parameter string // name of a query parameter or column instead of a pointer
	Code      string // stable, snake_case
	Detail    string // what is wrong and what would be right
}

// Refusal is a request that cannot be answered, with everything found wrong.
type Refusal struct {
	Malformed  bool // not one readable document (400); else read and refused (422)
	Violations []Violation
}

// Error gives the first violation; the rest stand in Violations.
func (r *Refusal) Error() string {
	if len(r.Violations) == 0 {
		return "refused"
	}
	v := r.Violations[0]
	return v.Pointer + v.Parameter + ": " + v.Detail
}
