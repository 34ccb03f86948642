package segment

import (
	"borewright/calc"
	"borewright/calc/fitting"
	"borewright/calc/fluid"
)

// EndError tells at which end an error belongs.
type EndError struct {
	End string // "inlet" or "outlet"
	Err error
}

func (e *EndError) Error() string { return e.End + ": " + e.Err.Error() }

// Unwrap gives the error of the end.
func (e *EndError) Unwrap() error { return e.Err }

// PressureDrop fills the whole result.
//
// Equation:
//
//	Δpf = f L/Dh ρ V²/2, Δpt = Δpf + Δp of the fittings, Δpe = ρ g z,
//	Δpa = ρ/2 (Vo² - Vi²), Δp = pi - po = Δpt + Δpe + Δpa,
//	h = Δpt/(ρ g), W = (Δpt + Δpe) q
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
//
// Validity: steady flow of constant density, kinetic energy factor 1. With a
// free surface the depth is given: friction slope instead of a static drop. A gas
// given by its density is taken as incompressible, which a 10 % drop of absolute
// pressure makes doubtful and 40 % or Mach number 0.3 wrong.
//
// Source: Darcy-Weisbach and the extended Bernoulli equation, common practice.
//
// Accuracy: 2e-12 for each part; the static drop 1e-11 of the sum of the parts'
// magnitudes; testdata/segment/segment.csv. The law behind it about 5 %, loss
// coefficients 10 to 30 % (common practice).
//
// Errors: those of its parts; [calc.ErrDomain] for a pressure given at both ends
// or with a free surface; [calc.ErrRange] where a gas cannot be taken as
// incompressible; an [*EndError] for the section of an end.
func PressureDrop(in *Input, out *Result) error {
	if err := in.checkSegment(); err != nil {
		return err
	}
	if err := Friction(in, out); err != nil {
		return err
	}
	loss, err := fitting.LossOf(in.Fittings, fitting.Conditions{Density: in.Fluid.Density, Velocity: out.Flow.Velocity, VolumeFlow: out.Flow.VolumeFlow})
	if err != nil {
		return err
	}
	p := &out.Pressure
	p.LossCoefficients, p.CoefficientDrop, p.ComponentDrop, p.FittingsDrop = loss.LossCoefficients, loss.CoefficientDrop, loss.ComponentDrop, loss.Drop
	out.losses(in)
	out.lossConditions(loss.Coefficients)
	if out.Section.FreeSurface {
		return out.openChannel(in)
	}
	if err := out.closedLine(in); err != nil {
		return err
	}
	return out.finite()
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

// frictionDrop is Darcy-Weisbach for a factor, [Pa].
func (out *Result) frictionDrop(in *Input, factor float64) float64 {
	v := out.Flow.Velocity
	return factor * (in.Length / out.Section.HydraulicDiameter) * (in.Fluid.Density * v * v / 2)
}

// losses accounts the friction of both branches and what follows from the plain one.
func (out *Result) losses(in *Input) {
	p := &out.Pressure
	p.FrictionDrop = out.frictionDrop(in, out.Friction.Darcy.Value)
	if out.Friction.IfLaminar.Valid {
		p.FrictionDropIfLaminar = calc.Some(out.frictionDrop(in, out.Friction.IfLaminar.Value))
		p.FrictionDropIfTurbulent = calc.Some(out.frictionDrop(in, out.Friction.IfTurbulent.Value))
	}
	p.TotalPressureLoss = p.FrictionDrop + p.FittingsDrop
	p.FrictionGradient = p.FrictionDrop / in.Length
	p.HeadLoss = p.TotalPressureLoss / (in.Fluid.Density * in.Gravity)
}

// steadyCoefficients is the Reynolds number above which a loss coefficient is
// taken as constant. Common practice.
const steadyCoefficients = 1e4

func (out *Result) lossConditions(coefficients int) {
	c := &out.Conditions
	if c.AtRest {
		return
	}
	c.Developing = out.Regime.EntryLength.Valid
	c.ConstantLossLaminar = coefficients > 0 && out.Regime.CanBeLaminar
	c.ConstantLossLowRe = coefficients > 0 && !c.ConstantLossLaminar && out.Regime.Reynolds < steadyCoefficients
}

// openChannel closes the account of a section with a free surface.
func (out *Result) openChannel(in *Input) error {
	for _, f := range [...]struct {
		given    bool
		quantity string
	}{
		{in.InletPressure.Valid, "inlet_pressure"}, {in.OutletPressure.Valid, "outlet_pressure"},
		{in.Inlet.Kind != SameSection, "inlet"}, {in.Outlet.Kind != SameSection, "outlet"},
	} {
		if f.given {
			return &calc.Error{Kind: calc.ErrDomain, Quantity: f.quantity,
				Detail: "with a free surface the pressure is that above the liquid and no end is joined; leave this out, or leave liquid_depth out if the section runs full"}
		}
	}
	out.Conditions.DepthGiven = true
	out.Conditions.Developing = out.Conditions.Developing && in.Length < out.Regime.EntryLength.Value
	out.Pressure.FrictionSlope = calc.Some(out.Pressure.FrictionDrop / (in.Fluid.Density * in.Gravity * in.Length))
	if in.Rise.Valid {
		out.Pressure.BedSlope = calc.Some(-in.Rise.Value / in.Length)
	}
	return out.finite()
}

// closedLine closes the account of a section that runs full.
func (out *Result) closedLine(in *Input) error {
	p := &out.Pressure
	var err error
	if p.InletVelocity, err = out.endVelocity(&in.Inlet, "inlet"); err != nil {
		return err
	}
	if p.OutletVelocity, err = out.endVelocity(&in.Outlet, "outlet"); err != nil {
		return err
	}
	c := &out.Conditions
	c.Developing = c.Developing && in.Length < out.Regime.EntryLength.Value
	c.EndLossMissing = !c.AtRest && (in.Inlet.Kind == Reservoir || in.Outlet.Kind == Reservoir) && p.LossCoefficients == 0
	c.GasIncompressible = in.Fluid.Phase == fluid.Gas
	rho := in.Fluid.Density
	elevation := rho * in.Gravity * in.Rise.Value
	acceleration := rho / 2 * (p.OutletVelocity - p.InletVelocity) * (p.OutletVelocity + p.InletVelocity)
	rest := p.FittingsDrop + elevation + acceleration
	p.ElevationDrop, p.AccelerationDrop = calc.Some(elevation), calc.Some(acceleration)
	p.StaticPressureDrop = calc.Some(p.FrictionDrop + rest)
	if p.FrictionDropIfLaminar.Valid {
		p.StaticPressureDropIfLaminar = calc.Some(p.FrictionDropIfLaminar.Value + rest)
		p.StaticPressureDropIfTurbulent = calc.Some(p.FrictionDropIfTurbulent.Value + rest)
	}
	p.FluidPower = calc.Some((p.TotalPressureLoss + elevation) * out.Flow.VolumeFlow)
	out.pressures(in)
	return out.compressibility(in)
}

// endVelocity is the velocity at one end.
func (out *Result) endVelocity(e *End, name string) (float64, error) {
	switch e.Kind {
	case Reservoir:
		return 0, nil
	case OtherSection:
		s, err := e.Section.Of()
		if err != nil {
			return 0, &EndError{name, err}
		}
		return out.Flow.VolumeFlow / s.FlowArea, nil
	}
	return out.Flow.Velocity, nil
}

// pressures gives the pressure at both ends and the lowest on the way. Between
// the ends the section's own velocity holds; the place of the fittings is not
// known, so that their loss is taken at the inlet end where that is lower.
func (out *Result) pressures(in *Input) {
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
	half, v := in.Fluid.Density/2, out.Flow.Velocity
	start := p.InletPressure.Value - half*(v-p.InletVelocity)*(v+p.InletVelocity)
	end := p.OutletPressure.Value + half*(p.OutletVelocity-v)*(p.OutletVelocity+v)
	lowest := min(p.InletPressure.Value, p.OutletPressure.Value, start, end, start-p.FittingsDrop)
	p.LowestPressure = calc.Some(lowest)
	out.Conditions.NotPositive = lowest <= 0
	vapour := in.Fluid.VapourPressure
	out.Conditions.BelowVapour = in.Fluid.Phase == fluid.Liquid && vapour.Valid && lowest < vapour.Value
}

// Bounds of taking a gas as incompressible. Common practice.
const (
	gasDropRefused = 0.40 // of the inlet's absolute pressure
	gasMachRefused = 0.3
	// GasDropNoted is the drop over inlet pressure above which the answer is doubtful.
	GasDropNoted = 0.10
)

// compressibility refuses a gas that cannot be taken as incompressible, where
// the pressure or the sound speed is known.
func (out *Result) compressibility(in *Input) error {
	if in.Fluid.Phase != fluid.Gas {
		return nil
	}
	p := &out.Pressure
	if p.InletPressure.Valid && p.StaticPressureDrop.Value > gasDropRefused*p.InletPressure.Value {
		return &calc.Error{Kind: calc.ErrRange, Quantity: "static_pressure_drop", Value: p.StaticPressureDrop.Value, Max: gasDropRefused * p.InletPressure.Value,
			Detail: "this gas would lose more than 40 % of its absolute pressure; taking it as incompressible does not hold"}
	}
	if s := in.Fluid.SoundSpeed; s.Valid && max(out.Flow.Velocity, p.InletVelocity, p.OutletVelocity) > gasMachRefused*s.Value {
		return &calc.Error{Kind: calc.ErrRange, Quantity: "velocity", Value: out.Flow.Velocity, Max: gasMachRefused * s.Value,
			Detail: "above Mach number 0.3 taking a gas as incompressible does not hold"}
	}
	return nil
}

// finite catches an overflow on accepted input. One sum is enough: it is finite
// only if each of its terms is, and none can be large enough to overflow it.
func (out *Result) finite() error {
	p, f := &out.Pressure, &out.Friction
	sum := p.FrictionDrop + p.TotalPressureLoss + p.HeadLoss + p.FrictionGradient + p.StaticPressureDrop.Value + p.FluidPower.Value +
		p.FrictionSlope.Value + p.InletPressure.Value + p.OutletPressure.Value + f.WallShear + f.RoughnessReynolds
	if calc.Finite(sum) {
		return nil
	}
	return &calc.Error{Kind: calc.ErrNonFinite, Quantity: "static_pressure_drop", Value: sum}
}
