package segment

import (
	"borewright/calc"
	"borewright/calc/gas"
)

// GasPoint is the gas at one place of the segment.
type GasPoint struct {
	Distance float64 // from the inlet, along the developed length [m]
	gas.State
}

// Distribution appends the state of the gas at equal steps along the line of a
// segment that [PressureDrop] has filled.
//
// Equation:
//
//	the law of the segment over the part x of its resistance and rise
//
// Symbols:
//   - x: place from the known end, 0 to 1 of the developed length [1]
//
// Validity: a gas that is carried isothermally or adiabatically; fittings spread
// over the length, the changes of area at the ends left out.
//
// Source: [gas.Isothermal], [gas.Adiabatic].
//
// Accuracy: that of the law.
//
// Errors: [calc.ErrDomain] for fewer than 2 or more than 1000 points, and for a
// segment without such a gas.
func Distribution(dst []GasPoint, in *Input, out *Result, points int) ([]GasPoint, error) {
	if err := calc.DistributionPoints.Check(float64(points)); err != nil {
		return dst, err
	}
	run := &out.Gas
	if run.Stations[1].Pressure == 0 {
		return dst, &calc.Error{Kind: calc.ErrDomain, Quantity: "distribution_points", Value: float64(points),
			Detail: "only a gas that is carried isothermally or adiabatically has a distribution; leave this out"}
	}
	for i := range points {
		x := float64(i) / float64(points-1)
		state, err := run.at(x, out.Pressure.GasModel == Adiabatic)
		if err != nil {
			return dst, err
		}
		dst = append(dst, GasPoint{Distance: x * in.Length, State: state})
	}
	return dst, nil
}

// at is the state at the place x, from 0 at the first station of the line to 1.
func (r *GasRun) at(x float64, adiabatic bool) (gas.State, error) {
	from, part := r.Stations[1], x
	if r.AtOutlet {
		from, part = r.Stations[2], 1-x
	}
	switch {
	case part == 0:
		return from, nil
	case r.Line.MassFlux == 0:
		c := gas.Column{Gas: r.Line.Gas, Lift: r.Line.Lift * part}
		ends := c.Ends(gas.Known{Pressure: from.Pressure, Temperature: from.Temperature, AtOutlet: r.AtOutlet})
		return r.farOf(&ends), nil
	}
	ends, err := integrate(r.Line.Part(part), from, r.AtOutlet, adiabatic)
	return r.farOf(&ends), err
}

func (r *GasRun) farOf(ends *gas.Ends) gas.State {
	if r.AtOutlet {
		return ends.In
	}
	return ends.Out
}
