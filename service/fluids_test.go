package service_test

import (
	"math"
	"strings"
	"testing"

	"borewright/calc/fluid"
	"borewright/calc/segment"
	"borewright/service/document"
)

// nitrogen is a gas line of the invented plant that says all that matters.
func nitrogen() object {
	return object{
		"section": object{"shape": "circle", "diameter": 0.0525},
		"fluid": object{"molar_mass": 28.0134e-3, "heat_capacity_ratio": 1.4, "compressibility_factor": 1,
			"dynamic_viscosity": 1.78e-5, "temperature": 298.15, "pressure": 8e5},
		"flow": object{"mass_flow": 0.35}, "roughness": 4.5e-5, "length": 80, "rise": 4, "gas_model": "isothermal",
		"fittings": []any{object{"loss_coefficient": 0.3, "count": 4}}, "friction": object{"friction_law": "colebrook_white"},
		"surroundings": object{"substance": "air", "temperature": 288.15}, "site": object{"atmospheric_pressure": 101325, "gravity": 9.80665},
	}
}

// named is the quiet line with another fluid, whose state stands at the inlet.
func named(fluid object) object {
	return with(quiet(), object{"fluid": fluid, "inlet_pressure": nil})
}

func leaf(a object, block, name string) float64 {
	v, ok := a[block].(object)[name].(float64)
	if !ok {
		return math.NaN()
	}
	return v
}

func TestNamedFluidsAreThoseOfCalc(t *testing.T) {
	air, err := fluid.Air(fluid.StatePoint{Temperature: 293.15, Pressure: 2.5e5})
	if err != nil {
		t.Fatal(err)
	}
	water, err := fluid.Water(fluid.StatePoint{Temperature: 298.15, Pressure: 521325})
	if err != nil {
		t.Fatal(err)
	}
	steam, _, err := fluid.SaturatedWater(450, fluid.Gas)
	if err != nil {
		t.Fatal(err)
	}
	for name, c := range map[string]struct {
		fluid object
		want  fluid.Properties
	}{
		"air":             {object{"substance": "air", "temperature": "20 degC", "pressure": "2.5 bara"}, air},
		"water":           {object{"substance": "water", "temperature": 298.15, "pressure": "4.2 barg"}, water},
		"saturated steam": {object{"substance": "water", "state": "saturated_vapour", "temperature": 450}, steam},
	} {
		got := answered(t, document.FluidDoor, object{"fluid": c.fluid})
		block := got["fluid"].(object)
		if block["density"] != c.want.Density || block["dynamic_viscosity"] != c.want.DynamicViscosity || block["sound_speed"] != c.want.SoundSpeed.Value ||
			block["phase"] != c.want.Phase.String() || block["property_source"] != c.want.Source || block["pressure"] != c.want.Pressure.Value || block["temperature"] != c.want.Temperature.Value {
			t.Errorf("%s: %v, calc says %+v", name, block, c.want)
		}
		if len(got) != 5 {
			t.Errorf("%s: the fluid door answers %v", name, got)
		}
	}
}

// A saturated state is the same by its temperature and by its pressure.
func TestSaturationByEither(t *testing.T) {
	for _, state := range []string{"saturated_liquid", "saturated_vapour"} {
		byTemperature := answered(t, document.FluidDoor, object{"fluid": object{"substance": "water", "state": state, "temperature": 420}})
		pressure := leaf(byTemperature, "fluid", "pressure")
		byPressure := answered(t, document.FluidDoor, object{"fluid": object{"substance": "water", "state": state, "pressure": pressure}})
		if a, b := leaf(byTemperature, "fluid", "density"), leaf(byPressure, "fluid", "density"); math.Abs(a/b-1) > 1e-11 {
			t.Errorf("%s: %v by temperature, %v by pressure", state, a, b)
		}
	}
}

// The state of the fluid is the pressure at the inlet, and may be said twice.
func TestStateIsThePressureAtTheInlet(t *testing.T) {
	water := object{"substance": "water", "temperature": "60 degC", "pressure": "4.2 barg"}
	request := with(named(water), object{"site": object{"altitude": "600 m"}})
	a := answered(t, document.SegmentDoor, request)
	if p := leaf(a, "pressure", "inlet_pressure"); p != leaf(a, "fluid", "pressure") || !(p > 5e5 && p < 5.2e5) {
		t.Errorf("inlet pressure %v", p)
	}
	again := answered(t, document.SegmentDoor, with(request, object{"inlet_pressure": "4.2 barg"}))
	if a["fingerprint"] != again["fingerprint"] {
		t.Error("the same pressure said twice is another request")
	}
	atOutlet := answered(t, document.SegmentDoor, with(request, object{"outlet_pressure": "4.2 barg"}))
	if leaf(atOutlet, "pressure", "outlet_pressure") != leaf(a, "fluid", "pressure") {
		t.Errorf("%v", atOutlet["pressure"])
	}
	if leaf(a, "fluid", "vapour_pressure") < 1e4 {
		t.Errorf("water has a vapour pressure: %v", a["fluid"])
	}
}

// 500 normal cubic metres an hour of air are 500/22.413 969 54 kmol/h.
// Source: CODATA 2018, molar volume of ideal gas; molar mass of Lemmon et al. 2000.
func TestReferenceVolumeFlow(t *testing.T) {
	air := with(named(object{"substance": "air", "temperature": "20 degC", "pressure": "7 barg"}), object{"flow": object{"reference_volume_flow": "500 Nm3/h"}, "rise": nil})
	a := answered(t, document.SegmentDoor, air)
	if want := 500 / 22.41396954 * 28.9586 / 3600; math.Abs(leaf(a, "flow", "mass_flow")/want-1) > 1e-9 {
		t.Errorf("mass flow %v, want %v", leaf(a, "flow", "mass_flow"), want)
	}
	if leaf(a, "flow", "reference_temperature") != 273.15 || leaf(a, "flow", "reference_pressure") != 101325 || math.Abs(leaf(a, "flow", "reference_volume_flow")*3600/500-1) > 1e-15 {
		t.Errorf("%v", a["flow"])
	}
	plain := answered(t, document.SegmentDoor, with(air, object{"flow": object{"reference_volume_flow": "500 m3/h", "reference_temperature": "0 degC", "reference_pressure": "101325 Paa"}}))
	if plain["fingerprint"] != a["fingerprint"] {
		t.Error("the state by the unit and the state by its fields are two requests")
	}
}

func TestGaugesOfAGas(t *testing.T) {
	a := answered(t, document.SegmentDoor, nitrogen())
	air, err := fluid.Air(fluid.StatePoint{Temperature: 288.15, Pressure: 101325})
	if err != nil {
		t.Fatal(err)
	}
	want := leaf(a, "pressure", "static_pressure_drop") - air.Density*segment.StandardGravity*4
	if got := leaf(a, "pressure", "gauge_pressure_drop"); math.Abs(got-want) > 1e-9 {
		t.Errorf("gauges show %v, want %v", got, want)
	}
	if notes := notesOf(a); len(notes) != 1 || noted(a, "gas_displaces_air") == nil {
		t.Errorf("a line that says all earns %v", notes)
	}
	if a["pressure"].(object)["gas_model"] != "isothermal" || leaf(a, "pressure", "mach_number_out") <= leaf(a, "pressure", "mach_number_in") {
		t.Errorf("%v", a["pressure"])
	}
}

func TestDistributionIsAnswered(t *testing.T) {
	a := answered(t, document.SegmentDoor, with(nitrogen(), object{"distribution_points": 5}))
	points := a["distribution"].([]any)
	if len(points) != 5 {
		t.Fatalf("%v", points)
	}
	first, last := points[0].(object), points[4].(object)
	if first["distance"] != 0.0 || last["distance"] != 80.0 || first["pressure"] != 8e5 || math.Abs(last["pressure"].(float64)/leaf(a, "pressure", "outlet_pressure")-1) > 1e-13 {
		t.Errorf("%v", points)
	}
	if _, there := answered(t, document.SegmentDoor, nitrogen())["distribution"]; there {
		t.Error("nobody asked for a distribution")
	}
}

func TestChokedFlowIsAnsweredOnRequest(t *testing.T) {
	request := with(nitrogen(), object{"flow": object{"mass_flow": 60}, "answer_at_choking": true, "gas_model": "adiabatic"})
	a := answered(t, document.SegmentDoor, request)
	most := leaf(a, "pressure", "choking_mass_flow")
	if !(most > 0.3 && most < 10) || leaf(a, "flow", "mass_flow") != most || math.Abs(leaf(a, "pressure", "mach_number_out")-1) > 1e-3 {
		t.Errorf("%v %v", a["flow"], a["pressure"])
	}
	v := refused(t, document.SegmentDoor, written(t, with(request, object{"answer_at_choking": false}))).Violations
	if len(v) != 1 || v[0].Code != "choked" || !strings.Contains(v[0].Detail, "kg/s") || !strings.Contains(v[0].Detail, " m of 80 m") {
		t.Errorf("%v", v)
	}
}
