package service

import (
	"fmt"

	"borewright/calc"
	"borewright/calc/flow"
	"borewright/calc/fluid"
	"borewright/service/document"
)

// fluid resolves the fluid to its properties at its state.
func (w *work) fluid() {
	f := &w.req.Fluid
	before := len(w.violations)
	var p fluid.Properties
	var err error
	switch f.Way {
	case document.BySubstance:
		p, err = w.substance(f)
	case document.ByConstants:
		p, err = fluid.ByConstants(fluid.ConstantsInput{
			MolarMass: given(f.MolarMass), RelativeDensity: given(f.RelativeDensity),
			HeatCapacityRatio: given(f.HeatCapacityRatio), CompressibilityFactor: given(f.CompressibilityFactor),
			DynamicViscosity: f.DynamicViscosity.Value, StatePoint: w.statePoint(f),
		})
	default:
		p, err = fluid.Given(fluid.GivenInput{
			Density: f.Density.Value, DynamicViscosity: given(f.DynamicViscosity), KinematicViscosity: given(f.KinematicViscosity),
			VapourPressure: w.absolute(f.VapourPressure, calc.VapourPressure, "/fluid/vapour_pressure"), Phase: f.Phase,
		})
	}
	if err != nil && len(w.violations) == before { // a pressure refused above would be refused again
		w.fault(err, "/fluid")
	}
	w.in.Fluid = p
}

func (w *work) statePoint(f *document.Fluid) fluid.StatePoint {
	return fluid.StatePoint{Temperature: f.Temperature.Value, Pressure: w.absolute(f.Pressure, calc.Pressure, "/fluid/pressure").Value}
}

func (w *work) substance(f *document.Fluid) (fluid.Properties, error) {
	if f.Saturated != 0 {
		return w.saturated(f)
	}
	return propertiesOf(f.Substance, w.statePoint(f))
}

// propertiesOf asks the equation of state of a substance.
func propertiesOf(s document.Substance, at fluid.StatePoint) (fluid.Properties, error) {
	if s == document.Air {
		return fluid.Air(at)
	}
	return fluid.Water(at)
}

func (w *work) saturated(f *document.Fluid) (fluid.Properties, error) {
	if f.Substance != document.Water {
		return fluid.Properties{}, &calc.Error{Kind: calc.ErrUnknown, Quantity: "state",
			Detail: "only water has a saturation line here; give " + f.Substance.String() + " by temperature and pressure"}
	}
	temperature := f.Temperature.Value
	if f.Pressure.Given {
		pressure := w.absolute(f.Pressure, calc.Pressure, "/fluid/pressure")
		if !pressure.Valid {
			return fluid.Properties{}, nil
		}
		w.saturatedAt = pressure.Value
		var err error
		if temperature, err = fluid.WaterSaturationTemperature(pressure.Value); err != nil {
			return fluid.Properties{}, err
		}
	}
	p, _, err := fluid.SaturatedWater(temperature, f.Saturated)
	return p, err
}

// flow resolves the rate of flow; a volume at a reference state becomes a mass.
func (w *work) flow() {
	f := &w.req.Flow
	if f.By != 0 {
		w.in.Flow = flow.Rate{By: f.By, Value: f.Measure.Value}
		return
	}
	before := len(w.violations)
	s := fluid.StatePoint{Temperature: f.ReferenceTemperature.Value, Pressure: w.absolute(f.ReferencePressure, calc.ReferencePressure, "/flow/reference_pressure").Value}
	if len(w.violations) > before || w.in.Fluid.Density == 0 {
		return // refused once, and not again by what takes it
	}
	density, err := fluid.ReferenceDensity(&w.in.Fluid, s)
	if err != nil {
		w.fault(err, "/flow")
		return
	}
	w.in.Flow = flow.Rate{By: flow.ByMass, Value: f.Measure.Value * density}
	w.reference = s
}

// ends says which pressure is known at the ends. The state of a fluid is at the
// inlet, or at the outlet where the outlet pressure is given; that pressure can only
// repeat it.
func (w *work) ends() {
	r := &w.req
	w.in.InletPressure = w.absolute(r.InletPressure, calc.InletPressure, "/inlet_pressure")
	w.in.OutletPressure = w.absolute(r.OutletPressure, calc.OutletPressure, "/outlet_pressure")
	state := w.in.Fluid.Pressure
	if !state.Valid || r.Section.LiquidDepth.Given {
		return
	}
	for _, end := range [...]struct {
		name string
		at   *calc.Optional
	}{{"inlet_pressure", &w.in.InletPressure}, {"outlet_pressure", &w.in.OutletPressure}} {
		if !end.at.Valid {
			continue
		}
		if !repeats(end.at.Value, state.Value) {
			w.refuse("/"+end.name, "contradiction", fmt.Sprintf(
				"the state of the fluid is at this end, %.10g Pa absolute, and %s says %.10g Pa; leave it out, or repeat that pressure", state.Value, end.name, end.at.Value))
		}
		*end.at = state
		return
	}
	w.in.InletPressure = state
}

// repeats reports whether a pressure is the one already given, up to the rounding
// of a unit.
func repeats(a, b float64) bool { return a >= b*(1-1e-9) && a <= b*(1+1e-9) }

// surroundings resolves the density of what stands around the line, at the
// atmosphere of the site.
func (w *work) surroundings() {
	s := &w.req.Surroundings
	if !s.Given {
		return
	}
	w.atmosphereUsed = true
	p, err := propertiesOf(s.Substance, fluid.StatePoint{Temperature: s.Temperature.Value, Pressure: w.atmosphere})
	if err != nil {
		w.fault(err, "/surroundings")
		return
	}
	w.in.SurroundingsDensity = calc.Some(p.Density)
}
