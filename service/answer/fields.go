package answer

import (
	"borewright/calc"
	"borewright/calc/flow"
	"borewright/calc/segment"
	"borewright/calc/units"
)

func always(get func(*segment.Result) float64) func(*Answer) (float64, bool) {
	return func(a *Answer) (float64, bool) { return get(&a.Result), true }
}

func optional(get func(*segment.Result) calc.Optional) func(*Answer) (float64, bool) {
	return func(a *Answer) (float64, bool) {
		o := get(&a.Result)
		return o.Value, o.Valid
	}
}

// moving is a quantity that has no meaning at rest.
func moving(get func(*segment.Result) float64) func(*Answer) (float64, bool) {
	return func(a *Answer) (float64, bool) { return get(&a.Result), !a.Result.Conditions.AtRest }
}

// closed is a quantity of a section that runs full.
func closed(get func(*segment.Result) float64) func(*Answer) (float64, bool) {
	return func(a *Answer) (float64, bool) { return get(&a.Result), !a.Result.Section.FreeSurface }
}

// stated is a quantity as the request stated it.
func stated(get func(*Reference) calc.Optional) func(*Answer) (float64, bool) {
	return func(a *Answer) (float64, bool) {
		o := get(&a.Reference)
		return o.Value, o.Valid
	}
}

// leaf is a row of the table of leaves: a number or a text.
type leaf struct {
	number *Field
	text   *Text
	key    string // `"name":`
}

// leaves are all leaves in the order of the contract. A number stands here once
// with its block, its kind and where it comes from.
var leaves = [...]leaf{
	number("flow_area", SectionBlock, units.Area, always(func(r *segment.Result) float64 { return r.Section.FlowArea })),
	number("wetted_perimeter", SectionBlock, units.Length, always(func(r *segment.Result) float64 { return r.Section.WettedPerimeter })),
	number("hydraulic_diameter", SectionBlock, units.Length, always(func(r *segment.Result) float64 { return r.Section.HydraulicDiameter })),
	number("hydraulic_radius", SectionBlock, units.Length, always(func(r *segment.Result) float64 { return r.Section.HydraulicRadius })),
	number("equal_area_diameter", SectionBlock, units.Length, always(func(r *segment.Result) float64 { return r.Section.EqualAreaDiameter })),
	number("free_surface_width", SectionBlock, units.Length, optional(func(r *segment.Result) calc.Optional { return r.Section.FreeSurfaceWidth })),
	number("mean_depth", SectionBlock, units.Length, optional(func(r *segment.Result) calc.Optional { return r.Section.MeanDepth })),
	number("centroid_depth", SectionBlock, units.Length, optional(func(r *segment.Result) calc.Optional { return r.Section.CentroidDepth })),
	number("fill_ratio", SectionBlock, units.Dimensionless, optional(func(r *segment.Result) calc.Optional { return r.Section.FillRatio })),
	number("laminar_constant", SectionBlock, units.Dimensionless, optional(func(r *segment.Result) calc.Optional { return r.Section.LaminarConstant })),
	number("laminar_equivalent_diameter", SectionBlock, units.Length, optional(func(r *segment.Result) calc.Optional { return r.Section.LaminarEquivalent })),
	number("equal_friction_diameter", SectionBlock, units.Length, optional(func(r *segment.Result) calc.Optional { return r.Section.EqualFriction })),

	number("density", FluidBlock, units.Density, always(func(r *segment.Result) float64 { return r.Fluid.Density })),
	number("dynamic_viscosity", FluidBlock, units.DynamicViscosity, always(func(r *segment.Result) float64 { return r.Fluid.DynamicViscosity })),
	number("kinematic_viscosity", FluidBlock, units.KinematicViscosity, always(func(r *segment.Result) float64 { return r.Fluid.KinematicViscosity })),
	text("phase", FluidBlock, func(a *Answer) string { return a.Result.Fluid.Phase.String() }),
	number("vapour_pressure", FluidBlock, units.StatePressure, optional(func(r *segment.Result) calc.Optional { return r.Fluid.VapourPressure })),
	number("sound_speed", FluidBlock, units.Velocity, optional(func(r *segment.Result) calc.Optional { return r.Fluid.SoundSpeed })),
	number("heat_capacity_ratio", FluidBlock, units.Dimensionless, optional(func(r *segment.Result) calc.Optional { return r.Fluid.HeatCapacityRatio })),
	number("temperature", FluidBlock, units.Temperature, optional(func(r *segment.Result) calc.Optional { return r.Fluid.Temperature })),
	number("pressure", FluidBlock, units.StatePressure, optional(func(r *segment.Result) calc.Optional { return r.Fluid.Pressure })),
	text("property_source", FluidBlock, func(a *Answer) string { return a.Result.Fluid.Source }),

	number("mass_flow", FlowBlock, units.MassFlow, always(func(r *segment.Result) float64 { return r.Flow.MassFlow })),
	number("volume_flow", FlowBlock, units.VolumeFlow, always(func(r *segment.Result) float64 { return r.Flow.VolumeFlow })),
	number("velocity", FlowBlock, units.Velocity, always(func(r *segment.Result) float64 { return r.Flow.Velocity })),
	number("reference_volume_flow", FlowBlock, units.ReferenceVolumeFlow, stated(func(r *Reference) calc.Optional { return r.VolumeFlow })),
	number("reference_temperature", FlowBlock, units.Temperature, stated(func(r *Reference) calc.Optional { return r.Temperature })),
	number("reference_pressure", FlowBlock, units.StatePressure, stated(func(r *Reference) calc.Optional { return r.Pressure })),

	number("reynolds", RegimeBlock, units.Dimensionless, always(func(r *segment.Result) float64 { return r.Regime.Reynolds })),
	text("flow_regime", RegimeBlock, func(a *Answer) string { return a.Result.Regime.Name.String() }),
	{text: &Text{Name: "possible_regimes", Block: RegimeBlock, list: possibleRegimes}, key: `"possible_regimes":`},
	number("lower_critical_reynolds", RegimeBlock, units.Dimensionless, always(func(r *segment.Result) float64 { return r.Regime.Lower })),
	number("upper_critical_reynolds", RegimeBlock, units.Dimensionless, always(func(r *segment.Result) float64 { return r.Regime.Upper })),
	text("regime_basis", RegimeBlock, func(a *Answer) string { return a.Regime }),
	number("entry_length", RegimeBlock, units.Length, optional(func(r *segment.Result) calc.Optional { return r.Regime.EntryLength })),

	number("darcy_friction_factor", FrictionBlock, units.Dimensionless, optional(func(r *segment.Result) calc.Optional { return r.Friction.Darcy })),
	number("fanning_friction_factor", FrictionBlock, units.Dimensionless, optional(func(r *segment.Result) calc.Optional { return r.Friction.Fanning })),
	text("friction_law", FrictionBlock, frictionLaw),
	number("relative_roughness", FrictionBlock, units.Dimensionless, always(func(r *segment.Result) float64 { return r.Friction.RelativeRoughness })),
	number("wall_shear_stress", FrictionBlock, units.Pressure, always(func(r *segment.Result) float64 { return r.Friction.WallShear })),
	number("friction_velocity", FrictionBlock, units.Velocity, always(func(r *segment.Result) float64 { return r.Friction.FrictionVelocity })),
	number("roughness_reynolds", FrictionBlock, units.Dimensionless, moving(func(r *segment.Result) float64 { return r.Friction.RoughnessReynolds })),
	text("roughness_regime", FrictionBlock, func(a *Answer) string { return a.Result.Friction.RoughnessRegime.String() }),
	number("darcy_friction_factor_if_laminar", FrictionBlock, units.Dimensionless, optional(func(r *segment.Result) calc.Optional { return r.Friction.IfLaminar })),
	number("darcy_friction_factor_if_turbulent", FrictionBlock, units.Dimensionless, optional(func(r *segment.Result) calc.Optional { return r.Friction.IfTurbulent })),

	number("friction_drop", PressureBlock, units.Pressure, always(func(r *segment.Result) float64 { return r.Pressure.FrictionDrop })),
	number("fittings_drop", PressureBlock, units.Pressure, always(func(r *segment.Result) float64 { return r.Pressure.FittingsDrop })),
	number("total_pressure_loss", PressureBlock, units.Pressure, always(func(r *segment.Result) float64 { return r.Pressure.TotalPressureLoss })),
	number("elevation_drop", PressureBlock, units.Pressure, optional(func(r *segment.Result) calc.Optional { return r.Pressure.ElevationDrop })),
	number("acceleration_drop", PressureBlock, units.Pressure, optional(func(r *segment.Result) calc.Optional { return r.Pressure.AccelerationDrop })),
	number("static_pressure_drop", PressureBlock, units.Pressure, optional(func(r *segment.Result) calc.Optional { return r.Pressure.StaticPressureDrop })),
	number("friction_gradient", PressureBlock, units.PressureGradient, always(func(r *segment.Result) float64 { return r.Pressure.FrictionGradient })),
	number("head_loss", PressureBlock, units.Length, always(func(r *segment.Result) float64 { return r.Pressure.HeadLoss })),
	number("fluid_power", PressureBlock, units.Power, optional(func(r *segment.Result) calc.Optional { return r.Pressure.FluidPower })),
	number("friction_drop_if_laminar", PressureBlock, units.Pressure, optional(func(r *segment.Result) calc.Optional { return r.Pressure.FrictionDropIfLaminar })),
	number("friction_drop_if_turbulent", PressureBlock, units.Pressure, optional(func(r *segment.Result) calc.Optional { return r.Pressure.FrictionDropIfTurbulent })),
	number("static_pressure_drop_if_laminar", PressureBlock, units.Pressure, optional(func(r *segment.Result) calc.Optional { return r.Pressure.StaticPressureDropIfLaminar })),
	number("static_pressure_drop_if_turbulent", PressureBlock, units.Pressure, optional(func(r *segment.Result) calc.Optional { return r.Pressure.StaticPressureDropIfTurbulent })),
	number("inlet_pressure", PressureBlock, units.StatePressure, optional(func(r *segment.Result) calc.Optional { return r.Pressure.InletPressure })),
	number("outlet_pressure", PressureBlock, units.StatePressure, optional(func(r *segment.Result) calc.Optional { return r.Pressure.OutletPressure })),
	number("lowest_pressure", PressureBlock, units.StatePressure, optional(func(r *segment.Result) calc.Optional { return r.Pressure.LowestPressure })),
	number("gauge_pressure_drop", PressureBlock, units.Pressure, optional(func(r *segment.Result) calc.Optional { return r.Pressure.GaugePressureDrop })),
	text("gas_model", PressureBlock, func(a *Answer) string { return a.Result.Pressure.GasModel.String() }),
	number("inlet_temperature", PressureBlock, units.Temperature, optional(func(r *segment.Result) calc.Optional { return r.Gas.InletTemperature })),
	number("outlet_temperature", PressureBlock, units.Temperature, optional(func(r *segment.Result) calc.Optional { return r.Gas.OutletTemperature })),
	number("inlet_velocity", PressureBlock, units.Velocity, closed(func(r *segment.Result) float64 { return r.Pressure.InletVelocity })),
	number("outlet_velocity", PressureBlock, units.Velocity, closed(func(r *segment.Result) float64 { return r.Pressure.OutletVelocity })),
	number("mach_number_in", PressureBlock, units.Dimensionless, optional(func(r *segment.Result) calc.Optional { return r.Gas.MachIn })),
	number("mach_number_out", PressureBlock, units.Dimensionless, optional(func(r *segment.Result) calc.Optional { return r.Gas.MachOut })),
	number("choking_mass_flow", PressureBlock, units.MassFlow, optional(func(r *segment.Result) calc.Optional { return r.Gas.ChokingMassFlow })),
	number("friction_slope", PressureBlock, units.Dimensionless, optional(func(r *segment.Result) calc.Optional { return r.Pressure.FrictionSlope })),
	number("bed_slope", PressureBlock, units.Dimensionless, optional(func(r *segment.Result) calc.Optional { return r.Pressure.BedSlope })),
}

func number(name string, b Block, kind units.Kind, value func(*Answer) (float64, bool)) leaf {
	return leaf{number: &Field{Name: name, Block: b, Kind: kind, value: value}, key: `"` + name + `":`}
}

func text(name string, b Block, value func(*Answer) string) leaf {
	return leaf{text: &Text{Name: name, Block: b, one: value}, key: `"` + name + `":`}
}

func frictionLaw(a *Answer) string {
	if !a.Result.Friction.Darcy.Valid {
		return ""
	}
	return a.Result.Friction.Law.String()
}

var (
	onlyLaminar   = []string{flow.Laminar.String()}
	onlyTurbulent = []string{flow.Turbulent.String()}
	both          = []string{flow.Laminar.String(), flow.Turbulent.String()}
	atRest        = []string{flow.AtRest.String()}
)

func possibleRegimes(a *Answer) []string {
	switch r := &a.Result.Regime; {
	case r.CanBeLaminar && r.CanBeTurbulent:
		return both
	case r.CanBeLaminar:
		return onlyLaminar
	case r.CanBeTurbulent:
		return onlyTurbulent
	}
	return atRest
}

// Fields lists the numeric leaves up to a block.
func Fields(last Block) []*Field { return fieldsBetween(SectionBlock, last) }

func fieldsBetween(first, last Block) []*Field {
	var list []*Field
	for i := range leaves {
		if f := leaves[i].number; f != nil && f.Block >= first && f.Block <= last {
			list = append(list, f)
		}
	}
	return list
}

// Texts lists the other leaves up to a block.
func Texts(last Block) []*Text {
	var list []*Text
	for i := range leaves {
		if t := leaves[i].text; t != nil && t.Block <= last {
			list = append(list, t)
		}
	}
	return list
}
