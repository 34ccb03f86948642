package fitting

import (
	"math"

	"borewright/calc"
)

// Conditions are what a loss depends on besides the fitting.
type Conditions struct {
	Density    float64 // [kg/m³]
	Velocity   float64 // of the line, on the true flow area [m/s]
	VolumeFlow float64 // [m³/s]
}

// Loss is the loss of total pressure of a list of fittings.
type Loss struct {
	LossCoefficients float64 // Σ count · K
	Coefficients     int     // entries given by a coefficient
	CoefficientDrop  float64 // [Pa]
	ComponentDrop    float64 // [Pa]
	Drop             float64 // the two together [Pa]
}

// ItemError tells which entry of the list an error belongs to.
type ItemError struct {
	Index int
	Err   error
}

func (e *ItemError) Error() string { return e.Err.Error() }

// Unwrap gives the error of the entry.
func (e *ItemError) Unwrap() error { return e.Err }

// LossOf returns the loss of total pressure of fittings and rated components.
//
// Equation:
//
//	Δp = Σ count · K ρ V²/2 + Σ count · Δpr (q/qr)ⁿ
//
// Symbols:
//   - Δp: loss of total pressure [Pa]
//   - K: loss coefficient on the line's own velocity [1]
//   - ρ: density [kg/m³]
//   - V: velocity of the line [m/s]
//   - Δpr: rated drop of a component [Pa]
//   - q: volume flow [m³/s]
//   - qr: rated flow of the component [m³/s]
//   - n: exponent, 2 for fully turbulent components [1]
//
// Validity: kinetic energy factor 1; a constant K for Reynolds numbers above
// about 1e4 (common practice). A negative K (a straight run past a joining
// branch) is allowed.
//
// Source: definition of the loss coefficient; affinity of drop and flow, common practice.
//
// Accuracy: 1e-15; K itself is seldom known better than 10 to 30 % (common practice).
//
// Errors: an [*ItemError] around [calc.ErrDomain] for an entry out of bounds;
// [calc.ErrNonFinite] on overflow.
func LossOf(items []Item, c Conditions) (Loss, error) {
	var l Loss
	head := c.Density * c.Velocity * c.Velocity / 2
	for i := range items {
		it := &items[i]
		if err := it.check(); err != nil {
			return Loss{}, &ItemError{i, err}
		}
		if it.ByRating {
			l.ComponentDrop += it.Count * it.ratedDrop(c.VolumeFlow)
			continue
		}
		l.Coefficients++
		l.LossCoefficients += it.Count * it.LossCoefficient
	}
	l.CoefficientDrop = l.LossCoefficients * head
	l.Drop = l.CoefficientDrop + l.ComponentDrop
	if !calc.Finite(l.Drop) {
		return Loss{}, &calc.Error{Kind: calc.ErrNonFinite, Quantity: "fittings_drop", Value: l.Drop}
	}
	return l, nil
}

func (it *Item) check() error {
	if err := calc.Count.Check(it.Count); err != nil {
		return err
	}
	if !it.ByRating {
		return calc.LossCoefficient.Check(it.LossCoefficient)
	}
	if err := calc.RatedDrop.Check(it.RatedDrop); err != nil {
		return err
	}
	if err := calc.RatedFlow.Check(it.RatedFlow); err != nil {
		return err
	}
	return calc.Exponent.Check(it.Exponent)
}

// ratedDrop is the drop of one component; without flow there is none.
func (it *Item) ratedDrop(volumeFlow float64) float64 {
	if volumeFlow == 0 {
		return 0
	}
	ratio := volumeFlow / it.RatedFlow
	if it.Exponent == 2 {
		return it.RatedDrop * ratio * ratio
	}
	return it.RatedDrop * math.Pow(ratio, it.Exponent)
}
