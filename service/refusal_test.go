package service_test

import (
	"slices"
	"strings"
	"testing"

	"borewright/service/document"
)

// refusalCase is a request that physics or a catalogue refuses.
type refusalCase struct {
	name    string
	pointer string
	code    string
	says    string // what a person can do about it
	request object
}

func shaped(s object) object { return with(quiet(), object{"section": s}) }

func plantShape(name string, changes object) object {
	return shaped(with(shapesOfThePlant()[name], changes))
}

func pipeNamed(changes object) object {
	return with(object{"shape": "pipe", "standard": "ASME B36.10M", "size": "DN 150", "schedule": 40}, changes)
}

var partlyFull = with(quiet(), object{"section/liquid_depth": 0.06, "inlet_pressure": nil})

var refusalCases = []refusalCase{
	{"a depth above the crown", "/section/liquid_depth", "outside_domain", "0.15", with(partlyFull, object{"section/liquid_depth": 0.2})},
	{"a depth above the brim", "/section/liquid_depth", "outside_domain", "0.2", with(plantShape("rectangle", object{"liquid_depth": 0.3}), object{"inlet_pressure": nil})},
	{"a corner radius over half the height", "/section/corner_radius", "outside_domain", "0.1", plantShape("rectangle", object{"corner_radius": 0.15})},
	{"an inner tube as wide as the outer", "/section/inner_diameter", "outside_domain", "0.2", plantShape("annulus", object{"inner_diameter": 0.2})},
	{"a wall that fills the pipe", "/section/wall_thickness", "outside_domain", "", plantShape("pipe", object{"wall_thickness": 0.09})},
	{"a lining that fills the bore", "/section/lining_thickness", "outside_domain", "", plantShape("pipe", object{"lining_thickness": 0.09})},
	{"banks that meet below the height", "/section/bank_left", "outside_domain", "0.15 m", plantShape("trapezoid", object{"bank_left": -1, "bank_right": -1})},
	{"a trapezoid without height and depth", "/section/height", "outside_domain", "liquid_depth", plantShape("trapezoid", object{"height": nil})},
	{"a polygon that crosses itself", "/section/vertices", "outside_domain", "cross", plantShape("polygon", object{"dry_edges": nil, "vertices": []any{[]any{0, 0}, []any{1, 1}, []any{1, 0}, []any{0, 1}}})},
	{"an edge that is not there", "/section/dry_edges", "outside_domain", "", plantShape("polygon", object{"dry_edges": []any{7}})},
	{"a sheared duct without room", "/section", "outside_domain", "flow area", plantShape("trapezoid", object{"bottom_width": 1e-240, "bank_left": -1, "bank_right": 1})},
	{"all edges dry", "/section/dry_edges", "outside_domain", "", plantShape("polygon", object{"dry_edges": []any{0, 1, 2, 3}})},

	{"laminar flow in a sector", "/section", "not_known_yet", "not known yet for this section", with(plantShape("sector", nil), object{"fluid/dynamic_viscosity": 10})},
	{"laminar flow partly full", "/section", "not_known_yet", "not known yet for this section", with(partlyFull, object{"fluid/dynamic_viscosity": 10})},
	{"an equivalent diameter that is not known", "/friction/friction_diameter", "not_known_yet", "use hydraulic", with(plantShape("sector", nil), object{"friction/friction_diameter": "laminar_equivalent"})},
	{"Blasius above its range", "/friction/friction_law", "outside_validity", "100000", with(quiet(), object{"friction/friction_law": "blasius", "roughness": 0})},
	{"Haaland below its range", "/friction/friction_law", "outside_validity", "4000", with(quiet(), object{"friction/friction_law": "haaland", "fluid/dynamic_viscosity": 0.08, "regime": object{"lower_critical_reynolds": 1000, "upper_critical_reynolds": 2000}})},
	{"von Karman on a smooth wall", "/friction/friction_law", "outside_validity", "rough", with(quiet(), object{"friction/friction_law": "von_karman_rough", "roughness": 0})},
	{"a smooth law on a rough wall", "/friction/friction_law", "outside_validity", "smooth", with(quiet(), object{"friction/friction_law": "prandtl_smooth", "roughness": 0.005})},
	{"a wall rougher than 5 %", "/roughness", "outside_validity", "0.0075", with(quiet(), object{"roughness": "8 mm"})},

	{"an inlet below vacuum", "/inlet_pressure", "outside_domain", "vacuum", with(quiet(), object{"inlet_pressure": "-1.2 barg"})},
	{"an outlet below vacuum", "/outlet_pressure", "outside_domain", "vacuum", with(quiet(), object{"inlet_pressure": nil, "outlet_pressure": "-1.2 barg"})},
	{"a vapour pressure below vacuum", "/fluid/vapour_pressure", "outside_domain", "vacuum", with(quiet(), object{"fluid/vapour_pressure": "-1.2 barg"})},
	{"pressures at both ends", "/outlet_pressure", "one_of", "at one end", with(quiet(), object{"outlet_pressure": 300000})},
	{"a pressure with a free surface", "/inlet_pressure", "outside_domain", "free surface", with(partlyFull, object{"inlet_pressure": 200000})},
	{"an outlet pressure with a free surface", "/outlet_pressure", "outside_domain", "free surface", with(partlyFull, object{"outlet_pressure": 200000})},
	{"an inlet with a free surface", "/inlet", "outside_domain", "free surface", with(partlyFull, object{"inlet": "reservoir"})},
	{"an outlet with a free surface", "/outlet", "outside_domain", "free surface", with(partlyFull, object{"outlet": "free_discharge"})},
	{"an impossible section at the inlet", "/inlet/inner_diameter", "outside_domain", "0.1", with(quiet(), object{"inlet": object{"shape": "annulus", "outer_diameter": 0.1, "inner_diameter": 0.2}})},
	{"a depth above the crown at the outlet", "/outlet/liquid_depth", "outside_domain", "0.1", with(quiet(), object{"outlet": object{"shape": "circle", "diameter": 0.1, "liquid_depth": 0.2}})},
	{"a gas that loses too much", "/flow/velocity", "outside_validity", "40 %", with(air(), object{"inlet_pressure": 400})},

	{"a gas that chokes", "/flow/mass_flow", "choked", "at most", with(nitrogen(), object{"flow": object{"mass_flow": 60}})},
	{"a gas that gains by its fittings", "/fittings", "outside_domain", "take pressure", with(nitrogen(), object{"fittings": []any{object{"loss_coefficient": -900}}})},
	{"a gas model of a liquid", "/gas_model", "outside_domain", "leave", with(quiet(), object{"gas_model": "adiabatic"})},
	{"an adiabatic gas known by density", "/gas_model", "outside_domain", "state", with(air(), object{"gas_model": "adiabatic"})},
	{"an adiabatic gas without its ratio", "/fluid/heat_capacity_ratio", "outside_domain", "1.4", with(nitrogen(), object{"fluid/heat_capacity_ratio": nil, "gas_model": "adiabatic"})},
	{"points of a liquid", "/distribution_points", "outside_domain", "leave", with(quiet(), object{"distribution_points": 5})},
	{"another pressure than the state", "/inlet_pressure", "contradiction", "repeat", with(nitrogen(), object{"inlet_pressure": "9 bara"})},
	{"another pressure at the outlet", "/outlet_pressure", "contradiction", "repeat", with(nitrogen(), object{"outlet_pressure": "9 bara"})},
	{"water near its saturation", "/fluid/temperature", "outside_domain", "saturated_liquid or saturated_vapour", with(quiet(), object{"inlet_pressure": nil, "fluid": object{"substance": "water", "temperature": 373.1, "pressure": 101325}})},
	{"ice", "/fluid/temperature", "outside_validity", "ice", with(quiet(), object{"inlet_pressure": nil, "fluid": object{"substance": "water", "temperature": 260, "pressure": 101325}})},
	{"water below vacuum", "/fluid/pressure", "outside_domain", "vacuum", with(quiet(), object{"inlet_pressure": nil, "fluid": object{"substance": "water", "temperature": 290, "pressure": "-2 barg"}})},
	{"saturated air", "/fluid/state", "not_known_yet", "temperature and pressure", with(quiet(), object{"inlet_pressure": nil, "fluid": object{"substance": "air", "state": "saturated_vapour", "pressure": 101325}})},
	{"hot air around", "/surroundings/temperature", "outside_validity", "2000", with(nitrogen(), object{"surroundings/temperature": 3000})},
	{"a normal volume of water", "/flow/reference_volume_flow", "outside_domain", "molar mass", with(quiet(), object{"flow": object{"reference_volume_flow": "5 Nm3/h"}})},
	{"a flow far above the rated one", "/fittings/0/rated_flow", "outside_validity", "right unit", with(quiet(), object{"fittings": []any{object{"rated_drop": 18000, "rated_flow": 1e-150}}})},

	{"limits in the wrong order", "/regime/lower_critical_reynolds", "outside_domain", "must not exceed", with(quiet(), object{"regime": object{"lower_critical_reynolds": 5000}})},
	{"an upper limit below the lower", "/regime/upper_critical_reynolds", "outside_domain", "must not be below", with(quiet(), object{"regime": object{"upper_critical_reynolds": 2000}})},
	{"calm without its limit", "/regime/calm_laminar_to_reynolds", "outside_domain", "up to which", with(quiet(), object{"regime": object{"approach_flow": "calm"}})},
	{"a calm limit without calm", "/regime/calm_laminar_to_reynolds", "outside_domain", "say calm", with(quiet(), object{"regime": object{"calm_laminar_to_reynolds": 20000}})},
	{"neither liquid nor gas", "/fluid/phase", "outside_domain", "say which", with(quiet(), object{"fluid/density": 75})},
	{"a viscosity that the density makes impossible", "/fluid/dynamic_viscosity", "outside_domain", "1e12", with(quiet(), object{"fluid": object{"density": 1e-9, "dynamic_viscosity": 1e9, "phase": "gas"}})},
	{"a flow too small to name", "/flow/volume_flow", "outside_validity", "say 0", with(quiet(), object{"flow/volume_flow": 1e-200})},
	{"a mass flow too small to name", "/flow/mass_flow", "outside_validity", "say 0", with(quiet(), object{"flow": object{"mass_flow": 1e-200}})},
	{"a velocity too small to name", "/flow/velocity", "outside_validity", "say 0", with(quiet(), object{"flow": object{"velocity": 1e-200}})},

	{"a standard that is not there", "/section/standard", "outside_domain", "ASME B36.10M", shaped(pipeNamed(object{"standard": "ASME B36.11"}))},
	{"a size that is not there", "/section/size", "outside_domain", "DN", shaped(pipeNamed(object{"size": "DN 155"}))},
	{"a schedule that is not there", "/section/schedule", "outside_domain", "40", shaped(pipeNamed(object{"schedule": 45}))},
	{"a size that is not there, with a wall", "/section/size", "outside_domain", "DN", shaped(pipeNamed(object{"size": "DN 155", "schedule": nil, "wall_thickness": 0.007}))},
	{"a size that is not there at the inlet", "/inlet/size", "outside_domain", "DN", with(quiet(), object{"inlet": pipeNamed(object{"size": "DN 155"})})},
	{"a schedule that is not there at the outlet", "/outlet/schedule", "outside_domain", "40", with(quiet(), object{"outlet": pipeNamed(object{"schedule": "XXXS"})})},
}

func TestPhysicsRefusesWithAPointer(t *testing.T) {
	for _, c := range refusalCases {
		t.Run(c.name, func(t *testing.T) {
			r := refused(t, document.SegmentDoor, written(t, c.request))
			v := r.Violations[0]
			if v.Pointer != c.pointer || v.Code != c.code || !strings.Contains(v.Detail, c.says) || len(v.Detail) < 15 || r.Malformed || len(r.Violations) != 1 {
				t.Errorf("got %q\nwanted %s %s with %q", r.Violations, c.pointer, c.code, c.says)
			}
		})
	}
}

// TestEveryFaultIsFoundAtOnce: what is wrong in one place hides nothing elsewhere.
func TestEveryFaultIsFoundAtOnce(t *testing.T) {
	request := with(quiet(), object{
		"section": pipeNamed(object{"size": "DN 155"}), "outlet": pipeNamed(object{"schedule": 45}),
		"fluid/density": 75, "inlet_pressure": "-2 barg",
	})
	var pointers []string
	for _, v := range refused(t, document.SegmentDoor, written(t, request)).Violations {
		pointers = append(pointers, v.Pointer)
	}
	slices.Sort(pointers)
	if want := []string{"/fluid/phase", "/inlet_pressure", "/outlet/schedule", "/section/size"}; !slices.Equal(pointers, want) {
		t.Errorf("refused at %q, wanted %q", pointers, want)
	}
}

// TestFittingsAreNamedByTheirPlace: an error of one fitting of many points at it.
func TestFittingsAreNamedByTheirPlace(t *testing.T) {
	fittings := []any{object{"loss_coefficient": 0.3}, object{"rated_drop": 1, "rated_flow": "-3 m3/h"}, object{"loss_coefficient": 1e10}, object{"loss_coefficient": 1, "count": 0}}
	var pointers []string
	for _, v := range refused(t, document.SegmentDoor, written(t, with(quiet(), object{"fittings": fittings}))).Violations {
		pointers = append(pointers, v.Pointer)
	}
	if want := []string{"/fittings/1/rated_flow", "/fittings/2/loss_coefficient", "/fittings/3/count"}; !slices.Equal(pointers, want) {
		t.Errorf("refused at %q, wanted %q", pointers, want)
	}
}
