// Package calc is the engineering of Borewright: sections, regime, friction and
// pressure drop of one line, in pure Go.
//
// Numbers are float64 in coherent SI units. Nothing in calc and the packages
// below it reads a file, a clock or a global that changes; the same input gives
// the same result. The root package holds what all topics share: the kinds of
// error, the stated bounds of every input and the optional number.
package calc

import (
	"errors"
	"strconv"
)

// The kinds of failure. Match them with [errors.Is].
var (
	// ErrDomain marks an impossible value: not a number, infinite, or outside
	// what the quantity can be (a negative length, a depth above the crown).
	ErrDomain = errors.New("outside the domain")
	// ErrRange marks a possible value outside the published validity of a law.
	ErrRange = errors.New("outside the published range")
	// ErrUnknown marks a value that this release has no law for.
	ErrUnknown = errors.New("not known yet")
	// ErrChoked marks a gas that reaches its limiting velocity before the outlet.
	ErrChoked = errors.New("choked")
	// ErrNoConvergence marks an iteration that gave up on accepted input.
	ErrNoConvergence = errors.New("no convergence")
	// ErrNonFinite marks a result that overflowed on accepted input.
	ErrNonFinite = errors.New("result is not finite")
)

// Error tells which quantity failed, with which value, and what would be right.
// Quantity is the leaf name of the contract ("liquid_depth"), so that a caller
// can point at the field without reading the text.
type Error struct {
	Kind     error   // one of the kinds above
	Quantity string  // leaf name of the input or result
	Value    float64 // the value refused
	Min, Max float64 // the bounds, where there are some (equal when there are none)
	Detail   string  // what would be right, lower case, one sentence without a full stop
}

// Error names the quantity, the value and what would be right.
func (e *Error) Error() string {
	text := e.Quantity + " " + strconv.FormatFloat(e.Value, 'g', -1, 64) + ": " + e.Kind.Error()
	if e.Detail != "" {
		return text + ": " + e.Detail
	}
	if e.Min < e.Max {
		text += " " + strconv.FormatFloat(e.Min, 'g', -1, 64) + " to " + strconv.FormatFloat(e.Max, 'g', -1, 64)
	}
	return text
}

// Unwrap gives the kind, so that errors.Is(err, calc.ErrDomain) works.
func (e *Error) Unwrap() error { return e.Kind }

// Optional is a number that has no meaning in some cases: the mean depth of a
// section that flows full, the friction factor of a fluid at rest.
type Optional struct {
	Value float64
	Valid bool
}

// Some is a number that has a meaning here.
func Some(v float64) Optional { return Optional{Value: v, Valid: true} }

// Finite reports whether v is neither NaN nor infinite: only then is v - v zero.
func Finite(v float64) bool { return v-v == 0 }
