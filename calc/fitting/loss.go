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
	Gain             float64 // the part of CoefficientDrop by negative coefficients, 0 or negative [Pa]
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
// branch) is allowed. At rest nothing is lost, whatever the exponent.
//
// Source: definition of the loss coefficient; affinity of drop and flow, common practice.
//
// Accuracy: 1e-15 of the sum of the entries' magnitudes, and one rounding more an
// entry; K itself is seldom known better than 10 to 30 % (common practice).
//
// Errors: an [*ItemError] around [calc.ErrDomain] for an entry out of bounds, or
// around [calc.ErrRange] for a flow so far above the rated one that the drop exceeds
// 1e100 Pa; [calc.ErrDomain] for conditions that no flow has; [calc.ErrNonFinite] on
// overflow.
func LossOf(items []Item, c Conditions) (Loss, error) {
	if err := c.check(); err != nil {
		return Loss{}, err
	}
	var l Loss
	var gains float64
	for i := range items {
		it := &items[i]
		if err := it.check(); err != nil {
			return Loss{}, &ItemError{i, err}
		}
		if !it.ByRating {
			k := it.Count * it.LossCoefficient
			l.Coefficients++
			l.LossCoefficients += k
			gains += min(k, 0)
			continue
		}
		drop := it.Count * it.ratedDrop(c.VolumeFlow)
		if !(drop <= largestDrop) {
			return Loss{}, &ItemError{i, it.farAboveRated()}
		}
		l.ComponentDrop += drop
	}
	head := c.velocityHead()
	l.CoefficientDrop, l.Gain = l.LossCoefficients*head, gains*head
	l.Drop = l.CoefficientDrop + l.ComponentDrop
	if !calc.Finite(l.Drop) {
		return Loss{}, &calc.Error{Kind: calc.ErrNonFinite, Quantity: "fittings_drop", Value: l.Drop}
	}
	return l, nil
}

// velocityHead is ρ V²/2 [Pa].
func (c *Conditions) velocityHead() float64 { return c.Density * c.Velocity * c.Velocity / 2 }

// check refuses what did not come from a flow.
func (c *Conditions) check() error {
	if err := calc.Density.Check(c.Density); err != nil {
		return err
	}
	if !(c.Velocity >= 0) || !calc.Finite(c.Velocity) {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "velocity", Value: c.Velocity, Detail: "flow runs from inlet to outlet; for the other direction swap the ends"}
	}
	if !(c.VolumeFlow >= 0) || !calc.Finite(c.VolumeFlow) {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "volume_flow", Value: c.VolumeFlow, Detail: "flow runs from inlet to outlet; for the other direction swap the ends"}
	}
	return nil
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

// largestDrop of one entry [Pa] keeps sums of drops, head and power finite, as no
// flow that anybody could have comes near it.
const largestDrop = 1e100

func (it *Item) farAboveRated() error {
	return &calc.Error{Kind: calc.ErrRange, Quantity: "rated_flow", Value: it.RatedFlow,
		Detail: "the flow is so far above the rated flow that the drop would exceed 1e100 Pa; is rated_flow in the right unit?"}
}

// ratedDrop is the drop of one component, Δpr (q/qr)ⁿ [Pa]; without flow there is none.
func (it *Item) ratedDrop(volumeFlow float64) float64 {
	if volumeFlow == 0 || it.RatedDrop == 0 {
		return 0
	}
	ratio := volumeFlow / it.RatedFlow
	if it.Exponent == 2 {
		return it.RatedDrop * ratio * ratio
	}
	return it.RatedDrop * math.Pow(ratio, it.Exponent)
}
