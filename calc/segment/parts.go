package segment

// The parts of the account, one equation each, so that a gradient can stand
// beside it. The symbols are those of [PressureDrop].

// frictionDrop is Δpf = f L/Dh ρ V²/2 [Pa].
func (out *Result) frictionDrop(in *Input, factor float64) float64 {
	v := out.Flow.Velocity
	return factor * (in.Length / out.Section.HydraulicDiameter) * (in.Fluid.Density * v * v / 2)
}

// elevationDrop is Δpe = ρ g z [Pa].
func (in *Input) elevationDrop() float64 { return in.Fluid.Density * in.Gravity * in.Rise.Value }

// accelerationDrop is Δpa = ρ/2 (Vo² - Vi²) [Pa].
func (out *Result) accelerationDrop(in *Input) float64 {
	return in.velocityHeadRise(out.Pressure.InletVelocity, out.Pressure.OutletVelocity)
}

// velocityHeadRise is ρ/2 (to² - from²) [Pa], as a product so that two velocities
// that are nearly the same lose no digits.
func (in *Input) velocityHeadRise(from, to float64) float64 {
	return in.Fluid.Density / 2 * (to - from) * (to + from)
}

// gaugeDrop is what gauges at both ends show, Δp - ρs g z [Pa]: the pressure around
// the line falls with height too.
func (out *Result) gaugeDrop(in *Input) float64 {
	return out.Pressure.StaticPressureDrop.Value - in.SurroundingsDensity.Value*in.Gravity*in.Rise.Value
}

// headLoss is h = Δpt/(ρ g) [m].
func (out *Result) headLoss(in *Input) float64 {
	return out.Pressure.TotalPressureLoss / (in.Fluid.Density * in.Gravity)
}

// fluidPower is W = (Δpt + Δpe) q [W]; at rest it is 0 and never -0.
func (out *Result) fluidPower(elevation float64) float64 {
	return (out.Pressure.TotalPressureLoss+elevation)*out.Flow.VolumeFlow + 0
}

// frictionSlope is Sf = Δpf/(ρ g L) [1].
func (out *Result) frictionSlope(in *Input) float64 {
	return out.Pressure.FrictionDrop / (in.Fluid.Density * in.Gravity * in.Length)
}

// bedSlope is Sb = -z/L [1]; level it is 0 and never -0.
func (in *Input) bedSlope() float64 { return (0 - in.Rise.Value) / in.Length }
