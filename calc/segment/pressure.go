package segment

import (
	"borewright/calc"
	"borewright/calc/fitting"
)

// PressureDrop fills the whole result.
//
// Equation:
//
//	Δpf = f L/Dh ρ V²/2, Δpt = Δpf + Δp of the fittings, Δpe = ρ g z,
//	Δpa = ρ/2 (Vo² - Vi²), Δp = pi - po = Δpt + Δpe + Δpa,
//	h = Δpt/(ρ g), W = (Δpt + Δpe) q; with a free surface Sf = Δpf/(ρ g L), Sb = -z/L
//
// Symbols:
//   - Δpf: friction drop [Pa]
//   - f: Darcy friction factor [1]
//   - L: developed length [m]
//   - Dh: hydraulic diameter [m]
//   - ρ: density [kg/m³]
//   - V: velocity on the true flow area [m/s]
//   - Δpt: loss of total pressure [Pa]
//   - Δpe: elevation drop [Pa]
//   - g: acceleration of gravity [m/s²]
//   - z: rise, outlet level less inlet level [m]
//   - Δpa: acceleration drop [Pa]
//   - Vi: velocity at the inlet end, 0 in a reservoir [m/s]
//   - Vo: velocity at the outlet end, 0 in a reservoir [m/s]
//   - Δp: static pressure drop [Pa]
//   - h: head loss, metres of the fluid [m]
//   - W: fluid power [W]
//   - q: volume flow [m³/s]
//   - Sf: friction slope [1]
//   - Sb: bed slope, falling in the direction of flow [1]
//
// Validity: steady flow of constant density, kinetic energy factor 1. With a
// free surface the depth is given: friction slope instead of a static drop. Where
// both regimes are possible the plain values are those of the larger friction. At
// rest only the level counts. A gas given by its density, or by request, is taken as
// incompressible, which a 10 % drop of absolute pressure makes doubtful and more
// than 40 %, or more than Mach number 0.3, wrong; both are judged only where the
// pressure or the sound speed is known.
//
// Any other gas is carried isothermally or adiabatically by [gas.Isothermal] or
// [gas.Adiabatic] from the end where its state is known: the inlet, or the outlet
// where the outlet pressure is given. The friction factor is that of the known
// state, exact in isothermal flow, where Reynolds number and viscosity stay the same.
// Loss coefficients, and rated components by the coefficient that they have at the
// known state, are spread over the length; another section or a reservoir at an end is
// passed without loss by [gas.Across] (common practice, both). The friction drop is
// the share of friction in the losses, the elevation drop the integral of the weight,
// the acceleration drop what is left; head and power are at the known state. A flow
// that chokes is refused, or answered at the largest flow that does not.
//
// The lowest pressure is that of a straight line between the two levels, at or
// between its ends. The place of the fittings in the line is not known, so that it
// is taken on the safe side: all losses at the inlet end, all gains at the outlet
// end. Where both regimes are possible it is the lower one of the two.
//
// Source: Darcy-Weisbach and the extended Bernoulli equation, common practice.
//
// Accuracy: 2e-12 for each part; the static drop 1e-11 of the sum of the parts'
// magnitudes; testdata/segment/segment.csv. The law behind it about 5 %, loss
// coefficients 10 to 30 % (common practice).
//
// Errors: those of its parts; [calc.ErrDomain] for a pressure given at both ends,
// a pressure or an end with a free surface, and a jet at the inlet; [calc.ErrRange]
// where a gas cannot be taken as incompressible; a [*ChokedError]; a [*fitting.ItemError] for a
// fitting and an [*EndError] for the section of an end; [calc.ErrNonFinite] on
// overflow. With an error the result is empty.
func PressureDrop(in *Input, out *Result) error {
	err := in.pressureDrop(out)
	if err != nil {
		*out = Result{}
	}
	return err
}

func (in *Input) pressureDrop(out *Result) error {
	if err := in.checkSegment(); err != nil {
		return err
	}
	if err := in.friction(out); err != nil {
		return err
	}
	loss, err := in.lossOf(out)
	if err != nil {
		return err
	}
	out.losses(in, &loss)
	out.lossConditions(in, loss.Coefficients)
	if out.Section.FreeSurface {
		return out.openChannel(in)
	}
	model, err := in.model()
	if err != nil {
		return err
	}
	if model == Isothermal || model == Adiabatic {
		err = out.gasLine(in, model)
	} else {
		err = out.closedLine(in, loss.Gain, model)
	}
	if err == nil && in.SurroundingsDensity.Valid {
		out.Pressure.GaugePressureDrop = calc.Some(out.gaugeDrop(in))
	}
	return err
}

// lossOf asks package fitting.
func (in *Input) lossOf(out *Result) (fitting.Loss, error) {
	return fitting.LossOf(in.Fittings, fitting.Conditions{Density: in.Fluid.Density, Velocity: out.Flow.Velocity, VolumeFlow: out.Flow.VolumeFlow})
}

func (in *Input) checkSegment() error {
	if err := calc.Length.Check(in.Length); err != nil {
		return err
	}
	if err := calc.Gravity.Check(in.Gravity); err != nil {
		return err
	}
	if in.Rise.Valid {
		if err := calc.Rise.Check(in.Rise.Value); err != nil {
			return err
		}
	}
	if err := in.checkEnds(); err != nil {
		return err
	}
	return in.checkPressures()
}

func (in *Input) checkPressures() error {
	if in.InletPressure.Valid && in.OutletPressure.Valid {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "outlet_pressure", Value: in.OutletPressure.Value,
			Detail: "give inlet_pressure or outlet_pressure; the other one is the answer"}
	}
	if in.InletPressure.Valid {
		return calc.InletPressure.Check(in.InletPressure.Value)
	}
	if in.OutletPressure.Valid {
		return calc.OutletPressure.Check(in.OutletPressure.Value)
	}
	return nil
}

// losses accounts the friction of both branches and what follows from the plain one.
func (out *Result) losses(in *Input, loss *fitting.Loss) {
	p := &out.Pressure
	p.LossCoefficients, p.CoefficientDrop, p.ComponentDrop, p.FittingsDrop = loss.LossCoefficients, loss.CoefficientDrop, loss.ComponentDrop, loss.Drop
	p.FrictionDrop = out.frictionDrop(in, out.Friction.Darcy.Value)
	if out.Friction.IfLaminar.Valid {
		p.FrictionDropIfLaminar = calc.Some(out.frictionDrop(in, out.Friction.IfLaminar.Value))
		p.FrictionDropIfTurbulent = calc.Some(out.frictionDrop(in, out.Friction.IfTurbulent.Value))
	}
	p.TotalPressureLoss = p.FrictionDrop + p.FittingsDrop
	p.FrictionGradient = p.FrictionDrop / in.Length
	p.HeadLoss = out.headLoss(in)
}

// steadyCoefficients is the Reynolds number above which a loss coefficient is
// taken as constant. Common practice.
const steadyCoefficients = 1e4

func (out *Result) lossConditions(in *Input, coefficients int) {
	c := &out.Conditions
	if c.AtRest {
		return
	}
	c.Developing = in.Length < out.Regime.EntryLength.Value
	c.ConstantLossLaminar = coefficients > 0 && out.Regime.CanBeLaminar
	c.ConstantLossLowRe = coefficients > 0 && !c.ConstantLossLaminar && out.Regime.Reynolds < steadyCoefficients
	c.EndLossMissing = coefficients == 0 && (in.Inlet.Kind == Reservoir || in.Outlet.Kind == Reservoir)
}

// closedLine closes the account of a section that runs full.
func (out *Result) closedLine(in *Input, gain float64, model GasModel) error {
	if err := out.endVelocities(in); err != nil {
		return err
	}
	out.Conditions.GasIncompressible = model == Incompressible
	p := &out.Pressure
	p.GasModel = model
	elevation, acceleration := in.elevationDrop(), out.accelerationDrop(in)
	rest := p.FittingsDrop + elevation + acceleration
	p.ElevationDrop, p.AccelerationDrop = calc.Some(elevation), calc.Some(acceleration)
	p.StaticPressureDrop = calc.Some(p.FrictionDrop + rest)
	if p.FrictionDropIfLaminar.Valid {
		p.StaticPressureDropIfLaminar = calc.Some(p.FrictionDropIfLaminar.Value + rest)
		p.StaticPressureDropIfTurbulent = calc.Some(p.FrictionDropIfTurbulent.Value + rest)
	}
	p.FluidPower = calc.Some(out.fluidPower(elevation))
	out.pressures(in, gain)
	if err := out.finite(); err != nil {
		return err
	}
	return out.compressibility(in)
}

// openChannel closes the account of a section with a free surface.
func (out *Result) openChannel(in *Input) error {
	if err := in.checkOpenChannel(); err != nil {
		return err
	}
	out.Conditions.DepthGiven = true
	out.Pressure.FrictionSlope = calc.Some(out.frictionSlope(in))
	if in.Rise.Valid {
		out.Pressure.BedSlope = calc.Some(in.bedSlope())
	}
	return out.finite()
}

// checkOpenChannel refuses what has no meaning with a free surface.
func (in *Input) checkOpenChannel() error {
	quantity := ""
	switch {
	case in.InletPressure.Valid:
		quantity = "inlet_pressure"
	case in.OutletPressure.Valid:
		quantity = "outlet_pressure"
	case in.Inlet.Kind != SameSection:
		quantity = "inlet"
	case in.Outlet.Kind != SameSection:
		quantity = "outlet"
	default:
		return nil
	}
	return &calc.Error{Kind: calc.ErrDomain, Quantity: quantity,
		Detail: "with a free surface the pressure is that above the liquid and no end is joined; leave this out, or leave liquid_depth out if the section runs full"}
}

// finite catches an overflow on accepted input. One sum is enough: it is finite
// only if each of its terms is, and none can be large enough to overflow it.
func (out *Result) finite() error {
	p := &out.Pressure
	sum := p.TotalPressureLoss + p.HeadLoss + p.FrictionGradient + p.StaticPressureDrop.Value + p.FluidPower.Value +
		p.FrictionSlope.Value + p.InletPressure.Value + p.OutletPressure.Value + p.LowestPressure.Value
	if calc.Finite(sum) {
		return nil
	}
	return &calc.Error{Kind: calc.ErrNonFinite, Quantity: "static_pressure_drop", Value: sum}
}
