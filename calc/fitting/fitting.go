// Package fitting gives the loss of total pressure of fittings and components.
package fitting

// Item is one entry of the list of fittings.
type Item struct {
	ByRating        bool    // a component with a rated drop, else a loss coefficient
	LossCoefficient float64 // K on the line's own velocity, kinetic energy factor 1
	Count           float64
	RatedDrop       float64 // [Pa] at the rated flow
	RatedFlow       float64 // [m³/s]
	Exponent        float64 // drop ~ flow^exponent; 2 where the caller was told none
}
