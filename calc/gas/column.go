package gas

import "math"

// Column is a column of gas at rest and at one temperature.
type Column struct {
	Gas  Gas
	Lift float64 // g · rise [m²/s²]
}

// Ends returns the states at the two ends of the column: the barometric formula
// p2 = p1 exp(-g z/(Rs T)), with z the rise from inlet to outlet. Source: weight of a
// perfect gas, common practice. It holds at any height at which one temperature and
// one gravity do, and it is exact then.
func (c Column) Ends(k Known) Ends {
	x := c.Lift / (c.Gas.SpecificConstant * k.Temperature)
	known := State{Pressure: k.Pressure, Temperature: k.Temperature}
	if k.AtOutlet {
		in := State{Pressure: k.Pressure * math.Exp(x), Temperature: k.Temperature}
		drop := k.Pressure * math.Expm1(x)
		return Ends{In: in, Out: known, Drop: drop, Weight: drop}
	}
	out := State{Pressure: k.Pressure * math.Exp(-x), Temperature: k.Temperature}
	drop := -k.Pressure * math.Expm1(-x)
	return Ends{In: known, Out: out, Drop: drop, Weight: drop}
}
