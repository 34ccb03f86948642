package segment

import (
	"borewright/calc"
	"borewright/calc/fluid"
)

// pressures gives the pressure at both ends and the lowest on the way.
func (out *Result) pressures(in *Input, gain float64) {
	p := &out.Pressure
	drop := p.StaticPressureDrop.Value
	switch {
	case in.InletPressure.Valid:
		p.InletPressure, p.OutletPressure = in.InletPressure, calc.Some(in.InletPressure.Value-drop)
	case in.OutletPressure.Valid:
		p.InletPressure, p.OutletPressure = calc.Some(in.OutletPressure.Value+drop), in.OutletPressure
	default:
		return
	}
	lowest := out.lowest(in, gain)
	p.LowestPressure = calc.Some(lowest)
	out.Conditions.NotPositive = lowest <= 0
	vapour := in.Fluid.VapourPressure
	out.Conditions.BelowVapour = in.Fluid.Phase == fluid.Liquid && vapour.Valid && lowest < vapour.Value
}

// lowest is the lowest pressure on the way [Pa]. Between the ends the section's own
// velocity holds, and pressure changes along a straight line, so that it is lowest
// at one end of it: just behind the inlet with all losses of the fittings there, or
// just before the outlet with all their gains still to come.
func (out *Result) lowest(in *Input, gain float64) float64 {
	p, v := &out.Pressure, out.Flow.Velocity
	inlet, outlet := p.InletPressure.Value-out.branchGap(in), p.OutletPressure.Value
	start := inlet - in.velocityHeadRise(p.InletVelocity, v)
	end := outlet + in.velocityHeadRise(v, p.OutletVelocity)
	return min(inlet, outlet, start, start-(p.FittingsDrop-gain), end, end+gain)
}

// branchGap is by how much less the other possible regime lets the pressure at
// the inlet rise over a given one at the outlet [Pa]. From a given inlet pressure
// the plain drop, the larger one, already leads lowest.
func (out *Result) branchGap(in *Input) float64 {
	p := &out.Pressure
	if !in.OutletPressure.Valid || !p.FrictionDropIfLaminar.Valid {
		return 0
	}
	return p.FrictionDrop - min(p.FrictionDropIfLaminar.Value, p.FrictionDropIfTurbulent.Value)
}
