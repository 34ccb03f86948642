// Package section gives the geometry of a flow section: true flow area, wetted
// perimeter, hydraulic diameter and what follows from them, full or partly full.
//
// A shape is a small value type (Circle, Rectangle, ...). A section is a shape
// and, where it runs partly full, the depth of the liquid in it. The free
// surface is never wetted perimeter.
package section

import (
	"math"
	"strconv"

	"borewright/calc"
)

// Shape is a closed cross-section that can run full.
type Shape interface {
	// Full returns the properties of the section running full.
	Full() (Properties, error)
}

// PartlyFullShape is a shape that can hold a liquid with a free surface.
type PartlyFullShape interface {
	Shape
	// PartlyFull returns the properties at the given depth above the lowest point.
	PartlyFull(liquidDepth float64) (Properties, error)
}

// Section is what a line is made of at one place.
type Section struct {
	Shape       Shape
	LiquidDepth calc.Optional // without it the section runs full
}

// Properties are the geometric quantities of a section. A quantity without a
// meaning in the case (the mean depth of a full pipe) is not Valid.
type Properties struct {
	FlowArea          float64       // A [m²]
	WettedPerimeter   float64       // P [m], the free surface and dry walls excluded
	HydraulicDiameter float64       // Dh = 4 A / P [m]
	HydraulicRadius   float64       // Rh = A / P [m]
	EqualAreaDiameter float64       // sqrt(4 A / π) [m]
	FreeSurfaceWidth  calc.Optional // T [m]; only with a free surface or a dry top
	MeanDepth         calc.Optional // A / T [m]
	CentroidDepth     calc.Optional // depth of the centroid of A below the free surface [m]
	FillRatio         calc.Optional // liquid depth / height of the section [1]; 1 when full
	LaminarConstant   calc.Optional // Darcy f·Re on Dh [1]; not Valid: not known yet for this section
	LaminarEquivalent calc.Optional // Dh · 64 / LaminarConstant [m]
	EqualFriction     calc.Optional // circular equivalent at equal friction and flow [m] (rectangle, flat oval)
	Round             bool          // a full circle: the published regime limits are for it
	FreeSurface       bool          // the liquid has a free surface
}

// Of returns the properties of the section, full or partly full.
//
// Equation:
//
//	Dh = 4 A/P, Rh = A/P, De = sqrt(4 A/π), mean depth = A/T
//
// Symbols:
//   - Dh: hydraulic diameter [m]
//   - Rh: hydraulic radius [m]
//   - De: equal-area diameter [m]
//   - A: true flow area [m²]
//   - P: wetted perimeter, free surface and dry walls excluded [m]
//   - T: width of the free surface [m]
//
// Validity: exact by definition.
//
// Source: definitions, common practice.
//
// Accuracy: 5e-13 full, 1e-11 partly full; testdata/section/sections.csv.
//
// Errors: [calc.ErrDomain] for dimensions that make no section or a depth above
// its height; [calc.ErrUnknown] for a liquid depth in a shape that takes none.
func (s Section) Of() (Properties, error) {
	if s.Shape == nil {
		return Properties{}, &calc.Error{Kind: calc.ErrDomain, Quantity: "shape", Detail: "a section needs a shape"}
	}
	if !s.LiquidDepth.Valid {
		return s.Shape.Full()
	}
	if err := calc.LiquidDepth.Check(s.LiquidDepth.Value); err != nil {
		return Properties{}, err
	}
	shape, ok := s.Shape.(PartlyFullShape)
	if !ok {
		return Properties{}, &calc.Error{Kind: calc.ErrUnknown, Quantity: "liquid_depth", Value: s.LiquidDepth.Value,
			Detail: "this shape is offered flowing full only; circle, pipe, rectangle, ellipse, triangle, trapezoid and polygon take a liquid_depth"}
	}
	return shape.PartlyFull(s.LiquidDepth.Value)
}

// outline is what a shape works out before the rest follows by definition.
type outline struct {
	area, perimeter float64
	laminar         calc.Optional
}

// full completes the properties of a section that runs full.
func (o outline) full() (Properties, error) {
	var p Properties
	err := o.fullInto(&p)
	return p, err
}

// fullInto is full, written into p.
func (o *outline) fullInto(p *Properties) error {
	o.common(p)
	p.FillRatio = calc.Some(1)
	return p.check()
}

func (o *outline) common(p *Properties) {
	p.FlowArea, p.WettedPerimeter = o.area, o.perimeter
	p.HydraulicRadius = o.area / o.perimeter
	p.HydraulicDiameter = 4 * p.HydraulicRadius // exact
	p.EqualAreaDiameter = math.Sqrt(o.area) * twoOverRootPi
	if o.laminar.Valid {
		p.LaminarConstant = o.laminar
		p.LaminarEquivalent = calc.Some(p.HydraulicDiameter * (64 / o.laminar.Value))
	}
}

const twoOverRootPi = 2 / (math.SqrtPi)

// leastArea [m²] is far below an atom; it keeps the squares of velocities finite.
const leastArea = 1e-40

// check catches an area or perimeter that vanished or overflowed, and then leaves
// no properties.
func (p *Properties) check() error {
	if p.FlowArea >= leastArea && p.HydraulicDiameter > 0 && calc.Finite(p.FlowArea) && calc.Finite(p.WettedPerimeter) && calc.Finite(p.HydraulicDiameter) {
		return nil
	}
	area := p.FlowArea
	*p = Properties{}
	return &calc.Error{Kind: calc.ErrDomain, Quantity: "flow_area", Value: area,
		Detail: "these dimensions leave no flow area, or one below 1e-40 m2 or too large to be expressed"}
}

// pool is a liquid with a free surface: its outline, the width of the surface
// and the first moment of the area about it.
type pool struct {
	area, perimeter, width, moment float64
	strips                         float64 // of a polygon, the magnitudes that its area is made of
	depth, height                  float64 // height 0: open, without a crown
}

// properties completes a partly full section. A pool that reaches the crown
// where the section has no width is a full section.
func (l pool) properties() (Properties, error) {
	var p Properties
	err := l.into(&p)
	return p, err
}

// into is properties, written into p.
func (l *pool) into(p *Properties) error {
	o := outline{area: l.area, perimeter: l.perimeter}
	o.common(p)
	p.FreeSurface = true
	p.FreeSurfaceWidth = calc.Some(l.width)
	p.MeanDepth = calc.Some(l.area / l.width)
	p.CentroidDepth = calc.Some(l.moment / l.area)
	if l.height > 0 {
		p.FillRatio = calc.Some(l.depth / l.height)
	}
	if !calc.Finite(p.MeanDepth.Value) {
		*p = Properties{}
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "liquid_depth", Value: l.depth, Detail: "at this depth the section is too narrow for a free surface"}
	}
	return p.check()
}

// checkDepth refuses a depth above the height of the section.
func checkDepth(depth, height float64) error {
	if err := calc.LiquidDepth.Check(depth); err != nil {
		return err
	}
	if depth > height {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "liquid_depth", Value: depth, Max: height,
			Detail: "the liquid stands above the section, which is " + text(height) + " m high inside; leave liquid_depth out if it runs full"}
	}
	return nil
}

func text(v float64) string { return strconv.FormatFloat(v, 'g', 6, 64) }

// check runs the bound of each input in turn.
func check(list ...dimension) error {
	for _, d := range list {
		if err := d.input.Check(d.value); err != nil {
			return err
		}
	}
	return nil
}

type dimension struct {
	input calc.Input
	value float64
}
