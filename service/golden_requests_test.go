package service_test

import (
	"fmt"

	"borewright/service/document"
)

// goldenRequest is one request of the golden set with its door.
type goldenRequest struct {
	door    document.Door
	request object
}

// goldenSections are sections of the invented plant, full ones first.
var goldenSections = []struct {
	section object
	laminar bool // laminar friction is known for it
	size    float64
}{
	{object{"shape": "circle", "diameter": "150 mm"}, true, 0.15},
	{object{"shape": "rectangle", "width": "900 mm", "height": "400 mm"}, true, 0.55},
	{object{"shape": "flat_oval", "width": "20 in", "height": "8 in"}, false, 0.3},
	{object{"shape": "ellipse", "width": "80 mm", "height": "50 mm"}, true, 0.06},
	{object{"shape": "annulus", "outer_diameter": "104 mm", "inner_diameter": "76.1 mm"}, true, 0.028},
	{object{"shape": "triangle", "base": 0.6, "height": 0.5196152422706632}, false, 0.35},
	{object{"shape": "regular_polygon", "sides": 6, "side_length": "120 mm"}, false, 0.2},
	{object{"shape": "sector", "radius": "300 mm", "angle": "60 deg"}, false, 0.2},
	{object{"shape": "trapezoid", "bottom_width": "0.8 m", "height": "0.5 m", "bank_left": 0.5, "bank_right": 0.25}, false, 0.6},
	{object{"shape": "parallel_plates", "gap": "4 mm", "width": "320 mm"}, true, 0.008},
	{object{"shape": "polygon", "vertices": []any{[]any{"0 m", "0 m"}, []any{"1.2 m", "0 m"}, []any{"1.2 m", "0.5 m"}, []any{"0.6 m", "0.5 m"}, []any{"0.6 m", "0.9 m"}, []any{"0 m", "0.9 m"}}}, false, 0.8},
	{object{"shape": "pipe", "standard": "ASME B36.10M", "size": "DN 150", "schedule": 40}, true, 0.154},
	{object{"shape": "pipe", "standard": "ASME B36.19M", "size": "NPS 2", "schedule": "10S"}, true, 0.055},
	{object{"shape": "pipe", "standard": "ASME B36.10M", "size": "NPS 1-1/2", "wall_thickness": "4 mm"}, true, 0.04},
	{object{"shape": "pipe", "outside_diameter": "219.1 mm", "wall_thickness": "6.3 mm", "lining_thickness": "5 mm"}, true, 0.2},
	{object{"shape": "rectangle", "width": "300 mm", "height": "300 mm", "corner_radius": "40 mm"}, false, 0.3},
}

var goldenPools = []object{
	{"shape": "circle", "diameter": "300 mm", "liquid_depth": "120 mm"},
	{"shape": "circle", "diameter": "300 mm", "liquid_depth": "299.9 mm"},
	{"shape": "pipe", "standard": "ASME B36.10M", "size": "DN 300", "schedule": "STD", "liquid_depth": "50 mm"},
	{"shape": "rectangle", "width": "1.2 m", "height": "0.9 m", "liquid_depth": "0.4 m"},
	{"shape": "ellipse", "width": "0.6 m", "height": "0.9 m", "liquid_depth": "0.5 m"},
	{"shape": "triangle", "base": "1 m", "height": "0.8 m", "apex_offset": "0.2 m", "liquid_depth": "0.3 m"},
	{"shape": "trapezoid", "bottom_width": "0.8 m", "bank_left": 1, "bank_right": 1.5, "liquid_depth": "0.55 m"},
	{"shape": "polygon", "vertices": []any{[]any{0, 0}, []any{1, 0}, []any{1, 0.8}, []any{0, 0.8}}, "dry_edges": []any{2}, "liquid_depth": 0.35},
}

// goldenReynolds are about those of the flow, from rest to a rough wall.
var goldenReynolds = []float64{0, 40, 1500, 2290, 2310, 3200, 3990, 4010, 9000, 6e4, 2e5, 1.5e6, 3e7}

var goldenLaws = []string{"colebrook_white", "haaland", "swamee_jain", "serghides", "churchill"}

var goldenEnds = []object{
	{}, {"inlet": "reservoir"}, {"outlet": "reservoir"}, {"inlet": "reservoir", "outlet": "free_discharge"},
	{"outlet": object{"shape": "circle", "diameter": "0.4 m"}}, {"inlet": object{"shape": "rectangle", "width": "0.9 m", "height": "0.5 m"}, "outlet": "free_discharge"},
}

var goldenPressures = []object{
	{}, {"inlet_pressure": "80 barg"}, {"outlet_pressure": "12 bara"}, {"inlet_pressure": "60 barg", "site": object{"altitude": "1250 m"}},
	{"outlet_pressure": "90 psig", "site": object{"atmospheric_pressure": "990 mbara", "gravity": "9.79 m/s2"}},
}

var goldenFittings = [][]any{
	{}, {object{"loss_coefficient": 0.24, "count": 6}, object{"loss_coefficient": -0.05}}, {object{"rated_drop": "18 kPa", "rated_flow": "150 m3/h"}},
	{object{"loss_coefficient": 1.5}, object{"rated_drop": "45 Pa", "rated_flow": "9000 m3/h", "exponent": 1.8, "count": 2}},
}

// goldenRequests makes the 200 requests of the golden set: all shapes, laws,
// regimes, ends, pressures and doors, each list walked at its own pace.
func goldenRequests() []goldenRequest {
	var list []goldenRequest
	add := func(door document.Door, request object) {
		request["id"] = fmt.Sprintf("GLD-%03d", len(list)+1)
		list = append(list, goldenRequest{door, request})
	}
	for _, s := range goldenSections {
		add(document.SectionDoor, object{"section": s.section})
	}
	for _, s := range goldenPools {
		add(document.SectionDoor, object{"section": s})
	}
	for i := range 26 {
		add(document.RegimeDoor, forDoor(goldenLine(i, goldenReynolds[i%len(goldenReynolds)]), document.RegimeDoor))
	}
	for i := range 26 {
		add(document.FrictionDoor, forDoor(goldenLine(7*i+3, goldenReynolds[i%len(goldenReynolds)]), document.FrictionDoor))
	}
	for _, c := range []object{
		{"friction/friction_law": "blasius", "roughness": 0}, {"friction/friction_law": "prandtl_smooth", "roughness": 0},
		{"friction/friction_law": "von_karman_rough", "roughness": "2 mm", "flow/velocity": 80}, {"friction/friction_diameter": "laminar_equivalent"},
		{"regime/approach_flow": "disturbed", "flow/velocity": 0.0145}, {"regime": object{"approach_flow": "calm", "calm_laminar_to_reynolds": 100000}},
		{"regime": object{"lower_critical_reynolds": 2000, "upper_critical_reynolds": 3000}},
	} {
		add(document.FrictionDoor, with(object{"section": goldenSections[0].section, "fluid": goldenFluid(0), "flow": object{"velocity": 0.4}, "roughness": "0.02 mm"}, c))
	}
	for i := range goldenPools {
		add(document.SegmentDoor, object{"section": goldenPools[i], "fluid": goldenFluid(0), "flow": object{"velocity": 0.4 + 0.3*float64(i)}, "roughness": "1.5 mm", "length": "52 m", "rise": -0.05 * float64(i)})
	}
	for i := 0; len(list) < 160; i++ {
		add(document.SegmentDoor, goldenLine(i, goldenReynolds[(5*i)%len(goldenReynolds)]))
	}
	for _, f := range goldenStates {
		add(document.FluidDoor, object{"fluid": f, "site": object{"altitude": "340 m"}})
	}
	for i := 0; len(list) < 200; i++ {
		add(document.SegmentDoor, goldenStream(i))
	}
	return list
}

// goldenStates are fluids whose state is known, the liquid ones first.
var goldenStates = []object{
	{"substance": "water", "temperature": "6 degC", "pressure": "4.2 barg"},
	{"substance": "water", "temperature": "82 degC", "pressure": "5 bara"},
	{"substance": "water", "state": "saturated_liquid", "temperature": "105 degC"},
	{"substance": "water", "state": "saturated_vapour", "pressure": "6 barg"},
	{"substance": "water", "temperature": "240 degC", "pressure": "10 barg"},
	{"substance": "air", "temperature": "20 degC", "pressure": "7 barg"},
	{"substance": "air", "temperature": "-5 degC", "pressure": "1013 mbara"},
	{"molar_mass": "28.0134 g/mol", "heat_capacity_ratio": 1.4, "dynamic_viscosity": "17.8 uPa.s", "temperature": "25 degC", "pressure": "7 barg"},
	{"relative_density": 0.62, "compressibility_factor": 0.98, "dynamic_viscosity": "11 uPa.s", "temperature": "15 degC", "pressure": "4 barg"},
	{"molar_mass": "44.0095 g/mol", "heat_capacity_ratio": 1.29, "compressibility_factor": 0.93, "dynamic_viscosity": "14.8 uPa.s", "temperature": "290 K", "pressure": "12 bara"},
}

// firstGas is where the gases of known states begin.
const firstGas = 3

var goldenGasModels = []object{{}, {"gas_model": "isothermal"}, {"gas_model": "adiabatic"}, {"gas_model": "incompressible"}}

var goldenGasFlows = []object{
	{"mass_flow": 0.4}, {"velocity": 12.5}, {"volume_flow": "90 m3/h"}, {"mass_flow": 0}, {"mass_flow": "3 kg/h"}, {"mass_flow": 2.1},
}

// goldenStream is a segment with a fluid of a known state in a 3 inch pipe.
func goldenStream(i int) object {
	f := goldenStates[i%len(goldenStates)]
	line := object{
		"section": goldenSections[11].section, "fluid": f, "roughness": "0.045 mm", "length": 8.5 + 2.75*float64(i%9),
		"flow": goldenGasFlows[i%len(goldenGasFlows)], "fittings": goldenFittings[i%2],
	}
	if i%len(goldenStates) < firstGas {
		return line
	}
	more := []object{goldenGasModels[i%len(goldenGasModels)], {}, {"rise": 18 - 9*float64(i%5)}, {"surroundings": object{"substance": "air", "temperature": "12 degC"}, "rise": 25}}
	for _, m := range []object{more[0], more[1+i%3], goldenEnds[i%4]} {
		for k, v := range m {
			line[k] = v
		}
	}
	switch {
	case f["substance"] == "air" && i%4 == 1:
		line["flow"] = object{"reference_volume_flow": "850 Nm3/h"}
	case f["heat_capacity_ratio"] != nil && line["gas_model"] != "incompressible" && i%3 == 0:
		line["flow"], line["answer_at_choking"] = object{"mass_flow": 900}, true
	}
	if i%7 == 3 && f["state"] == nil {
		line["outlet_pressure"] = f["pressure"]
	}
	if line["gas_model"] == "adiabatic" && f["heat_capacity_ratio"] == nil && f["substance"] == nil {
		delete(line, "gas_model")
	}
	return line
}

func goldenFluid(i int) object {
	return []object{
		{"density": "998.2 kg/m3", "dynamic_viscosity": "1.002 mPa.s", "vapour_pressure": "2.34 kPaa"},
		{"density": "1045 kg/m3", "kinematic_viscosity": "5.9 cSt"},
		{"density": "983.2 kg/m3", "dynamic_viscosity": "0.466 mPa.s"},
	}[i%3]
}

var goldenViscosity = [...]float64{1.0038e-6, 5.9e-6, 4.74e-7} // of the fluids above, about [m²/s]

// goldenLine is a full segment with about the Reynolds number wanted.
func goldenLine(i int, reynolds float64) object {
	s := goldenSections[i%len(goldenSections)]
	if !s.laminar && reynolds < 4500 && reynolds > 0 {
		reynolds += 5000
	}
	law := goldenLaws[i%len(goldenLaws)]
	if reynolds > 3500 && reynolds < 5500 {
		law = goldenLaws[0] // some laws begin at 4000 or 5000
	}
	line := object{
		"section": s.section, "fluid": goldenFluid(i), "roughness": "0.045 mm",
		"flow":     object{"velocity": reynolds * goldenViscosity[i%3] / s.size},
		"friction": object{"friction_law": law},
		"length":   12.5 + 3.25*float64(i%40), "rise": -4 + 1.5*float64(i%7), "fittings": goldenFittings[i%len(goldenFittings)],
	}
	if i%6 == 0 {
		delete(line, "rise")
	}
	for _, more := range []object{goldenEnds[i%len(goldenEnds)], goldenPressures[(i/2)%len(goldenPressures)]} {
		for k, v := range more {
			line[k] = v
		}
	}
	return line
}
