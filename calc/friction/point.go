package friction

import (
	"math"
	"strconv"

	"borewright/calc"
)

// Point is where a turbulent law is evaluated.
type Point struct {
	Reynolds          float64
	RelativeRoughness float64 // roughness / diameter
}

// MaxRelativeRoughness is the roughest wall that the laws are used for: the end
// of the published charts (common practice).
const MaxRelativeRoughness = 0.05

// Partials are a factor and its exact partial derivatives.
type Partials struct {
	Factor              float64
	ByReynolds          float64 // ∂f/∂Re [1]
	ByRelativeRoughness float64 // ∂f/∂e [1]
}

const twoOverLn10 = 2 / math.Ln10

// domain refuses what no pipe can have.
func (p Point) domain() error {
	if !(p.Reynolds > 0) || math.IsInf(p.Reynolds, 1) {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "reynolds", Value: p.Reynolds, Detail: "the Reynolds number must be positive and finite"}
	}
	if !(p.RelativeRoughness >= 0) || math.IsInf(p.RelativeRoughness, 1) {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "relative_roughness", Value: p.RelativeRoughness, Detail: "the relative roughness must be 0 or positive, and finite"}
	}
	return nil
}

// roughnessReynolds is u* ε/ν = Re e sqrt(f/8).
func (p Point) roughnessReynolds(f float64) float64 {
	return p.Reynolds * p.RelativeRoughness * math.Sqrt(f/8)
}

// text is a number for a reader.
func text(v float64) string { return strconv.FormatFloat(v, 'g', 6, 64) }
