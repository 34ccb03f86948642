package section

import "borewright/calc"

// Pipe is a round pipe by its outside diameter, wall and lining.
type Pipe struct {
	OutsideDiameter float64
	WallThickness   float64
	LiningThickness float64
}

// bore is the inside diameter: OD - 2 (wall + lining).
func (p Pipe) bore() (float64, error) {
	if err := check(dimension{calc.OutsideDiameter, p.OutsideDiameter}, dimension{calc.WallThickness, p.WallThickness}, dimension{calc.LiningThickness, p.LiningThickness}); err != nil {
		return 0, err
	}
	bore := p.OutsideDiameter - 2*p.WallThickness - 2*p.LiningThickness
	if bore > 0 {
		return bore, nil
	}
	quantity, value := "wall_thickness", p.WallThickness
	if 2*p.WallThickness < p.OutsideDiameter {
		quantity, value = "lining_thickness", p.LiningThickness
	}
	return 0, &calc.Error{Kind: calc.ErrDomain, Quantity: quantity, Value: value, Max: p.OutsideDiameter / 2,
		Detail: "wall and lining together leave no bore in an outside diameter of " + text(p.OutsideDiameter) + " m"}
}

// Full returns the properties of the bore running full.
//
// Equation:
//
//	D = OD - 2 (wall + lining), then as [Circle.Full]
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - D: bore [m]
//   - OD: outside diameter [m]
//   - wall: wall thickness [m]
//   - lining: lining thickness [m]
//
// Validity: a bore above 0.
//
// Source: definition; common practice.
//
// Accuracy: 3 ulp of the bore.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds or no bore is left.
func (p Pipe) Full() (Properties, error) {
	var full Properties
	err := p.fullInto(&full)
	return full, err
}

func (p Pipe) fullInto(full *Properties) error {
	d, err := p.bore()
	if err != nil {
		return err
	}
	return roundInto(full, d)
}

// PartlyFull returns the properties of the bore with a free surface.
//
// Equation:
//
//	D = OD - 2 (wall + lining), then as [Circle.PartlyFull]
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - T: width of the free surface [m]
//   - h: depth of the liquid above the lowest point [m]
//   - z: depth of the centroid of A below the surface [m]
//   - D: bore [m]
//   - OD: outside diameter [m]
//
// Validity: 0 < h ≤ D.
//
// Source: definition; common practice.
//
// Accuracy: as [Circle.PartlyFull].
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds, no bore is left or
// the depth is above it.
func (p Pipe) PartlyFull(liquidDepth float64) (Properties, error) {
	var partly Properties
	err := p.partlyFullInto(&partly, liquidDepth)
	return partly, err
}

func (p Pipe) partlyFullInto(partly *Properties, liquidDepth float64) error {
	d, err := p.bore()
	if err != nil {
		return err
	}
	return roundPartlyFullInto(partly, roundPool{d, liquidDepth})
}
