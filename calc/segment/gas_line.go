package segment

import (
	"fmt"

	"borewright/calc"
	"borewright/calc/fluid"
	"borewright/calc/gas"
)

// GasModel is how a gas is carried along the segment.
type GasModel uint8

// The gas models. ModelByFluid, the zero value, is isothermal for a gas whose
// state is known and incompressible for one that is known by its density alone.
const (
	ModelByFluid GasModel = iota
	Isothermal
	Adiabatic
	Incompressible
)

// String is the name of the model in the contract; empty where it is none.
func (m GasModel) String() string {
	return [...]string{"", "isothermal", "adiabatic", "incompressible"}[m]
}

// model is the one that the segment is calculated by; ModelByFluid for a liquid.
func (in *Input) model() (GasModel, error) {
	f := &in.Fluid
	known := f.Temperature.Valid && f.Pressure.Valid
	switch {
	case f.Phase != fluid.Gas:
		if in.GasModel != ModelByFluid {
			return 0, &calc.Error{Kind: calc.ErrDomain, Quantity: "gas_model", Value: float64(in.GasModel), Detail: "this fluid is a liquid; leave gas_model out"}
		}
		return ModelByFluid, nil
	case in.GasModel > Incompressible:
		return 0, &calc.Error{Kind: calc.ErrDomain, Quantity: "gas_model", Value: float64(in.GasModel), Detail: "say isothermal, adiabatic or incompressible"}
	case in.GasModel == Incompressible || in.GasModel == ModelByFluid && !known:
		return Incompressible, nil
	case !known:
		return 0, &calc.Error{Kind: calc.ErrDomain, Quantity: "gas_model", Value: float64(in.GasModel),
			Detail: "a gas known by its density alone has no state to start from; give a substance or molar_mass with temperature and pressure, or take gas_model incompressible"}
	case in.GasModel == ModelByFluid:
		return Isothermal, nil
	}
	return in.GasModel, nil
}

// GasRun is a gas from end to end of the segment.
type GasRun struct {
	Line     gas.Line     // the constant area between the ends, the larger friction in it
	Stations [4]gas.State // inlet end, first and last of the line, outlet end
	AtOutlet bool         // the state at the outlet end was given

	InletTemperature  calc.Optional // [K]
	OutletTemperature calc.Optional // [K]
	MachIn            calc.Optional // not Valid where the heat capacity ratio is not known
	MachOut           calc.Optional
	ChokingMassFlow   calc.Optional // the largest that passes, where more was asked for [kg/s]
	AskedMassFlow     calc.Optional // [kg/s]
}

// gasDuct is a segment with a compressible gas in it, ready to be integrated.
type gasDuct struct {
	line      gas.Line
	known     gas.Known
	adiabatic bool
	changes   bool       // of flow area at the ends
	flux      [2]float64 // mass flux at the inlet and the outlet end [kg/(m² s)]
	fittings  float64    // the part of the line's resistance that is fittings
}

// gasDrops are the drops of one duct; the first four sum to the last [Pa].
type gasDrops struct {
	friction, fittings, elevation, acceleration, static float64
}

// duct puts the segment in the terms of package gas. Loss coefficients, and rated
// components by the coefficient they have at the known state, are spread over the
// length. Common practice.
func (out *Result) duct(in *Input, factor float64, model GasModel) gasDuct {
	f := &in.Fluid
	v := out.Flow.Velocity
	d := gasDuct{adiabatic: model == Adiabatic, changes: in.Inlet.Kind.changes() || in.Outlet.Kind.changes()}
	d.fittings = out.Pressure.FittingsDrop / (f.Density * v * v / 2)
	d.line = gas.Line{
		Gas:        gas.Gas{SpecificConstant: f.Pressure.Value / (f.Density * f.Temperature.Value), HeatCapacityRatio: f.HeatCapacityRatio.Value},
		MassFlux:   out.Flow.MassFlow / out.Section.FlowArea,
		Resistance: factor*(in.Length/out.Section.HydraulicDiameter) + d.fittings,
		Lift:       in.Gravity * in.Rise.Value,
	}
	d.flux = [2]float64{f.Density * out.Pressure.InletVelocity, f.Density * out.Pressure.OutletVelocity}
	d.known = gas.Known{Pressure: f.Pressure.Value, Temperature: f.Temperature.Value, AtOutlet: in.OutletPressure.Valid}
	return d
}

// run carries the gas from the known end to the other.
func (d gasDuct) run() (GasRun, gasDrops, error) {
	r := GasRun{Line: d.line, AtOutlet: d.known.AtOutlet}
	known, near, far, other := 0, 1, 2, 3
	if d.known.AtOutlet {
		known, near, far, other = 3, 2, 1, 0
	}
	r.Stations[known] = d.start()
	first, err := d.across(r.Stations[known], d.line.MassFlux)
	if err != nil {
		return GasRun{}, gasDrops{}, err
	}
	ends, err := integrate(d.line, first.State, d.known.AtOutlet, d.adiabatic)
	if err != nil {
		return GasRun{}, gasDrops{}, err
	}
	r.Stations[1], r.Stations[2] = ends.In, ends.Out
	second, err := d.across(r.Stations[far], d.flux[other/3])
	if err != nil {
		return GasRun{}, gasDrops{}, err
	}
	r.Stations[near], r.Stations[other] = first.State, second.State
	changes := first.Rise + second.Rise
	if !d.known.AtOutlet {
		changes = -changes
	}
	return r, d.drops(&ends, changes), nil
}

// start is the state at the known end of the segment.
func (d *gasDuct) start() gas.State {
	l := gas.Line{Gas: d.line.Gas, MassFlux: d.flux[0]}
	if d.known.AtOutlet {
		l.MassFlux = d.flux[1]
	}
	return l.At(d.known)
}

// across passes the change of flow area at one end, where there is one.
func (d *gasDuct) across(from gas.State, flux float64) (gas.Crossed, error) {
	if !d.changes {
		return gas.Crossed{State: from}, nil
	}
	return gas.Across(gas.Change{Gas: d.line.Gas, Known: from, MassFlux: flux, Adiabatic: d.adiabatic})
}

// changes: another flow area is joined at this end.
func (k EndKind) changes() bool { return k == OtherSection || k == Reservoir }

func integrate(l gas.Line, from gas.State, atOutlet, adiabatic bool) (gas.Ends, error) {
	known := gas.Known{Pressure: from.Pressure, Temperature: from.Temperature, AtOutlet: atOutlet}
	if adiabatic {
		return gas.Adiabatic(l, known)
	}
	return gas.Isothermal(l, known)
}

// drops splits the drop: the weight of the gas, the acceleration by the momentum of
// the line and the changes at its ends, and the losses by their shares of the
// resistance.
func (d *gasDuct) drops(ends *gas.Ends, changes float64) gasDrops {
	momentum := d.line.MassFlux * ends.Faster
	fittings := ends.Loss * (d.fittings / d.line.Resistance)
	return gasDrops{
		friction: ends.Loss - fittings, fittings: fittings, elevation: ends.Weight,
		acceleration: momentum + changes, static: ends.Drop + changes,
	}
}

// gasLine closes the account of a compressible gas.
func (out *Result) gasLine(in *Input, model GasModel) error {
	if err := out.endVelocities(in); err != nil {
		return err
	}
	if err := in.checkGasState(model); err != nil {
		return err
	}
	out.Pressure.GasModel = model
	out.Conditions.GasRiseWithoutSurroundings = in.Rise.Value != 0 && !in.SurroundingsDensity.Valid
	if out.Conditions.AtRest {
		drops, err := out.gasAtRest(in)
		if err != nil {
			return err
		}
		out.gasAccount(in, &drops)
		return out.finite()
	}
	drops, err := out.gasBranches(in, model)
	if err != nil {
		return out.choked(in, model, err)
	}
	out.gasAccount(in, &drops)
	return out.finite()
}

// checkGasState refuses a second pressure that is not the state of the fluid, and
// adiabatic flow of a gas whose heat capacity ratio is not known.
func (in *Input) checkGasState(model GasModel) error {
	state := in.Fluid.Pressure.Value
	for _, end := range [...]struct {
		name  string
		given calc.Optional
	}{{"inlet_pressure", in.InletPressure}, {"outlet_pressure", in.OutletPressure}} {
		if end.given.Valid && !repeats(end.given.Value, state) {
			return &calc.Error{Kind: calc.ErrDomain, Quantity: end.name, Value: end.given.Value,
				Detail: fmt.Sprintf("the state of the fluid is at this end, %.10g Pa absolute; %s may only repeat it", state, end.name)}
		}
	}
	if model == Adiabatic && !in.Fluid.HeatCapacityRatio.Valid {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "heat_capacity_ratio", Detail: "adiabatic flow needs the heat capacity ratio of the gas, such as 1.4 for air"}
	}
	return nil
}

// repeats reports whether a pressure is the one already given, up to the rounding
// of a unit.
func repeats(a, b float64) bool { return a >= b*(1-1e-9) && a <= b*(1+1e-9) }

// gasBranches runs the branches that are possible. The plain one is that of the
// larger friction factor, which loses more.
func (out *Result) gasBranches(in *Input, model GasModel) (gasDrops, error) {
	f, p := &out.Friction, &out.Pressure
	run, plain, err := out.duct(in, f.Darcy.Value, model).run()
	if err != nil {
		return gasDrops{}, err
	}
	out.Gas = run
	if !f.IfLaminar.Valid {
		return plain, nil
	}
	_, other, err := out.duct(in, min(f.IfLaminar.Value, f.IfTurbulent.Value), model).run()
	if err != nil {
		return gasDrops{}, err
	}
	laminar, turbulent := other, plain
	if f.IfLaminar.Value > f.IfTurbulent.Value {
		laminar, turbulent = plain, other
	}
	p.FrictionDropIfLaminar, p.FrictionDropIfTurbulent = calc.Some(laminar.friction), calc.Some(turbulent.friction)
	p.StaticPressureDropIfLaminar, p.StaticPressureDropIfTurbulent = calc.Some(laminar.static), calc.Some(turbulent.static)
	return plain, nil
}

// gasAccount writes the drops and the ends into the account. Head and power are at
// the density of the known state.
func (out *Result) gasAccount(in *Input, d *gasDrops) {
	p := &out.Pressure
	p.CoefficientDrop, p.ComponentDrop = sharedDrop(p, d.fittings)
	p.FrictionDrop, p.FittingsDrop = d.friction, d.fittings
	p.TotalPressureLoss = d.friction + d.fittings
	p.FrictionGradient = d.friction / in.Length
	p.HeadLoss = out.headLoss(in)
	p.ElevationDrop, p.AccelerationDrop, p.StaticPressureDrop = calc.Some(d.elevation), calc.Some(d.acceleration), calc.Some(d.static)
	p.FluidPower = calc.Some(out.fluidPower(d.elevation))
	s := &out.Gas.Stations
	p.InletVelocity, p.OutletVelocity = s[0].Velocity, s[3].Velocity
	p.InletPressure, p.OutletPressure = calc.Some(s[0].Pressure), calc.Some(s[3].Pressure)
	out.Gas.InletTemperature, out.Gas.OutletTemperature = calc.Some(s[0].Temperature), calc.Some(s[3].Temperature)
	p.LowestPressure = calc.Some(min(s[0].Pressure, s[1].Pressure, s[2].Pressure, s[3].Pressure))
	if in.Fluid.HeatCapacityRatio.Valid {
		out.Gas.MachIn, out.Gas.MachOut = calc.Some(s[0].Mach), calc.Some(s[3].Mach)
	}
}

// sharedDrop keeps the shares of coefficients and rated components.
func sharedDrop(p *Pressure, fittings float64) (coefficients, components float64) {
	all := p.CoefficientDrop + p.ComponentDrop
	if all == 0 {
		return 0, 0
	}
	coefficients = fittings * (p.CoefficientDrop / all)
	return coefficients, fittings - coefficients
}

// highest is the height of a column of gas over the height in which its pressure
// falls by e: beyond, there is no gas left at one end.
const highest = 500

// gasAtRest is a column of gas at one temperature.
func (out *Result) gasAtRest(in *Input) (gasDrops, error) {
	f := &in.Fluid
	g := gas.Gas{SpecificConstant: f.Pressure.Value / (f.Density * f.Temperature.Value), HeatCapacityRatio: f.HeatCapacityRatio.Value}
	column := gas.Column{Gas: g, Lift: in.Gravity * in.Rise.Value}
	if x := column.Lift / (g.SpecificConstant * f.Temperature.Value); !(x >= -highest && x <= highest) {
		return gasDrops{}, &calc.Error{Kind: calc.ErrDomain, Quantity: "rise", Value: in.Rise.Value,
			Detail: "so high a column of this gas has no pressure left at its upper end, or more than can be told at its lower one"}
	}
	ends := column.Ends(gas.Known{Pressure: f.Pressure.Value, Temperature: f.Temperature.Value, AtOutlet: in.OutletPressure.Valid})
	out.Gas = GasRun{Line: gas.Line{Gas: g, Lift: column.Lift}, Stations: [4]gas.State{ends.In, ends.In, ends.Out, ends.Out}, AtOutlet: in.OutletPressure.Valid}
	return gasDrops{elevation: ends.Weight, static: ends.Drop}, nil
}
