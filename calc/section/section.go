// Package section gives the geometry of a flow section: true flow area, wetted
// perimeter, hydraulic diameter and what follows from them, full or partly full.
//
// A shape is a small value type (Circle, Rectangle, ...). A section is a shape
// and, where it runs partly full, the depth of the liquid in it. The free
// surface is never wetted perimeter.
package section

import "borewright/calc"

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

// Of returns the properties of the section.
func (s Section) Of() (Properties, error) {
	return Properties{}, &calc.Error{Kind: calc.ErrUnknown, Quantity: "shape"}
}
